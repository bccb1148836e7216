// Columns of what chance adds to studies: a standard normal and a scaled chi-squared each.
#pragma once

#include "sim/design/sampling.h"

namespace lacuna {

/// The purposes of one pair of columns.
struct ErrorPurposes {
    Purpose data, test, again;
};
inline constexpr ErrorPurposes study_errors{Purpose::study_data, Purpose::study_variance_test,
                                            Purpose::study_variance_again};
inline constexpr ErrorPurposes study_other_errors{Purpose::study_other_data, Purpose::study_other_test,
                                                  Purpose::study_other_again};

/// z[i] standard normal, v[i] = the chi-squared of row[i] in `chi` (see ChiColumns), independent, for the
/// entities of `round`. Columns must be readable and writable up to the next multiple of 16 entries.
void draw_errors(const StudyRound& round, ErrorPurposes purposes, const ChiColumns& chi, const std::uint32_t* row,
                 SamplingScratch& scratch, double* z, double* v);

}  // namespace lacuna
