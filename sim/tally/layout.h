// The sufficient statistics of one literature under one regime: which numbers, in which order, under
// which names. Every estimand is computed from them; /literatures stores them, one column each.
//
// All are counts or sums over the literature (so rows of blocks add up), but for the medians.
#pragma once

#include <cstddef>
#include <span>
#include <string>
#include <vector>

#include "sim/model/claim.h"
#include "sim/model/tables.h"

namespace lacuna {

/// Sums over studies of real questions. Estimates and effects are oriented by the sign of the
/// question's effect, so a positive estimate points the right way.
enum class Sum : std::uint8_t { estimate, abs_estimate, abs_effect };

/// What a question counts as in a scope: studied (a study is in it), established by at least one
/// finding, or by findings in more than half of its studies.
enum class Standing : std::uint8_t { studied, any_finding, majority };

/// Medians of (oriented estimate / |effect|) over real questions' findings or over all their reports.
enum class Median : std::uint8_t { findings, reports };

class Layout {
public:
    /// `kinds`: number of lab kinds, 1 or more. Study statistics are kept by lab kind.
    explicit Layout(std::size_t kinds);

    std::size_t kinds() const { return kinds_; }
    std::size_t size() const { return size_; }  // doubles in a row

    std::size_t studies(std::size_t kind, Scope scope, Truth truth, Claim claim) const;
    std::size_t sum(std::size_t kind, Scope scope, Claim claim, Sum what) const;
    std::size_t participants(std::size_t kind, Scope scope) const;
    std::size_t manuscripts(Scope scope, bool real, ManuscriptClass manuscript_class) const;
    std::size_t questions(Scope scope, bool real, Standing standing) const;
    std::size_t median(Scope scope, Median what) const;  // NaN in a row: nothing to take a median of

    /// Names, units and descriptions of the row's columns, in order. `labs`: names of the lab kinds.
    std::vector<ColumnSpec> columns(const std::vector<std::string>& labs) const;

private:
    std::size_t kinds_;
    std::size_t manuscripts_at_, questions_at_, medians_at_, size_;
};

}  // namespace lacuna
