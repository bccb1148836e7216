// Reads the reference tables in tests/reference: '#' lines are comments, then a line of column names.
#pragma once

#include <fstream>
#include <map>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

namespace lacuna::oracle {

struct ReferenceTable {
    std::vector<std::string> names;
    std::vector<std::map<std::string, std::string>> rows;
};

/// The number in a cell; missing cells ("" or "NA") throw, so that a test never compares with nothing.
inline double number(const std::map<std::string, std::string>& row, const std::string& column) {
    return std::stod(row.at(column));
}

inline bool has(const std::map<std::string, std::string>& row, const std::string& column) {
    const std::string& text = row.at(column);
    return !text.empty() && text != "NA";
}

inline std::vector<std::string> fields(const std::string& line) {
    std::vector<std::string> cells(1);
    bool quoted = false;
    for (const char c : line) {
        if (c == '"')
            quoted = !quoted;
        else if (c == ',' && !quoted)
            cells.emplace_back();
        else if (c != '\r')
            cells.back() += c;
    }
    return cells;
}

inline ReferenceTable read_reference(const std::string& file) {
    std::ifstream in(std::string(LACUNA_REFERENCE) + '/' + file);
    if (!in) throw std::runtime_error("no reference file " + file);
    ReferenceTable table;
    for (std::string line; std::getline(in, line);) {
        if (line.empty() || line[0] == '#') continue;
        if (table.names.empty()) {
            table.names = fields(line);
            continue;
        }
        const std::vector<std::string> cells = fields(line);
        std::map<std::string, std::string> row;
        for (std::size_t c = 0; c < table.names.size(); ++c) row[table.names[c]] = c < cells.size() ? cells[c] : "";
        table.rows.push_back(row);
    }
    return table;
}

}  // namespace lacuna::oracle
