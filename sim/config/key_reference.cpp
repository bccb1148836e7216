#include "sim/config/key_reference.h"

#include <fmt/format.h>

#include <vector>

#include "sim/config/keys.h"
#include "sim/config/keys_regime.h"

namespace lacuna {

namespace {

struct Row {
    std::string key, takes, otherwise, meaning;
};

/// Walks the table of keys over default values and lists them. The members are described in reader.h.
class Lister {
public:
    Lister(std::string path, std::vector<Row>& rows) : path_(std::move(path)), rows_(rows) {}

    void number(const char* key, double& x, const Range& range, const About& about) {
        add(key, to_string(range) == "finite" ? "number" : "number, " + to_string(range), fmt::format("{}", x),
            about);
    }
    void bound(const char* key, double&, const About& about) { add(key, "number", "", about); }
    void number_or_word(const char* key, double& x, bool&, const char* word, const About& about) {
        add(key, fmt::format("number, \"{}\"", word), fmt::format("{}", x), about);
    }
    void numbers(const char* key, std::vector<double>&, const Range& range, const About& about) {
        add(key, "numbers, " + to_string(range), "[]", about);
    }
    void flag(const char* key, bool& x, const About& about) {
        add(key, "true, false", x ? "true" : "false", about);
    }
    void text(const char* key, std::string&, const About& about) { add(key, "string", "", about); }
    void name(const char* key, std::string&, const About& about) { add(key, "string", "", about); }

    template <class T>
    void integer(const char* key, T& x, std::int64_t low, std::int64_t high, const About& about) {
        add(key, fmt::format("{} to {}", low, high), fmt::format("{}", x), about);
    }
    template <class E>
    void choice(const char* key, E& x, const About& about) {
        std::string words;
        for (const auto& [word, its] : choices<E>)
            words += fmt::format("{}\"{}\"", words.empty() ? "" : ", ", word);
        add(key, words, fmt::format("\"{}\"", word_for(x)), about);
    }
    void distribution(const char* key, Distribution& x, const About& about) {
        add(key, "distribution", fmt::format("{}", x.first), about);
    }
    void distribution_keys() { add("*", "the keys of a distribution", "as there", "how sizes are drawn"); }
    template <class F>
    void table(const char* key, const About& about, F describe_inner) {
        if (!path_.empty()) add(key, "table", "", about);
        Lister inner(full(key), rows_);
        describe_inner(inner);
    }
    template <class F>
    void optional_table(const char* key, bool&, const About& about, F describe_inner) {
        table(key, about, describe_inner);
    }
    template <class S, class F>
    void number_or_table(const char* key, const Range& range, const About& about, S, F describe_inner) {
        add(key, fmt::format("number, {}, or table", to_string(range)), "1", about);
        Lister inner(full(key), rows_);
        describe_inner(inner);
    }
    template <class T, class F>
    void list(const char* key, std::vector<T>&, const About& about, F describe_inner) {
        add(key, "[[" + full(key) + "]]", "", about);
        Lister inner(full(key), rows_);
        T element{};
        describe_inner(inner, element);
    }
    template <class E, class F>
    void variant(const char* tag, const E&, E wanted, F describe_inner) {
        const std::string before = condition_;
        condition_ += fmt::format("{}{} = \"{}\"", before.empty() ? "" : ", ", tag, word_for(wanted));
        describe_inner();
        condition_ = before;
    }
    template <class P>
    void check(std::initializer_list<const char*>, P, const std::string&, const std::string&) {}
    template <class T>
    void preset(T&, const T&) {}
    bool sound(std::initializer_list<const char*>) const { return false; }
    void known(const char*, const About&) {}
    void known_paths() {}

private:
    std::string full(const char* key) const { return path_.empty() ? key : path_ + '.' + key; }

    void add(const char* key, std::string takes, std::string otherwise, const About& about) {
        if (about.required)
            otherwise = "required";
        else if (about.otherwise)
            otherwise = about.otherwise;
        std::string meaning = about.meaning;
        if (!condition_.empty()) meaning += fmt::format(" [{}]", condition_);
        rows_.push_back({full(key), std::move(takes), std::move(otherwise), std::move(meaning)});
    }

    std::string path_;
    std::vector<Row>& rows_;
    std::string condition_;
};

std::vector<Row> all_rows() {
    std::vector<Row> rows;
    Lister lister("", rows);
    Document document;
    describe(lister, document);
    std::vector<RegimeEntry> regimes;
    lister.list("regime", regimes, About::derived("sets of rules", "one, \"rules as given\""),
                [](auto& inner, RegimeEntry& regime) { describe(inner, regime); });
    Lister of_distribution("distribution", rows);
    Distribution distribution;
    describe(of_distribution, distribution);
    return rows;
}

}  // namespace

std::string key_reference() {
    std::string text;
    for (const Row& row : all_rows()) {
        text += fmt::format("{}: {}; default: {}. {}\n", row.key, row.takes, row.otherwise, row.meaning);
    }
    return text;
}

}  // namespace lacuna
