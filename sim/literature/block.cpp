#include "sim/literature/block.h"

#include <algorithm>
#include <cmath>

#include "sim/literature/details.h"
#include "sim/literature/expected_studies.h"

namespace lacuna {

namespace {

/// Studies in a block that keep its columns in the second-level cache.
constexpr double studies_wanted = 16384.0;
constexpr std::uint64_t most_questions = 65536;

}  // namespace

BlockRange Blocks::range(std::uint64_t block) const {
    const std::uint64_t group = block / parts;
    return {group * questions_each, std::min(questions, (group + 1) * questions_each), block % parts, parts};
}

Blocks cut_into_blocks(const Scenario& scenario) {
    Blocks blocks{0, 0, 1, 0, 0.0, 0.0};
    for (const std::size_t first : group_by_science(scenario.regimes).firsts) {
        const Science& science = scenario.regimes[first].science;
        blocks.questions = std::max(blocks.questions, science.field.questions);
        const double studies = expected_studies(science);
        blocks.studies_a_literature = std::max(blocks.studies_a_literature, studies);
        blocks.studies_together += studies;
    }
    const double a_question = blocks.studies_a_literature / static_cast<double>(blocks.questions);
    const double wanted = std::clamp(studies_wanted / std::max(a_question, 1e-9), 32.0, double(most_questions));
    blocks.questions_each = static_cast<std::uint64_t>(std::ceil(wanted / 32.0)) * 32;
    const auto together = static_cast<double>(std::min(blocks.questions, blocks.questions_each));
    blocks.parts = static_cast<std::uint64_t>(std::fmax(1.0, std::round(a_question * together / studies_wanted)));
    blocks.count = (blocks.questions + blocks.questions_each - 1) / blocks.questions_each * blocks.parts;
    return blocks;
}

std::vector<Roster> draw_rosters(const PreparedScenario& prepared, StreamKey key, std::uint32_t literature) {
    std::vector<Roster> rosters;
    for (const PreparedScience& science : prepared.sciences)
        rosters.push_back(draw_roster(science, key, literature));
    return rosters;
}

std::uint64_t simulate_block(const PreparedScenario& prepared, StreamKey key, std::uint32_t literature,
                             const std::vector<Roster>& rosters, BlockRange range, BlockScratch& scratch,
                             std::vector<Tally>& tallies, std::map<std::string, Batch>& details) {
    std::uint64_t studies = 0;
    scratch.outcomes.resize(prepared.rules.size());
    for (std::size_t s = 0; s < prepared.sciences.size(); ++s) {
        const PreparedScience& science = prepared.sciences[s];
        // Regimes may differ in how many questions the field has.
        const std::uint64_t questions = science.science.field.questions;
        const BlockRange its{std::min(range.first, questions), std::min(range.last, questions), range.part,
                             range.parts};
        conduct(science, key, rosters[s], literature, its, scratch.conduct, scratch.block);
        gather_facts(science, scratch.block, scratch.count);
        studies += scratch.block.studies.claim.size();
        const bool single = one_study_a_question(science, rosters[s]);
        for (std::size_t r = 0; r < prepared.rules.size(); ++r) {
            if (prepared.groups.science_of[r] != s) continue;
            publish(key, prepared.rules[r], scratch.block, scratch.chain, scratch.outcomes[r]);
            count_outcome(prepared.rules[r], scratch.block, scratch.outcomes[r], single, scratch.count, tallies[r]);
        }
        if (!details.empty()) add_details(prepared, s, rosters[s], scratch.block, scratch.outcomes, details);
    }
    return studies;
}

}  // namespace lacuna
