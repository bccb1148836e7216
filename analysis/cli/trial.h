// A short run of the engine, to say what a long one will take.
#pragma once

#include "analysis/report/preview.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// Simulates a smaller copy of the scenario for about `seconds` on `threads` threads (0: all), stores
/// nothing, and scales studies, time, peak memory and file size up. `studies` is exact in expectation;
/// the rest is as good as the machine is steady.
SizePreview measure_size(const Scenario& scenario, unsigned threads, double seconds);

}  // namespace lacuna
