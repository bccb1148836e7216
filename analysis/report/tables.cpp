#include "analysis/report/tables.h"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <functional>
#include <string_view>

#include "analysis/report/number.h"
#include "analysis/report/text_table.h"

namespace lacuna {

namespace {

using Wanted = std::function<bool(const std::string& metric, const std::string& stratum)>;

constexpr std::array<std::string_view, 8> headline{
    "false_discovery_rate", "effect_inflation", "wrong_sign_rate", "false_nonfinding_rate",
    "positive_share",       "missing_share",    "power",           "type1_error"};

bool is_headline(const std::string& metric, const std::string& stratum) {
    return stratum == "all" && std::find(headline.begin(), headline.end(), metric) != headline.end();
}

std::string label(const std::string& metric, const std::string& stratum) {
    return stratum == "all" ? fmt::format("  {}", metric) : fmt::format("  {} {}", metric, stratum);
}

std::string cell(const Estimate& estimate, const std::optional<Spread>& spread) {
    const std::string range = show_range(spread);
    return range.empty() ? show(estimate) : fmt::format("{}\n  {}", show(estimate), range);
}

/// What the legend must explain because it was shown.
struct Shown {
    bool missing = false, no_error = false, error = false, spread = false;
    void note(const Estimate& estimate, const std::optional<Spread>& range) {
        missing |= !estimate.value;
        no_error |= estimate.value && !estimate.mcse;
        error |= estimate.value && estimate.mcse;
        spread |= range.has_value();
    }
};

std::string legend(const Shown& shown) {
    std::string text;
    if (shown.error) text += "±: one Monte Carlo standard error over literatures.\n";
    if (shown.spread) {
        text += "a to b: spread, the 5-95 % range over literatures (what one field would see by luck).\n";
    }
    if (shown.no_error) text += "without ±: fewer than two literatures entered, so the error cannot be known.\n";
    if (shown.missing) {
        text += fmt::format("{}: missing; no literature holds anything of the kind (empty denominator).\n",
                            missing_sign);
    }
    return text;
}

bool is_zero(const Estimate& estimate) {
    return estimate.value && *estimate.value == 0.0 && estimate.mcse && *estimate.mcse == 0.0;
}

/// Rows in the order of the headline; others keep theirs.
template <class Entry>
void order_by_headline(std::vector<Entry>& entries) {
    const auto place = [](const Entry& entry) {
        return std::find(headline.begin(), headline.end(), entry.metric) - headline.begin();
    };
    std::stable_sort(entries.begin(), entries.end(),
                     [&](const Entry& a, const Entry& b) { return place(a) < place(b); });
}

/// Results come estimand by estimand with the regimes within: the rows of a table.
void add_results(const Results& all, Scope scope, const Wanted& wanted, TextTable& table, Shown& shown) {
    bool headed = false;
    for (std::size_t at = 0; at < all.results.size(); at += all.regimes.size()) {
        const Result& first = all.results[at];
        if (first.scope != scope || !wanted(first.metric, first.stratum)) continue;
        if (!headed) table.rows.push_back({std::string(scope_names[static_cast<std::size_t>(scope)])});
        headed = true;
        std::vector<std::string> row{label(first.metric, first.stratum)};
        for (std::size_t r = 0; r < all.regimes.size(); ++r) {
            const Result& result = all.results[at + r];
            row.push_back(cell(result.estimate, result.spread));
            shown.note(result.estimate, result.spread);
        }
        table.rows.push_back(std::move(row));
    }
}

/// As add_results; rows that are exactly 0 under every regime are counted instead of shown.
std::size_t add_differences(const Results& all, Scope scope, const Wanted& wanted, TextTable& table, Shown& shown) {
    const std::size_t width = all.regimes.size() - 1;
    std::size_t zeros = 0;
    bool headed = false;
    for (std::size_t at = 0; at < all.differences.size(); at += width) {
        const PairedDifference& first = all.differences[at];
        if (first.scope != scope || !wanted(first.metric, first.stratum)) continue;
        const auto begin = all.differences.begin() + static_cast<std::ptrdiff_t>(at);
        if (std::all_of(begin, begin + static_cast<std::ptrdiff_t>(width),
                        [](const PairedDifference& d) { return is_zero(d.estimate); })) {
            ++zeros;
            continue;
        }
        if (!headed) table.rows.push_back({std::string(scope_names[static_cast<std::size_t>(scope)])});
        headed = true;
        std::vector<std::string> row{label(first.metric, first.stratum)};
        for (std::size_t r = 0; r < width; ++r) {
            const PairedDifference& difference = all.differences[at + r];
            row.push_back(cell(difference.estimate, difference.spread));
            shown.note(difference.estimate, difference.spread);
        }
        table.rows.push_back(std::move(row));
    }
    return zeros;
}

std::string difference_tables(const Results& all, const Wanted& wanted, Shown& shown) {
    if (all.regimes.size() < 2) return "";
    TextTable table{{"difference"}, {}};
    table.header.insert(table.header.end(), all.regimes.begin() + 1, all.regimes.end());
    std::size_t zeros = 0;
    for (Scope scope : {Scope::conducted, Scope::published}) {
        zeros += add_differences(all, scope, wanted, table, shown);
    }
    std::string text = fmt::format("\nDifferences from '{}', paired by literature\n\n", all.regimes[0]);
    if (!table.rows.empty()) text += render(table);
    if (zeros > 0) {
        text += fmt::format("{}Rows that differ by exactly 0 under every regime, not shown: {}.\n",
                            table.rows.empty() ? "" : "\n", zeros);
    }
    return text;
}

std::string tables(const Results& all, const Wanted& wanted) {
    TextTable table{{"metric"}, {}};
    table.header.insert(table.header.end(), all.regimes.begin(), all.regimes.end());
    Shown shown;
    for (Scope scope : {Scope::conducted, Scope::published}) add_results(all, scope, wanted, table, shown);
    std::string text;
    if (!all.title.empty()) text += all.title + "\n";
    text += fmt::format("{} {}\n\n{}", show_count(static_cast<double>(all.literatures)),
                        all.literatures == 1 ? "literature" : "literatures", render(table));
    text += difference_tables(all, wanted, shown);
    return text + "\n" + legend(shown);
}

}  // namespace

std::string headline_tables(const Results& results) {
    Results ordered = results;
    order_by_headline(ordered.results);
    order_by_headline(ordered.differences);
    return tables(ordered, is_headline);
}

std::string full_tables(const Results& results) {
    return tables(results, [](const std::string&, const std::string&) { return true; });
}

std::string provenance_line(const Results& results, const std::string& version) {
    return fmt::format("lacuna {}, digest {}\n", version, results.digest);
}

}  // namespace lacuna
