// Ctrl-C and friends, as a flag to ask.
#pragma once

#include <string>

namespace lacuna {

/// While one lives, the first SIGINT or SIGTERM only sets a flag; the second removes `partial_file` (if
/// any) and ends the process at once. Signals are a matter of the whole process: one at a time.
class Interrupt {
public:
    explicit Interrupt(const std::string& partial_file = "");
    ~Interrupt();
    Interrupt(const Interrupt&) = delete;
    Interrupt& operator=(const Interrupt&) = delete;

    bool requested() const;
};

/// A closed pipe and a file size limit become failed writes instead of the end of the process.
void ignore_write_signals();

}  // namespace lacuna
