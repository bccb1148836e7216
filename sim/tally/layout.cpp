#include "sim/tally/layout.h"

namespace lacuna {

namespace {

constexpr std::size_t scopes = scope_names.size();
constexpr std::size_t truths = truth_names.size();
constexpr std::size_t claims = claim_names.size();
constexpr std::size_t classes = class_names.size();
constexpr std::size_t sums = 3;
constexpr std::size_t standings = 3;

constexpr std::size_t counts_per_kind = scopes * truths * claims;
constexpr std::size_t sums_per_kind = scopes * claims * sums;
constexpr std::size_t per_kind = counts_per_kind + sums_per_kind + scopes;

template <class E>
constexpr std::size_t at(E value) {
    return static_cast<std::size_t>(value);
}

std::string join(std::initializer_list<std::string_view> parts) {
    std::string text;
    for (std::string_view part : parts) {
        if (!text.empty()) text += '_';
        text += part;
    }
    return text;
}

constexpr std::array<std::string_view, sums> sum_names{"estimate_sum", "abs_estimate_sum", "abs_effect_sum"};
constexpr std::array<std::string_view, sums> sum_texts{
    "sum of estimates oriented by the sign of the question's effect", "sum of absolute estimates",
    "sum of absolute effects of the questions"};
constexpr std::array<std::string_view, standings> standing_names{"studied", "any_finding", "majority"};
constexpr std::array<std::string_view, standings> standing_texts{
    "with at least one study", "with at least one finding", "with findings in more than half of the studies"};
constexpr std::array<std::string_view, 2> median_names{"findings", "reports"};

}  // namespace

Layout::Layout(std::size_t kinds)
    : kinds_(kinds),
      manuscripts_at_(kinds * per_kind),
      questions_at_(manuscripts_at_ + scopes * 2 * classes),
      medians_at_(questions_at_ + scopes * 2 * standings),
      size_(medians_at_ + scopes * 2) {}

std::size_t Layout::studies(std::size_t kind, Scope scope, Truth truth, Claim claim) const {
    return kind * per_kind + (at(scope) * truths + at(truth)) * claims + at(claim);
}

std::size_t Layout::sum(std::size_t kind, Scope scope, Claim claim, Sum what) const {
    return kind * per_kind + counts_per_kind + (at(scope) * claims + at(claim)) * sums + at(what);
}

std::size_t Layout::participants(std::size_t kind, Scope scope) const {
    return kind * per_kind + counts_per_kind + sums_per_kind + at(scope);
}

std::size_t Layout::manuscripts(Scope scope, bool real, ManuscriptClass manuscript_class) const {
    return manuscripts_at_ + (at(scope) * 2 + real) * classes + at(manuscript_class);
}

std::size_t Layout::questions(Scope scope, bool real, Standing standing) const {
    return questions_at_ + (at(scope) * 2 + real) * standings + at(standing);
}

std::size_t Layout::median(Scope scope, Median what) const { return medians_at_ + at(scope) * 2 + at(what); }

std::vector<ColumnSpec> Layout::columns(const std::vector<std::string>& labs) const {
    std::vector<ColumnSpec> specs(size_);
    const auto put = [&](std::size_t index, std::string name, std::string units, std::string description) {
        specs[index] = {std::move(name), ColumnType::f64, std::move(units), std::move(description), {}};
    };
    const std::array<std::string_view, 2> truth_pair{"null", "real"};
    for (std::size_t kind = 0; kind < kinds_; ++kind) {
        const std::string suffix = kinds_ > 1 ? "_lab" + std::to_string(kind + 1) : "";
        const std::string whose = kinds_ > 1 ? " by labs of kind '" + labs.at(kind) + "'" : "";
        for (std::size_t s = 0; s < scopes; ++s) {
            const std::string scope(scope_names[s]);
            for (std::size_t c = 0; c < claims; ++c) {
                const std::string claim(claim_names[c]);
                for (std::size_t t = 0; t < truths; ++t) {
                    const std::string truth(truth_names[t]);
                    put(studies(kind, Scope(s), Truth(t), Claim(c)),
                        join({"studies", scope, truth, claim}) + suffix, "studies",
                        scope + " studies on " + truth + " questions with an outcome " + claim + whose);
                }
                for (std::size_t w = 0; w < sums; ++w) {
                    put(sum(kind, Scope(s), Claim(c), Sum(w)), join({sum_names[w], scope, claim}) + suffix,
                        "effect",
                        std::string(sum_texts[w]) + " over " + scope +
                            " studies of real questions with an outcome " + claim + whose);
                }
            }
            put(participants(kind, Scope(s)), join({"participants", scope}) + suffix, "participants",
                "participants in " + scope + " studies" + whose);
        }
    }
    for (std::size_t s = 0; s < scopes; ++s) {
        const std::string scope(scope_names[s]);
        for (std::size_t real = 0; real < 2; ++real) {
            for (std::size_t c = 0; c < classes; ++c) {
                put(manuscripts(Scope(s), real != 0, ManuscriptClass(c)),
                    join({"manuscripts", scope, truth_pair[real], class_names[c]}), "manuscripts",
                    scope + " manuscripts of class " + std::string(class_names[c]) + " on " +
                        std::string(truth_pair[real]) + " questions");
            }
            for (std::size_t n = 0; n < standings; ++n) {
                put(questions(Scope(s), real != 0, Standing(n)),
                    join({"questions", scope, truth_pair[real], standing_names[n]}), "questions",
                    std::string(truth_pair[real]) + " questions " + std::string(standing_texts[n]) + " (" + scope +
                        " studies)");
            }
        }
        for (std::size_t m = 0; m < 2; ++m) {
            put(median(Scope(s), Median(m)), join({"median_ratio", scope, median_names[m]}), "1",
                "median of oriented estimate / |effect| over the " + scope + " " + std::string(median_names[m]) +
                    " about real questions; NaN when there are none");
        }
    }
    return specs;
}

}  // namespace lacuna
