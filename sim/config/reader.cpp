#include "sim/config/reader.h"

#include <algorithm>

#include "sim/config/later.h"
#include "sim/config/nearest.h"

namespace lacuna {

namespace {

bool has_control_character(const std::string& text) {
    return std::any_of(text.begin(), text.end(), [](char c) { return (c >= 0 && c < 0x20) || c == 0x7F; });
}

bool reads_as_position(const std::string& text) {
    return text == "*" || text.find_first_not_of("0123456789") == std::string::npos;
}

}  // namespace

std::string Reader::full(std::string_view key) const {
    return path_.empty() ? printable(key) : path_ + '.' + printable(key);
}

std::string Reader::one_of(const std::vector<std::string>& words) {
    return fmt::format("one of \"{}\"", fmt::join(words, "\", \""));
}

bool Reader::misses(const char* key, const About& about) {
    if (dormant_ || !about.required || table_.find(key)) return false;
    known_.emplace_back(key);
    return true;
}

void Reader::report(const char* key, const Place& place, std::string message, std::string remedy) {
    faults_.push_back({place, full(key), std::move(message), std::move(remedy)});
    faulty_.insert(key);
}

void Reader::report_check(const char* key, const std::string& message, const std::string& remedy) {
    const ConfigEntry* entry = table_.find(key);
    report(key, entry ? entry->value.place : table_.place, message, remedy);
}

void Reader::wrong_type(const char* key, const ConfigNode& node, std::string_view wanted, std::string remedy) {
    report(key, node.place, fmt::format("must be {}, is {}", wanted, quoted(node)), std::move(remedy));
}

bool Reader::sound(std::initializer_list<const char*> keys) const {
    return std::none_of(keys.begin(), keys.end(), [&](const char* key) { return faulty_.count(key) > 0; });
}

const ConfigEntry* Reader::take(const char* key, const About& about) {
    if (dormant_) {
        if (!reason_.empty())
            foreign_.emplace(key, reason_);
        else
            known_.emplace_back(key);
        return nullptr;
    }
    known_.emplace_back(key);
    const ConfigEntry* entry = table_.find(key);
    if (!entry && about.required) report(key, table_.place, "is missing", fmt::format("add it: {}", about.meaning));
    return entry;
}

bool Reader::in_range(const char* key, const ConfigNode& node, const Range& range) {
    if (range.holds(node.number())) return true;
    report(key, node.place, fmt::format("must be {}, is {}", to_string(range), quoted(node)));
    return false;
}

void Reader::number(const char* key, double& out, const Range& range, const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return;
    if (!entry->value.is_number()) return wrong_type(key, entry->value, "a number");
    if (in_range(key, entry->value, range)) out = entry->value.number();
}

void Reader::number_or_word(const char* key, double& out, bool& is_word, const char* word, const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return;
    is_word = entry->value.kind == ConfigNode::Kind::string && entry->value.text == word;
    if (is_word) return;
    if (!entry->value.is_number()) return wrong_type(key, entry->value, fmt::format("a number or \"{}\"", word));
    if (in_range(key, entry->value, any_range)) out = entry->value.number();
}

void Reader::numbers(const char* key, std::vector<double>& out, const Range& range, const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return;
    if (entry->value.kind != ConfigNode::Kind::array) return wrong_type(key, entry->value, "an array of numbers");
    std::vector<double> all;
    for (std::size_t i = 0; i < entry->value.elements.size(); ++i) {
        const ConfigNode& element = entry->value.elements[i];
        if (!element.is_number()) {
            report(key, element.place, fmt::format("entry {} must be a number, is {}", i + 1, quoted(element)));
        } else if (!range.holds(element.number())) {
            report(key, element.place,
                   fmt::format("entry {} must be {}, is {}", i + 1, to_string(range), quoted(element)));
        } else {
            all.push_back(element.number());
        }
    }
    if (!faulty_.count(key)) out = std::move(all);
}

void Reader::flag(const char* key, bool& out, const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return;
    if (entry->value.kind != ConfigNode::Kind::boolean) return wrong_type(key, entry->value, "true or false");
    out = entry->value.boolean;
}

void Reader::text(const char* key, std::string& out, const About& about) {
    constexpr std::size_t longest = 200;
    const ConfigEntry* entry = take(key, about);
    if (!entry) return;
    const ConfigNode& node = entry->value;
    if (node.kind != ConfigNode::Kind::string) return wrong_type(key, node, "a string");
    if (node.text.empty() || node.text.size() > longest) {
        return report(key, node.place, fmt::format("must have 1 to {} bytes, has {}", longest, node.text.size()));
    }
    if (has_control_character(node.text)) return report(key, node.place, "must not hold control characters");
    out = node.text;
}

void Reader::name(const char* key, std::string& out, const About& about) {
    text(key, out, about);
    if (dormant_ || faulty_.count(key) || !table_.find(key) || !reads_as_position(out)) return;
    report(key, table_.find(key)->value.place, fmt::format("must not be a number or *, is \"{}\"", out),
           "paths such as journal.2.accept use these for positions");
}

std::optional<std::int64_t> Reader::take_integer(const char* key, std::int64_t low, std::int64_t high,
                                                 const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return {};
    const ConfigNode& node = entry->value;
    if (node.kind != ConfigNode::Kind::integer) {
        const bool is_whole = node.kind == ConfigNode::Kind::real &&
                              node.real == std::clamp(node.real, -1e15, 1e15) &&
                              node.real == static_cast<double>(static_cast<std::int64_t>(node.real));
        report(key, node.place, fmt::format("must be a whole number, is {}", quoted(node)),
               is_whole ? fmt::format("write {}", static_cast<std::int64_t>(node.real)) : "");
        return {};
    }
    if (node.integer < low || node.integer > high) {
        report(key, node.place, fmt::format("must be between {} and {}, is {}", low, high, node.integer));
        return {};
    }
    return node.integer;
}

std::optional<std::size_t> Reader::take_choice(const char* key, const std::vector<std::string>& words,
                                               const About& about) {
    const ConfigEntry* entry = take(key, about);
    if (!entry) return {};
    const ConfigNode& node = entry->value;
    if (node.kind != ConfigNode::Kind::string) {
        wrong_type(key, node, one_of(words));
        return {};
    }
    const auto found = std::find(words.begin(), words.end(), node.text);
    if (found != words.end()) return static_cast<std::size_t>(found - words.begin());
    const std::string best = nearest(node.text, words);
    report(key, node.place, fmt::format("must be {}, is {}", one_of(words), quoted(node)),
           best.empty() ? "" : fmt::format("did you mean \"{}\"?", best));
    return {};
}

bool Reader::is_list(const char* key, const ConfigNode& node) {
    if (node.kind == ConfigNode::Kind::array) {
        const auto bad = std::find_if(node.elements.begin(), node.elements.end(), [](const ConfigNode& element) {
            return element.kind != ConfigNode::Kind::table;
        });
        if (bad == node.elements.end()) return true;
        wrong_type(key, *bad, "an array of tables");
        return false;
    }
    const bool is_section = node.kind == ConfigNode::Kind::table && !node.written_inline;
    report(key, node.place, fmt::format("must be an array of tables, is {}", quoted(node)),
           is_section ? fmt::format("write [[{0}]] instead of [{0}]", full(key)) : "");
    return false;
}

void Reader::check_names(const char* key, const ConfigNode& list) {
    std::map<std::string_view, std::size_t> first;
    for (std::size_t i = 0; i < list.elements.size(); ++i) {
        const ConfigEntry* name = list.elements[i].find("name");
        if (!name || name->value.kind != ConfigNode::Kind::string) continue;
        const auto [it, is_new] = first.emplace(name->value.text, i + 1);
        if (is_new) continue;
        faults_.push_back(
            {name->value.place, fmt::format("{}.{}.name", full(key), i + 1),
             fmt::format("{} is already the name of {}.{}", quoted(name->value), full(key), it->second),
             "names must differ"});
    }
}

void Reader::report_unasked(const ConfigEntry& entry) {
    const std::string key = full(entry.key);
    if (is_for_later(key)) {
        faults_.push_back({entry.place, key, for_later_message, for_later_remedy});
        return;
    }
    const auto foreign = foreign_.find(entry.key);
    if (foreign != foreign_.end()) {
        faults_.push_back({entry.place, key, fmt::format("does not go with {}", foreign->second),
                           fmt::format("known: {}", fmt::join(known_, ", "))});
        return;
    }
    constexpr std::size_t enough = 1000;  // a file of garbage can hold a million keys
    faults_.push_back(
        {entry.place, key, "is not a key", faults_.size() < enough ? suggestion(entry.key, known_) : ""});
}

void Reader::finish() {
    if (free_keys_) return;
    for (const ConfigEntry& entry : table_.entries) {
        if (std::find(known_.begin(), known_.end(), entry.key) == known_.end()) report_unasked(entry);
    }
}

}  // namespace lacuna
