// SHA-256 (NIST FIPS 180-4, sections 5.1.1, 5.3.3 and 6.2).
#pragma once

#include <string>
#include <string_view>

namespace lacuna {

/// The hash of the bytes as 64 lower-case hexadecimal digits.
std::string sha256_hex(std::string_view bytes);

}  // namespace lacuna
