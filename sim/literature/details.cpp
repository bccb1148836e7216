#include "sim/literature/details.h"

#include <algorithm>
#include <cmath>

#include "sim/design/design.h"
#include "sim/design/p_values.h"

namespace lacuna {

namespace {

/// Writes the columns of a batch one after the other, `rows` values each.
class Filler {
public:
    Filler(Batch& batch, std::size_t rows) : batch_(batch), rows_(rows) { batch.rows += rows; }

    template <class Value>
    Filler& next(Value value) {
        std::visit(
            [&](auto& column) {
                using T = typename std::decay_t<decltype(column)>::value_type;
                const std::size_t begin = column.size();
                column.resize(begin + rows_);
                for (std::size_t i = 0; i < rows_; ++i) column[begin + i] = static_cast<T>(value(i));
            },
            batch_.columns[at_++]);
        return *this;
    }

private:
    Batch& batch_;
    std::size_t rows_;
    std::size_t at_ = 0;
};

void add_questions(std::size_t science, const Conducted& block, Batch& batch) {
    const Questions& questions = block.questions;
    Filler(batch, questions.truth.size())
        .next([&](std::size_t) { return science; })
        .next([&](std::size_t) { return block.literature; })
        .next([&](std::size_t q) { return questions.first + q; })
        .next([&](std::size_t q) { return questions.real[q]; })
        .next([&](std::size_t q) { return questions.truth[q]; })
        .next([&](std::size_t q) { return questions.effect[q]; });
}

void add_labs(const PreparedScenario& prepared, std::size_t science, const Roster& roster, const Conducted& block,
              Batch& batch) {
    const std::vector<LabKind>& kinds = prepared.sciences[science].science.labs;
    std::vector<std::size_t> code;  // of each kind among the names of all sciences
    for (const LabKind& kind : kinds) code.push_back(prepared.kind_code(kind.name));
    Filler(batch, prepared.sciences[science].science.field.labs)
        .next([&](std::size_t) { return science; })
        .next([&](std::size_t) { return block.literature; })
        .next([&](std::size_t i) { return i; })
        .next([&](std::size_t i) { return code[roster.kind[i]]; })
        .next([&](std::size_t i) { return roster.runs[i]; });
}

void add_manuscripts(const PreparedScenario& prepared, std::size_t regime, const Conducted& block,
                     const Outcome& outcome, Batch& batch) {
    const PreparedRules& rules = prepared.rules[regime];
    const Lines& lines = block.lines;
    const Studies& studies = block.studies;
    const bool by_study = rules.unit == Unit::study;
    std::vector<std::int32_t> number(by_study ? studies.claim.size() : 0);  // of a study in its line
    for (std::size_t r = 0; by_study && r + 1 < studies.round.size(); ++r) {
        std::fill(number.begin() + std::ptrdiff_t(studies.round[r]),
                  number.begin() + std::ptrdiff_t(studies.round[r + 1]), static_cast<std::int32_t>(r));
    }
    const auto line = [&](std::size_t m) { return by_study ? studies.line[m] : static_cast<std::uint32_t>(m); };
    const auto findings = [&](std::size_t m) -> unsigned {
        if (by_study) return is_finding(Claim(studies.claim[m]), rules.findings);
        return lines.positive[m] + (rules.findings == Findings::either ? lines.reversed[m] : 0u);
    };
    Filler(batch, outcome.manuscript_class.size())
        .next([&](std::size_t) { return regime; })
        .next([&](std::size_t) { return block.literature; })
        .next([&](std::size_t m) { return block.questions.first + lines.question[line(m)]; })
        .next([&](std::size_t m) { return lines.lab[line(m)]; })
        .next([&](std::size_t m) { return lines.first + line(m); })
        .next([&](std::size_t m) { return by_study ? number[m] : -1; })
        .next([&](std::size_t m) { return by_study ? 1u : unsigned{lines.studies[m]}; })
        .next(findings)
        .next([&](std::size_t m) { return outcome.manuscript_class[m]; })
        .next([&](std::size_t m) { return outcome.manuscript_status[m]; })
        .next([&](std::size_t m) { return prepared.journal_codes[regime][outcome.journal[m]]; })
        .next([&](std::size_t m) { return outcome.attempts[m]; });
}

/// The studies of a block in the order of lines: entry and number in the line.
struct Ordered {
    std::vector<std::size_t> entry;
    std::vector<std::int32_t> number;
};

Ordered by_line(const Conducted& block) {
    const Studies& studies = block.studies;
    std::vector<std::size_t> start(block.lines.studies.size() + 1, 0);
    for (std::size_t l = 0; l < block.lines.studies.size(); ++l) start[l + 1] = start[l] + block.lines.studies[l];
    Ordered order{std::vector<std::size_t>(studies.claim.size()), std::vector<std::int32_t>(studies.claim.size())};
    for (std::size_t r = 0; r + 1 < studies.round.size(); ++r) {
        for (std::size_t s = studies.round[r]; s < studies.round[r + 1]; ++s) {
            order.entry[start[studies.line[s]] + r] = s;
            order.number[start[studies.line[s]] + r] = static_cast<std::int32_t>(r);
        }
    }
    return order;
}

/// Of the reported estimate. Where effects are in units of the planned one, so is the noncentrality.
double standard_error(const PreparedScience& science, const Conducted& block, std::size_t s) {
    const Studies& studies = block.studies;
    if (!studies.standard_error.empty()) return studies.standard_error[s];
    const std::size_t kind = block.lines.kind.empty() ? 0 : block.lines.kind[studies.line[s]];
    const double unit = science.table.kinds[kind].in_planned_effects ? std::fabs(studies.planned[s]) : 1.0;
    TestPlan plan = science.table.plan(studies.row[s]);
    plan.noncentrality /= unit;
    return reported_standard_error(science.science.design, plan, studies.estimate[s]);
}

void add_studies(const PreparedScenario& prepared, std::size_t science, const Conducted& block,
                 const std::vector<Outcome>& outcomes, Batch& batch) {
    const Studies& studies = block.studies;
    const Lines& lines = block.lines;
    const PreparedScience& its = prepared.sciences[science];
    const TestTable& table = its.table;
    const Design& design = its.science.design;
    const Ordered order = by_line(block);
    const auto at = [&](std::size_t i) { return order.entry[i]; };
    const auto line = [&](std::size_t i) { return studies.line[at(i)]; };
    const auto row = [&](std::size_t i) { return studies.row[at(i)]; };
    const std::vector<double> p = p_values(design, table, studies);
    Filler filler(batch, studies.claim.size());
    filler.next([&](std::size_t) { return science; })
        .next([&](std::size_t) { return block.literature; })
        .next([&](std::size_t i) { return block.questions.first + lines.question[line(i)]; })
        .next([&](std::size_t i) { return lines.lab[line(i)]; })
        .next([&](std::size_t i) { return lines.first + line(i); })
        .next([&](std::size_t i) { return order.number[i]; })
        .next([&](std::size_t i) { return table.n1[row(i)]; })
        .next([&](std::size_t i) { return table.n2[row(i)]; })
        .next([&](std::size_t i) { return block.questions.effect[lines.question[line(i)]]; })
        .next([&](std::size_t i) { return studies.theta[at(i)]; })
        .next([&](std::size_t i) { return studies.estimate[at(i)]; })
        .next([&](std::size_t i) { return corrected_estimate(design, table.plan(row(i)), studies.estimate[at(i)]); })
        .next([&](std::size_t i) { return standard_error(its, block, at(i)); })
        .next([&](std::size_t i) { return studies.statistic[at(i)]; })
        .next([&](std::size_t i) { return studies.df.empty() ? table.df[row(i)] : studies.df[at(i)]; })
        .next([&](std::size_t i) { return p[at(i)]; })
        .next([&](std::size_t i) { return studies.looks.empty() ? 1 : studies.looks[at(i)]; })
        .next([&](std::size_t i) { return studies.stopped.empty() ? 0 : studies.stopped[at(i)]; })
        .next([&](std::size_t i) { return block.questions.truth[lines.question[line(i)]]; })
        .next([&](std::size_t i) { return studies.claim[at(i)]; });
    for (std::size_t r = 0; r < outcomes.size(); ++r) {
        const bool shared = prepared.groups.science_of[r] == science;
        filler.next([&](std::size_t i) { return shared ? outcomes[r].status[at(i)] : status_names.size(); });
    }
}

}  // namespace

void add_details(const PreparedScenario& prepared, std::size_t science, const Roster& roster,
                 const Conducted& block, const std::vector<Outcome>& outcomes,
                 std::map<std::string, Batch>& details) {
    if (block.part == 0) add_questions(science, block, details.at("questions"));
    if (block.part == 0 && block.questions.first == 0) add_labs(prepared, science, roster, block, details.at("labs"));
    for (std::size_t r = 0; r < outcomes.size(); ++r) {
        if (prepared.groups.science_of[r] == science) {
            add_manuscripts(prepared, r, block, outcomes[r], details.at("manuscripts"));
        }
    }
    const auto studies = details.find("studies");
    if (studies != details.end()) add_studies(prepared, science, block, outcomes, studies->second);
}

}  // namespace lacuna
