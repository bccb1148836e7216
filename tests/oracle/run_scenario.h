// A scenario, simulated and analysed in memory: what validation tests compare with the outside.
#pragma once

#include <algorithm>
#include <stdexcept>
#include <string>
#include <vector>

#include "analysis/estimand/accumulator.h"
#include "analysis/estimand/registry.h"
#include "sim/config/load.h"
#include "sim/engine/run.h"

namespace lacuna::oracle {

class Simulated {
public:
    explicit Simulated(const Scenario& scenario, unsigned threads = 0) : accumulator_(estimands(scenario)) {
        RunOptions options;
        options.threads = threads;
        Sinks sinks;
        sinks.literature = [this](std::uint32_t, const std::vector<std::vector<double>>& rows) {
            accumulator_.add(rows);
        };
        sinks.rows = [](const std::string&, Batch&&) {};
        outcome = simulate(scenario, options, sinks);
        results_ = accumulator_.results();
        differences_ = accumulator_.differences();
    }

    Estimate estimate(const std::string& metric, Scope scope, std::size_t regime = 0,
                      const std::string& stratum = "all") const {
        for (const Result& r : results_) {
            if (r.metric == metric && r.scope == scope && r.regime == regime && r.stratum == stratum)
                return r.estimate;
        }
        throw std::runtime_error("no result " + metric + " " + stratum);
    }

    /// (estimate - expected) / Monte Carlo standard error.
    double z(const std::string& metric, Scope scope, double expected, std::size_t regime = 0) const {
        const Estimate e = estimate(metric, scope, regime);
        return (e.value.value() - expected) / e.mcse.value();
    }

    const std::vector<Result>& results() const { return results_; }
    const std::vector<PairedDifference>& differences() const { return differences_; }

    RunOutcome outcome;

private:
    static std::vector<Estimands> estimands(const Scenario& scenario) {
        std::vector<Estimands> by_regime;
        for (const Regime& regime : scenario.regimes) {
            std::vector<std::string> labs;
            for (const LabKind& kind : regime.science.labs) labs.push_back(kind.name);
            by_regime.push_back(all_estimands(labs, regime.science.design.findings));
        }
        return by_regime;
    }

    Accumulator accumulator_;
    std::vector<Result> results_;
    std::vector<PairedDifference> differences_;
};

inline Simulated simulate_text(const std::string& text) { return Simulated(parse_scenario(text, "test", {})); }

}  // namespace lacuna::oracle
