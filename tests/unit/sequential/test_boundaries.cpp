// Boundaries and crossing chances against published constants, the reference recursion, and bivariate facts.
#include <catch2/catch.hpp>
#include <cmath>
#include <random>

#include "sim/base/fault.h"
#include "sim/sequential/boundaries.h"
#include "tests/oracle/reference_csv.h"
#include "tests/oracle/verdict.h"

using namespace lacuna;
using oracle::number;

namespace {

double both(const Crossing& crossing) { return crossing.predicted + crossing.reversed; }

}  // namespace

TEST_CASE("Pocock (1977) and O'Brien & Fleming (1979): constants to all printed digits", "[sequential]") {
    int published = 0;
    for (const auto& row : oracle::read_reference("group_sequential_bounds.csv").rows) {
        const auto looks = static_cast<std::size_t>(number(row, "K"));
        const double alpha = number(row, "alpha");
        INFO("K " << looks << " alpha " << alpha);
        const double pocock = look_bounds({BoundaryKind::pocock, equal_steps(looks), alpha, 2}).back();
        const std::vector<double> falling = look_bounds({BoundaryKind::obrien_fleming, equal_steps(looks), alpha, 2});
        CHECK(pocock == Approx(number(row, "C_P")).margin(1e-6).epsilon(0));
        CHECK(falling.back() == Approx(number(row, "C_B")).margin(1e-6).epsilon(0));
        CHECK(falling.front() == Approx(number(row, "OF_S")).margin(1e-5).epsilon(0));
        CHECK(nominal_level(pocock, 2) == Approx(number(row, "nominal_p_pocock")).margin(1e-7).epsilon(0));
        if (!oracle::has(row, "published_CP")) continue;
        ++published;
        CHECK(std::fabs(pocock - number(row, "published_CP")) < 0.00051);
        CHECK(std::fabs(falling.back() - number(row, "published_CB")) < 0.00051);
    }
    CHECK(published == 6);
}

TEST_CASE("Looks at a constant level: Armitage, McPherson & Rowe (1969), and under drift", "[sequential]") {
    const auto at_constant_level = [](std::size_t looks, double alpha, double drift) {
        const auto bounds = look_bounds({BoundaryKind::constant_level, equal_steps(looks), alpha, 2});
        return both(crossing(equal_steps(looks), bounds, 2, drift));
    };
    for (const auto& row : oracle::read_reference("repeated_looks_type1.csv").rows) {
        if (number(row, "k") > 50) continue;  // time grows with the cube of k
        CHECK(at_constant_level(static_cast<std::size_t>(number(row, "k")), number(row, "alpha"), 0.0) ==
              Approx(number(row, "type1")).margin(1e-7).epsilon(0));
    }
    for (const auto& row : oracle::read_reference("repeated_looks_published.csv").rows) {
        if (number(row, "k") > 50) continue;
        CHECK(std::fabs(at_constant_level(static_cast<std::size_t>(number(row, "k")), number(row, "alpha"), 0.0) -
                        number(row, "type1_published")) < 0.00051);
    }
    for (const auto& row : oracle::read_reference("repeated_looks_drift.csv").rows) {
        if (number(row, "K") > 50) continue;
        CHECK(at_constant_level(static_cast<std::size_t>(number(row, "K")), number(row, "alpha"), number(row, "delta")) ==
              Approx(number(row, "p_any")).margin(1e-7).epsilon(0));
    }
}

TEST_CASE("Looks at unequal steps (reference/optional_stopping_z.csv)", "[sequential]") {
    for (const auto& row : oracle::read_reference("optional_stopping_z.csv").rows) {
        std::vector<double> information;
        for (double n = number(row, "n0"); n <= number(row, "n_last"); n += number(row, "step"))
            information.push_back(n / number(row, "n_last"));
        if (information.size() > 45) continue;
        const auto bounds = look_bounds({BoundaryKind::constant_level, information, number(row, "alpha"), 2});
        CHECK(both(crossing(information, bounds, 2, 0.0)) == Approx(number(row, "type1")).margin(1e-7).epsilon(0));
    }
}

TEST_CASE("Lan & DeMets (1983): by every look exactly what the spending function allows is spent", "[sequential]") {
    const std::vector<double> information{0.1, 0.35, 0.4, 0.8, 1.0};
    for (const int sides : {1, 2}) {
        for (const BoundaryKind kind : {BoundaryKind::spending_pocock, BoundaryKind::spending_obrien_fleming}) {
            const auto bounds = look_bounds({kind, information, 0.05, sides});
            const Crossing its = crossing(information, bounds, sides, 0.0);
            double spent = 0.0;
            // Each side of a two-sided test at half the level: z of a quarter of it.
            const double z = sides == 2 ? 2.241402727604947 : 1.959963984540054;
            for (std::size_t k = 0; k < information.size(); ++k) {
                spent += its.above[k] + its.below[k];
                const double t = information[k];
                const double allowed = kind == BoundaryKind::spending_pocock
                                           ? 0.05 * std::log(1.0 + (std::exp(1.0) - 1.0) * t)
                                           : sides * std::erfc(z / std::sqrt(t) / std::sqrt(2.0));
                CHECK(spent == Approx(allowed).margin(1e-9).epsilon(0));
            }
        }
    }
    // Lan & DeMets (1983), Table 1, five equal steps, one-sided 0.025, shape of O'Brien & Fleming: 4.8769, 3.3569,
    // 2.6803, 2.2898, 2.0310 (from memory; two-sided 0.05 gives the same; good to about 1e-4).
    const auto bounds = look_bounds({BoundaryKind::spending_obrien_fleming, equal_steps(5), 0.05, 2});
    const double printed[] = {4.8769, 3.3569, 2.6803, 2.2898, 2.0310};
    for (std::size_t k = 0; k < 5; ++k) CHECK(bounds[k] == Approx(printed[k]).margin(2e-4).epsilon(0));
}

TEST_CASE("Crossing under drift and futility against plain paths", "[sequential]") {
    const std::vector<double> information{0.2, 0.5, 0.7, 1.0};
    for (const int sides : {1, 2}) {
        const auto bounds = look_bounds({BoundaryKind::obrien_fleming, information, 0.05, sides});
        const double drift = 2.0, futility = 0.4;
        const Crossing its = crossing(information, bounds, sides, drift, futility);
        std::mt19937_64 generator(4);
        std::normal_distribution<double> normal;
        const double paths = 2e6;
        double above = 0, below = 0, futile = 0, used = 0;
        for (int path = 0; path < int(paths); ++path) {
            double score = 0.0, t = 0.0;
            for (std::size_t k = 0; k < 4; ++k) {
                const double step = information[k] - t;
                score += drift * step + std::sqrt(step) * normal(generator);
                t = information[k];
                const double z = score / std::sqrt(t);
                const bool up = z >= bounds[k], down = sides == 2 && z <= -bounds[k];
                const bool stops = k < 3 && (sides == 2 ? std::fabs(z) : z) < futility;
                above += up;
                below += down;
                futile += stops && !up && !down;
                if (up || down || stops || k == 3) {
                    used += t;
                    break;
                }
            }
        }
        const auto z = [&](double seen, double p) { return std::fabs(seen / paths - p) / oracle::share_error(p, paths); };
        CHECK(z(above, its.predicted) < 4);
        if (sides == 2) CHECK(z(below, its.reversed) < 4);
        double expected = 0.0;
        for (const double p : its.futile) expected += p;
        CHECK(z(futile, expected) < 4);
        CHECK(std::fabs(used / paths - its.information) < 4 * 0.4 / std::sqrt(paths));  // shares within 0.2 .. 1
    }
}

TEST_CASE("The drift of a power, and one look as a fixed design", "[sequential]") {
    // A fixed two-sided 0.05 test has power 0.8 at 1.959964 + 0.841621 (the other tail adds 1e-6).
    CHECK(drift_of_power({1.0}, look_bounds({BoundaryKind::pocock, {1.0}, 0.05, 2}), 2, 0.8) ==
          Approx(2.801585).margin(1e-4).epsilon(0));
    // Pocock (1977): five looks, power 0.9: sample size 1.207 times the fixed design's (Jennison & Turnbull 2000,
    // Table 2.2, from memory).
    const auto bounds = look_bounds({BoundaryKind::pocock, equal_steps(5), 0.05, 2});
    const double fixed = drift_of_power({1.0}, {1.959963984540054}, 2, 0.9);
    const double drift = drift_of_power(equal_steps(5), bounds, 2, 0.9);
    CHECK(drift * drift / fixed / fixed == Approx(1.207).margin(0.0006).epsilon(0));
}

TEST_CASE("Impossible schedules are refused", "[sequential]") {
    CHECK_THROWS_AS(look_bounds({BoundaryKind::pocock, {0.5, 0.4, 1.0}, 0.05, 2}), InputError);
    CHECK_THROWS_AS(look_bounds({BoundaryKind::pocock, {0.5, 0.9}, 0.05, 2}), InputError);
    CHECK_THROWS_AS(look_bounds({BoundaryKind::pocock, {}, 0.05, 2}), InputError);
    CHECK_THROWS_AS(look_bounds({BoundaryKind::pocock, {1.0}, 1.0, 2}), InputError);
}
