#include "analysis/report/preview.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "analysis/report/number.h"
#include "analysis/report/text_table.h"

namespace lacuna {

namespace {

std::string size_text(std::uint32_t n, std::uint32_t low, std::uint32_t high) {
    const std::string median = show_count(n);
    return low == high ? median : fmt::format("{} ({} to {})", median, show_count(low), show_count(high));
}

std::string power_text(const DesignPreview& design) {
    const std::string power = fmt::format("{:.4f}{}", design.power, design.power_is_exact ? "" : "\nby normal drift");
    if (std::fabs(design.power - design.power_predicted) <= 1e-6) return power;
    return fmt::format("{}\n{:.4f} predicted", power, design.power_predicted);
}

/// An F test has no sides.
std::string test_text(const DesignPreview& design) {
    if (design.test == "several-means") return fmt::format("{}\nF {}", design.test, design.alpha);
    return fmt::format("{}\n{}-sided {}", design.test, design.sides == 2 ? "two" : "one", design.alpha);
}

std::vector<std::string> design_cells(const DesignPreview& design) {
    const std::string n = size_text(design.n1, design.n1_low, design.n1_high);
    return {design.lab,
            test_text(design),
            design.n2 == design.n1 ? fmt::format("{}\nper group", n)
            : design.n2 > 0        ? fmt::format("{}\nand {}", n, show_count(design.n2))
                                   : n,
            show_number(design.effect, 4),
            power_text(design),
            show_number(design.critical, 5),
            show_number(design.minimal_significant_effect, 4)};
}

using Rows = std::vector<std::vector<std::string>>;

Rows design_rows(const Preview& preview, const std::string& regime) {
    Rows rows;
    for (const DesignPreview& design : preview.designs) {
        if (design.regime == regime) rows.push_back(design_cells(design));
    }
    return rows;
}

/// Regimes with the same designs share their rows.
std::string designs_text(const Preview& preview) {
    TextTable table;
    table.header = {"lab kind", "test", "n (range)", "effect", "power", "critical value", "smallest significant"};
    std::vector<std::pair<std::string, Rows>> groups;  // names of regimes
    for (const std::string& regime : preview.regimes) {
        Rows rows = design_rows(preview, regime);
        const auto same = [&](const auto& group) { return group.second == rows; };
        const auto found = std::find_if(groups.begin(), groups.end(), same);
        if (found == groups.end())
            groups.emplace_back(regime, std::move(rows));
        else
            found->first += ", " + regime;
    }
    for (const auto& [names, rows] : groups) {
        if (groups.size() > 1) table.rows.push_back({names});
        table.rows.insert(table.rows.end(), rows.begin(), rows.end());
    }
    return fmt::format("Designs (n: median; effect: what the power is at)\n\n{}", render(table));
}

std::string model_text(const Preview& preview) {
    TextTable table;
    table.header = {"model", "value"};
    for (const auto& [key, value] : preview.model) {
        std::string lines;
        for (const std::string& line : broken(value, 60)) lines += (lines.empty() ? "" : "\n") + line;
        table.rows.push_back({key, lines});
    }
    return render(table);
}

std::string changes_text(const Preview& preview) {
    if (preview.regimes.size() < 2) return "";
    std::string text = "\nBetween regimes\n";
    if (preview.changes.empty()) text += "  nothing differs\n";
    for (const std::string& change : preview.changes) {
        std::string indent = "  ";
        for (const std::string& line : broken(change, text_width - 4)) {
            text += fmt::format("{}{}\n", indent, line);
            indent = "    ";
        }
    }
    return text;
}

std::string size_text(const SizePreview& size) {
    return fmt::format("\nSize: about {} studies, {} s, {} of memory, {} on disk\n",
                       show_count(std::round(size.studies)), show_number(size.seconds, 2),
                       show_bytes(size.memory_bytes), show_bytes(size.file_bytes));
}

std::string expected_text(const Preview& preview) {
    std::string text = "\nExact expected values\n\n";
    TextTable table;
    table.header = {"metric"};
    std::vector<std::size_t> column(preview.regimes.size(), 0);  // of each regime; 0: it has no exact values
    for (std::size_t r = 0; r < preview.regimes.size(); ++r) {
        const auto its = [&](const Result& result) { return result.regime == r && result.estimate.value; };
        if (std::none_of(preview.expected.begin(), preview.expected.end(), its)) continue;
        column[r] = table.header.size();
        table.header.push_back(preview.regimes[r]);
    }
    for (Scope scope : {Scope::conducted, Scope::written, Scope::published}) {
        bool headed = false;
        for (std::size_t at = 0; at < preview.expected.size();) {
            const Result& first = preview.expected[at];
            std::vector<std::string> row(table.header.size(), missing_sign);
            row[0] = first.stratum == "all" ? fmt::format("  {}", first.metric)
                                            : fmt::format("  {} {}", first.metric, first.stratum);
            for (; at < preview.expected.size(); ++at) {
                const Result& each = preview.expected[at];
                if (each.metric != first.metric || each.scope != first.scope || each.stratum != first.stratum)
                    break;
                if (each.estimate.value) row[column[each.regime]] = show_number(*each.estimate.value, 6);
            }
            if (first.scope != scope) continue;
            if (!headed) table.rows.push_back({std::string(scope_names[static_cast<std::size_t>(scope)])});
            headed = true;
            table.rows.push_back(std::move(row));
        }
    }
    if (!table.rows.empty()) text += render(table);
    for (const auto& [regime, reason] : preview.untractable) {
        text += fmt::format("No exact values under '{}': {}\n", regime, reason);
    }
    return text;
}

}  // namespace

std::string show_bytes(double bytes) {
    const char* units[] = {"B", "kB", "MB", "GB", "TB", "PB"};
    std::size_t unit = 0;
    while (bytes >= 999.5 && unit + 1 < std::size(units)) {
        bytes /= 1000;
        ++unit;
    }
    return fmt::format("{} {}", unit == 0 ? show_count(bytes) : show_number(bytes, 2), units[unit]);
}

std::string preview_text(const Preview& preview) {
    const std::string title = preview.title.empty() ? "" : fmt::format("{}\n\n", preview.title);
    return fmt::format("{}{}\n{}{}{}{}", title, model_text(preview), designs_text(preview), changes_text(preview),
                       size_text(preview.size), expected_text(preview));
}

}  // namespace lacuna
