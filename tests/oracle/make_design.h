// A design with the rest at its defaults.
#pragma once

#include "sim/model/scenario.h"

namespace lacuna::oracle {

inline Design make(Test test, double alpha, int sides) {
    Design design;
    design.test = test;
    design.alpha = alpha;
    design.sides = sides;
    return design;
}

}  // namespace lacuna::oracle
