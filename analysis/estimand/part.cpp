#include "analysis/estimand/part.h"

#include <utility>

namespace lacuna {

const Truths& all_truths() {
    static const Truths truths{Truth::null, Truth::real, Truth::real_negative};
    return truths;
}

const Truths& real_truths() {
    static const Truths truths{Truth::real, Truth::real_negative};
    return truths;
}

const Truths& null_truth() {
    static const Truths truths{Truth::null};
    return truths;
}

const Claims& all_claims() {
    static const Claims claims{Claim::inconclusive, Claim::positive, Claim::reversed, Claim::equivalent};
    return claims;
}

Claims Part::findings() const {
    Claims claims;
    for (Claim claim : all_claims()) {
        if (is_finding(claim, findings_)) claims.push_back(claim);
    }
    return claims;
}

Claims Part::nonfindings() const {
    Claims claims;
    for (Claim claim : all_claims()) {
        if (!is_finding(claim, findings_)) claims.push_back(claim);
    }
    return claims;
}

std::vector<std::size_t> Part::kinds() const {
    if (kind_) return {*kind_};
    std::vector<std::size_t> kinds;
    for (std::size_t kind = 0; kind < layout_.kinds(); ++kind) kinds.push_back(kind);
    return kinds;
}

Columns Part::studies(Scope scope, const Truths& truths, const Claims& claims) const {
    Columns columns;
    for (std::size_t kind : kinds()) {
        for (Truth truth : truths) {
            for (Claim claim : claims) columns.push_back(layout_.studies(kind, scope, truth, claim));
        }
    }
    return columns;
}

Columns Part::sums(Scope scope, const Claims& claims, Sum what) const {
    Columns columns;
    for (std::size_t kind : kinds()) {
        for (Claim claim : claims) columns.push_back(layout_.sum(kind, scope, claim, what));
    }
    return columns;
}

Columns Part::participants(Scope scope) const {
    Columns columns;
    for (std::size_t kind : kinds()) columns.push_back(layout_.participants(kind, scope));
    return columns;
}

Columns operator+(Columns left, const Columns& right) {
    left.insert(left.end(), right.begin(), right.end());
    return left;
}

Form sum_of(Columns columns) {
    return [columns = std::move(columns)](std::span<const double> row) {
        double sum = 0.0;
        for (std::size_t column : columns) sum += row[column];
        return sum;
    };
}

Form difference_of(Columns plus, Columns minus) {
    return [plus = sum_of(std::move(plus)), minus = sum_of(std::move(minus))](std::span<const double> row) {
        return plus(row) - minus(row);
    };
}

Form one() {
    return [](std::span<const double>) { return 1.0; };
}

}  // namespace lacuna
