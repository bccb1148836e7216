#include "analysis/report/entries.h"

#include <cmath>

namespace lacuna {

namespace {

Json scope_text(Scope scope) { return scope_names[static_cast<std::size_t>(scope)]; }

void put_values(Json& to, const Estimate& estimate, const std::optional<Spread>& spread) {
    to["estimate"] = json_number(estimate.value);
    to["mcse"] = json_number(estimate.mcse);
    to["literatures"] = estimate.n;
    Json& quantiles = to["spread"] = nullptr;
    if (!spread) return;
    quantiles = {{"p05", json_number(spread->p05)},
                 {"p25", json_number(spread->p25)},
                 {"p50", json_number(spread->p50)},
                 {"p75", json_number(spread->p75)},
                 {"p95", json_number(spread->p95)}};
}

}  // namespace

Json json_number(std::optional<double> value) {
    if (!value || !std::isfinite(*value)) return nullptr;
    return *value;
}

Json json_entry(const Results& all, const Result& result) {
    Json one{{"metric", result.metric},
             {"scope", scope_text(result.scope)},
             {"regime", all.regimes[result.regime]},
             {"point", 0},
             {"stratum", result.stratum}};
    put_values(one, result.estimate, result.spread);
    return one;
}

Json json_entry(const Results& all, const PairedDifference& difference) {
    Json one{{"metric", difference.metric},
             {"scope", scope_text(difference.scope)},
             {"regime", all.regimes[difference.regime]},
             {"against", all.regimes[difference.against]},
             {"point", 0},
             {"stratum", difference.stratum}};
    put_values(one, difference.estimate, difference.spread);
    return one;
}

std::string json_text(const Json& value) {
    return value.dump(2, ' ', false, Json::error_handler_t::replace) + '\n';
}

}  // namespace lacuna
