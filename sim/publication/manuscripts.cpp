#include "sim/publication/manuscripts.h"

#include <algorithm>

namespace lacuna {

namespace {

std::uint32_t findings_of(const Lines& lines, std::size_t line, Findings findings) {
    return lines.positive[line] + (findings == Findings::either ? lines.reversed[line] : 0u);
}

/// Whether study s is in its line's manuscript under Unit::findings.
bool is_reported(const Conducted& block, const PreparedRules& rules, std::size_t s) {
    return is_finding(Claim(block.studies.claim[s]), rules.findings) ||
           findings_of(block.lines, block.studies.line[s], rules.findings) == 0;
}

void best_of_lines(const PreparedRules& rules, const Conducted& block, const std::vector<std::uint8_t>& of_study,
                   std::vector<std::uint8_t>& of_line) {
    of_line.clear();
    if (of_study.empty()) return;
    of_line.resize(block.lines.studies.size(), 0);
    for (std::size_t s = 0; s < of_study.size(); ++s) {
        if (rules.unit == Unit::findings && !is_reported(block, rules, s)) continue;
        std::uint8_t& best = of_line[block.studies.line[s]];
        best = std::max(best, of_study[s]);
    }
}

}  // namespace

ManuscriptClass class_of_line(std::uint32_t studies, std::uint32_t positive, std::uint32_t reversed,
                              Findings findings) {
    const std::uint32_t against = findings == Findings::either ? reversed : 0;
    if (positive + against == 0) return ManuscriptClass::null;
    if (positive == studies || against == studies) return ManuscriptClass::supportive;
    return ManuscriptClass::mixed;
}

void classify(const PreparedRules& rules, const Conducted& block, Outcome& outcome) {
    std::vector<std::uint8_t>& classes = outcome.manuscript_class;
    if (rules.unit == Unit::study) {
        const std::size_t count = block.studies.claim.size();
        classes.resize(count);
        const std::uint8_t* claim = block.studies.claim.data();
        std::uint8_t* out = classes.data();
        constexpr auto supportive = static_cast<std::uint8_t>(ManuscriptClass::supportive);
        constexpr auto null = static_cast<std::uint8_t>(ManuscriptClass::null);
        const auto other =
            static_cast<std::uint8_t>(rules.findings == Findings::either ? Claim::reversed : Claim::positive);
        for (std::size_t s = 0; s < count; ++s) {
            const bool finds = claim[s] == static_cast<std::uint8_t>(Claim::positive) || claim[s] == other;
            out[s] = finds ? supportive : null;
        }
        return;
    }
    const Lines& lines = block.lines;
    classes.resize(lines.studies.size());
    for (std::size_t l = 0; l < classes.size(); ++l) {
        classes[l] = static_cast<std::uint8_t>(
            class_of_line(lines.studies[l], lines.positive[l], lines.reversed[l], rules.findings));
    }
}

void best_levels(const PreparedRules& rules, const Conducted& block, ChainScratch& scratch) {
    if (rules.unit == Unit::study) {
        scratch.level_two = block.studies.level_two;
        scratch.level_one = block.studies.level_one;
        return;
    }
    best_of_lines(rules, block, block.studies.level_two, scratch.level_two);
    best_of_lines(rules, block, block.studies.level_one, scratch.level_one);
}

void spread_status(const PreparedRules& rules, const Conducted& block, Outcome& outcome) {
    if (rules.unit == Unit::study) {
        outcome.status = outcome.manuscript_status;
        return;
    }
    const std::size_t count = block.studies.claim.size();
    outcome.status.resize(count);
    for (std::size_t s = 0; s < count; ++s) outcome.status[s] = outcome.manuscript_status[block.studies.line[s]];
    if (rules.unit == Unit::line) return;
    for (std::size_t s = 0; s < count; ++s) {
        if (!is_reported(block, rules, s)) outcome.status[s] = static_cast<std::uint8_t>(Status::unwritten);
    }
}

}  // namespace lacuna
