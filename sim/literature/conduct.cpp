#include "sim/literature/conduct.h"

#include <algorithm>
#include <cmath>

namespace lacuna {

namespace {

Truth truth_of(bool real, double effect, double negligible) {
    if (!real || std::fabs(effect) <= negligible) return Truth::null;
    return effect > 0.0 ? Truth::real : Truth::real_negative;
}

/// Effects of the questions whose `real` is `which`, from their own sampler.
void draw_effects(const Sampler& sampler, bool which, StreamKey key, std::uint32_t literature,
                  ConductScratch& scratch, Questions& questions) {
    scratch.chosen.clear();
    for (std::size_t q = 0; q < questions.real.size(); ++q) {
        if (questions.real[q] == which) scratch.chosen.push_back(static_cast<std::uint32_t>(q));
    }
    scratch.drawn.resize(scratch.chosen.size());
    sampler.draw(key, {literature, Purpose::question_effect}, Purpose::question_effect_again,
                 {questions.first, scratch.chosen.data(), scratch.chosen.size()}, scratch.drawn.data());
    for (std::size_t i = 0; i < scratch.chosen.size(); ++i) questions.effect[scratch.chosen[i]] = scratch.drawn[i];
}

void draw_questions(const PreparedScience& science, StreamKey key, std::uint32_t literature, QuestionRange range,
                    ConductScratch& scratch, Questions& questions) {
    const Field& field = science.science.field;
    const std::size_t count = range.last - range.first;
    questions.first = range.first;
    questions.real.resize(count);
    questions.truth.resize(count);
    questions.effect.resize(count);
    scratch.drawn.resize(count);
    uniforms(key, {literature, Purpose::question_truth}, {range.first, nullptr, count}, scratch.drawn.data());
    for (std::size_t q = 0; q < count; ++q) questions.real[q] = scratch.drawn[q] < field.true_rate;
    if (science.effect.constant() && science.null_effect.constant()) {
        double effect[2];
        science.null_effect.draw(key, {}, Purpose::question_effect, {0, nullptr, 1}, &effect[0]);
        science.effect.draw(key, {}, Purpose::question_effect, {0, nullptr, 1}, &effect[1]);
        const Truth truth[2] = {truth_of(false, effect[0], field.negligible), truth_of(true, effect[1], field.negligible)};
        for (std::size_t q = 0; q < count; ++q) {
            questions.effect[q] = effect[questions.real[q]];
            questions.truth[q] = static_cast<std::uint8_t>(truth[questions.real[q]]);
        }
        return;
    }
    draw_effects(science.effect, true, key, literature, scratch, questions);
    draw_effects(science.null_effect, false, key, literature, scratch, questions);
    for (std::size_t q = 0; q < count; ++q) {
        questions.truth[q] =
            static_cast<std::uint8_t>(truth_of(questions.real[q] != 0, questions.effect[q], field.negligible));
    }
}

void place_lines(const PreparedScience& science, const Roster& roster, QuestionRange range, ConductScratch& scratch,
                 Lines& lines) {
    const std::uint64_t questions = science.science.field.questions;
    lines.first = first_line(range.first, questions, roster.lines);
    const std::size_t count = first_line(range.last, questions, roster.lines) - lines.first;
    lines.question.resize(count);
    std::size_t l = 0;
    for (std::uint64_t q = range.first; q < range.last; ++q) {
        const std::size_t end = first_line(q + 1, questions, roster.lines) - lines.first;
        while (l < end) lines.question[l++] = static_cast<std::uint32_t>(q - range.first);
    }
    lines.lab.clear();
    lines.kind.clear();
    if (!roster.order || count == 0) return;
    roster.order->images(lines.first, count, scratch.places);
    lines.lab.resize(count);
    for (std::size_t i = 0; i < count; ++i) {
        lines.lab[i] = static_cast<std::uint32_t>(roster.lab_of_place(scratch.places[i]));
    }
    if (roster.kind.empty()) return;
    lines.kind.resize(count);
    for (std::size_t i = 0; i < count; ++i) lines.kind[i] = roster.kind[lines.lab[i]];
}

const LineRule& rule_of(const PreparedScience& science, const Lines& lines, std::size_t line) {
    return science.science.labs[lines.kind.empty() ? 0 : lines.kind[line]].studies;
}

/// True effects of the round's studies: the question's, and the study's own deviation.
void draw_thetas(const PreparedScience& science, StreamKey key, Address address, Entities entities,
                 const Questions& questions, const Lines& lines, const std::uint32_t* line, ConductScratch& scratch,
                 double* theta) {
    for (std::size_t i = 0; i < entities.count; ++i) theta[i] = questions.effect[lines.question[line[i]]];
    const double sd = science.science.field.heterogeneity;
    if (sd == 0.0) return;
    scratch.deviation.resize(entities.count);
    address.purpose = Purpose::study_effect;
    normals(key, address, entities, scratch.deviation.data());
    for (std::size_t i = 0; i < entities.count; ++i) theta[i] += sd * scratch.deviation[i];
}

/// Runs study number `round` of the lines in scratch.active and appends its columns.
void run_round(const PreparedScience& science, StreamKey key, std::uint16_t round, ConductScratch& scratch,
               Conducted& block) {
    Lines& lines = block.lines;
    Studies& studies = block.studies;
    const std::size_t begin = studies.round.back();
    const std::size_t count = scratch.active.size();
    const std::size_t end = begin + count;
    studies.line.resize(end);
    studies.row.resize(end);
    studies.theta.resize(end);
    studies.statistic.resize(end);
    studies.estimate.resize(end);
    studies.claim.resize(end);
    std::copy(scratch.active.begin(), scratch.active.end(), studies.line.begin() + static_cast<std::ptrdiff_t>(begin));
    const std::uint32_t* line = studies.line.data() + begin;
    const bool every_line = count == lines.studies.size();
    const Entities entities{lines.first, every_line ? nullptr : line, count};

    std::uint8_t* kind = nullptr;
    std::vector<std::uint8_t> kinds;
    if (!lines.kind.empty() && every_line) {
        kind = lines.kind.data();
    } else if (!lines.kind.empty()) {
        for (std::size_t i = 0; i < count; ++i) kinds.push_back(lines.kind[line[i]]);
        kind = kinds.data();
    }
    draw_sizes(key, block.literature, round, entities, science.table, kind, scratch.sampling, studies.row.data() + begin);
    draw_thetas(science, key, {block.literature, Purpose::study_effect, round}, entities, block.questions, lines, line,
                scratch, studies.theta.data() + begin);
    draw_studies(key, block.literature, round, entities, science.science.design, science.table, scratch.sampling,
                 {studies.row.data() + begin, studies.theta.data() + begin, studies.statistic.data() + begin,
                  studies.estimate.data() + begin, studies.claim.data() + begin});
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint8_t claim = studies.claim[begin + i];
        const std::uint32_t l = line[i];
        lines.studies[l] = static_cast<std::uint16_t>(lines.studies[l] + 1);
        lines.positive[l] = static_cast<std::uint16_t>(lines.positive[l] + (claim == std::uint8_t(Claim::positive)));
        lines.reversed[l] = static_cast<std::uint16_t>(lines.reversed[l] + (claim == std::uint8_t(Claim::reversed)));
    }
    studies.round.push_back(end);
}

/// Keeps in scratch.active the lines that go on.
void keep_going(const PreparedScience& science, const Lines& lines, ConductScratch& scratch) {
    const bool either = science.science.design.findings == Findings::either;
    scratch.still.clear();
    for (const std::uint32_t l : scratch.active) {
        const std::uint32_t findings = lines.positive[l] + (either ? lines.reversed[l] : 0u);
        if (goes_on(rule_of(science, lines, l), lines.studies[l], findings)) scratch.still.push_back(l);
    }
    scratch.active.swap(scratch.still);
}

void count_levels(const PreparedScience& science, Studies& studies) {
    const std::size_t count = studies.claim.size();
    const auto fill = [&](const std::vector<std::size_t>& cuts, int sides, std::vector<std::uint8_t>& level) {
        level.clear();
        if (cuts.empty()) return;
        level.resize(count);
        count_cuts(science.table, cuts, sides, count, studies.row.data(), studies.statistic.data(), level.data());
    };
    fill(science.cuts_two, 2, studies.level_two);
    fill(science.cuts_one, 1, studies.level_one);
}

void run_studies(const PreparedScience& science, StreamKey key, ConductScratch& scratch, Conducted& block) {
    Lines& lines = block.lines;
    const std::size_t count = lines.question.size();
    lines.studies.assign(count, 0);
    lines.positive.assign(count, 0);
    lines.reversed.assign(count, 0);
    scratch.active.resize(count);
    for (std::size_t l = 0; l < count; ++l) scratch.active[l] = static_cast<std::uint32_t>(l);
    block.studies.round.assign(1, 0);
    for (std::uint16_t round = 0; !scratch.active.empty(); ++round) {
        run_round(science, key, round, scratch, block);
        keep_going(science, lines, scratch);
    }
    const std::size_t studies = block.studies.round.back();
    block.studies.line.resize(studies);
    block.studies.row.resize(studies);
    block.studies.theta.resize(studies);
    block.studies.statistic.resize(studies);
    block.studies.estimate.resize(studies);
    block.studies.claim.resize(studies);
    count_levels(science, block.studies);
}

}  // namespace

std::uint64_t first_line(std::uint64_t question, std::uint64_t questions, std::uint64_t lines) {
    if (lines == questions) return question;
    __extension__ using Wide = unsigned __int128;  // both factors may reach 2^40
    return static_cast<std::uint64_t>(static_cast<Wide>(question) * lines / questions);
}

bool goes_on(const LineRule& rule, std::uint32_t studies, std::uint32_t findings) {
    switch (rule.kind) {
        case LineRule::Kind::fixed: return studies < rule.count;
        case LineRule::Kind::until_positive: return findings == 0 && studies < rule.limit;
        case LineRule::Kind::until_failures: return studies - findings < rule.failures && studies < rule.limit;
    }
    return false;
}

void conduct(const PreparedScience& science, StreamKey key, const Roster& roster, std::uint32_t literature,
             QuestionRange range, ConductScratch& scratch, Conducted& block) {
    block.literature = literature;
    draw_questions(science, key, literature, range, scratch, block.questions);
    place_lines(science, roster, range, scratch, block.lines);
    run_studies(science, key, scratch, block);
}

}  // namespace lacuna
