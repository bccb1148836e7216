// Errors that carry a place and a remedy. User faults (exit code 2), failed runs (1) and defects of
// the program are different types; only main() turns them into exit codes.
#pragma once

#include <stdexcept>
#include <string>
#include <vector>

namespace lacuna {

/// Where in a text a fault was found. `line` and `column` count from 1; 0 means unknown.
struct Place {
    std::string source;  // file name, or "--set" and the like
    int line = 0;
    int column = 0;
};

/// "configs/demo.toml:12:5", or just the source where no line is known.
std::string to_string(const Place& place);

/// One thing that is wrong with what the user gave, and what to do about it.
struct Fault {
    Place place;
    std::string key;      // dotted path of the config key, or the option; may be empty
    std::string message;  // what is wrong and the rule that was broken
    std::string remedy;   // what to do; may be empty
};

/// "file:line:column: key: message (remedy)".
std::string to_string(const Fault& fault);

/// The user's input cannot be used; nothing was written. Carries every fault found.
class InputError : public std::runtime_error {
public:
    explicit InputError(std::vector<Fault> faults);
    explicit InputError(Fault fault) : InputError(std::vector<Fault>{std::move(fault)}) {}
    const std::vector<Fault>& faults() const { return faults_; }

private:
    std::vector<Fault> faults_;
};

/// The run could not go on (disk, memory, a file that is not what it should be).
class RunError : public std::runtime_error {
public:
    using std::runtime_error::runtime_error;
};

/// A defect of the program: a state that the code claims cannot be.
class Defect : public std::logic_error {
public:
    using std::logic_error::logic_error;
};

}  // namespace lacuna
