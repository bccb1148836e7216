// Standard output and standard error.
#pragma once

#include <string>

namespace lacuna {

/// Results. A reader that went away (closed pipe) is no error; a full disk is: RunError.
void print(const std::string& text);

/// Messages and progress, on standard error; never fails.
void message(const std::string& text);

bool error_is_terminal();

}  // namespace lacuna
