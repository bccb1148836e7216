#include "sim/publication/chain.h"

#include <algorithm>

#include "sim/publication/manuscripts.h"

namespace lacuna {

namespace {

constexpr auto unwritten = static_cast<std::uint8_t>(Status::unwritten);
constexpr auto unpublished = static_cast<std::uint8_t>(Status::unpublished);
constexpr auto published = static_cast<std::uint8_t>(Status::published);

/// Manuscripts begin .. begin + entities.count - 1, which share an address but for the entity.
struct Segment {
    std::size_t begin;
    std::uint16_t study;
    Entities entities;
};

/// Studies as manuscripts come in the block's rounds; lines are one segment.
std::vector<Segment> segments(Unit unit, const Conducted& block) {
    const Lines& lines = block.lines;
    if (unit != Unit::study) return {{0, 0, {lines.first, nullptr, lines.studies.size()}}};
    std::vector<Segment> all;
    const std::vector<std::size_t>& round = block.studies.round;
    for (std::size_t r = 0; r + 1 < round.size(); ++r) {
        const std::size_t count = round[r + 1] - round[r];
        const bool every_line = count == lines.studies.size();
        all.push_back({round[r], static_cast<std::uint16_t>(r),
                       {lines.first, every_line ? nullptr : block.studies.line.data() + round[r], count}});
    }
    return all;
}

/// Uniforms of the waiting manuscripts of a segment, in the order of scratch.waiting.
void waiting_uniforms(StreamKey key, Address address, const Segment& segment, ChainScratch& scratch,
                      std::vector<double>& out) {
    const std::size_t count = scratch.waiting.size();
    if (count == segment.entities.count) {
        out.resize(count);
        uniforms(key, address, segment.entities, out.data());
    } else if (2 * count > segment.entities.count && segment.entities.offsets == nullptr) {
        out.resize(segment.entities.count);  // cheaper to draw all in order than half of them scattered
        uniforms(key, address, segment.entities, out.data());
        for (std::size_t i = 0; i < count; ++i) out[i] = out[scratch.waiting[i]];
    } else {
        out.resize(count);
        scratch.offsets.resize(count);
        for (std::size_t i = 0; i < count; ++i) {
            const std::uint32_t w = scratch.waiting[i];
            scratch.offsets[i] = segment.entities.offsets ? segment.entities.offsets[w] : w;
        }
        uniforms(key, address, {segment.entities.first, scratch.offsets.data(), count}, out.data());
    }
}

void write_up(StreamKey key, Address address, const PreparedRules& rules, const Segment& segment,
              ChainScratch& scratch, Outcome& outcome) {
    const std::size_t count = segment.entities.count;
    scratch.waiting.resize(count);
    const double* w = rules.writing;
    if (w[0] == 1.0 && w[1] == 1.0 && w[2] == 1.0) {
        for (std::size_t i = 0; i < count; ++i) scratch.waiting[i] = static_cast<std::uint32_t>(i);
        return;
    }
    scratch.uniform.resize(count);
    address.purpose = Purpose::writing;
    uniforms(key, address, segment.entities, scratch.uniform.data());
    const std::uint8_t* classes = outcome.manuscript_class.data() + segment.begin;
    std::size_t written = 0;
    for (std::size_t i = 0; i < count; ++i) {
        scratch.waiting[written] = static_cast<std::uint32_t>(i);
        written += scratch.uniform[i] < w[classes[i]];
    }
    scratch.waiting.resize(written);
}

/// What a journal's rule looks at: class or level of each manuscript of the segment.
const std::uint8_t* seen(const AcceptanceTable& accept, const Segment& segment, const ChainScratch& scratch,
                         const Outcome& outcome) {
    if (accept.kind == Acceptance::Kind::by_class) return outcome.manuscript_class.data() + segment.begin;
    return (accept.sides == 2 ? scratch.level_two : scratch.level_one).data() + segment.begin;
}

void submit(StreamKey key, Address address, const PreparedRules& rules, std::size_t j, const Segment& segment,
            ChainScratch& scratch, Outcome& outcome) {
    const PreparedRules::PreparedJournal& journal = rules.journals[j];
    address.index = journal.index;
    address.purpose = Purpose::acceptance;
    waiting_uniforms(key, address, segment, scratch, scratch.uniform);
    const bool some_blind = journal.results_blind > 0.0;
    if (some_blind) {
        address.purpose = Purpose::results_blind;
        waiting_uniforms(key, address, segment, scratch, scratch.blind);
    }
    const std::uint8_t* facts = seen(journal.accept, segment, scratch, outcome);
    const double* chance = journal.accept.chance.data();
    std::size_t rejected = 0;
    for (std::size_t i = 0; i < scratch.waiting.size(); ++i) {
        const std::uint32_t m = scratch.waiting[i];
        const bool blind = some_blind && scratch.blind[i] < journal.results_blind;
        const bool accepted = scratch.uniform[i] < (blind ? journal.results_blind_chance : chance[facts[m]]);
        const std::size_t at = segment.begin + m;
        outcome.manuscript_status[at] = accepted ? published : unpublished;
        outcome.journal[at] = accepted ? static_cast<std::uint8_t>(j + 1) : std::uint8_t{0};
        outcome.attempts[at] = static_cast<std::uint8_t>(j + 1);
        scratch.waiting[rejected] = m;
        rejected += !accepted;
    }
    scratch.waiting.resize(rejected);
}

void add_cuts(std::vector<double>& cuts, const std::vector<double>& steps) {
    cuts.insert(cuts.end(), steps.begin(), steps.end());
    std::sort(cuts.begin(), cuts.end());
    cuts.erase(std::unique(cuts.begin(), cuts.end()), cuts.end());
}

}  // namespace

Cuts collect_cuts(const std::vector<const Rules*>& rules) {
    Cuts cuts;
    for (const Rules* its : rules) {
        for (const Journal& journal : its->journals) {
            if (journal.accept.kind != Acceptance::Kind::by_p) continue;
            add_cuts(journal.accept.sides == 2 ? cuts.two_sided : cuts.one_sided, journal.accept.steps);
        }
    }
    return cuts;
}

PreparedRules prepare(const Rules& rules, Findings findings, const Cuts& cuts) {
    PreparedRules prepared{rules.writing.unit,
                           findings,
                           {rules.writing.supportive, rules.writing.mixed, rules.writing.null},
                           {},
                           rules.journals.empty()};
    const std::size_t tried = std::min<std::size_t>(rules.submission.attempts, rules.journals.size());
    for (std::size_t j = 0; j < tried; ++j) {
        const Journal& journal = rules.journals[j];
        prepared.journals.push_back(
            {journal_index(journal.name),
             acceptance_table(journal.accept, journal.accept.sides == 2 ? cuts.two_sided : cuts.one_sided),
             journal.results_blind, journal.results_blind_chance});
    }
    return prepared;
}

void publish(StreamKey key, const PreparedRules& rules, const Conducted& block, ChainScratch& scratch,
             Outcome& outcome) {
    classify(rules, block, outcome);
    best_levels(rules, block, scratch);
    const std::size_t count = outcome.manuscript_class.size();
    outcome.manuscript_status.assign(count, unwritten);
    outcome.journal.assign(count, 0);
    outcome.attempts.assign(count, 0);
    for (const Segment& segment : segments(rules.unit, block)) {
        Address address{block.literature, Purpose::writing, segment.study};
        write_up(key, address, rules, segment, scratch, outcome);
        if (rules.no_journal) {
            for (const std::uint32_t m : scratch.waiting) outcome.manuscript_status[segment.begin + m] = published;
            continue;
        }
        for (std::size_t j = 0; j < rules.journals.size() && !scratch.waiting.empty(); ++j) {
            submit(key, address, rules, j, segment, scratch, outcome);
        }
    }
    spread_status(rules, block, outcome);
}

}  // namespace lacuna
