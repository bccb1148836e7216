#include "analysis/cli/build_facts.h"

#include <fmt/format.h>

#include "sim/random/kernels.h"

namespace lacuna {

namespace {

std::string compiler() {
#if defined(__clang__)
    return "clang " __clang_version__;
#elif defined(__GNUC__)
    return "g++ " __VERSION__;
#else
    return "another compiler";
#endif
}

}  // namespace

std::string version_text(const BuildFacts& build) {
    return fmt::format("lacuna {}\ncommit    {}\ncompiler  {}\nlibraries {}\nvectors   {}\n", build.version,
                       build.commit, compiler(), build.libraries, vector_target());
}

}  // namespace lacuna
