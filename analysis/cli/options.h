// What the user asks for on the command line.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "analysis/cli/build_facts.h"

namespace lacuna {

enum class Command { check, run, analyse, export_tables };
enum class Format { text, json, csv };
enum class ShowProgress { automatic, always, never };

struct Options {
    Command command = Command::check;
    std::string input;                             // CONFIG or OUT.h5
    std::string output;                            // -o; empty: the command's default
    std::vector<std::string> sets;                 // KEY=VALUE, as given
    std::optional<std::string> seed, literatures;  // as given; values of run.seed and run.literatures
    unsigned threads = 0;                          // 0: as many as the machine has
    Format format = Format::text;
    ShowProgress progress = ShowProgress::automatic;
    bool quiet = false;
    bool overwrite = false;
};

/// What to do: a command's options, or a text to print (help, version) and nothing else.
struct Invocation {
    std::optional<Options> options;
    std::string text;
};

/// Throws InputError with everything that is wrong with the arguments.
Invocation parse_arguments(int count, const char* const* arguments, const BuildFacts& build);

}  // namespace lacuna
