#include "analysis/cli/console.h"

#include <unistd.h>

#include <cerrno>
#include <cstdio>
#include <cstring>

#include "sim/base/fault.h"

namespace lacuna {

void print(const std::string& text) {
    errno = 0;
    const bool whole = std::fwrite(text.data(), 1, text.size(), stdout) == text.size() && std::fflush(stdout) == 0;
    if (whole || errno == EPIPE) return;
    throw RunError(std::string("cannot write to standard output: ") + std::strerror(errno));
}

void message(const std::string& text) {
    std::fwrite(text.data(), 1, text.size(), stderr);
    std::fflush(stderr);
}

bool error_is_terminal() { return isatty(STDERR_FILENO) == 1; }

}  // namespace lacuna
