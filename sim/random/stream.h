// Keyed random streams. A draw is a pure function of (seed, literature, purpose, entity, study, index):
// the seed is the key of a counter-based generator, all else is its counter, so no draw depends on
// what was drawn before it, on threads, or on rules that only matter further downstream.
//
// Generator: Philox4x32-10 (Salmon, Moraes, Dror & Shaw 2011, "Parallel random numbers: as easy as
// 1, 2, 3", SC11), taken from Random123.
#pragma once

#include <cstdint>
#include <limits>

#include <Random123/philox.h>

namespace lacuna {

/// What a draw is for. Append only: the numbers are part of every result ever published.
enum class Purpose : std::uint8_t {
    question_truth = 0,         // is the question real
    question_effect = 1,        // its effect
    question_effect_again = 2,  // after a draw fell outside the truncation bounds
    lab_kind = 3,               // the kind of a lab
    lab_lines = 4,              // how many lines it runs
    lab_lines_again = 5,        // after a draw fell outside the truncation bounds
    line_order = 6,             // which lab works on which line
    study_size = 7,             // n
    study_effect = 8,           // the study's true effect around the question's
    study_data = 9,             // a pair of normals: sampling error, and the root of the chi-squared
    study_variance_test = 10,   // further bits of that chi-squared's acceptance test
    study_variance_again = 11,  // draws after a rejection
    writing = 12,               // is the manuscript written up
    results_blind = 13,         // is it judged before results are seen (index: journal)
    acceptance = 14,            // is it accepted (index: journal)
    refinement = 15,            // further bits of a 32-bit word that decided nothing
    question_plan = 16,         // the effect that studies of a question that is not real are planned for
    question_plan_again = 17,   // after a draw fell outside the truncation bounds
    study_other_data = 18,      // as study_data, for a second chi-squared or a second group
    study_other_test = 19,      // further bits of its acceptance test
    study_other_again = 20,     // draws after a rejection
    optional_stopping = 21      // is the study run with it
};

/// The key of all streams of a run.
struct StreamKey {
    std::uint64_t seed = 0;
};

/// Counter of one draw: which literature, what for, which entity of it (below 2^40), which study of
/// a line (below 2^16), and an index for several draws of one purpose.
struct Address {
    std::uint32_t literature = 0;
    Purpose purpose{};
    std::uint16_t study = 0;
    std::uint32_t index = 0;
};

/// Highest number of entities (questions, labs, lines) in a literature.
inline constexpr std::uint64_t entity_limit = std::uint64_t{1} << 40;

/// One stream as a uniform random bit generator (32 bits a call), for Boost.Random and other
/// sequential consumers. Costs one Philox block per four calls.
class Stream {
public:
    using result_type = std::uint32_t;

    Stream(StreamKey key, Address address, std::uint64_t entity)
        : key_{{static_cast<std::uint32_t>(key.seed), static_cast<std::uint32_t>(key.seed >> 32)}},
          counter_{{address.index, static_cast<std::uint32_t>(entity),
                    static_cast<std::uint32_t>(entity >> 32) | static_cast<std::uint32_t>(address.purpose) << 8 |
                        static_cast<std::uint32_t>(address.study) << 16,
                    address.literature}} {}

    static constexpr result_type min() { return 0; }
    static constexpr result_type max() { return std::numeric_limits<result_type>::max(); }

    result_type operator()() {
        if (used_ == 4) {
            words_ = r123::Philox4x32()(counter_, key_);
            ++counter_[0];
            used_ = 0;
        }
        return words_[used_++];
    }

    /// Uniform on the open interval (0, 1): odd multiples of 2^-53, as in the vector kernels.
    double uniform() {
        const std::uint64_t low = (*this)();
        const std::uint64_t high = (*this)();
        return static_cast<double>((high << 32 | low) >> 12) * 0x1p-52 + 0x1p-53;
    }

private:
    r123::Philox4x32::key_type key_;
    r123::Philox4x32::ctr_type counter_;
    r123::Philox4x32::ctr_type words_{};
    unsigned used_ = 4;
};

}  // namespace lacuna
