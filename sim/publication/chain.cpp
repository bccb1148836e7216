#include "sim/publication/chain.h"

#include <algorithm>

#include "sim/publication/manuscripts.h"

namespace lacuna {

namespace {

constexpr auto unwritten = static_cast<std::uint8_t>(Status::unwritten);
constexpr auto unpublished = static_cast<std::uint8_t>(Status::unpublished);
static_assert(static_cast<int>(Status::published) == static_cast<int>(Status::unpublished) + 1);
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
        all.push_back({round[r],
                       static_cast<std::uint16_t>(r),
                       {lines.first, every_line ? nullptr : block.studies.line.data() + round[r], count}});
    }
    return all;
}

/// Words of the waiting manuscripts of a segment, in the order of scratch.waiting.
void waiting_words(StreamKey key, Address address, const Segment& segment, ChainScratch& scratch,
                   std::vector<std::uint16_t>& out) {
    const std::size_t count = scratch.waiting.size();
    if (count == segment.entities.count) {
        out.resize(count);
        words(key, address, segment.entities, out.data());
    } else if (8 * count > segment.entities.count && segment.entities.offsets == nullptr) {
        out.resize(segment.entities.count);  // cheaper to draw all in order than an eighth of them scattered
        words(key, address, segment.entities, out.data());
        for (std::size_t i = 0; i < count; ++i) out[i] = out[scratch.waiting[i]];
    } else {
        out.resize(count);
        scratch.offsets.resize(count);
        for (std::size_t i = 0; i < count; ++i) {
            const std::uint32_t w = scratch.waiting[i];
            scratch.offsets[i] = segment.entities.offsets ? segment.entities.offsets[w] : w;
        }
        words(key, address, {segment.entities.first, scratch.offsets.data(), count}, out.data());
    }
}

std::uint64_t entity_of(const Segment& segment, std::uint32_t manuscript) {
    return segment.entities.first + (segment.entities.offsets ? segment.entities.offsets[manuscript] : manuscript);
}

/// Leaves in scratch.waiting the manuscripts that are written up.
void write_up(StreamKey key, Address address, const PreparedRules& rules, const Segment& segment,
              ChainScratch& scratch, Outcome& outcome) {
    const std::size_t count = segment.entities.count;
    while (scratch.everyone.size() < count)
        scratch.everyone.push_back(static_cast<std::uint32_t>(scratch.everyone.size()));
    scratch.waiting.assign(scratch.everyone.begin(), scratch.everyone.begin() + static_cast<std::ptrdiff_t>(count));
    const Chance* chance = rules.writing;
    if (chance[0].p() == 1.0 && chance[1].p() == 1.0 && chance[2].p() == 1.0) return;
    address.purpose = Purpose::writing;
    waiting_words(key, address, segment, scratch, scratch.words);
    const std::uint8_t* classes = outcome.manuscript_class.data() + segment.begin;
    scratch.happened.resize(count);
    decide_by_code(
        key, address, count, scratch.words.data(), classes, chance, 3,
        [&](std::size_t i) { return entity_of(segment, static_cast<std::uint32_t>(i)); }, scratch.happened.data());
    std::size_t written = 0;
    for (std::size_t i = 0; i < count; ++i) {
        scratch.waiting[written] = static_cast<std::uint32_t>(i);
        written += scratch.happened[i];
    }
    scratch.waiting.resize(written);
}

/// What a journal's rule looks at: class or level of each manuscript of the segment.
const std::uint8_t* seen(const AcceptanceTable& accept, const Segment& segment, const ChainScratch& scratch,
                         const Outcome& outcome) {
    if (accept.kind == Acceptance::Kind::by_class) return outcome.manuscript_class.data() + segment.begin;
    return (accept.sides == 2 ? scratch.level_two : scratch.level_one).data() + segment.begin;
}

/// scratch.happened[i] = whether journal j accepts waiting manuscript i.
void judge(StreamKey key, Address address, const PreparedRules::PreparedJournal& journal, const Segment& segment,
           ChainScratch& scratch, const Outcome& outcome) {
    const std::size_t count = scratch.waiting.size();
    const std::uint32_t* waiting = scratch.waiting.data();
    const auto entity = [&](std::size_t i) { return entity_of(segment, waiting[i]); };
    const std::uint8_t* facts = seen(journal.accept, segment, scratch, outcome);
    const Chance* chances = journal.accept.chance.data();
    const bool everyone = count == segment.entities.count;
    scratch.happened.resize(count);
    address.index = journal.index;
    address.purpose = Purpose::acceptance;
    waiting_words(key, address, segment, scratch, scratch.words);
    if (journal.results_blind.p() == 0.0 && everyone && journal.accept.chance.size() <= 4) {
        decide_by_code(key, address, count, scratch.words.data(), facts, chances, journal.accept.chance.size(),
                       entity, scratch.happened.data());
        return;
    }
    if (journal.results_blind.p() == 0.0) {
        decide(
            key, address, count, scratch.words.data(),
            [&](std::size_t i) -> const Chance& { return chances[facts[waiting[i]]]; }, entity,
            scratch.happened.data());
        return;
    }
    Address blind_address = address;
    blind_address.purpose = Purpose::results_blind;
    waiting_words(key, blind_address, segment, scratch, scratch.blind_words);
    scratch.blind.resize(count);
    decide(
        key, blind_address, count, scratch.blind_words.data(),
        [&](std::size_t) -> const Chance& { return journal.results_blind; }, entity, scratch.blind.data());
    decide(
        key, address, count, scratch.words.data(),
        [&](std::size_t i) -> const Chance& {
            return scratch.blind[i] ? journal.results_blind_chance : chances[facts[waiting[i]]];
        },
        entity, scratch.happened.data());
}

/// The waiting manuscripts of a segment at journal j; those it rejects go on waiting.
void submit(StreamKey key, Address address, const PreparedRules& rules, std::size_t j, const Segment& segment,
            ChainScratch& scratch, Outcome& outcome) {
    judge(key, address, rules.journals[j], segment, scratch, outcome);
    const std::uint8_t* accepted = scratch.happened.data();
    std::uint32_t* waiting = scratch.waiting.data();
    std::uint8_t* status = outcome.manuscript_status.data() + segment.begin;
    std::uint8_t* published_by = outcome.journal.data() + segment.begin;
    std::uint8_t* attempts = outcome.attempts.data() + segment.begin;
    const auto number = static_cast<std::uint8_t>(j + 1);
    const std::size_t count = scratch.waiting.size();
    if (count == segment.entities.count) {  // without the indirection these loops are vectors
        for (std::size_t i = 0; i < count; ++i) status[i] = static_cast<std::uint8_t>(unpublished + accepted[i]);
        for (std::size_t i = 0; i < count; ++i) published_by[i] = static_cast<std::uint8_t>(number * accepted[i]);
        std::fill(attempts, attempts + count, number);
    } else {
        for (std::size_t i = 0; i < count; ++i) {
            const std::uint32_t m = waiting[i];
            status[m] = static_cast<std::uint8_t>(unpublished + accepted[i]);
            published_by[m] = static_cast<std::uint8_t>(number * accepted[i]);
            attempts[m] = number;
        }
    }
    if (j + 1 == rules.journals.size()) return;
    std::size_t rejected = 0;
    for (std::size_t i = 0; i < count; ++i) {
        waiting[rejected] = waiting[i];
        rejected += 1u - accepted[i];
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
    PreparedRules prepared{
        rules.writing.unit,
        findings,
        {Chance(rules.writing.supportive), Chance(rules.writing.mixed), Chance(rules.writing.null)},
        {},
        rules.journals.empty()};
    const std::size_t tried = std::min<std::size_t>(rules.submission.attempts, rules.journals.size());
    for (std::size_t j = 0; j < tried; ++j) {
        const Journal& journal = rules.journals[j];
        prepared.journals.push_back(
            {journal_index(journal.name),
             acceptance_table(journal.accept, journal.accept.sides == 2 ? cuts.two_sided : cuts.one_sided),
             Chance(journal.results_blind), Chance(journal.results_blind_chance)});
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
