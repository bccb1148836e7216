// What this executable was built from and with.
#pragma once

#include <string>

namespace lacuna {

struct BuildFacts {
    std::string version;    // "0.1.0"
    std::string commit;     // short hash, or "unknown"
    std::string libraries;  // "HDF5 1.10.8, Boost 1.74.0, ..."
};

/// What --version prints: version, commit, compiler, libraries, and the vector instructions in use.
std::string version_text(const BuildFacts& build);

}  // namespace lacuna
