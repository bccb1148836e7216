// Attributes of HDF5 objects: text and small integers.
#pragma once

#include <cstdint>
#include <string>

#include "sim/store/handle.h"

namespace lacuna {

/// Variable-length UTF-8 text. Throws RunError.
void write_text(hid_t object, const char* name, const std::string& text);
void write_integer(hid_t object, const char* name, std::int32_t value);

/// Text of fixed or variable length; empty when there is no such attribute. Throws RunError when it is
/// not a text, or larger than 64 MB.
std::string read_text(hid_t object, const char* name);
/// The integer, or `otherwise` when there is no such attribute.
std::int32_t read_integer(hid_t object, const char* name, std::int32_t otherwise);

}  // namespace lacuna
