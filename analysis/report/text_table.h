// Tables of aligned text, at most 100 columns wide.
#pragma once

#include <cstddef>
#include <string>
#include <vector>

namespace lacuna {

inline constexpr std::size_t text_width = 100;

/// Cells may hold several lines ('\n'). A row with a single cell is a heading over the rows below.
struct TextTable {
    std::vector<std::string> header;  // long ones are broken at spaces
    std::vector<std::vector<std::string>> rows;
};

/// The table as lines; columns two spaces apart, the first one left-aligned, the others at their left
/// edges too. A table that would be wider than text_width is given in several, each with the first
/// column and as many of the others as fit. Control characters become '?'.
std::string render(const TextTable& table);

/// Code points in UTF-8 text, which is its width in our tables.
std::size_t shown_width(const std::string& text);

/// `text` broken at spaces into lines of at most `width`; longer words are cut.
std::vector<std::string> broken(const std::string& text, std::size_t width);

}  // namespace lacuna
