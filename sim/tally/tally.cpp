#include "sim/tally/tally.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace lacuna {

namespace {

constexpr std::size_t statuses = 3;
constexpr std::size_t scopes = 3;

/// A scope holds the statuses from its own number on: conducted all, written from unpublished on.
constexpr std::size_t lowest_status(Scope scope) { return static_cast<std::size_t>(scope); }

}  // namespace

Tally::Tally(std::size_t kinds, Findings findings)
    : kinds_(kinds),
      cells_(kinds * 12),
      findings_(findings),
      sums_(lanes * statuses * cells_),
      ratios_(statuses * 2 * ratio_bins::count) {}

void Tally::clear() {
    std::fill(sums_.begin(), sums_.end(), Cell{});
    std::fill(ratios_.begin(), ratios_.end(), 0u);
    std::fill_n(&manuscripts_[0][0][0], statuses * 6, 0u);
    std::fill_n(&questions_[0][0][0], scopes * 6, 0u);
    manuscripts_from_studies_ = questions_from_studies_ = false;
}

void Tally::add_studies(const StudyFacts& facts, const std::uint8_t* status) {
    const std::size_t count = facts.cell.size();
    const std::size_t stride = statuses * cells_;
    std::size_t found[4];
    for (std::size_t claim = 0; claim < 4; ++claim) found[claim] = finds(claim);
    const std::uint16_t* cell = facts.cell.data();
    const std::uint16_t* bin = facts.bin.data();
    const double* estimate = facts.estimate.data();
    const double* effect = facts.effect.data();
    Cell* sums = sums_.data();
    std::uint32_t* ratios = ratios_.data();
    for (std::size_t s = 0; s < count; ++s) {
        const std::size_t at = cell[s];
        Cell& sum = sums[(s % lanes) * stride + status[s] * cells_ + at];
        sum.count += 1.0;
        sum.estimate += estimate[s];
        sum.abs_estimate += std::fabs(estimate[s]);
        sum.effect += effect[s];
        sum.participants += facts.participants[s];
        ++ratios[(status[s] * 2u + found[at % 4]) * ratio_bins::count + bin[s]];
    }
}

void Tally::add_question(bool real, Scope scope, QuestionCount count) {
    auto& standings = questions_[static_cast<std::size_t>(scope)][real];
    standings[static_cast<std::size_t>(Standing::studied)] += count.studies > 0;
    standings[static_cast<std::size_t>(Standing::any_finding)] += count.findings > 0;
    standings[static_cast<std::size_t>(Standing::majority)] += 2 * count.findings > count.studies;
}

void Tally::count_studies_as_manuscripts() { manuscripts_from_studies_ = true; }

void Tally::count_studies_as_questions() { questions_from_studies_ = true; }

void Tally::merge(const Tally& part) {
    for (std::size_t i = 0; i < sums_.size(); ++i) {
        Cell& to = sums_[i];
        const Cell& from = part.sums_[i];
        to.count += from.count;
        to.estimate += from.estimate;
        to.abs_estimate += from.abs_estimate;
        to.effect += from.effect;
        to.participants += from.participants;
    }
    for (std::size_t i = 0; i < ratios_.size(); ++i) ratios_[i] += part.ratios_[i];
    for (std::size_t i = 0; i < statuses * 6; ++i) (&manuscripts_[0][0][0])[i] += (&part.manuscripts_[0][0][0])[i];
    for (std::size_t i = 0; i < scopes * 6; ++i) (&questions_[0][0][0])[i] += (&part.questions_[0][0][0])[i];
    manuscripts_from_studies_ |= part.manuscripts_from_studies_;
    questions_from_studies_ |= part.questions_from_studies_;
}

Tally::Cell Tally::total(std::size_t status, std::size_t cell) const {
    Cell sum;
    for (std::size_t lane = 0; lane < lanes; ++lane) {
        const Cell& part = sums_[(lane * statuses + status) * cells_ + cell];
        sum.count += part.count;
        sum.estimate += part.estimate;
        sum.abs_estimate += part.abs_estimate;
        sum.effect += part.effect;
        sum.participants += part.participants;
    }
    return sum;
}

/// Median of the binned ratios by linear interpolation within the bin that holds it; NaN when empty.
double Tally::median(std::size_t from_status, bool findings_only) const {
    std::vector<double> counts(ratio_bins::count, 0.0);
    double all = 0.0;
    for (std::size_t status = from_status; status < statuses; ++status) {
        for (std::size_t finding = findings_only; finding < 2; ++finding) {
            const std::uint32_t* bins = &ratios_[(status * 2 + finding) * ratio_bins::count];
            for (std::size_t b = 1; b < ratio_bins::count; ++b) {
                counts[b] += bins[b];
                all += bins[b];
            }
        }
    }
    if (all == 0.0) return std::numeric_limits<double>::quiet_NaN();
    double below = 0.0;
    std::size_t b = 1;
    while (below + counts[b] < 0.5 * all) below += counts[b++];
    const double low = ratio_bins::lower_edge(b);
    return low + (ratio_bins::lower_edge(b + 1) - low) * (0.5 * all - below) / counts[b];
}

std::vector<double> Tally::row() const {
    const Layout layout(kinds_);
    std::vector<double> row(layout.size(), 0.0);
    for (std::size_t cell = 0; cell < cells_; ++cell) {
        const std::size_t kind = cell / 12;
        const auto truth = Truth(cell / 4 % 3);
        const auto claim = Claim(cell % 4);
        Cell sum;  // of the statuses that the scope holds, the narrowest scope first
        for (std::size_t s = scopes; s-- > 0;) {
            const auto scope = Scope(s);
            const Cell own = total(lowest_status(scope), cell);
            sum.count += own.count;
            sum.estimate += own.estimate;
            sum.abs_estimate += own.abs_estimate;
            sum.effect += own.effect;
            sum.participants += own.participants;
            row[layout.studies(kind, scope, truth, claim)] = sum.count;
            row[layout.participants(kind, scope)] += sum.participants;
            if (manuscripts_from_studies_) {
                const auto its = finds(cell) ? ManuscriptClass::supportive : ManuscriptClass::null;
                row[layout.manuscripts(scope, truth != Truth::null, its)] += sum.count;
            }
            if (questions_from_studies_) {
                const bool real = truth != Truth::null;
                row[layout.questions(scope, real, Standing::studied)] += sum.count;
                if (finds(cell)) {
                    row[layout.questions(scope, real, Standing::any_finding)] += sum.count;
                    row[layout.questions(scope, real, Standing::majority)] += sum.count;
                }
            }
            if (truth == Truth::null) continue;
            row[layout.sum(kind, scope, claim, Sum::estimate)] += sum.estimate;
            row[layout.sum(kind, scope, claim, Sum::abs_estimate)] += sum.abs_estimate;
            row[layout.sum(kind, scope, claim, Sum::abs_effect)] += sum.effect;
        }
    }
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
        row[layout.median(scope, Median::findings)] = median(lowest_status(scope), true);
        row[layout.median(scope, Median::reports)] = median(lowest_status(scope), false);
    }
    return row;
}

}  // namespace lacuna
