// Walks the table of keys (keys_*.h) over a part of a config: fills in the values, and collects every
// fault. One Reader reads one table; `finish` then reports the keys that nothing asked for.
//
// Every walker of the table of keys has these members; what they do is said here once:
//   number, integer, numbers, flag, text, name, choice  one key with one value
//                   (a name is a text that paths can tell from a position)
//   number_or_word  a number, or one word that says how it comes about
//   bound           a number that is left out where it is infinite
//   table           a key that holds a table
//   optional_table  a table that need not be given; `given` says whether it is
//   number_or_table a key that holds a table, or a number that `set` turns into the same values
//   list            a key that holds an array of tables
//   variant         keys that exist only where the word under `tag` is the one for `wanted`
//   check           a rule over several keys, looked at only where they are sound
//   preset          gives a value the default that other values imply
#pragma once

#include <fmt/format.h>

#include <initializer_list>
#include <limits>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <type_traits>
#include <vector>

#include "sim/config/choices.h"
#include "sim/config/node.h"
#include "sim/config/rule.h"

namespace lacuna {

class Reader {
public:
    /// `path` is the dotted path of `table` ("" for the root). Faults are appended to `faults`.
    Reader(const ConfigNode& table, std::string path, std::vector<Fault>& faults)
        : table_(table), path_(std::move(path)), faults_(faults) {}

    void number(const char* key, double& out, const Range& range, const About& about);
    void bound(const char* key, double& out, const About& about) { number(key, out, any_range, about); }
    void number_or_word(const char* key, double& out, bool& is_word, const char* word, const About& about);
    void numbers(const char* key, std::vector<double>& out, const Range& range, const About& about);
    void flag(const char* key, bool& out, const About& about);
    void text(const char* key, std::string& out, const About& about);
    void name(const char* key, std::string& out, const About& about);

    template <class T>
    void integer(const char* key, T& out, std::int64_t low, std::int64_t high, const About& about) {
        if (const std::optional<std::int64_t> value = take_integer(key, low, high, about))
            out = static_cast<T>(*value);
    }

    template <class E>
    void choice(const char* key, E& out, const About& about) {
        std::vector<std::string> words;
        for (const auto& [word, its] : choices<E>) words.emplace_back(word);
        if (misses(key, about)) return report(key, table_.place, "is missing", one_of(words));
        if (const std::optional<std::size_t> which = take_choice(key, words, about))
            out = choices<E>[*which].second;
        if (!faulty_.count(key)) tags_[key] = word_for(out);
    }

    template <class F>
    bool table(const char* key, const About& about, F read) {
        const ConfigEntry* entry = take(key, about);
        if (!entry) return false;
        return read_table(key, entry->value, "a table", about, read);
    }

    template <class F>
    void optional_table(const char* key, bool& given, const About& about, F read) {
        const bool is_given = table(key, about, read);
        if (!dormant_ && is_given) given = true;
    }

    template <class S, class F>
    void number_or_table(const char* key, const Range& range, const About& about, S set, F read) {
        const ConfigEntry* entry = take(key, about);
        if (!entry) return;
        if (!entry->value.is_number()) {
            read_table(key, entry->value, "a number or a table", about, read);
        } else if (in_range(key, entry->value, range)) {
            set(entry->value.number());
        }
    }

    /// Elements with a `name` must have different ones.
    template <class T, class F>
    void list(const char* key, std::vector<T>& out, const About& about, F read) {
        const ConfigEntry* entry = take(key, about);
        if (!entry || !is_list(key, entry->value)) return;
        out.assign(entry->value.elements.size(), T{});
        const std::size_t before = faults_.size();
        for (std::size_t i = 0; i < out.size(); ++i) {
            Reader element(entry->value.elements[i], fmt::format("{}.{}", full(key), i + 1), faults_);
            read(element, out[i]);
            element.finish();
        }
        check_names(key, entry->value);
        if (faults_.size() > before) faulty_.insert(key);
    }

    template <class E, class F>
    void variant(const char* tag, const E& current, E wanted, F read) {
        const bool was_dormant = dormant_;
        const std::string was_reason = reason_;
        if (!dormant_ && (faulty_.count(tag) || current != wanted)) {
            dormant_ = true;
            reason_ = faulty_.count(tag) ? "" : fmt::format("{} = \"{}\"", tag, tags_[tag]);
        }
        read();
        dormant_ = was_dormant;
        reason_ = was_reason;
    }

    template <class P>
    void check(std::initializer_list<const char*> keys, P holds, const std::string& message,
               const std::string& remedy) {
        if (dormant_ || !sound(keys) || holds()) return;
        report_check(*keys.begin(), message, remedy);
    }

    template <class T>
    void preset(T& value, const T& implied) {
        if (!dormant_) value = implied;
    }

    /// True when none of the keys had a fault.
    bool sound(std::initializer_list<const char*> keys) const;

    /// A key that others read.
    void known(const char* key, const About&) { known_.emplace_back(key); }

    /// This table's keys are paths, which others read.
    void known_paths() { free_keys_ = true; }

    void finish();

private:
    std::string full(std::string_view key) const;
    const ConfigEntry* take(const char* key, const About& about);
    std::optional<std::int64_t> take_integer(const char* key, std::int64_t low, std::int64_t high,
                                             const About& about);
    std::optional<std::size_t> take_choice(const char* key, const std::vector<std::string>& words,
                                           const About& about);
    bool in_range(const char* key, const ConfigNode& node, const Range& range);
    bool is_list(const char* key, const ConfigNode& node);
    void check_names(const char* key, const ConfigNode& list);
    void wrong_type(const char* key, const ConfigNode& node, std::string_view wanted, std::string remedy = "");
    void report(const char* key, const Place& place, std::string message, std::string remedy = "");
    void report_check(const char* key, const std::string& message, const std::string& remedy);
    bool misses(const char* key, const About& about);
    static std::string one_of(const std::vector<std::string>& words);
    void report_unasked(const ConfigEntry& entry);

    template <class F>
    bool read_table(const char* key, const ConfigNode& node, std::string_view wanted, const About& about, F read) {
        if (node.kind != ConfigNode::Kind::table) {
            const bool has_example = about.otherwise && about.otherwise[0] == '{';
            wrong_type(key, node, wanted, has_example ? fmt::format("as in {}", about.otherwise) : "");
            return false;
        }
        const std::size_t before = faults_.size();
        Reader inner(node, full(key), faults_);
        read(inner);
        inner.finish();
        if (faults_.size() > before) faulty_.insert(key);
        return true;
    }

    const ConfigNode& table_;
    std::string path_;
    std::vector<Fault>& faults_;
    std::vector<std::string> known_;
    std::map<std::string, std::string, std::less<>> foreign_;  // key -> the word that rules it out
    std::set<std::string, std::less<>> faulty_;
    std::map<std::string, std::string, std::less<>> tags_;
    bool free_keys_ = false;
    bool dormant_ = false;  // inside a variant that does not apply
    std::string reason_;    // why it does not
};

}  // namespace lacuna
