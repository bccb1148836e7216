// Cost of the field of configs/published-rates.toml per study: the whole engine against the bare draws
// that no simulation of it can do without, in turns. Usage: bench_field [STUDIES [ROUNDS]]
#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <cstdlib>
#include <vector>

#include "sim/config/load.h"
#include "sim/design/sampling.h"
#include "sim/engine/run.h"

using namespace lacuna;

namespace {

double seconds_of(const auto& job) {
    const auto start = std::chrono::steady_clock::now();
    job();
    return std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
}

/// Truth, size, sampling error, variance and acceptance of each study, drawn in blocks and thrown away.
double bare_draws(std::uint64_t studies) {
    constexpr std::size_t block = 8192;
    std::vector<std::uint16_t> word(block);
    std::vector<std::uint32_t> size(block);
    std::vector<double> normal(block);
    double kept = 0.0;
    for (std::uint64_t first = 0; first < studies; first += block) {
        const Entities entities{first, nullptr, block};
        words({1}, {0, Purpose::question_truth}, entities, word.data());
        words({1}, {0, Purpose::study_size}, entities, size.data());
        normals({1}, {0, Purpose::study_data}, entities, normal.data());
        kept += normal[first % block];
        normals({1}, {0, Purpose::study_effect}, entities, normal.data());
        words({1}, {0, Purpose::acceptance}, entities, word.data());
        kept += normal[0] + word[1] + size[2];
    }
    return kept;
}

Scenario field(std::uint64_t studies) {
    const std::string n = std::to_string(studies);
    return load_scenario(std::string(LACUNA_CONFIGS) + "/published-rates.toml",
                         {{"run.literatures", "1"}, {"field.questions", n}, {"lab.1.lines", n}});
}

double run_field(const Scenario& scenario, unsigned threads) {
    RunOptions options;
    options.threads = threads;
    Sinks sinks;
    sinks.literature = [](std::uint32_t, const std::vector<std::vector<double>>&) {};
    return seconds_of([&] { simulate(scenario, options, sinks); });
}

double median(std::vector<double> x) {
    std::nth_element(x.begin(), x.begin() + static_cast<std::ptrdiff_t>(x.size() / 2), x.end());
    return x[x.size() / 2];
}

}  // namespace

int main(int argc, char** argv) {
    const auto studies = static_cast<std::uint64_t>(argc > 1 ? std::atof(argv[1]) : 2e7);
    const int rounds = argc > 2 ? std::atoi(argv[2]) : 5;
    const Scenario scenario = field(studies);
    std::vector<double> draws, one, two, to_draws, speedup;
    volatile double sink = 0.0;
    for (int r = 0; r < rounds; ++r) {
        draws.push_back(seconds_of([&] { sink = bare_draws(studies); }));
        one.push_back(run_field(scenario, 1));
        two.push_back(run_field(scenario, 2));
        to_draws.push_back(one.back() / draws.back());
        speedup.push_back(one.back() / two.back());
    }
    const double ns = 1e9 / static_cast<double>(studies);
    fmt::print("{} studies in one literature, median of {} rounds in turns, vectors: {}\n", studies, rounds,
               vector_target());
    fmt::print("bare draws            {:7.2f} ns/study\n", ns * median(draws));
    fmt::print("engine, one thread    {:7.2f} ns/study   {:.2f} times the bare draws\n", ns * median(one),
               median(to_draws));
    fmt::print("engine, two threads   {:7.2f} ns/study   {:.2f} times as fast as one\n", ns * median(two),
               median(speedup));
}
