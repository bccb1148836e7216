// Truncated and clamped draws: inside their bounds, with the exact mean (sim/stats, which SciPy checks).
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>

#include "sim/variate/sampler.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;

namespace {

Distribution bounded(Family family, double first, double second, double min, double max, bool clamp = false) {
    return {family, first, second, min, max, clamp, {}, {}};
}

}  // namespace

TEST_CASE("Draws of every family keep to min and max, and have the exact mean", "[variate]") {
    Distribution discrete = bounded(Family::discrete, 0, 0, -infinity, 2.5);
    discrete.values = {-1.0, 0.5, 2.0, 3.0};
    discrete.weights = {1.0, 2.0, 3.0, 1.5};
    const std::vector<Distribution> cases{
        bounded(Family::normal, 0.3, 1.0, -0.5, 0.9),      bounded(Family::normal, 0.3, 1.0, -infinity, 0.4),
        bounded(Family::normal, 0.0, 1.0, 2.5, infinity),  // a tail, by inversion
        bounded(Family::half_normal, 1.0, 0.0, 0.1, 1.5),  bounded(Family::lognormal, 20.0, 0.5, 8.0, 30.0),
        bounded(Family::gamma, 2.0, 1.5, 0.5, 4.0),        bounded(Family::beta, 0.4, 3.0, 0.1, 0.8),
        bounded(Family::uniform, -1.0, 2.0, -0.5, 1.0),    bounded(Family::poisson, 6.0, 0.0, 3.0, 8.0),
        bounded(Family::normal, 0.3, 1.0, -0.5, 0.9, true), bounded(Family::poisson, 6.0, 0.0, 3.0, 8.0, true),
        discrete};
    const std::size_t count = 200000;
    for (std::size_t c = 0; c < cases.size(); ++c) {
        INFO("case " << c);
        std::vector<double> drawn(count);
        Sampler(cases[c]).draw({5}, {1, Purpose::question_effect}, Purpose::question_effect_again,
                               {0, nullptr, count}, drawn.data());
        oracle::Sample sample;
        for (const double x : drawn) sample.add(x);
        CHECK(*std::min_element(drawn.begin(), drawn.end()) >= cases[c].min);
        CHECK(*std::max_element(drawn.begin(), drawn.end()) <= cases[c].max);
        CHECK(std::fabs(oracle::z_score(sample.mean(), mean(cases[c]), sample.standard_error())) < 4);
    }
}
