#include "sim/theory/line_ends.h"

#include <cmath>

namespace lacuna {

namespace {

bool goes_on(const LineRule& rule, std::uint32_t studies, std::uint32_t findings) {
    if (studies >= rule.longest()) return false;
    switch (rule.kind) {
        case LineRule::Kind::fixed:
            return true;
        case LineRule::Kind::until_positive:
            return findings == 0;
        case LineRule::Kind::until_failures:
            return studies - findings < rule.failures;
    }
    return false;
}

}  // namespace

std::vector<LineEnd> line_ends(const LineRule& rule, double find, double miss) {
    std::vector<LineEnd> ends;
    std::vector<double> going{1.0};  // by findings so far
    for (std::uint32_t studies = 1; !going.empty(); ++studies) {
        std::vector<double> next(going.size() + 1, 0.0);
        for (std::size_t f = 0; f < going.size(); ++f) {
            next[f] += going[f] * miss;
            next[f + 1] += going[f] * find;
        }
        bool any = false;
        for (std::size_t f = 0; f < next.size(); ++f) {
            const auto findings = static_cast<std::uint32_t>(f);
            if (next[f] == 0.0 || goes_on(rule, studies, findings)) {
                any = any || next[f] > 0.0;
                continue;
            }
            ends.push_back({studies, findings, next[f]});
            next[f] = 0.0;
        }
        if (!any) next.clear();
        going = std::move(next);
    }
    return ends;
}

}  // namespace lacuna
