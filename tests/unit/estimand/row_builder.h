// Rows of sufficient statistics for tests, filled by name.
#pragma once

#include <stdexcept>
#include <string>
#include <vector>

#include "analysis/estimand/accumulator.h"
#include "analysis/estimand/registry.h"
#include "sim/tally/layout.h"

namespace lacuna {

class RowBuilder {
public:
    explicit RowBuilder(std::size_t kinds = 1) : layout_(kinds), row_(layout_.size(), 0.0) {}

    RowBuilder& studies(Scope scope, Truth truth, Claim claim, double count, std::size_t kind = 0) {
        row_[layout_.studies(kind, scope, truth, claim)] = count;
        return *this;
    }
    RowBuilder& sums(Scope scope, Claim claim, double estimate, double abs_estimate, double effect,
                     std::size_t kind = 0) {
        row_[layout_.sum(kind, scope, claim, Sum::estimate)] = estimate;
        row_[layout_.sum(kind, scope, claim, Sum::abs_estimate)] = abs_estimate;
        row_[layout_.sum(kind, scope, claim, Sum::abs_effect)] = effect;
        return *this;
    }
    RowBuilder& participants(Scope scope, double count) {
        row_[layout_.participants(0, scope)] = count;
        return *this;
    }
    RowBuilder& manuscripts(Scope scope, bool real, ManuscriptClass its, double count) {
        row_[layout_.manuscripts(scope, real, its)] = count;
        return *this;
    }
    RowBuilder& questions(Scope scope, bool real, Standing standing, double count) {
        row_[layout_.questions(scope, real, standing)] = count;
        return *this;
    }
    RowBuilder& median(Scope scope, Median which, double value) {
        row_[layout_.median(scope, which)] = value;
        return *this;
    }
    const std::vector<double>& row() const { return row_; }

private:
    Layout layout_;
    std::vector<double> row_;
};

/// The one result of this metric, scope and stratum under regime 0.
inline Result find_result(const std::vector<Result>& results, const std::string& metric, Scope scope,
                          const std::string& stratum = "all", std::size_t regime = 0) {
    for (const Result& result : results) {
        if (result.metric == metric && result.scope == scope && result.stratum == stratum &&
            result.regime == regime) {
            return result;
        }
    }
    throw std::runtime_error("no result " + metric + " " + stratum);
}

/// An estimand that reads a = row[0], b = row[1].
inline Estimands first_two_columns() {
    return {{"metric", Scope::published, "all", [](std::span<const double> row) { return row[0]; },
             [](std::span<const double> row) { return row[1]; }}};
}

}  // namespace lacuna
