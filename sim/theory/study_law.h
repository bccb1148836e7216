// The law of one study's result, given its question's effect.
#pragma once

#include <vector>

#include "sim/model/claim.h"
#include "sim/model/scenario.h"
#include "sim/stats/partitioned_t.h"

namespace lacuna {

/// Expected counts and sums of a set of results.
struct Sums {
    double studies = 0.0;
    double estimate = 0.0;
    double abs_estimate = 0.0;

    void add(const Sums& other, double factor = 1.0) {
        studies += factor * other.studies;
        estimate += factor * other.estimate;
        abs_estimate += factor * other.abs_estimate;
    }
};

/// Results that no rule tells apart: the same claim, and the same p cuts passed.
struct Cell {
    Claim claim;
    std::size_t level_two, level_one;
    Sums sums;  // studies: the chance of the cell
};

/// Studies of one lab kind. Their sizes are averaged over; so is the study's own deviation from its
/// question's effect: with theta ~ N(effect, tau^2) and noncentrality l theta, the statistic is
/// s = sqrt(1 + l^2 tau^2) times a noncentral t of noncentrality l effect / s.
class StudyLaw {
public:
    /// Cuts ascending. Throws InputError as size_distribution does.
    StudyLaw(const Science& science, const LabKind& kind, const std::vector<double>& cuts_two,
             const std::vector<double>& cuts_one);

    /// How many integrals one call of cells() takes.
    std::size_t integrals() const { return sizes_.size(); }

    /// Effects between which the chances of cells bend gently enough for one Gauss-Legendre piece.
    std::vector<double> bends() const;

    /// All cells of positive chance; chances sum to 1.
    std::vector<Cell> cells(double effect) const;

private:
    /// Studies of one size: their statistic divided by `spread`, parted at every critical value.
    struct Size {
        PartitionedT statistic;
        std::vector<std::size_t> cells;  // of each part
        double noncentrality, to_estimate, weight;
    };

    std::size_t cell_of(const Cell& facts);
    void add_size(const Science& science, std::uint32_t n, double weight, const std::vector<double>& cuts_two,
                  const std::vector<double>& cuts_one);

    std::vector<Size> sizes_;
    double largest_critical_ = 0.0, least_noncentrality_ = infinity, most_noncentrality_ = 0.0;
    std::vector<Cell> blank_;  // every cell that occurs, with empty sums
};

}  // namespace lacuna
