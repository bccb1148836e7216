#include "analysis/report/text_table.h"

#include <algorithm>

namespace lacuna {

namespace {

constexpr std::size_t gap = 2;
constexpr std::size_t short_header = 14;  // is not broken
constexpr std::size_t longest_word = 20;  // of a header that makes its column wider

bool continues(char byte) { return (static_cast<unsigned char>(byte) & 0xC0u) == 0x80u; }

std::string printable(std::string text) {
    for (char& byte : text) {
        const auto code = static_cast<unsigned char>(byte);
        if ((code < 0x20 && byte != '\n') || code == 0x7F) byte = '?';
    }
    return text;
}

std::vector<std::string> lines_of(const std::string& text) {
    std::vector<std::string> lines(1);
    for (char byte : text) {
        if (byte == '\n')
            lines.emplace_back();
        else
            lines.back() += byte;
    }
    return lines;
}

std::size_t widest(const std::vector<std::string>& lines) {
    std::size_t width = 0;
    for (const std::string& line : lines) width = std::max(width, shown_width(line));
    return width;
}

/// The width that a header asks for: its own when it is short, else that of its longest word.
std::size_t header_width(const std::string& header) {
    std::size_t widest_word = std::min(shown_width(header), short_header);
    for (std::size_t from = 0; from < header.size();) {
        const std::size_t space = std::min(header.find(' ', from), header.size());
        widest_word = std::max(widest_word, shown_width(header.substr(from, space - from)));
        from = space + 1;
    }
    return std::min(widest_word, longest_word);
}

using Cells = std::vector<std::vector<std::string>>;  // [column][line]

std::string render_row(const Cells& cells, const std::vector<std::size_t>& widths) {
    std::size_t height = 0;
    for (const auto& cell : cells) height = std::max(height, cell.size());
    std::string text;
    for (std::size_t l = 0; l < height; ++l) {
        std::string line;
        std::size_t at = 0;  // where the column begins
        for (std::size_t c = 0; c < cells.size(); ++c) {
            line.append(at > shown_width(line) ? at - shown_width(line) : 0, ' ');
            if (l < cells[c].size()) line += cells[c][l];
            at += widths[c] + gap;
        }
        line.erase(line.find_last_not_of(' ') + 1);
        text += line + '\n';
    }
    return text;
}

/// One table with the first column and columns [from, to).
std::string render_part(const TextTable& table, const std::vector<std::size_t>& widths, std::size_t from,
                        std::size_t to) {
    std::vector<std::size_t> columns{0};
    for (std::size_t c = from; c < to; ++c) columns.push_back(c);
    std::vector<std::size_t> shown;
    Cells header;
    std::size_t total = 0;
    for (std::size_t c : columns) {
        shown.push_back(widths[c]);
        header.push_back(broken(printable(table.header[c]), std::max(widths[c], std::size_t{1})));
        total += widths[c] + gap;
    }
    std::string text = render_row(header, shown) + std::string(total - gap, '-') + '\n';
    for (const auto& row : table.rows) {
        Cells cells;
        if (row.size() == 1) {
            cells.push_back(lines_of(printable(row[0])));
        } else {
            for (std::size_t c : columns) cells.push_back(lines_of(c < row.size() ? printable(row[c]) : ""));
        }
        text += render_row(cells, shown);
    }
    return text;
}

}  // namespace

std::size_t shown_width(const std::string& text) {
    return static_cast<std::size_t>(
        std::count_if(text.begin(), text.end(), [](char byte) { return !continues(byte); }));
}

std::vector<std::string> broken(const std::string& text, std::size_t width) {
    std::vector<std::string> lines(1);
    std::string word;
    const auto flush = [&] {
        if (!lines.back().empty() && shown_width(lines.back()) + 1 + shown_width(word) > width)
            lines.emplace_back();
        if (!lines.back().empty()) lines.back() += ' ';
        lines.back() += word;
        word.clear();
    };
    for (std::size_t i = 0; i < text.size(); ++i) {
        if (text[i] == ' ' || text[i] == '\n') {
            flush();
            continue;
        }
        if (shown_width(word) == width && !continues(text[i])) flush();
        word += text[i];
    }
    if (!word.empty()) flush();
    return lines;
}

std::string render(const TextTable& table) {
    const std::size_t columns = table.header.size();
    std::vector<std::size_t> widths(columns);
    for (std::size_t c = 0; c < columns; ++c) {
        widths[c] = header_width(table.header[c]);
        for (const auto& row : table.rows) {
            if (row.size() > 1 && c < row.size()) widths[c] = std::max(widths[c], widest(lines_of(row[c])));
        }
    }
    std::string text;
    std::size_t from = 1;
    do {
        std::size_t to = from, total = widths[0];
        while (to < columns && (to == from || total + gap + widths[to] <= text_width)) total += gap + widths[to++];
        if (from > 1) text += '\n';
        text += render_part(table, widths, from, to);
        from = to;
    } while (from < columns);
    return text;
}

}  // namespace lacuna
