// The part of a row that an estimand looks at: all studies or those of one lab kind, with the
// regime's word for what counts as a finding.
#pragma once

#include <cstddef>
#include <optional>
#include <vector>

#include "analysis/estimand/estimand.h"
#include "sim/tally/layout.h"

namespace lacuna {

/// Indices of a row's columns that are added up.
using Columns = std::vector<std::size_t>;

using Truths = std::vector<Truth>;
using Claims = std::vector<Claim>;

const Truths& all_truths();
const Truths& real_truths();  // of either sign
const Truths& null_truth();
const Claims& all_claims();

class Part {
public:
    /// `kind`: the lab kind looked at; none: all of them.
    Part(Layout layout, Findings findings, std::optional<std::size_t> kind = std::nullopt)
        : layout_(layout), findings_(findings), kind_(kind) {}

    const Layout& layout() const { return layout_; }
    Claims findings() const;     // the claims that count as discoveries
    Claims nonfindings() const;  // the others

    Columns studies(Scope scope, const Truths& truths, const Claims& claims) const;
    Columns sums(Scope scope, const Claims& claims, Sum what) const;
    Columns participants(Scope scope) const;

private:
    std::vector<std::size_t> kinds() const;

    Layout layout_;
    Findings findings_;
    std::optional<std::size_t> kind_;
};

/// All of both, one after the other.
Columns operator+(Columns left, const Columns& right);

Form sum_of(Columns columns);
Form difference_of(Columns plus, Columns minus);
/// 1 for every literature: the estimand is a mean over literatures.
Form one();

/// The two scopes that estimands are given in.
inline constexpr Scope reported_scopes[] = {Scope::conducted, Scope::published};

}  // namespace lacuna
