// p-values of stored studies. Rules with steps of p use critical values instead (count_cuts).
#pragma once

#include <vector>

#include "sim/design/test_table.h"
#include "sim/model/columns.h"

namespace lacuna {

/// p of every study by the design's test, one- or two-sided; relative error 1e-12 (sim/tail).
std::vector<double> p_values(const Design& design, const TestTable& table, const Studies& studies);

}  // namespace lacuna
