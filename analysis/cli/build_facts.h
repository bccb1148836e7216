// What this executable was built from and with.
#pragma once

#include <string>

namespace lacuna {

struct BuildFacts {
    std::string version;    // "0.1.0"
    std::string commit;     // short hash, or "unknown"
    std::string libraries;  // "HDF5 1.10.8, Boost 1.74.0, ..."
    std::string flags;      // that every source was compiled with
};

/// Name and version of the compiler.
std::string compiler_text();

/// The processor's own name and the vector instructions in use: both can change the last bits of a draw.
std::string processor_text();

/// What --version prints: version, commit, compiler, libraries, and the vector instructions in use.
std::string version_text(const BuildFacts& build);

}  // namespace lacuna
