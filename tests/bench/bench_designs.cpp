// Cost of each study design at the level of statistics, one thread, against its bare variates. The designs are
// those of designs_numpy.py, which designs.py sets beside them. Usage: bench_designs DESIGN [STUDIES]
// Prints the design, nanoseconds per study, those of the variates alone, and the share of positives.
#include <fmt/format.h>

#include <chrono>
#include <cstdlib>
#include <map>
#include <string>
#include <vector>

#include "sim/design/errors.h"
#include "sim/design/sampling.h"
#include "sim/variate/binomial.h"

using namespace lacuna;

namespace {

constexpr std::size_t block = 8192;

struct Case {
    Design design;
    double effect;
    int pairs;  // 1: a normal and a chi-squared (as often as there are looks); 2: another chi-squared; 0: two binomials
};

Case case_of(Test test, double effect, int pairs) {
    Case its{{}, effect, pairs};
    its.design.test = test;
    its.design.size.n = 24;
    return its;
}

std::map<std::string, Case> cases() {
    std::map<std::string, Case> all{{"two-means", case_of(Test::two_means, 0.4, 1)},
                                    {"unequal-means", case_of(Test::two_means, 0.4, 1)},
                                    {"one-mean", case_of(Test::one_mean, 0.4, 1)},
                                    {"known-variance", case_of(Test::known_variance, 0.4, 1)},
                                    {"welch", case_of(Test::two_means, 0.4, 2)},
                                    {"correlation", case_of(Test::correlation, 0.4, 2)},
                                    {"several-means", case_of(Test::several_means, 0.25, 2)},
                                    {"two-proportions", case_of(Test::two_proportions, 0.8, 0)},
                                    {"equivalence", case_of(Test::two_means, 0.1, 1)},
                                    {"looks", case_of(Test::two_means, 0.4, 3)}};
    all["unequal-means"].design.allocation = 2.0;
    all["welch"].design.welch = true;
    all["several-means"].design.groups = 4;
    all["two-proportions"].design.base_rate = 0.3;
    all["equivalence"].design.equivalence = {0.8, 0.05};
    all["looks"].design.looks.count = 3;
    return all;
}

struct Columns {
    std::vector<std::uint32_t> row, n, x;
    std::vector<double> theta, statistic, estimate, df, error, z, v;
    std::vector<std::uint8_t> claim;
    explicit Columns(double effect)
        : row(block + 16), n(block + 16, 24), x(block + 16), theta(block + 16, effect), statistic(block + 16),
          estimate(block + 16), df(block + 16), error(block + 16), z(block + 16), v(block + 16), claim(block + 16) {}
};

double seconds_of(const auto& job) {
    const auto start = std::chrono::steady_clock::now();
    job();
    return std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
}

/// The variates alone, drawn and thrown away.
double bare(const Case& its, const StudyRound& round, const TestTable& table, SamplingScratch& scratch, Columns& c) {
    if (its.design.test == Test::known_variance) {
        normals(round.key, round.address(Purpose::study_data), round.entities, c.z.data());
    } else if (its.pairs == 2 && its.design.groups == 4) {
        draw_errors(round, table.variance, c.row.data(), scratch, c.z.data(), c.v.data());
        uniforms(round.key, round.address(Purpose::study_other_data), round.entities, c.z.data());
    } else if (its.pairs == 2) {
        draw_two_errors(round, table.variance, table.other, c.row.data(), scratch, c.z.data(), c.v.data(), c.df.data());
    }
    for (int look = 0; its.pairs != 2 && its.design.test != Test::known_variance && look < its.pairs; ++look) {
        draw_errors(round, table.variance, c.row.data(), scratch, c.z.data(), c.v.data());
    }
    for (int group = 0; its.pairs == 0 && group < 2; ++group) {
        uniforms(round.key, round.address(group ? Purpose::study_other_data : Purpose::study_data), round.entities, c.z.data());
        std::fill(c.v.begin(), c.v.end(), 0.3 + 0.2 * group);
        binomials(c.n.data(), c.v.data(), c.z.data(), block, c.x.data());
    }
    return c.z[0] + c.v[1] + c.x[2];
}

}  // namespace

int main(int argc, char** argv) {
    const std::string name = argc > 1 ? argv[1] : "two-means";
    const auto studies = static_cast<std::uint64_t>(argc > 2 ? std::atof(argv[2]) : 2e7);
    const Case its = cases().at(name);
    Science science;
    science.design = its.design;
    science.labs = {LabKind{}};
    science.labs[0].size = its.design.size;
    const TestTable table = test_table(science, {});
    Columns c(its.effect);
    SamplingScratch scratch;
    std::uint64_t positives = 0;
    volatile double sink = 0.0;
    double own = 0.0, variates = 0.0;
    for (std::uint64_t first = 0; first < studies; first += block) {
        const StudyRound round{{1}, 0, 0, {first, nullptr, block}};
        own += seconds_of([&] {
            draw_sizes(round, table, nullptr, nullptr, scratch, c.row.data());
            draw_studies(round, its.design, table, scratch,
                         {c.row.data(), c.theta.data(), c.statistic.data(), c.estimate.data(), c.claim.data(), c.df.data(),
                          c.error.data()});
        });
        for (std::size_t i = 0; i < block; ++i) positives += c.claim[i] == std::uint8_t(Claim::positive);
        std::fill(c.row.begin(), c.row.end(), 0u);
        variates += seconds_of([&] { sink = bare(its, round, table, scratch, c); });
    }
    const double done = static_cast<double>((studies + block - 1) / block * block);
    fmt::print("{} {:.2f} {:.2f} {:.5f}\n", name, 1e9 * own / done, 1e9 * variates / done, static_cast<double>(positives) / done);
}
