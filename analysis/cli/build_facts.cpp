#include "analysis/cli/build_facts.h"

#include <fmt/format.h>

#include <fstream>

#include "sim/random/kernels.h"

namespace lacuna {

std::string compiler_text() {
#if defined(__clang__)
    return "clang " __clang_version__;
#elif defined(__GNUC__)
    return "g++ " __VERSION__;
#else
    return "another compiler";
#endif
}

std::string processor_text() {
    std::ifstream file("/proc/cpuinfo");
    std::string line, name = "unknown processor";
    while (std::getline(file, line)) {
        const std::size_t at = line.find(": ");
        if (!line.starts_with("model name") || at == std::string::npos) continue;
        name = line.substr(at + 2);
        break;
    }
    return fmt::format("{}, {}", name, vector_target());
}

std::string version_text(const BuildFacts& build) {
    return fmt::format("lacuna {}\ncommit    {}\ncompiler  {}\nlibraries {}\nflags     {}\nvectors   {}\n",
                       build.version, build.commit, compiler_text(), build.libraries, build.flags, vector_target());
}

}  // namespace lacuna
