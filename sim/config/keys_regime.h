// [[regime]]
#pragma once

#include <string>

#include "sim/config/rule.h"

namespace lacuna {

struct RegimeEntry {
    std::string name;
};

template <class V>
void describe(V& v, RegimeEntry& regime) {
    v.name("name", regime.name, About::required_key("name of the set of rules"));
    v.table("set", About::derived("paths and the values they take under this regime", "nothing"),
            [](auto& inner) { inner.known_paths(); });
}

}  // namespace lacuna
