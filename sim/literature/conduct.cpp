#include "sim/literature/conduct.h"

#include <algorithm>
#include <cmath>

#include "sim/random/chance.h"

namespace lacuna {

namespace {

/// Kernels write whole vectors, so columns have room for so many entries more.
constexpr std::size_t room_beyond = 16;

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

/// Effects and truths where each kind of question has one effect.
void fill_two_effects(const PreparedScience& science, StreamKey key, Questions& questions) {
    double effect[2];
    science.null_effect.draw(key, {}, Purpose::question_effect, {0, nullptr, 1}, &effect[0]);
    science.effect.draw(key, {}, Purpose::question_effect, {0, nullptr, 1}, &effect[1]);
    const double negligible = science.science.field.negligible;
    const auto null_truth = static_cast<std::uint8_t>(truth_of(false, effect[0], negligible));
    const auto real_truth = static_cast<std::uint8_t>(truth_of(true, effect[1], negligible));
    const std::size_t count = questions.real.size();
    const std::uint8_t* real = questions.real.data();
    std::uint8_t* truth = questions.truth.data();
    double* out = questions.effect.data();
    for (std::size_t q = 0; q < count; ++q) truth[q] = real[q] ? real_truth : null_truth;
    for (std::size_t q = 0; q < count; ++q) out[q] = effect[real[q]];
}

/// The effects that studies are planned for: of a real question its own, of another one drawn like a real
/// one's, so that sizes tell nothing about the truth.
void draw_planned(const PreparedScience& science, StreamKey key, std::uint32_t literature, ConductScratch& scratch,
                  Questions& questions) {
    questions.planned.clear();
    if (!science.plans_for_truth()) return;
    questions.planned = questions.effect;
    scratch.chosen.clear();
    for (std::size_t q = 0; q < questions.real.size(); ++q) {
        if (!questions.real[q]) scratch.chosen.push_back(static_cast<std::uint32_t>(q));
    }
    scratch.drawn.resize(scratch.chosen.size());
    science.effect.draw(key, {literature, Purpose::question_plan}, Purpose::question_plan_again,
                        {questions.first, scratch.chosen.data(), scratch.chosen.size()}, scratch.drawn.data());
    for (std::size_t i = 0; i < scratch.chosen.size(); ++i) questions.planned[scratch.chosen[i]] = scratch.drawn[i];
}

void draw_questions(const PreparedScience& science, StreamKey key, std::uint32_t literature, BlockRange range,
                    ConductScratch& scratch, Questions& questions) {
    const Field& field = science.science.field;
    const std::size_t count = range.last - range.first;
    questions.first = range.first;
    questions.real.resize(count);
    questions.truth.resize(count);
    questions.effect.resize(count);
    scratch.words.resize(count);
    const Address address{literature, Purpose::question_truth};
    words(key, address, {range.first, nullptr, count}, scratch.words.data());
    const Chance chance(field.true_rate);
    decide(key, address, count, scratch.words.data(), [&](std::size_t) -> const Chance& { return chance; },
           [&](std::size_t q) { return range.first + q; }, questions.real.data());
    if (science.effect.constant() && science.null_effect.constant()) {
        fill_two_effects(science, key, questions);
        return;
    }
    draw_effects(science.effect, true, key, literature, scratch, questions);
    draw_effects(science.null_effect, false, key, literature, scratch, questions);
    for (std::size_t q = 0; q < count; ++q) {
        questions.truth[q] =
            static_cast<std::uint8_t>(truth_of(questions.real[q] != 0, questions.effect[q], field.negligible));
    }
}

void place_lines(const PreparedScience& science, const Roster& roster, BlockRange range, ConductScratch& scratch,
                 Lines& lines) {
    const std::uint64_t questions = science.science.field.questions;
    const std::uint64_t begin = first_line(range.first, questions, roster.lines);
    const std::uint64_t all = first_line(range.last, questions, roster.lines) - begin;
    lines.first = begin + first_line(range.part, range.parts, all);
    const std::uint64_t last = begin + first_line(range.part + 1, range.parts, all);
    const std::size_t count = last - lines.first;
    lines.question.resize(count);
    lines.one_each = roster.lines == questions && range.parts == 1;
    std::size_t l = 0;
    for (std::uint64_t q = range.first; q < range.last && !lines.one_each; ++q) {
        const std::uint64_t end = std::min(last, first_line(q + 1, questions, roster.lines));
        while (lines.first + l < end) lines.question[l++] = static_cast<std::uint32_t>(q - range.first);
    }
    for (; l < count; ++l) lines.question[l] = static_cast<std::uint32_t>(l);
    lines.lab.clear();
    lines.kind.clear();
    if (!roster.order || count == 0) return;
    roster.order->images(lines.first, count, scratch.places);
    if (science.labs_are_stored) {
        lines.lab.resize(count);
        for (std::size_t i = 0; i < count; ++i) lines.lab[i] = roster.lab_of_place(scratch.places[i]);
    }
    if (science.science.labs.size() == 1) return;
    lines.kind.resize(count);
    for (std::size_t i = 0; i < count; ++i) lines.kind[i] = roster.kind_of_place(scratch.places[i]);
}

const LineRule& rule_of(const PreparedScience& science, const Lines& lines, std::size_t line) {
    return science.science.labs[lines.kind.empty() ? 0 : lines.kind[line]].studies;
}

/// True effects of the round's studies: the question's, and the study's own deviation.
void draw_thetas(const PreparedScience& science, const StudyRound& round, bool every_line, const Conducted& block,
                 const std::uint32_t* line, ConductScratch& scratch, double* theta) {
    const std::size_t count = round.entities.count;
    const std::vector<double>& effect = block.questions.effect;
    if (every_line && block.lines.one_each) {
        std::copy(effect.begin(), effect.end(), theta);
    } else {
        for (std::size_t i = 0; i < count; ++i) theta[i] = effect[block.lines.question[line[i]]];
    }
    const double sd = science.science.field.heterogeneity;
    if (sd == 0.0) return;
    scratch.deviation.resize(count);
    normals(round.key, round.address(Purpose::study_effect), round.entities, scratch.deviation.data());
    const auto move = [&](auto moved) {
        for (std::size_t i = 0; i < count; ++i) theta[i] = moved(theta[i], sd * scratch.deviation[i]);
    };
    switch (science.science.design.test) {
        case Test::correlation:  // on the scale of Fisher's z
            return move([](double rho, double by) {
                constexpr double most = 1.0 - 0x1p-52;  // tanh rounds to 1, which no data have
                return std::clamp(std::tanh(std::atanh(rho) + by), -most, most);
            });
        case Test::several_means:  // an f has no sign
            return move([](double f, double by) { return std::fabs(f + by); });
        case Test::two_means:
        case Test::paired_means:
        case Test::one_mean:
        case Test::two_proportions:
        case Test::known_variance:
            return move([](double x, double by) { return x + by; });
    }
}

/// The effects that the round's studies are planned for; null where no kind plans for each question.
const double* planned_of(const PreparedScience& science, const std::uint32_t* line, std::size_t begin, std::size_t count,
                         Conducted& block) {
    if (!science.plans_for_questions()) return nullptr;
    block.studies.planned.resize(begin + count + room_beyond);
    double* planned = block.studies.planned.data() + begin;
    for (std::size_t i = 0; i < count; ++i) {
        const std::size_t kind = block.lines.kind.empty() ? 0 : block.lines.kind[line[i]];
        const PlanningEffect& effect = science.science.labs[kind].size.effect;
        planned[i] = effect.is_true ? effect.optimism * block.questions.planned[block.lines.question[line[i]]]
                                    : effect.value;
    }
    return planned;
}

/// Multiplies (or divides) columns of studies whose effects are in units of the planned one by that.
void scale_by_planned(const PreparedScience& science, const std::uint8_t* kind, const double* planned,
                      std::size_t count, bool divide, double* column) {
    if (!planned) return;
    for (std::size_t i = 0; i < count; ++i) {
        if (!science.table.kinds[kind ? kind[i] : 0].in_planned_effects) continue;
        const double unit = std::fabs(planned[i]);
        column[i] = divide ? column[i] / unit : column[i] * unit;
    }
}

/// Room for `size` studies.
void make_room(const PreparedScience& science, Studies& studies, std::size_t size) {
    const Design& design = science.science.design;
    studies.line.resize(size);
    studies.row.resize(size);
    studies.theta.resize(size);
    studies.statistic.resize(size);
    studies.estimate.resize(size);
    studies.claim.resize(size);
    studies.looks.resize(science.has_looks() ? size : 0);
    studies.stopped.resize(science.has_practices() ? size : 0);
    studies.df.resize(fills_df(design) ? size : 0);
    studies.standard_error.resize(fills_standard_error(design) ? size : 0);
    if (!studies.planned.empty()) studies.planned.resize(size);
}

/// Lab kinds of the lines of a round; null where there is one.
const std::uint8_t* kinds_of(const Lines& lines, bool every_line, std::size_t count, const std::uint32_t* line,
                             ConductScratch& scratch) {
    if (lines.kind.empty()) return nullptr;
    if (every_line) return lines.kind.data();
    scratch.kinds.resize(count);
    for (std::size_t i = 0; i < count; ++i) scratch.kinds[i] = lines.kind[line[i]];
    return scratch.kinds.data();
}

void count_claims(bool every_line, std::size_t count, const std::uint32_t* line, const std::uint8_t* claim,
                  Lines& lines) {
    constexpr auto positive_claim = static_cast<std::uint8_t>(Claim::positive);
    constexpr auto reversed_claim = static_cast<std::uint8_t>(Claim::reversed);
    std::uint16_t* studies = lines.studies.data();
    std::uint16_t* positive = lines.positive.data();
    std::uint16_t* reversed = lines.reversed.data();
    const auto plus = [](std::uint16_t x, bool one) { return static_cast<std::uint16_t>(x + one); };
    if (every_line) {  // without the indirection these loops are vectors
        for (std::size_t i = 0; i < count; ++i) studies[i] = plus(studies[i], true);
        for (std::size_t i = 0; i < count; ++i) positive[i] = plus(positive[i], claim[i] == positive_claim);
        for (std::size_t i = 0; i < count; ++i) reversed[i] = plus(reversed[i], claim[i] == reversed_claim);
        return;
    }
    for (std::size_t i = 0; i < count; ++i) {
        const std::uint32_t l = line[i];
        studies[l] = plus(studies[l], true);
        positive[l] = plus(positive[l], claim[i] == positive_claim);
        reversed[l] = plus(reversed[l], claim[i] == reversed_claim);
    }
}

/// Runs study number `number` of the lines in scratch.active and appends its columns.
void run_round(const PreparedScience& science, StreamKey key, std::uint16_t number, ConductScratch& scratch,
               Conducted& block) {
    Lines& lines = block.lines;
    Studies& studies = block.studies;
    const std::size_t begin = studies.round.back();
    const std::size_t count = scratch.active.size();
    make_room(science, studies, begin + count + room_beyond);
    std::copy(scratch.active.begin(), scratch.active.end(), studies.line.begin() + static_cast<std::ptrdiff_t>(begin));
    const std::uint32_t* line = studies.line.data() + begin;
    const bool every_line = count == lines.studies.size();
    const StudyRound round{key, block.literature, number, {lines.first, every_line ? nullptr : line, count}};
    const StudyBatch batch{studies.row.data() + begin,
                           studies.theta.data() + begin,
                           studies.statistic.data() + begin,
                           studies.estimate.data() + begin,
                           studies.claim.data() + begin,
                           studies.df.empty() ? nullptr : studies.df.data() + begin,
                           studies.standard_error.empty() ? nullptr : studies.standard_error.data() + begin,
                           studies.looks.empty() ? nullptr : studies.looks.data() + begin};
    const std::uint8_t* kinds = kinds_of(lines, every_line, count, line, scratch);
    const double* planned = planned_of(science, line, begin, count, block);
    double* theta = studies.theta.data() + begin;
    draw_sizes(round, science.table, kinds, planned, scratch.sampling, batch.row);
    draw_thetas(science, round, every_line, block, line, scratch, theta);
    scale_by_planned(science, kinds, planned, count, true, theta);
    draw_studies(round, science.science.design, science.table, scratch.sampling, batch);
    if (science.has_practices()) {
        bend_studies(science, round, kinds, scratch.sampling, scratch.bent, batch, studies.stopped.data() + begin);
    }
    scale_by_planned(science, kinds, planned, count, false, theta);
    scale_by_planned(science, kinds, planned, count, false, batch.estimate);
    count_claims(every_line, count, line, batch.claim, lines);
    studies.round.push_back(begin + count);
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
        count_cuts(science.table, cuts, sides, count, studies.row.data(), studies.statistic.data(),
                   studies.df.empty() ? nullptr : studies.df.data(), level.data());
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
    for (std::uint16_t number = 0; !scratch.active.empty(); ++number) {
        run_round(science, key, number, scratch, block);
        if (science.longest_line == 1u) break;
        keep_going(science, lines, scratch);
    }
    make_room(science, block.studies, block.studies.round.back());
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
             BlockRange range, ConductScratch& scratch, Conducted& block) {
    block.literature = literature;
    block.part = range.part;
    block.parts = range.parts;
    draw_questions(science, key, literature, range, scratch, block.questions);
    draw_planned(science, key, literature, scratch, block.questions);
    place_lines(science, roster, range, scratch, block.lines);
    run_studies(science, key, scratch, block);
}

}  // namespace lacuna
