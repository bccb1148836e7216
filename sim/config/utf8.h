// UTF-8 as RFC 3629 defines it.
#pragma once

#include <cstddef>
#include <string_view>

namespace lacuna {

/// Length in bytes of the well-formed character at `text[at]`, or 0: overlong forms, surrogates and
/// code points above U+10FFFF are not well formed (RFC 3629, section 4).
std::size_t utf8_length(std::string_view text, std::size_t at);

}  // namespace lacuna
