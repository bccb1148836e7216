// The only file that includes toml++. Its assertions are off because version 3.3.0 fails them on broken
// text that it then reports in good order, and it is taken as headers because the distribution's
// compiled library was built with them.
#ifndef NDEBUG
#define NDEBUG
#endif
#undef TOML_HEADER_ONLY
#undef TOML_SHARED_LIB
#define TOML_HEADER_ONLY 1
#define TOML_EXCEPTIONS 1
#define TOML_ENABLE_FORMATTERS 0

#include "sim/config/toml_text.h"

#include <fmt/format.h>
#include <toml++/toml.h>

#include <algorithm>
#include <sstream>

#include "sim/config/toml_scan.h"

namespace lacuna {

namespace {

class Copier {
public:
    explicit Copier(const std::string& source) : source_(source) {}

    ConfigNode copy(const toml::node& from) const {
        ConfigNode node;
        node.place = place(from.source());
        if (const toml::table* table = from.as_table())
            copy_table(*table, node);
        else if (const toml::array* array = from.as_array())
            copy_array(*array, node);
        else
            copy_value(from, node);
        return node;
    }

private:
    Place place(const toml::source_region& region) const {
        return {source_, static_cast<int>(region.begin.line), static_cast<int>(region.begin.column)};
    }

    void copy_table(const toml::table& table, ConfigNode& node) const {
        node.kind = ConfigNode::Kind::table;
        node.written_inline = table.is_inline();
        for (const auto& [key, value] : table) {
            node.entries.push_back({std::string(key.str()), place(key.source()), copy(value)});
        }
        std::stable_sort(node.entries.begin(), node.entries.end(), [](const ConfigEntry& a, const ConfigEntry& b) {
            return std::pair(a.place.line, a.place.column) < std::pair(b.place.line, b.place.column);
        });
    }

    void copy_array(const toml::array& array, ConfigNode& node) const {
        node.kind = ConfigNode::Kind::array;
        node.elements.reserve(array.size());
        for (const toml::node& element : array) node.elements.push_back(copy(element));
    }

    static void copy_value(const toml::node& from, ConfigNode& node) {
        if (const auto* text = from.as_string()) {
            node.kind = ConfigNode::Kind::string;
            node.text = text->get();
        } else if (const auto* integer = from.as_integer()) {
            node.kind = ConfigNode::Kind::integer;
            node.integer = integer->get();
        } else if (const auto* real = from.as_floating_point()) {
            node.kind = ConfigNode::Kind::real;
            node.real = real->get();
        } else if (const auto* boolean = from.as_boolean()) {
            node.kind = ConfigNode::Kind::boolean;
            node.boolean = boolean->get();
        } else {
            node.kind = ConfigNode::Kind::date;
        }
    }

    const std::string& source_;
};

InputError refused(const Place& place, const std::string& message, const std::string& remedy) {
    Fault fault{place, "", message, remedy};
    return InputError(std::move(fault));
}

}  // namespace

ConfigNode parse_toml(std::string_view text, const std::string& source) {
    if (text.size() > largest_config) {
        throw refused({source, 0, 0}, "is larger than 4 MB, which no config is", "is this the right file?");
    }
    if (std::optional<Fault> fault = scan_toml(text, source)) throw InputError(*fault);
    try {
        const toml::table table = toml::parse(text);
        ConfigNode root = Copier(source).copy(table);
        root.place = {source, 1, 1};
        return root;
    } catch (const toml::parse_error& error) {
        const toml::source_position at = error.source().begin;
        constexpr std::string_view opening = "Error while parsing ";
        std::string_view what = error.description();
        if (what.substr(0, opening.size()) == opening) what.remove_prefix(opening.size());
        throw refused({source, static_cast<int>(at.line), static_cast<int>(at.column)},
                      "is not TOML: " + std::string(what), "");
    }
}

}  // namespace lacuna
