#include "sim/config/resolve.h"

#include <algorithm>
#include <string_view>
#include <tuple>

#include "sim/config/keys.h"
#include "sim/config/limits.h"
#include "sim/config/reader.h"
#include "sim/config/regimes.h"

namespace lacuna {

namespace {

Document read_document(const ConfigNode& root, std::vector<Fault>& faults) {
    Document document;
    Reader reader(root, "", faults);
    describe(reader, document);
    reader.finish();
    if (!faults.empty()) return document;
    faults = limit_faults(document, root);
    return document;
}

/// More faults than anyone reads; a file of garbage can hold a million.
constexpr std::size_t most_faults = 200;

}  // namespace

void sort_faults(std::vector<Fault>& faults, const std::string& source) {
    const auto order = [&](const Fault& f) {
        return std::tuple(f.place.source != source, std::string_view(f.place.source), f.place.line, f.place.column,
                          std::string_view(f.key), std::string_view(f.message));
    };
    const auto as_key = [&](const Fault& a, const Fault& b) { return order(a) < order(b); };
    std::stable_sort(faults.begin(), faults.end(), as_key);
    const auto same = [&](const Fault& a, const Fault& b) { return !as_key(a, b) && !as_key(b, a); };
    faults.erase(std::unique(faults.begin(), faults.end(), same), faults.end());
    if (faults.size() <= most_faults) return;
    const std::size_t more = faults.size() - most_faults;
    faults.resize(most_faults);
    Fault rest;
    rest.place.source = source;
    rest.message = "has " + std::to_string(more) + " more faults";
    faults.push_back(std::move(rest));
}

Scenario resolve(const ConfigNode& root, const std::string& source, std::vector<Fault>& faults) {
    std::vector<Fault> given;
    const Document base = read_document(root, given);
    Scenario scenario{base.title, base.run, {}, base.store};
    faults.insert(faults.end(), given.begin(), given.end());
    const std::vector<RegimeText> regimes = read_regimes(root, faults);
    if (given.size() > most_faults) {
        sort_faults(faults, source);
        return scenario;
    }
    for (const RegimeText& regime : regimes) {
        std::vector<Fault> problems, found;
        const ConfigNode tree = changed(root, regime, problems);
        Document document;
        if (problems.empty())
            document = read_document(tree, found);
        else
            found = problems;
        const std::vector<Fault> own = faults_of_regime(found, given, regime);
        faults.insert(faults.end(), own.begin(), own.end());
        scenario.regimes.push_back({regime.name, document.science, document.rules});
    }
    if (faults.empty()) faults = limit_faults(scenario, root);
    sort_faults(faults, source);
    return scenario;
}

}  // namespace lacuna
