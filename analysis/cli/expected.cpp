#include "analysis/cli/expected.h"

#include <algorithm>
#include <map>
#include <optional>
#include <string>
#include <utility>

#include "sim/theory/theory.h"

namespace lacuna {

namespace {

std::optional<Scope> reported_scope(const std::string& name) {
    for (Scope scope : {Scope::conducted, Scope::published}) {
        if (scope_names[static_cast<std::size_t>(scope)] == name) return scope;
    }
    return std::nullopt;
}

}  // namespace

void add_expected(const Scenario& scenario, Preview& preview) {
    using Key = std::pair<std::string, Scope>;
    std::map<Key, std::size_t> order;  // of first appearance
    for (std::size_t r = 0; r < scenario.regimes.size(); ++r) {
        const Theory theory = expectations(scenario.regimes[r]);
        if (!theory.unavailable.empty()) preview.untractable.emplace_back(preview.regimes[r], theory.unavailable);
        for (const ExpectedValue& each : theory.values) {
            const std::optional<Scope> scope = reported_scope(each.scope);
            if (!scope) continue;
            order.emplace(Key{each.metric, *scope}, order.size());
            preview.expected.push_back({each.metric, *scope, "all", r, {each.value, 0.0, 0}, std::nullopt});
        }
    }
    const auto place = [&](const Result& result) {
        return std::pair{order.at({result.metric, result.scope}), result.regime};
    };
    std::sort(preview.expected.begin(), preview.expected.end(),
              [&](const Result& a, const Result& b) { return place(a) < place(b); });
}

}  // namespace lacuna
