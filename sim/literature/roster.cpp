#include "sim/literature/roster.h"

#include <algorithm>
#include <cmath>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

/// Labs are drawn so many at a time, so that a field of many labs needs no columns of that length.
constexpr std::uint64_t labs_at_once = 65536;

struct LabColumns {
    std::vector<double> u, drawn;
    std::vector<std::uint8_t> kind;
    std::vector<std::uint32_t> members;
    std::vector<std::uint64_t> lines;
};

std::uint64_t whole(double lines) { return static_cast<std::uint64_t>(std::fmax(0.0, std::floor(lines + 0.5))); }

/// Kinds of labs first .. first + count - 1.
void draw_kinds(const std::vector<LabKind>& kinds, StreamKey key, std::uint32_t literature, std::uint64_t first,
                std::size_t count, LabColumns& labs) {
    labs.kind.assign(count, 0);
    if (kinds.size() == 1) return;
    labs.u.resize(count);
    uniforms(key, {literature, Purpose::lab_kind}, {first, nullptr, count}, labs.u.data());
    for (std::size_t i = 0; i < count; ++i) {
        double below = 0.0;
        std::size_t k = 0;
        while (k + 1 < kinds.size() && labs.u[i] >= below + kinds[k].share) below += kinds[k++].share;
        labs.kind[i] = static_cast<std::uint8_t>(k);
    }
}

/// Their lines.
void draw_lines(const std::vector<Sampler>& lines, StreamKey key, std::uint32_t literature, std::uint64_t first,
                std::size_t count, LabColumns& labs) {
    labs.lines.resize(count);
    for (std::size_t k = 0; k < lines.size(); ++k) {
        labs.members.clear();
        for (std::size_t i = 0; i < count; ++i) {
            if (labs.kind[i] == k) labs.members.push_back(static_cast<std::uint32_t>(i));
        }
        labs.drawn.resize(labs.members.size());
        lines[k].draw(key, {literature, Purpose::lab_lines}, Purpose::lab_lines_again,
                      {first, labs.members.data(), labs.members.size()}, labs.drawn.data());
        for (std::size_t m = 0; m < labs.members.size(); ++m) labs.lines[labs.members[m]] = whole(labs.drawn[m]);
    }
}

/// One kind of labs, each with as many lines: nothing to draw.
bool all_alike(const PreparedScience& science) {
    return science.lab_lines.size() == 1 && science.lab_lines[0].constant() && !science.labs_are_stored;
}

/// The place of every lab's lines, labs in the order of their kinds.
void lay_out(Roster& roster, std::size_t kinds) {
    roster.first.assign(1, 0);
    for (std::size_t k = 0; k < kinds; ++k) {
        for (std::size_t i = 0; i < roster.kind.size(); ++i) {
            if (roster.kind[i] != k) continue;
            roster.lab.push_back(static_cast<std::uint32_t>(i));
            roster.first.push_back(roster.first.back() + roster.runs[i]);
        }
    }
}

void draw_labs(const PreparedScience& science, StreamKey key, std::uint32_t literature, Roster& roster) {
    const std::vector<LabKind>& kinds = science.science.labs;
    const std::uint64_t labs = science.science.field.labs;
    std::vector<std::uint64_t> total(kinds.size(), 0);
    if (all_alike(science)) {
        double each = 0.0;
        science.lab_lines[0].draw(key, {}, Purpose::lab_lines, {0, nullptr, 1}, &each);
        total[0] = whole(each) * labs;
    } else {
        LabColumns columns;
        for (std::uint64_t first = 0; first < labs; first += labs_at_once) {
            const std::size_t count = std::min(labs_at_once, labs - first);
            draw_kinds(kinds, key, literature, first, count, columns);
            draw_lines(science.lab_lines, key, literature, first, count, columns);
            for (std::size_t i = 0; i < count; ++i) total[columns.kind[i]] += columns.lines[i];
            if (!science.labs_are_stored) continue;
            roster.kind.insert(roster.kind.end(), columns.kind.begin(), columns.kind.end());
            roster.runs.insert(roster.runs.end(), columns.lines.begin(), columns.lines.end());
        }
        if (science.labs_are_stored) lay_out(roster, kinds.size());
    }
    roster.kind_first.assign(1, 0);
    for (const std::uint64_t lines : total) roster.kind_first.push_back(roster.kind_first.back() + lines);
    roster.lines = roster.kind_first.back();
}

}  // namespace

std::uint8_t Roster::kind_of_place(std::uint64_t place) const {
    std::uint8_t k = 0;
    while (place >= kind_first[k + 1u]) ++k;
    return k;
}

std::uint32_t Roster::lab_of_place(std::uint64_t place) const {
    return lab[static_cast<std::size_t>(std::upper_bound(first.begin(), first.end(), place) - first.begin()) - 1];
}

Roster draw_roster(const PreparedScience& science, StreamKey key, std::uint32_t literature) {
    Roster roster;
    draw_labs(science, key, literature, roster);
    if (roster.lines >= entity_limit) {
        Fault fault;
        fault.key = "lab.lines";
        fault.message = "the labs of one literature run 2^40 lines or more";
        fault.remedy = "lower field.labs or lab.lines";
        throw InputError(std::move(fault));
    }
    if (science.who_matters() && roster.lines > 0) {
        roster.order.emplace(roster.lines, Stream(key, {literature, Purpose::line_order}, 0));
    }
    return roster;
}

}  // namespace lacuna
