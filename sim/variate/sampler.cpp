#include "sim/variate/sampler.h"

#include <algorithm>
#include <boost/random/normal_distribution.hpp>
#include <boost/random/poisson_distribution.hpp>
#include <cmath>

#include "sim/base/fault.h"
#include "sim/variate/gamma.h"

namespace lacuna {

namespace {

bool truncates(const Distribution& d) { return !d.clamp && (d.min > -infinity || d.max < infinity); }

/// Families whose draw is a function of one standard normal, so that the vector kernel serves them.
bool from_normal(Family family) {
    return family == Family::normal || family == Family::half_normal || family == Family::lognormal;
}

double of_normal(const Distribution& d, double z) {
    switch (d.family) {
        case Family::normal:
            return d.first + d.second * z;
        case Family::half_normal:
            return d.first * std::fabs(z);
        default:
            return d.first * std::exp(d.second * z);  // lognormal
    }
}

std::uint64_t entity_at(const Entities& entities, std::size_t i) {
    return entities.first + (entities.offsets ? entities.offsets[i] : i);
}

}  // namespace

Sampler::Sampler(Distribution distribution)
    : distribution_(std::move(distribution)),
      constant_(is_constant(distribution_)),
      invert_(truncates(distribution_) && mass_inside(distribution_) < 0.5) {
    if (distribution_.family == Family::discrete) alias_ = alias_table(distribution_.weights);
}

double Sampler::one_draw(Stream& stream) const {
    const Distribution& d = distribution_;
    switch (d.family) {
        case Family::fixed:
            return d.first;
        case Family::normal:
        case Family::half_normal:
        case Family::lognormal:
            return of_normal(d, boost::random::normal_distribution<double>()(stream));
        case Family::gamma:
            return gamma_variate(stream, d.second) * d.first / d.second;
        case Family::beta:
            return beta_variate(stream, d.first * d.second, (1.0 - d.first) * d.second);
        case Family::uniform:
            return d.first + (d.second - d.first) * stream.uniform();
        case Family::poisson:
            return static_cast<double>(boost::random::poisson_distribution<long, double>(d.first)(stream));
        case Family::discrete:
            return d.values[alias_.pick(stream.uniform())];
    }
    throw Defect("Sampler: unknown family");
}

void Sampler::first_draws(StreamKey key, Address address, Purpose again, Entities entities, double* out) const {
    const Distribution& d = distribution_;
    if (invert_) {
        uniforms(key, address, entities, out);
        for (std::size_t i = 0; i < entities.count; ++i) out[i] = quantile(d, out[i]);
    } else if (from_normal(d.family)) {
        normals(key, address, entities, out);
        for (std::size_t i = 0; i < entities.count; ++i) out[i] = of_normal(d, out[i]);
    } else if (d.family == Family::uniform || d.family == Family::discrete) {
        uniforms(key, address, entities, out);
        for (std::size_t i = 0; i < entities.count; ++i) {
            out[i] = d.family == Family::uniform ? d.first + (d.second - d.first) * out[i]
                                                 : d.values[alias_.pick(out[i])];
        }
    } else {  // sequential samplers: their whole stream is keyed by `address`
        for (std::size_t i = 0; i < entities.count; ++i) {
            Stream stream(key, address, entity_at(entities, i));
            out[i] = one_draw(stream);
        }
    }
    if (!truncates(d) || invert_) return;
    address.purpose = again;
    for (std::size_t i = 0; i < entities.count; ++i) {
        if (out[i] >= d.min && out[i] <= d.max) continue;
        Stream stream(key, address, entity_at(entities, i));
        do out[i] = one_draw(stream);
        while (out[i] < d.min || out[i] > d.max);
    }
}

void Sampler::draw(StreamKey key, Address address, Purpose again, Entities entities, double* out) const {
    if (constant_) {
        std::fill(out, out + entities.count, quantile(distribution_, 0.5));
        return;
    }
    first_draws(key, address, again, entities, out);
    if (!distribution_.clamp) return;
    for (std::size_t i = 0; i < entities.count; ++i) {
        out[i] = std::clamp(out[i], distribution_.min, distribution_.max);
    }
}

}  // namespace lacuna
