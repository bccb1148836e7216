// Counting: columns of studies, manuscripts and questions in, sufficient statistics out.
#pragma once

#include <cstdint>
#include <map>
#include <vector>

#include "sim/tally/layout.h"
#include "sim/tally/study_facts.h"

namespace lacuna {

/// A question's studies and findings, by Status.
struct QuestionCount {
    bool real = false;  // and not negligible
    std::uint32_t studies[3] = {};
    std::uint32_t findings[3] = {};
};

/// The counts of one literature (or a part of it) under one regime. Everything is counted in whole
/// numbers, so parts merge to the same bits in any order.
class Tally {
public:
    Tally(std::size_t kinds, Findings findings, EffectScale scale);

    /// Every study once. `status`: a Status each.
    void add_studies(const StudyFacts& facts, const std::uint8_t* status);

    /// One manuscript of a question that is real (and not negligible) or not.
    void add_manuscript(bool real, ManuscriptClass manuscript_class, Status status) {
        ++manuscripts_[static_cast<std::size_t>(status)][real][static_cast<std::size_t>(manuscript_class)];
    }

    /// Questions first, first + 1, ... with all their studies; or, where their studies come in `parts`,
    /// with those of one part: they count once all parts are in, added here or merged.
    void add_questions(std::uint64_t first, std::uint64_t parts, const std::vector<QuestionCount>& counts);

    /// Takes manuscripts and questions from the study counts added so far, instead of add_manuscript
    /// and add_questions: right where every manuscript is one study and every question has at most one.
    void count_studies_as_manuscripts();
    void count_studies_as_questions();

    void merge(const Tally& part);
    void clear();

    /// The row of sufficient statistics, in the order of Layout(kinds).
    std::vector<double> row() const;

private:
    __extension__ using Wide = __int128;
    struct Cell {
        std::uint64_t count = 0, participants = 0;        // all studies
        Wide estimate = 0, abs_estimate = 0, effect = 0;  // studies of real questions, units of the scale
    };
    struct Effects {
        std::int64_t estimate = 0, abs_estimate = 0, effect = 0, unused = 0;
    };
    static constexpr std::size_t lanes = 4;  // copies of the scratch sums, so that additions overlap

    /// Questions of which some parts are still to come.
    struct OpenQuestions {
        std::uint64_t parts, parts_missing;
        std::vector<QuestionCount> counts;
    };
    void add_question(const QuestionCount& count);
    void join(std::uint64_t first, std::uint64_t parts, std::uint64_t parts_given,
              const std::vector<QuestionCount>& counts);
    void count_studies(const StudyFacts& facts, const std::uint8_t* status);
    void sum_effects(const StudyFacts& facts, const std::uint8_t* status);
    static void add(const Cell& from, Cell& to);
    const Cell& total(std::size_t status, std::size_t cell) const { return sums_[status * cells_ + cell]; }
    bool finds(std::size_t cell) const { return is_finding(Claim(cell % 4), findings_); }
    struct Octaves;
    double median(const Octaves& octaves, std::size_t lowest_status, bool findings_only) const;
    void put_medians(const Layout& layout, std::vector<double>& row) const;
    void put_studies(const Layout& layout, std::vector<double>& row) const;
    void put_manuscripts_and_questions(const Layout& layout, std::vector<double>& row) const;

    std::size_t kinds_, cells_;
    Findings findings_;
    EffectScale scale_;
    std::vector<Cell> sums_;                   // [status][cell]
    std::vector<std::uint64_t> packed_;        // [lane][status][cell], scratch of count_studies
    std::vector<Effects> effects_;             // [lane][status][cell], scratch of sum_effects
    std::vector<std::uint32_t> ratios_;        // [status][finding][bin]
    std::uint64_t manuscripts_[3][2][3] = {};  // [status][real][class]
    std::uint64_t questions_[3][2][3] = {};    // [scope][real][standing]
    std::map<std::uint64_t, OpenQuestions> open_;  // by their first question
    bool manuscripts_from_studies_ = false, questions_from_studies_ = false;
};

}  // namespace lacuna
