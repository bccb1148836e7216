// The commands; each returns the exit code of success (0, or 3 when stopped early) and throws otherwise.
#pragma once

#include "analysis/cli/build_facts.h"
#include "analysis/cli/options.h"

namespace lacuna {

namespace exit_code {
inline constexpr int done = 0, failed = 1, unusable = 2, stopped = 3;
}

int check_command(const Options& options);
int run_command(const Options& options, const BuildFacts& build);
int analyse_command(const Options& options, const BuildFacts& build);
int export_command(const Options& options);

/// Parses, does what was asked, and turns exceptions into messages and exit codes.
int run_lacuna(int count, const char* const* arguments, const BuildFacts& build);

}  // namespace lacuna
