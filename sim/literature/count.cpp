#include "sim/literature/count.h"

namespace lacuna {

namespace {

bool is_real(const Conducted& block, std::uint32_t line) {
    return block.questions.truth[block.lines.question[line]] != static_cast<std::uint8_t>(Truth::null);
}

void count_manuscripts(const PreparedRules& rules, const Conducted& block, const Outcome& outcome, Tally& tally) {
    const std::size_t count = outcome.manuscript_class.size();
    for (std::size_t m = 0; m < count; ++m) {
        const std::uint32_t line =
            rules.unit == Unit::study ? block.studies.line[m] : static_cast<std::uint32_t>(m);
        tally.add_manuscript(is_real(block, line), ManuscriptClass(outcome.manuscript_class[m]),
                             Status(outcome.manuscript_status[m]));
    }
}

void count_questions(const PreparedRules& rules, const Conducted& block, const Outcome& outcome,
                     CountScratch& scratch, Tally& tally) {
    const std::size_t questions = block.questions.truth.size();
    scratch.questions.assign(questions, {});
    const std::uint32_t* question = block.lines.question.data();
    const std::uint32_t* line = block.studies.line.data();
    std::uint32_t finding[4];
    for (std::size_t claim = 0; claim < 4; ++claim) finding[claim] = is_finding(Claim(claim), rules.findings);
    for (std::size_t s = 0; s < outcome.status.size(); ++s) {
        QuestionCount& its = scratch.questions[question[line[s]]];
        ++its.studies[outcome.status[s]];
        its.findings[outcome.status[s]] += finding[block.studies.claim[s]];
    }
    for (std::size_t q = 0; q < questions; ++q) {
        scratch.questions[q].real = block.questions.truth[q] != static_cast<std::uint8_t>(Truth::null);
    }
    tally.add_questions(block.questions.first, block.parts, scratch.questions);
}

}  // namespace

void gather_facts(const PreparedScience& science, const Conducted& block, CountScratch& scratch) {
    const Studies& studies = block.studies;
    const std::size_t count = studies.claim.size();
    scratch.participants.resize(count);
    const std::uint32_t* by_row = science.table.participants.data();
    for (std::size_t s = 0; s < count; ++s) scratch.participants[s] = by_row[studies.row[s]];
    StudyColumns columns{count,
                         block.questions.truth.data(),
                         studies.claim.data(),
                         nullptr,
                         studies.estimate.data(),
                         block.questions.effect.data(),
                         scratch.participants.data()};
    if (!block.lines.one_each || studies.round.size() > 2) {
        scratch.truth.resize(count);
        scratch.effect.resize(count);
        for (std::size_t s = 0; s < count; ++s) {
            const std::uint32_t q = block.lines.question[studies.line[s]];
            scratch.truth[s] = block.questions.truth[q];
            scratch.effect[s] = block.questions.effect[q];
        }
        columns.truth = scratch.truth.data();
        columns.effect = scratch.effect.data();
    }
    if (!block.lines.kind.empty()) {
        scratch.kind.resize(count);
        for (std::size_t s = 0; s < count; ++s) scratch.kind[s] = block.lines.kind[studies.line[s]];
        columns.kind = scratch.kind.data();
    }
    make_study_facts(columns, science.scale, scratch.facts);
}

bool one_study_a_question(const PreparedScience& science, const Roster& roster) {
    if (roster.lines > science.science.field.questions) return false;
    for (const LabKind& kind : science.science.labs) {
        if (kind.studies.longest() > 1) return false;
    }
    return true;
}

void count_outcome(const PreparedRules& rules, const Conducted& block, const Outcome& outcome, bool single,
                   CountScratch& scratch, Tally& tally) {
    tally.add_studies(scratch.facts, outcome.status.data());
    if (single) {
        tally.count_studies_as_manuscripts();
        tally.count_studies_as_questions();
        return;
    }
    count_manuscripts(rules, block, outcome, tally);
    count_questions(rules, block, outcome, scratch, tally);
}

}  // namespace lacuna
