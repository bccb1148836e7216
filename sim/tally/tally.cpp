#include "sim/tally/tally.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

constexpr std::size_t statuses = 3;
constexpr std::size_t scopes = 3;

/// A scope holds the statuses from its own number on: conducted all, written from unpublished on.
constexpr std::size_t lowest_status(Scope scope) { return static_cast<std::size_t>(scope); }

}  // namespace

Tally::Tally(std::size_t kinds, Findings findings, EffectScale scale)
    : kinds_(kinds),
      cells_(kinds * 12),
      findings_(findings),
      scale_(scale),
      sums_(statuses * cells_),
      packed_(lanes * sums_.size()),
      effects_(lanes * sums_.size()),
      ratios_(statuses * 2 * ratio_bins::count) {}

void Tally::clear() {
    std::fill(sums_.begin(), sums_.end(), Cell{});
    std::fill(ratios_.begin(), ratios_.end(), 0u);
    std::fill_n(&manuscripts_[0][0][0], statuses * 6, 0u);
    std::fill_n(&questions_[0][0][0], scopes * 6, 0u);
    open_.clear();
    manuscripts_from_studies_ = questions_from_studies_ = false;
}

void Tally::add_studies(const StudyFacts& facts, const std::uint8_t* status) {
    count_studies(facts, status);
    sum_effects(facts, status);
}

/// Counts and participants in one addition: the count above bit 40, participants below it, for as many
/// studies as cannot overflow (largest_n twice over stays below 2^25, 2^12 times that below 2^40).
void Tally::count_studies(const StudyFacts& facts, const std::uint8_t* status) {
    constexpr std::size_t stretch = 4096;
    const std::size_t stride = statuses * cells_;
    const std::size_t count = facts.cell.size();
    const std::uint16_t* cell = facts.cell.data();
    std::uint64_t* packed = packed_.data();
    for (std::size_t begin = 0; begin < count; begin += stretch) {
        const std::size_t end = std::min(count, begin + stretch);
        for (std::size_t s = begin; s < end; ++s) {
            packed[(s % lanes) * stride + status[s] * cells_ + cell[s]] +=
                (std::uint64_t{1} << 40) + facts.participants[s];
        }
        for (std::size_t i = 0; i < packed_.size(); ++i) {
            Cell& sum = sums_[i % stride];
            sum.count += packed[i] >> 40;
            sum.participants += packed[i] & ((std::uint64_t{1} << 40) - 1);
            packed[i] = 0;
        }
    }
}

/// Sums of effects in 64 bits, for as many studies as cannot overflow (2^51 units each, 2^11 of them),
/// then in 128.
void Tally::sum_effects(const StudyFacts& facts, const std::uint8_t* status) {
    constexpr std::size_t stretch = 2048;
    const std::size_t stride = statuses * cells_;
    std::size_t found[4];
    for (std::size_t claim = 0; claim < 4; ++claim) found[claim] = finds(claim);
    const std::size_t count = facts.real.size();
    Effects* effects = effects_.data();
    std::uint32_t* ratios = ratios_.data();
    for (std::size_t begin = 0; begin < count; begin += stretch) {
        const std::size_t end = std::min(count, begin + stretch);
        for (std::size_t k = begin; k < end; ++k) {
            const std::uint32_t s = facts.real[k];
            const std::size_t at = facts.cell[s];
            const std::size_t its_status = status[s];
            const std::int64_t estimate = facts.estimate[k];
            Effects& sum = effects[(k % lanes) * stride + its_status * cells_ + at];
            sum.estimate += estimate;
            sum.abs_estimate += estimate < 0 ? -estimate : estimate;
            sum.effect += facts.effect[k];
            ++ratios[(its_status * 2 + found[at % 4]) * ratio_bins::count + facts.bin[k]];
        }
        for (std::size_t i = 0; i < effects_.size(); ++i) {
            Cell& sum = sums_[i % stride];
            sum.estimate += effects[i].estimate;
            sum.abs_estimate += effects[i].abs_estimate;
            sum.effect += effects[i].effect;
            effects[i] = {};
        }
    }
}

void Tally::add_question(const QuestionCount& count) {
    std::uint32_t studies = 0;
    std::uint32_t findings = 0;
    for (std::size_t scope = scopes; scope-- > 0;) {  // the narrowest first: each holds the one before
        studies += count.studies[scope];
        findings += count.findings[scope];
        auto& standings = questions_[scope][count.real];
        standings[static_cast<std::size_t>(Standing::studied)] += studies > 0;
        standings[static_cast<std::size_t>(Standing::any_finding)] += findings > 0;
        standings[static_cast<std::size_t>(Standing::majority)] += 2 * findings > studies;
    }
}

void Tally::add_questions(std::uint64_t first, std::uint64_t parts, const std::vector<QuestionCount>& counts) {
    if (parts > 1) return join(first, parts, 1, counts);
    for (const QuestionCount& count : counts) add_question(count);
}

void Tally::join(std::uint64_t first, std::uint64_t parts, std::uint64_t parts_given,
                 const std::vector<QuestionCount>& counts) {
    auto [at, fresh] = open_.try_emplace(first, OpenQuestions{parts, parts, counts});
    OpenQuestions& open = at->second;
    for (std::size_t q = 0; !fresh && q < counts.size(); ++q) {
        for (std::size_t status = 0; status < statuses; ++status) {
            open.counts[q].studies[status] += counts[q].studies[status];
            open.counts[q].findings[status] += counts[q].findings[status];
        }
    }
    open.parts_missing -= parts_given;
    if (open.parts_missing > 0) return;
    for (const QuestionCount& count : open.counts) add_question(count);
    open_.erase(at);
}

void Tally::count_studies_as_manuscripts() { manuscripts_from_studies_ = true; }

void Tally::count_studies_as_questions() { questions_from_studies_ = true; }

void Tally::merge(const Tally& part) {
    for (std::size_t i = 0; i < sums_.size(); ++i) add(part.sums_[i], sums_[i]);
    for (std::size_t i = 0; i < ratios_.size(); ++i) ratios_[i] += part.ratios_[i];
    for (std::size_t i = 0; i < statuses * 6; ++i) (&manuscripts_[0][0][0])[i] += (&part.manuscripts_[0][0][0])[i];
    for (std::size_t i = 0; i < scopes * 6; ++i) (&questions_[0][0][0])[i] += (&part.questions_[0][0][0])[i];
    for (const auto& [first, open] : part.open_) join(first, open.parts, open.parts - open.parts_missing, open.counts);
    manuscripts_from_studies_ |= part.manuscripts_from_studies_;
    questions_from_studies_ |= part.questions_from_studies_;
}

void Tally::add(const Cell& from, Cell& to) {
    to.count += from.count;
    to.estimate += from.estimate;
    to.abs_estimate += from.abs_estimate;
    to.effect += from.effect;
    to.participants += from.participants;
}

/// Sums of the ratio histograms over each octave, so that a median need not go through every bin.
struct Tally::Octaves {
    static constexpr std::size_t count = 2 * ratio_bins::octaves;
    std::uint64_t sums[statuses][2][count] = {};

    explicit Octaves(const std::vector<std::uint32_t>& ratios) {
        for (std::size_t status = 0; status < statuses; ++status) {
            for (std::size_t finding = 0; finding < 2; ++finding) {
                const std::uint32_t* bins = &ratios[(status * 2 + finding) * ratio_bins::count];
                for (std::size_t o = 0; o < count; ++o) {
                    std::uint64_t sum = 0;
                    for (std::size_t b = 0; b < ratio_bins::per_octave; ++b)
                        sum += bins[o * ratio_bins::per_octave + b];
                    sums[status][finding][o] = sum;
                }
            }
        }
    }
};

/// Median of the binned ratios by linear interpolation within the bin that holds it; NaN when empty.
double Tally::median(const Octaves& octaves, std::size_t from_status, bool findings_only) const {
    const auto over = [&](auto count_of) {  // the histograms that belong to the scope
        std::uint64_t sum = 0;
        for (std::size_t status = from_status; status < statuses; ++status) {
            for (std::size_t finding = findings_only; finding < 2; ++finding) sum += count_of(status, finding);
        }
        return static_cast<double>(sum);
    };
    double octave[Octaves::count];
    double all = 0.0;
    for (std::size_t o = 0; o < Octaves::count; ++o) {
        octave[o] = over([&](std::size_t status, std::size_t finding) { return octaves.sums[status][finding][o]; });
        all += octave[o];
    }
    if (all == 0.0) return std::numeric_limits<double>::quiet_NaN();
    double below = 0.0;
    std::size_t o = 0;
    while (below + octave[o] < 0.5 * all) below += octave[o++];
    for (std::size_t b = o * ratio_bins::per_octave;; ++b) {
        const double here = over([&](std::size_t status, std::size_t finding) {
            return std::uint64_t{ratios_[(status * 2 + finding) * ratio_bins::count + b]};
        });
        if (below + here < 0.5 * all) {
            below += here;
            continue;
        }
        const double low = ratio_bins::lower_edge(b);
        return low + (ratio_bins::lower_edge(b + 1) - low) * (0.5 * all - below) / here;
    }
}

void Tally::put_studies(const Layout& layout, std::vector<double>& row) const {
    Cell effects[4][scopes];  // by claim, over the truths that are real
    for (std::size_t cell = 0; cell < cells_; ++cell) {
        if (cell % 12 == 0) std::fill_n(&effects[0][0], 4 * scopes, Cell{});
        const std::size_t kind = cell / 12;
        const auto truth = Truth(cell / 4 % 3);
        const auto claim = Claim(cell % 4);
        const bool real = truth != Truth::null;
        Cell sum;  // of the statuses that the scope holds, the narrowest scope first
        for (std::size_t s = scopes; s-- > 0;) {
            const auto scope = Scope(s);
            add(total(lowest_status(scope), cell), sum);
            const auto count = static_cast<double>(sum.count);
            row[layout.studies(kind, scope, truth, claim)] = count;
            row[layout.participants(kind, scope)] += static_cast<double>(sum.participants);
            if (manuscripts_from_studies_) {
                const auto its = finds(cell) ? ManuscriptClass::supportive : ManuscriptClass::null;
                row[layout.manuscripts(scope, real, its)] += count;
            }
            if (questions_from_studies_) {
                row[layout.questions(scope, real, Standing::studied)] += count;
                row[layout.questions(scope, real, Standing::any_finding)] += finds(cell) ? count : 0.0;
                row[layout.questions(scope, real, Standing::majority)] += finds(cell) ? count : 0.0;
            }
            if (!real) continue;
            add(sum, effects[static_cast<std::size_t>(claim)][s]);
        }
        if (truth != Truth::real_negative) continue;  // both real truths are in now
        for (std::size_t s = 0; s < scopes; ++s) {
            const Cell& its = effects[static_cast<std::size_t>(claim)][s];
            row[layout.sum(kind, Scope(s), claim, Sum::estimate)] =
                static_cast<double>(its.estimate) * scale_.unit();
            row[layout.sum(kind, Scope(s), claim, Sum::abs_estimate)] =
                static_cast<double>(its.abs_estimate) * scale_.unit();
            row[layout.sum(kind, Scope(s), claim, Sum::abs_effect)] =
                static_cast<double>(its.effect) * scale_.unit();
        }
    }
}

void Tally::put_manuscripts_and_questions(const Layout& layout, std::vector<double>& row) const {
    for (std::size_t s = 0; s < scopes; ++s) {
        const auto scope = Scope(s);
        for (std::size_t real = 0; real < 2; ++real) {
            for (std::size_t c = 0; c < 3; ++c) {
                for (std::size_t status = lowest_status(scope); status < statuses; ++status) {
                    row[layout.manuscripts(scope, real != 0, ManuscriptClass(c))] +=
                        static_cast<double>(manuscripts_[status][real][c]);
                }
                row[layout.questions(scope, real != 0, Standing(c))] += static_cast<double>(questions_[s][real][c]);
            }
        }
    }
}

void Tally::put_medians(const Layout& layout, std::vector<double>& row) const {
    const Octaves octaves(ratios_);
    for (std::size_t s = 0; s < scopes; ++s) {
        const auto scope = Scope(s);
        row[layout.median(scope, Median::findings)] = median(octaves, lowest_status(scope), true);
        row[layout.median(scope, Median::reports)] = median(octaves, lowest_status(scope), false);
    }
}

std::vector<double> Tally::row() const {
    if (!open_.empty()) throw Defect("Tally::row: parts of a literature's questions are missing");
    const Layout layout(kinds_);
    std::vector<double> row(layout.size(), 0.0);
    put_studies(layout, row);
    put_manuscripts_and_questions(layout, row);
    put_medians(layout, row);
    return row;
}

}  // namespace lacuna
