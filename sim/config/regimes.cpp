#include "sim/config/regimes.h"

#include <fmt/format.h>

#include <algorithm>
#include <array>

#include "sim/config/keys_regime.h"
#include "sim/config/reader.h"

namespace lacuna {

namespace {

constexpr std::array<std::string_view, 4> fixed_sections{"title", "run", "store", "regime"};

bool same_fault(const Fault& a, const Fault& b) {
    return a.place.source == b.place.source && a.place.line == b.place.line && a.place.column == b.place.column &&
           a.key == b.key && a.message == b.message;
}

bool same_place(const Place& a, const Place& b) {
    return a.source == b.source && a.line == b.line && a.column == b.column;
}

/// Whether the place is one of the node's own or of those below it.
bool holds_place(const ConfigNode& node, const Place& place) {
    if (same_place(node.place, place)) return true;
    return std::any_of(
               node.entries.begin(), node.entries.end(),
               [&](const ConfigEntry& e) { return same_place(e.place, place) || holds_place(e.value, place); }) ||
           std::any_of(node.elements.begin(), node.elements.end(),
                       [&](const ConfigNode& element) { return holds_place(element, place); });
}

/// A section ([writing]) or an element of an array of sections (journal.*), whose keys a `set` may
/// change one by one even when it is written in braces. Any other table in braces is a value.
bool is_section(const ConfigPath& path) {
    if (path.parts.size() == 1) return true;
    return path.parts.size() == 2 && (path.parts[0] == "lab" || path.parts[0] == "journal");
}

class ChangeList {
public:
    ChangeList(std::string key, std::vector<Fault>& faults) : key_(std::move(key)), faults_(faults) {}

    void add(const ConfigNode& table, const ConfigPath& below) {
        for (const ConfigEntry& entry : table.entries) {
            const std::optional<ConfigPath> own = parse_path(entry.key);
            if (!own) {
                faults_.push_back({entry.place, key_, fmt::format("\"{}\" is not a path of keys", entry.key),
                                   "as in \"journal.*.results_blind\""});
                continue;
            }
            ConfigPath path = below;
            path.parts.insert(path.parts.end(), own->parts.begin(), own->parts.end());
            add_entry(entry, path);
        }
    }
    std::vector<Change> take() { return std::move(changes_); }

private:
    void add_entry(const ConfigEntry& entry, const ConfigPath& path) {
        const std::string& section = path.parts.front();
        if (std::find(fixed_sections.begin(), fixed_sections.end(), section) != fixed_sections.end()) {
            faults_.push_back({entry.place, key_, fmt::format("a regime cannot set {}", to_string(path)),
                               "title, run, store and regime hold for all regimes"});
        } else if (entry.value.kind == ConfigNode::Kind::table &&
                   (!entry.value.written_inline || is_section(path))) {
            add(entry.value, path);
        } else {
            changes_.push_back({path, entry.place, entry.value});
        }
    }

    std::string key_;
    std::vector<Fault>& faults_;
    std::vector<Change> changes_;
};

/// The change that a fault elsewhere in the config is put down to: the last of its section, or the last.
const Change& cause(const Fault& fault, const RegimeText& regime) {
    const std::string section = fault.key.substr(0, fault.key.find('.'));
    const auto found = std::find_if(regime.changes.rbegin(), regime.changes.rend(),
                                    [&](const Change& change) { return change.path.parts.front() == section; });
    return found == regime.changes.rend() ? regime.changes.back() : *found;
}

}  // namespace

std::vector<RegimeText> read_regimes(const ConfigNode& root, std::vector<Fault>& faults) {
    Reader reader(root, "", faults);
    std::vector<RegimeText> regimes;
    std::vector<RegimeEntry> entries;
    reader.list("regime", entries, "the regimes", [](auto& inner, RegimeEntry& entry) { describe(inner, entry); });
    const ConfigEntry* list = root.find("regime");
    for (std::size_t i = 0; i < entries.size(); ++i) {
        const ConfigNode& node = list->value.elements[i];
        const ConfigEntry* set = node.find("set");
        ChangeList changes(fmt::format("regime.{}.set", i + 1), faults);
        if (set && set->value.kind == ConfigNode::Kind::table) changes.add(set->value, {});
        regimes.push_back({entries[i].name, node.place, changes.take()});
    }
    if (list && list->value.kind == ConfigNode::Kind::array && list->value.elements.empty()) {
        faults.push_back({list->value.place, "regime", "must hold at least one regime", "or leave it out"});
    }
    constexpr std::size_t most_regimes = 256;
    if (regimes.size() > most_regimes) {
        faults.push_back(
            {list->value.place, "regime", fmt::format("must hold at most {} regimes", most_regimes), ""});
        regimes.clear();
    }
    if (!list) regimes.push_back({"rules as given", root.place, {}});
    return regimes;
}

ConfigNode changed(const ConfigNode& root, const RegimeText& regime, std::vector<Fault>& faults) {
    ConfigNode copy = root;
    for (const Change& change : regime.changes) {
        if (const std::optional<std::string> problem = assign(copy, change.path, change.value, change.key_place)) {
            faults.push_back({change.key_place, to_string(change.path), *problem, ""});
        }
    }
    return copy;
}

std::vector<Fault> faults_of_regime(const std::vector<Fault>& found, const std::vector<Fault>& given,
                                    const RegimeText& regime) {
    std::vector<Fault> own;
    for (Fault fault : found) {
        const bool was_there =
            std::any_of(given.begin(), given.end(), [&](const Fault& other) { return same_fault(fault, other); });
        if (was_there || regime.changes.empty()) continue;
        const bool at_change = std::any_of(regime.changes.begin(), regime.changes.end(), [&](const Change& change) {
            return same_place(change.key_place, fault.place) || holds_place(change.value, fault.place);
        });
        if (!at_change) fault.place = cause(fault, regime).key_place;
        fault.message = fmt::format("under regime \"{}\": {}", regime.name, fault.message);
        own.push_back(std::move(fault));
    }
    return own;
}

}  // namespace lacuna
