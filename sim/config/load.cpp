#include "sim/config/load.h"

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <optional>

#include "sim/config/path.h"
#include "sim/config/resolve.h"
#include "sim/config/toml_text.h"

namespace lacuna {

namespace {

constexpr const char* start_here = "start from configs/biostimulant-trials.toml";

/// "two-means" of --set design.test=two-means.
bool is_plain_word(std::string_view text) {
    const auto letter = [](char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z'); };
    return !text.empty() && letter(text.front()) && std::all_of(text.begin(), text.end(), [&](char c) {
        return letter(c) || (c >= '0' && c <= '9') || c == '-' || c == '_' || c == ' ';
    });
}

/// The value that `text` spells, if it is one TOML value on one line.
std::optional<ConfigNode> toml_value(const std::string& text, const Place& place) {
    if (text.find('\n') != std::string::npos) return {};
    try {
        return parse_toml("value = " + text, place.source).entries.front().value;
    } catch (const InputError&) {
        return {};
    }
}

ConfigNode override_value(const Override& override, const Place& place) {
    std::optional<ConfigNode> value = toml_value(override.value, place);
    if (!value && is_plain_word(override.value)) {
        value.emplace();
        value->kind = ConfigNode::Kind::string;
        value->text = override.value;
    }
    if (!value) {
        Fault fault{place, override.key, "\"" + printable(override.value) + "\" is not a TOML value",
                    "strings need quotes, as in 'title=\"A field\"'"};
        throw InputError(std::move(fault));
    }
    set_places(*value, place);
    return *value;
}

void apply(const Override& override, ConfigNode& root, std::vector<Fault>& faults) {
    const Place place{"--set " + printable(override.key + "=" + override.value), 0, 0};
    const std::optional<ConfigPath> path = parse_path(override.key);
    if (!path) {
        faults.push_back({place, override.key, "is not a path of keys", "as in journal.*.results_blind=1.0"});
        return;
    }
    try {
        const std::optional<std::string> problem = assign(root, *path, override_value(override, place), place);
        if (problem) faults.push_back({place, override.key, *problem, ""});
    } catch (const InputError& error) {
        faults.insert(faults.end(), error.faults().begin(), error.faults().end());
    }
}

InputError unusable(const std::string& path, const std::string& why) {
    Fault fault;
    fault.place.source = path;
    fault.message = why;
    fault.remedy = start_here;
    return InputError(std::move(fault));
}

}  // namespace

Scenario parse_scenario(std::string_view text, const std::string& source_name,
                        const std::vector<Override>& overrides) {
    ConfigNode root = parse_toml(text, source_name);
    if (root.entries.empty()) throw unusable(source_name, "the config is empty");
    std::vector<Fault> faults;
    for (const Override& override : overrides) apply(override, root, faults);
    Scenario scenario = resolve(root, source_name, faults);
    if (!faults.empty()) throw InputError(std::move(faults));
    return scenario;
}

std::string read_config_text(const std::string& path) {
    std::error_code code;
    if (std::filesystem::is_directory(path, code)) throw unusable(path, "is a directory, not a config");
    errno = 0;
    std::ifstream file(path, std::ios::binary);
    if (!file) throw unusable(path, std::string("cannot be opened: ") + std::strerror(errno));
    std::string text(largest_config + 1, '\0');  // one byte more than is allowed shows that it is too large
    file.read(text.data(), static_cast<std::streamsize>(text.size()));
    if (file.bad()) throw unusable(path, std::string("cannot be read: ") + std::strerror(errno));
    text.resize(static_cast<std::size_t>(file.gcount()));
    return text;
}

Scenario load_scenario(const std::string& path, const std::vector<Override>& overrides) {
    return parse_scenario(read_config_text(path), path, overrides);
}

}  // namespace lacuna
