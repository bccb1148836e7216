// The line that says how far a run is.
#pragma once

#include <chrono>
#include <functional>
#include <string>

#include "sim/engine/run.h"

namespace lacuna {

/// "42 %  168 of 400 literatures  12.3 M studies/s  0:12 left" after `seconds` of running.
std::string progress_text(const Progress& progress, double seconds);

/// Writes the line over itself at most five times a second where `terminal`, else on a line of its own
/// at most once a second; nothing at all unless `shown`.
class ProgressLine {
public:
    using Clock = std::function<double()>;                  // seconds
    using Write = std::function<void(const std::string&)>;  // to the terminal

    ProgressLine(bool shown, bool terminal, Clock clock, Write write);

    void update(const Progress& progress);
    void erase();

private:
    bool shown_, terminal_;
    Clock clock_;
    Write write_;
    double start_, last_;
    bool visible_ = false;
};

}  // namespace lacuna
