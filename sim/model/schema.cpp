#include "sim/model/schema.h"

#include <algorithm>

namespace lacuna {

namespace {

template <std::size_t N>
std::vector<std::string> labels(const std::array<std::string_view, N>& names) {
    return {names.begin(), names.end()};
}

std::vector<ColumnSpec> where() {
    return {{"science", ColumnType::u8, "code", "which science (see /regimes/science) the row belongs to", {}},
            {"literature", ColumnType::i32, "code", "literature number, from 0", {}}};
}

TableSpec questions_table() {
    TableSpec table{"questions", where()};
    table.columns.push_back({"question", ColumnType::i32, "code", "question number within the literature", {}});
    table.columns.push_back({"real", ColumnType::u8, "1", "1: drawn as a real effect", {}});
    table.columns.push_back({"truth", ColumnType::u8, "1",
                             "null: not real, or real and negligible; otherwise by the sign of the effect",
                             labels(truth_names)});
    table.columns.push_back({"effect", ColumnType::f64, "effect", "true effect of the question", {}});
    return table;
}

TableSpec labs_table(const std::vector<std::string>& kinds) {
    TableSpec table{"labs", where()};
    table.columns.push_back({"lab", ColumnType::i32, "code", "lab number within the literature", {}});
    table.columns.push_back({"kind", ColumnType::u8, "1", "lab kind", kinds});
    table.columns.push_back({"lines", ColumnType::i32, "lines", "lines the lab runs", {}});
    return table;
}

TableSpec manuscripts_table(const std::vector<std::string>& regimes, const std::vector<std::string>& journals) {
    TableSpec table{"manuscripts", {}};
    table.columns = {{"regime", ColumnType::u8, "1", "regime", regimes},
                     {"literature", ColumnType::i32, "code", "literature number, from 0", {}},
                     {"question", ColumnType::i32, "code", "question number within the literature", {}},
                     {"lab", ColumnType::i32, "code", "lab number within the literature", {}},
                     {"line", ColumnType::i32, "code", "line number within the literature", {}},
                     {"study",
                      ColumnType::i32,
                      "code",
                      "number of the study in its line; -1 when the manuscript is a whole line",
                      {}},
                     {"studies", ColumnType::i32, "studies", "studies of the line or study", {}},
                     {"findings", ColumnType::i32, "studies", "of them with a finding", {}},
                     {"class", ColumnType::u8, "1",
                      "all find in one direction; some do, or they disagree; none does", labels(class_names)},
                     {"status", ColumnType::u8, "1", "how far the manuscript got", labels(status_names)},
                     {"journal", ColumnType::u8, "1", "journal that published it", journals},
                     {"attempts", ColumnType::u8, "journals", "journals that judged it", {}}};
    return table;
}

TableSpec studies_table(const std::vector<std::string>& regimes) {
    TableSpec table{"studies", where()};
    const std::vector<ColumnSpec> own{
        {"question", ColumnType::i32, "code", "question number within the literature", {}},
        {"lab", ColumnType::i32, "code", "lab number within the literature", {}},
        {"line", ColumnType::i32, "code", "line number within the literature", {}},
        {"study", ColumnType::i32, "code", "number of the study in its line, from 0", {}},
        {"n1", ColumnType::i32, "participants", "size of the first (or only) group; of each in several-means", {}},
        {"n2", ColumnType::i32, "participants", "size of the second group; 0 in designs with one", {}},
        {"question_effect", ColumnType::f64, "effect", "true effect of the question", {}},
        {"true_effect", ColumnType::f64, "effect", "true effect of the study", {}},
        {"estimate", ColumnType::f64, "effect", "effect as reported", {}},
        {"hedges_g",
         ColumnType::f64,
         "effect",
         "estimate with the exact small-sample correction; equal to the estimate where none applies",
         {}},
        {"standard_error", ColumnType::f64, "effect", "standard error of the estimate, as reported", {}},
        {"statistic", ColumnType::f64, "1", "t, z or F", {}},
        {"df", ColumnType::f64, "1", "degrees of freedom (of an F's denominator); infinite for z", {}},
        {"p", ColumnType::f64, "1", "of the design's test, one- or two-sided; with interim looks as if there were none", {}},
        {"looks", ColumnType::i32, "looks", "looks at the data before the study ended, the last included", {}},
        {"optional_stopping", ColumnType::u8, "1", "1: tested after every batch, and stopped when significant", {}},
        {"truth", ColumnType::u8, "1", "truth of the question", labels(truth_names)},
        {"claim", ColumnType::u8, "1", "what the study says", labels(claim_names)}};
    table.columns.insert(table.columns.end(), own.begin(), own.end());
    for (std::size_t r = 0; r < regimes.size(); ++r) {
        std::vector<std::string> names = labels(status_names);
        names.push_back("other_science");
        table.columns.push_back({"status_" + std::to_string(r + 1), ColumnType::u8, "1",
                                 "how far the study got under regime '" + regimes[r] + "'", names});
    }
    return table;
}

void add_once(std::vector<std::string>& names, const std::string& name) {
    if (std::find(names.begin(), names.end(), name) == names.end()) names.push_back(name);
}

}  // namespace

ScienceGroups group_by_science(const std::vector<Regime>& regimes) {
    ScienceGroups groups;
    for (const Regime& regime : regimes) {
        std::size_t s = 0;
        while (s < groups.firsts.size() && !(regimes[groups.firsts[s]].science == regime.science)) ++s;
        if (s == groups.firsts.size()) groups.firsts.push_back(groups.science_of.size());
        groups.science_of.push_back(s);
    }
    return groups;
}

std::vector<std::string> all_kind_names(const Scenario& scenario) {
    std::vector<std::string> names;
    for (const Regime& regime : scenario.regimes) {
        for (const LabKind& kind : regime.science.labs) add_once(names, kind.name);
    }
    return names;
}

std::vector<std::string> all_journal_names(const Scenario& scenario) {
    std::vector<std::string> names{"none"};
    for (const Regime& regime : scenario.regimes) {
        for (const Journal& journal : regime.rules.journals) add_once(names, journal.name);
    }
    return names;
}

std::vector<TableSpec> detail_tables(const Scenario& scenario) {
    if (scenario.store.detail == Detail::literatures) return {};
    std::vector<std::string> regimes;
    for (const Regime& regime : scenario.regimes) regimes.push_back(regime.name);
    std::vector<TableSpec> tables{questions_table(), labs_table(all_kind_names(scenario)),
                                  manuscripts_table(regimes, all_journal_names(scenario))};
    if (scenario.store.detail == Detail::studies) tables.push_back(studies_table(regimes));
    return tables;
}

}  // namespace lacuna
