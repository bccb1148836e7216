// One draw per entity from any Distribution value.
#pragma once

#include <cstdint>

#include "sim/random/kernels.h"
#include "sim/stats/distribution.h"
#include "sim/variate/alias.h"

namespace lacuna {

/// Prepared once from a distribution, then drawn from any number of times. Draws that fall outside a
/// truncation are drawn again from the entity's own stream (`again` at the same literature and study),
/// or, where less than half of the mass is inside, by inversion.
class Sampler {
public:
    explicit Sampler(Distribution distribution);

    bool constant() const { return constant_; }

    /// out[i] = the draw of entity i. `again` must differ from the address's purpose.
    void draw(StreamKey key, Address address, Purpose again, Entities entities, double* out) const;

private:
    void first_draws(StreamKey key, Address address, Purpose again, Entities entities, double* out) const;
    double one_draw(Stream& stream) const;

    Distribution distribution_;
    bool constant_;
    bool invert_;       // by quantile function
    AliasTable alias_;  // discrete only
};

}  // namespace lacuna
