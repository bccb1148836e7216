#include "analysis/report/machine.h"

#include "analysis/report/entries.h"
#include "analysis/report/number.h"

namespace lacuna {

namespace {

std::string scope_text(Scope scope) { return std::string(scope_names[static_cast<std::size_t>(scope)]); }

std::string values_csv(const Estimate& estimate, const std::optional<Spread>& spread) {
    std::string text =
        exact_number(estimate.value) + ',' + exact_number(estimate.mcse) + ',' + std::to_string(estimate.n);
    if (!spread) return text + ",,,,,\r\n";
    for (double q : {spread->p05, spread->p25, spread->p50, spread->p75, spread->p95})
        text += ',' + exact_number(q);
    return text + "\r\n";
}

const std::string value_names = "estimate,mcse,literatures,p05,p25,p50,p75,p95\r\n";

std::string line(const Results& all, const Result& r, const std::string& against) {
    return r.metric + ',' + scope_text(r.scope) + ',' + csv_field(all.regimes[r.regime]) + ',' + against + "0," +
           csv_field(r.stratum) + ',' + values_csv(r.estimate, r.spread);
}

std::string line(const Results& all, const PairedDifference& d) {
    return line(all, {d.metric, d.scope, d.stratum, d.regime, d.estimate, d.spread},
                csv_field(all.regimes[d.against]) + ',');
}

}  // namespace

std::string results_json(const Results& results, const std::string& version) {
    Json all{{"lacuna", version},
             {"digest", results.digest},
             {"results", Json::array()},
             {"differences", Json::array()}};
    for (const Result& result : results.results) all["results"].push_back(json_entry(results, result));
    for (const PairedDifference& each : results.differences)
        all["differences"].push_back(json_entry(results, each));
    return json_text(all);
}

std::string results_csv(const Results& results) {
    std::string text = "metric,scope,regime,point,stratum," + value_names;
    for (const Result& result : results.results) text += line(results, result, "");
    return text;
}

std::string differences_csv(const Results& results) {
    std::string text = "metric,scope,regime,against,point,stratum," + value_names;
    for (const PairedDifference& difference : results.differences) text += line(results, difference);
    return text;
}

std::string all_csv(const Results& results) {
    std::string text = "metric,scope,regime,against,point,stratum," + value_names;
    for (const Result& result : results.results) text += line(results, result, ",");
    for (const PairedDifference& difference : results.differences) text += line(results, difference);
    return text;
}

std::string csv_field(const std::string& text) {
    if (text.find_first_of(",\"\r\n") == std::string::npos) return text;
    std::string quoted = "\"";
    for (char byte : text) {
        if (byte == '"') quoted += '"';
        quoted += byte;
    }
    return quoted + '"';
}

}  // namespace lacuna
