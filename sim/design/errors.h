// Columns of what chance adds to studies: standard normals and scaled chi-squareds.
#pragma once

#include "sim/design/sampling.h"

namespace lacuna {

/// z[i] standard normal, v[i] = the chi-squared of row[i] in `chi` (see ChiColumns), independent, for the
/// entities of `round`. Columns must be readable and writable up to the next multiple of 16 entries.
void draw_errors(const StudyRound& round, const ChiColumns& chi, const std::uint32_t* row, SamplingScratch& scratch,
                 double* z, double* v);

/// The same with a second, independent chi-squared, of `other`.
void draw_two_errors(const StudyRound& round, const ChiColumns& chi, const ChiColumns& other, const std::uint32_t* row,
                     SamplingScratch& scratch, double* z, double* v, double* other_v);

}  // namespace lacuna
