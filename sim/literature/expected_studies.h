// How many studies a literature is expected to hold: what the size of blocks and the time left go by.
#pragma once

#include "sim/model/scenario.h"

namespace lacuna {

/// The expected number of studies of one literature under `science`: exact for fixed lines; for
/// until-rules by a coarse quadrature, good to a few percent.
double expected_studies(const Science& science);

}  // namespace lacuna
