// [[regime]]: what each one changes, and the config that results.
#pragma once

#include <string>
#include <vector>

#include "sim/config/node.h"
#include "sim/config/path.h"

namespace lacuna {

/// One entry of a regime's `set`.
struct Change {
    ConfigPath path;
    Place key_place;
    ConfigNode value;
};

struct RegimeText {
    std::string name;
    Place place;
    std::vector<Change> changes;
};

/// The regimes of a config, one named "rules as given" when it has none. Faults are appended.
std::vector<RegimeText> read_regimes(const ConfigNode& root, std::vector<Fault>& faults);

/// A copy of the config with the regime's changes made, in the order of the text. Faults are appended.
ConfigNode changed(const ConfigNode& root, const RegimeText& regime, std::vector<Fault>& faults);

/// Of the faults found in the changed config, those that the config as given does not have. They name
/// the regime, and point at the change that brought them about.
std::vector<Fault> faults_of_regime(const std::vector<Fault>& found, const std::vector<Fault>& given,
                                    const RegimeText& regime);

}  // namespace lacuna
