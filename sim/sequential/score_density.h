// The density of a Brownian score where no look has stopped yet, carried from look to look.
#pragma once

#include <vector>

namespace lacuna {

inline constexpr double infinite_score = __builtin_huge_val();

/// The score S(t) = Z sqrt(t) is normal with mean drift * t and variance t, with independent increments. Before
/// the first look it is 0.
class ScoreDensity {
public:
    /// Chances that the study has gone on so far and the score at information t is above (below) `bound`.
    double above(double t, double bound, double drift) const;
    double below(double t, double bound, double drift) const;

    /// Goes on to information t inside (low, high), or inside (low, inner_low) and (inner_high, high). Ends may
    /// be infinite.
    void advance(double t, double low, double high, double drift);
    void advance_around(double t, double low, double inner_low, double inner_high, double high, double drift);

private:
    struct Point {
        double score, mass;  // density times quadrature weight
    };
    void add_interval(double t, double low, double high, double drift, std::vector<Point>& next) const;

    double information_ = 0.0;
    std::vector<Point> points_{{0.0, 1.0}};
};

}  // namespace lacuna
