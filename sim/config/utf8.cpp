#include "sim/config/utf8.h"

namespace lacuna {

std::size_t utf8_length(std::string_view text, std::size_t at) {
    const auto byte = [&](std::size_t i) -> unsigned {
        return at + i < text.size() ? static_cast<unsigned char>(text[at + i]) : 0u;
    };
    const auto tail = [&](std::size_t i, unsigned low = 0x80u, unsigned high = 0xBFu) {
        return byte(i) >= low && byte(i) <= high;
    };
    const unsigned lead = byte(0);
    if (lead < 0x80u) return 1;
    if (lead >= 0xC2u && lead <= 0xDFu) return tail(1) ? 2 : 0;
    if (lead >= 0xE0u && lead <= 0xEFu) {
        const unsigned low = lead == 0xE0u ? 0xA0u : 0x80u;
        const unsigned high = lead == 0xEDu ? 0x9Fu : 0xBFu;
        return tail(1, low, high) && tail(2) ? 3 : 0;
    }
    if (lead >= 0xF0u && lead <= 0xF4u) {
        const unsigned low = lead == 0xF0u ? 0x90u : 0x80u;
        const unsigned high = lead == 0xF4u ? 0x8Fu : 0xBFu;
        return tail(1, low, high) && tail(2) && tail(3) ? 4 : 0;
    }
    return 0;
}

}  // namespace lacuna
