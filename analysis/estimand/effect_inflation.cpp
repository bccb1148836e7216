// How far reported effects are from the true ones, over studies of real questions. Estimates and
// effects are oriented by the sign of the question's effect: an estimate that points the wrong way
// counts as negative.
#include <cmath>

#include "analysis/estimand/families.h"

namespace lacuna {

namespace {

/// Mean of the literatures' medians, over those that have one.
void add_median(const std::string& metric, Scope scope, std::size_t column, Estimands& out) {
    out.push_back({metric, scope, "all",
                   [column](std::span<const double> row) { return std::isnan(row[column]) ? 0.0 : row[column]; },
                   [column](std::span<const double> row) { return std::isnan(row[column]) ? 0.0 : 1.0; }});
}

void add_ratio(const Part& part, Scope scope, const Claims& claims, const std::string& stratum,
               const std::string& suffix, Estimands& out) {
    out.push_back({"effect_inflation" + suffix, scope, stratum, sum_of(part.sums(scope, claims, Sum::estimate)),
                   sum_of(part.sums(scope, claims, Sum::abs_effect))});
}

void add_bias(const Part& part, Scope scope, const Claims& claims, const std::string& suffix, Estimands& out) {
    out.push_back(
        {"effect_bias" + suffix, scope, "all",
         difference_of(part.sums(scope, claims, Sum::estimate), part.sums(scope, claims, Sum::abs_effect)),
         sum_of(part.studies(scope, real_truths(), claims))});
}

}  // namespace

/// effect_inflation = sum of oriented estimates / sum of absolute effects, over the scope's findings
/// about real questions: mean reported over mean true effect.
void add_effect_inflation(const Part& part, const std::string& stratum, Estimands& out) {
    for (Scope scope : reported_scopes) add_ratio(part, scope, part.findings(), stratum, "", out);
}

/// Over the scope's findings about real questions:
///   effect_bias = mean of (oriented estimate - |effect|), on the design's effect scale;
///   effect_inflation_median = median of oriented estimate / |effect| within a literature, averaged
///     over the literatures that have one;
///   exaggeration_ratio = sum of |estimate| / sum of |effect|, the sign put aside: type M error of
///     Gelman & Carlin (2014, Perspectives on Psychological Science 9:641).
/// With the suffix _reports: effect_inflation and these over all the scope's studies of real
/// questions, whatever they found.
void add_effect_size(const Part& part, Estimands& out) {
    for (Scope scope : reported_scopes) {
        add_bias(part, scope, part.findings(), "", out);
        add_median("effect_inflation_median", scope, part.layout().median(scope, Median::findings), out);
        out.push_back({"exaggeration_ratio", scope, "all",
                       sum_of(part.sums(scope, part.findings(), Sum::abs_estimate)),
                       sum_of(part.sums(scope, part.findings(), Sum::abs_effect))});
    }
    for (Scope scope : reported_scopes) {
        add_ratio(part, scope, all_claims(), "all", "_reports", out);
        add_bias(part, scope, all_claims(), "_reports", out);
        add_median("effect_inflation_median_reports", scope, part.layout().median(scope, Median::reports), out);
    }
}

}  // namespace lacuna
