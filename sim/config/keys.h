// The table of keys, from which the reader, the echo, the differences and the reference all come.
#pragma once

#include "sim/config/keys_field.h"
#include "sim/config/keys_lab.h"
#include "sim/config/keys_rules.h"

namespace lacuna {

/// A config without its regimes.
struct Document {
    std::string title;
    Run run;
    Science science;
    Rules rules;
    StorePlan store;
};

template <class V>
void describe(V& v, StorePlan& store) {
    v.choice("detail", store.detail, "what the outcome file holds besides the sums");
    v.flag("compress", store.compress, "whether its columns are deflated");
}

/// The sections that a regime spells out.
template <class V>
void describe(V& v, Science& science, Rules& rules) {
    v.table("field", "the questions and their effects", [&](auto& inner) { describe(inner, science.field); });
    v.table("design", "the studies", [&](auto& inner) { describe(inner, science.design); });
    describe(v, science.labs, science.design);
    v.table("writing", "what is written up", [&](auto& inner) { describe(inner, rules.writing); });
    describe(v, rules.journals);
    v.table("submission", "where manuscripts go", [&](auto& inner) { describe(inner, rules.submission); });
}

template <class V>
void describe(V& v, Document& document) {
    v.text("title", document.title, About::derived("printed above results", "none"));
    v.table("run", "the run", [&](auto& inner) { describe(inner, document.run); });
    describe(v, document.science, document.rules);
    v.table("store", "the outcome file", [&](auto& inner) { describe(inner, document.store); });
    v.known("regime", "the regimes");
}

}  // namespace lacuna
