// What an outcome file says about itself: the attributes of its root.
#pragma once

#include <string>

namespace lacuna {

inline constexpr const char* outcome_format = "lacuna outcomes";
inline constexpr int outcome_format_version = 1;

struct FileFacts {
    std::string title;
    std::string config_text;      // as the user gave it
    std::string resolved_config;  // JSON, complete
    std::string digest;           // SHA-256 of the resolved config, hexadecimal
    std::string seed;             // text: readers in R have no 64-bit integers
    std::string program_version, commit;
    std::string compiler, flags, processor;
};

/// The attributes' names beside the members they hold, in the order in which they are written.
struct FactName {
    const char* name;
    std::string FileFacts::*member;
};
inline constexpr FactName fact_names[] = {
    {"title", &FileFacts::title},
    {"config_text", &FileFacts::config_text},
    {"resolved_config", &FileFacts::resolved_config},
    {"digest", &FileFacts::digest},
    {"seed", &FileFacts::seed},
    {"program_version", &FileFacts::program_version},
    {"commit", &FileFacts::commit},
    {"compiler", &FileFacts::compiler},
    {"flags", &FileFacts::flags},
    {"processor", &FileFacts::processor},
};

}  // namespace lacuna
