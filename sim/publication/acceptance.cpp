#include "sim/publication/acceptance.h"

#include <algorithm>

namespace lacuna {

double writing_chance(const Writing& writing, ManuscriptClass manuscript_class) {
    switch (manuscript_class) {
        case ManuscriptClass::supportive:
            return writing.supportive;
        case ManuscriptClass::mixed:
            return writing.mixed;
        case ManuscriptClass::null:
            return writing.null;
    }
    return 0.0;
}

AcceptanceTable acceptance_table(const Acceptance& accept, const std::vector<double>& cuts) {
    if (accept.kind == Acceptance::Kind::by_class) {
        return {accept.kind, 2, {Chance(accept.supportive), Chance(accept.mixed), Chance(accept.null)}};
    }
    AcceptanceTable table{accept.kind, accept.sides, std::vector<Chance>(cuts.size() + 1)};
    for (std::size_t level = 0; level <= cuts.size(); ++level) {
        // At this level p is below cuts[size - level] and not below the cut before it.
        std::size_t step = accept.steps.size();
        if (level > 0) {
            const double bound = cuts[cuts.size() - level];
            step = static_cast<std::size_t>(std::lower_bound(accept.steps.begin(), accept.steps.end(), bound) -
                                            accept.steps.begin());
        }
        table.chance[level] = Chance(accept.chance[step]);
    }
    return table;
}

double highest_chance(const Acceptance& accept) {
    if (accept.kind == Acceptance::Kind::by_class) {
        return std::max({accept.supportive, accept.mixed, accept.null});
    }
    return *std::max_element(accept.chance.begin(), accept.chance.end());
}

std::uint32_t journal_index(const std::string& name) {
    std::uint32_t hash = 2166136261u;
    for (const char c : name) hash = (hash ^ static_cast<unsigned char>(c)) * 16777619u;
    return hash;
}

}  // namespace lacuna
