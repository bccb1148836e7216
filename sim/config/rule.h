// What a config says about one key, whichever way the table of keys is walked.
#pragma once

#include <string>

namespace lacuna {

/// The numbers a key may take; always finite.
struct Range {
    double low, high;  // may be infinite
    bool low_open = false, high_open = false;

    bool holds(double x) const;
};

inline constexpr double unbounded = __builtin_huge_val();
inline constexpr Range any_range{-unbounded, unbounded};
inline constexpr Range nonnegative_range{0.0, unbounded};
inline constexpr Range positive_range{0.0, unbounded, true};
inline constexpr Range share_range{0.0, 1.0};
inline constexpr Range open_share_range{0.0, 1.0, true, true};

/// "between 0 and 1", "above 0 and below 1", "0 or more", "above 0", "finite".
std::string to_string(const Range& range);

/// What a key means, and what holds when it is not given.
struct About {
    const char* meaning;
    bool required = false;
    const char* otherwise = nullptr;  // the default in words, where it is not a constant

    About(const char* its_meaning) : meaning(its_meaning) {}
    static About required_key(const char* meaning) {
        About about(meaning);
        about.required = true;
        return about;
    }
    static About derived(const char* meaning, const char* otherwise) {
        About about(meaning);
        about.otherwise = otherwise;
        return about;
    }
};

}  // namespace lacuna
