// The columns of one block of a literature: what is true, what was done, and what is reported are
// three types. A block holds a range of questions with the lines that work on them.
#pragma once

#include <cstdint>
#include <vector>

namespace lacuna {

/// What is true of the block's questions; one entry per question.
struct Questions {
    std::uint64_t first = 0;          // question number of entry 0
    std::vector<std::uint8_t> real;   // 1: drawn as real
    std::vector<std::uint8_t> truth;  // a Truth: real, and not negligible
    std::vector<double> effect;
    std::vector<double> planned;      // effect that studies are planned for; empty when none plans for true ones
};

/// The block's lines; one entry per line, lines of a question one after the other.
struct Lines {
    std::uint64_t first = 0;              // line number of entry 0
    std::vector<std::uint32_t> question;  // entry in Questions
    bool one_each = false;                // line i works on question i, for all of them
    std::vector<std::uint32_t> lab;       // lab number; empty when nobody asks
    std::vector<std::uint8_t> kind;       // lab kind; empty when there is one
    std::vector<std::uint16_t> studies;   // how many the line holds
    std::vector<std::uint16_t> positive;  // of them positive
    std::vector<std::uint16_t> reversed;  // of them reversed
};

/// The block's studies, in rounds: first every line's study 0, then every study 1, and so on.
struct Studies {
    std::vector<std::size_t> round;   // round r: entries round[r] .. round[r + 1] - 1
    std::vector<std::uint32_t> line;  // entry in Lines, ascending within a round
    std::vector<std::uint32_t> row;   // row of the test table (the study's size)
    std::vector<double> theta;        // true effect of the study
    std::vector<double> statistic;
    std::vector<double> estimate;
    std::vector<std::uint8_t> claim;      // a Claim
    std::vector<std::uint16_t> looks;     // at the data; empty where each had one
    std::vector<std::uint8_t> stopped;    // 1: run with optional stopping; empty where none was
    std::vector<double> df;               // where they depend on the data; else empty
    std::vector<double> standard_error;   // where the estimate does not give it; else empty
    std::vector<double> planned;          // effect the study was planned for; empty when none plans for each question
    std::vector<std::uint8_t> level_two;  // cuts of two-sided p rules passed; empty when no rule asks
    std::vector<std::uint8_t> level_one;  // cuts of one-sided p rules passed; empty when no rule asks
};

/// One block of conducted science.
struct Conducted {
    std::uint32_t literature = 0;
    // A block holds all lines of its questions, or one part of them when they are too many.
    std::uint64_t part = 0, parts = 1;
    Questions questions;
    Lines lines;
    Studies studies;
};

/// What became of the block under one regime.
struct Outcome {
    std::vector<std::uint8_t> status;  // a Status per study
    // One entry per manuscript: per study where studies are manuscripts, else per line.
    std::vector<std::uint8_t> manuscript_class;
    std::vector<std::uint8_t> manuscript_status;
    std::vector<std::uint8_t> journal;   // that published it, counted from 1; 0: none
    std::vector<std::uint8_t> attempts;  // journals that saw it
};

}  // namespace lacuna
