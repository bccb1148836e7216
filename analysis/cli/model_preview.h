// The resolved model as lines to read.
#pragma once

#include <string>
#include <utility>
#include <vector>

namespace lacuna {

/// Keys (dotted, positions from 1) and values of a resolved config (the text of resolved_json), those of
/// the first regime for what regimes may change. Distributions stay on one line.
std::vector<std::pair<std::string, std::string>> model_lines(const std::string& resolved);

}  // namespace lacuna
