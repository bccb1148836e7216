#include "sim/theory/publication_chance.h"

#include <algorithm>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

void keep_each_once(std::vector<double>& cuts) {
    std::sort(cuts.begin(), cuts.end());
    cuts.erase(std::unique(cuts.begin(), cuts.end()), cuts.end());
}

double by_class(double supportive, double mixed, double null, ManuscriptClass manuscript_class) {
    switch (manuscript_class) {
        case ManuscriptClass::supportive:
            return supportive;
        case ManuscriptClass::mixed:
            return mixed;
        case ManuscriptClass::null:
            return null;
    }
    throw Defect("by_class: unknown class");
}

/// The rule's chance for a p just below the level-th largest of `cuts`, or at or above all (level 0).
double by_p(const Acceptance& accept, const std::vector<double>& cuts, std::size_t level) {
    std::size_t step = accept.steps.size();
    for (std::size_t i = accept.steps.size(); level > 0 && i > 0; --i) {
        if (accept.steps[i - 1] >= cuts[cuts.size() - level]) step = i - 1;
    }
    return accept.chance[step];
}

}  // namespace

PublicationChance::PublicationChance(const Rules& rules) : rules_(rules) {
    for (const Journal& journal : rules.journals) {
        if (journal.accept.kind != Acceptance::Kind::by_p) continue;
        std::vector<double>& cuts = journal.accept.sides == 2 ? cuts_two_ : cuts_one_;
        cuts.insert(cuts.end(), journal.accept.steps.begin(), journal.accept.steps.end());
    }
    keep_each_once(cuts_two_);
    keep_each_once(cuts_one_);
}

double PublicationChance::written(ManuscriptClass manuscript_class) const {
    return by_class(rules_.writing.supportive, rules_.writing.mixed, rules_.writing.null, manuscript_class);
}

double PublicationChance::accepted(const Journal& journal, ManuscriptClass manuscript_class, std::size_t level_two,
                                   std::size_t level_one) const {
    const Acceptance& accept = journal.accept;
    const double seen = accept.kind == Acceptance::Kind::by_class
                            ? by_class(accept.supportive, accept.mixed, accept.null, manuscript_class)
                        : accept.sides == 2 ? by_p(accept, cuts_two_, level_two)
                                            : by_p(accept, cuts_one_, level_one);
    return journal.results_blind * journal.results_blind_chance + (1.0 - journal.results_blind) * seen;
}

double PublicationChance::published(ManuscriptClass manuscript_class, std::size_t level_two,
                                    std::size_t level_one) const {
    if (rules_.journals.empty()) return 1.0;
    const std::size_t tried = std::min<std::size_t>(rules_.submission.attempts, rules_.journals.size());
    double rejected = 1.0;
    for (std::size_t j = 0; j < tried; ++j) {
        rejected *= 1.0 - accepted(rules_.journals[j], manuscript_class, level_two, level_one);
    }
    return 1.0 - rejected;
}

}  // namespace lacuna
