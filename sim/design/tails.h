// Chances of the two kinds of significant results.
#pragma once

namespace lacuna {

struct Tails {
    double predicted, reversed;  // in the predicted direction, and the other way (0 in a one-sided test)
};

}  // namespace lacuna
