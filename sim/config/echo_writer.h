// Walks the table of keys over values and writes them as JSON. The members are described in reader.h.
#pragma once

#include <cmath>
#include <initializer_list>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "sim/config/choices.h"
#include "sim/config/rule.h"

namespace lacuna {

using EchoJson = nlohmann::ordered_json;

class EchoWriter {
public:
    explicit EchoWriter(EchoJson& object) : object_(object) {}

    void number(const char* key, double& x, const Range&, const About&) { object_[key] = x; }
    void bound(const char* key, double& x, const About&) {
        if (std::isfinite(x)) object_[key] = x;
    }
    void number_or_word(const char* key, double& x, bool& is_word, const char* word, const About&) {
        if (is_word)
            object_[key] = word;
        else
            object_[key] = x;
    }
    void numbers(const char* key, std::vector<double>& x, const Range&, const About&) { object_[key] = x; }
    void flag(const char* key, bool& x, const About&) { object_[key] = x; }
    void text(const char* key, std::string& x, const About&) {
        if (!x.empty()) object_[key] = x;
    }
    void name(const char* key, std::string& x, const About&) { object_[key] = x; }

    template <class T>
    void integer(const char* key, T& x, std::int64_t, std::int64_t, const About&) {
        object_[key] = x;
    }
    template <class E>
    void choice(const char* key, E& x, const About&) {
        object_[key] = std::string(word_for(x));
    }
    template <class F>
    void table(const char* key, const About&, F describe_inner) {
        EchoWriter inner(object_[key] = EchoJson::object());
        describe_inner(inner);
    }
    template <class F>
    void optional_table(const char* key, bool& given, const About& about, F describe_inner) {
        if (given) table(key, about, describe_inner);
    }
    template <class S, class F>
    void number_or_table(const char* key, const Range&, const About& about, S, F describe_inner) {
        table(key, about, describe_inner);
    }
    template <class T, class F>
    void list(const char* key, std::vector<T>& x, const About&, F describe_inner) {
        EchoJson& array = object_[key] = EchoJson::array();
        for (T& element : x) {
            array.push_back(EchoJson::object());
            EchoWriter inner(array.back());
            describe_inner(inner, element);
        }
    }
    template <class E, class F>
    void variant(const char*, const E& current, E wanted, F describe_inner) {
        if (current == wanted) describe_inner();
    }
    template <class P>
    void check(std::initializer_list<const char*>, P, const std::string&, const std::string&) {}
    template <class T>
    void preset(T&, const T&) {}
    bool sound(std::initializer_list<const char*>) const { return true; }
    void known(const char*, const About&) {}
    void known_paths() {}

private:
    EchoJson& object_;
};

/// A regime's sections in full, without its name.
EchoJson regime_json(const Regime& regime);

}  // namespace lacuna
