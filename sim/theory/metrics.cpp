#include "sim/theory/metrics.h"

#include <cmath>

namespace lacuna {

namespace {

/// Totals of one scope over parts of [truth][claim].
struct Parts {
    Total findings_null, findings_real, findings_wrong, others_null, others_real;
};

void add(Total& to, const Total& from) {
    to.sums.add(from.sums);
    to.abs_effect += from.abs_effect;
}

Parts parts_of(const ScopeTotals& totals, Findings findings) {
    Parts parts;
    for (std::size_t t = 0; t < totals.studies.size(); ++t) {
        for (std::size_t c = 0; c < totals.studies[t].size(); ++c) {
            const Truth truth{static_cast<std::uint8_t>(t)};
            const Claim claim{static_cast<std::uint8_t>(c)};
            const bool null = truth == Truth::null, found = is_finding(claim, findings);
            add(found ? (null ? parts.findings_null : parts.findings_real)
                      : (null ? parts.others_null : parts.others_real),
                totals.studies[t][c]);
            const Truth against = claim == Claim::positive ? Truth::real_negative : Truth::real;
            if (found && truth == against) add(parts.findings_wrong, totals.studies[t][c]);
        }
    }
    return parts;
}

class Scoped {
public:
    Scoped(std::string scope, std::vector<ExpectedValue>& values) : scope_(std::move(scope)), values_(values) {}
    /// Totals are per line, so what is below the rounding of sums near 1 is nothing.
    void ratio(const char* metric, double numerator, double denominator) {
        constexpr double rounding = 1e-15;
        if (!(denominator > rounding)) return;
        const double value = numerator / denominator;
        values_.push_back(
            {metric, scope_, std::fabs(value) < 1e-12 && std::fabs(numerator) < rounding ? 0.0 : value});
    }

private:
    std::string scope_;
    std::vector<ExpectedValue>& values_;
};

void add_rates(const Parts& parts, Scoped& out) {
    const double null_found = parts.findings_null.sums.studies, null_missed = parts.others_null.sums.studies;
    const double real_found = parts.findings_real.sums.studies, real_missed = parts.others_real.sums.studies;
    const double findings = null_found + real_found, others = null_missed + real_missed;
    out.ratio("false_discovery_rate", null_found, findings);
    out.ratio("wrong_sign_rate", parts.findings_wrong.sums.studies, real_found);
    out.ratio("false_nonfinding_rate", real_missed, others);
    out.ratio("positive_share", findings, findings + others);
    out.ratio("type1_error", null_found, null_found + null_missed);
    out.ratio("power", real_found, real_found + real_missed);
}

void add_effects(const Parts& parts, Scoped& out) {
    const Total& found = parts.findings_real;
    Total reports = found;
    add(reports, parts.others_real);
    out.ratio("effect_inflation", found.sums.estimate, found.abs_effect);
    out.ratio("effect_bias", found.sums.estimate - found.abs_effect, found.sums.studies);
    out.ratio("exaggeration_ratio", found.sums.abs_estimate, found.abs_effect);
    out.ratio("effect_inflation_reports", reports.sums.estimate, reports.abs_effect);
    out.ratio("effect_bias_reports", reports.sums.estimate - reports.abs_effect, reports.sums.studies);
}

void add_units(const ScopeTotals& totals, bool of_questions, Scoped& out) {
    const auto claiming = [&](std::size_t real) {
        return totals.manuscripts[real][std::size_t(ManuscriptClass::supportive)] +
               totals.manuscripts[real][std::size_t(ManuscriptClass::mixed)];
    };
    out.ratio("false_discovery_rate_manuscripts", claiming(0), claiming(0) + claiming(1));
    if (!of_questions) return;
    out.ratio("false_discovery_rate_questions", totals.established[0],
              totals.established[0] + totals.established[1]);
}

double studies_in(const ScopeTotals& totals) {
    double studies = 0.0;
    for (const auto& of_truth : totals.studies) {
        for (const Total& total : of_truth) studies += total.sums.studies;
    }
    return studies;
}

}  // namespace

std::vector<ExpectedValue> metrics(const std::array<ScopeTotals, 3>& totals, Findings findings, bool of_questions) {
    std::vector<ExpectedValue> values;
    for (std::size_t s = 0; s < totals.size(); ++s) {
        Scoped out(std::string(scope_names[s]), values);
        const Parts parts = parts_of(totals[s], findings);
        add_rates(parts, out);
        add_units(totals[s], of_questions, out);
        add_effects(parts, out);
    }
    const double conducted = studies_in(totals[std::size_t(Scope::conducted)]);
    const double published = studies_in(totals[std::size_t(Scope::published)]);
    Scoped out("published", values);
    out.ratio("publication_rate", published, conducted);
    out.ratio("missing_share", conducted - published, conducted);
    return values;
}

}  // namespace lacuna
