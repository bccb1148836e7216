#include "sim/base/fault.h"

namespace lacuna {

namespace {

std::string joined(const std::vector<Fault>& faults) {
    std::string text;
    for (const Fault& fault : faults) {
        if (!text.empty()) text += '\n';
        text += to_string(fault);
    }
    return text;
}

}  // namespace

std::string to_string(const Place& place) {
    if (place.line <= 0) return place.source;
    return place.source + ':' + std::to_string(place.line) + ':' + std::to_string(place.column);
}

std::string to_string(const Fault& fault) {
    std::string text = to_string(fault.place);
    if (!text.empty()) text += ": ";
    if (!fault.key.empty()) text += fault.key + ": ";
    text += fault.message;
    if (!fault.remedy.empty()) text += " (" + fault.remedy + ')';
    return text;
}

InputError::InputError(std::vector<Fault> faults)
    : std::runtime_error(joined(faults)), faults_(std::move(faults)) {}

}  // namespace lacuna
