#include "sim/literature/roster.h"

#include <algorithm>
#include <cmath>

#include "sim/base/fault.h"

namespace lacuna {

namespace {

void draw_kinds(const PreparedScience& science, StreamKey key, std::uint32_t literature, Roster& roster) {
    const std::vector<LabKind>& kinds = science.science.labs;
    if (kinds.size() == 1) return;
    const std::size_t labs = science.science.field.labs;
    std::vector<double> u(labs);
    uniforms(key, {literature, Purpose::lab_kind}, {0, nullptr, labs}, u.data());
    roster.kind.resize(labs);
    for (std::size_t i = 0; i < labs; ++i) {
        double below = 0.0;
        std::size_t k = 0;
        while (k + 1 < kinds.size() && u[i] >= below + kinds[k].share) below += kinds[k++].share;
        roster.kind[i] = static_cast<std::uint8_t>(k);
    }
}

std::uint64_t whole(double lines) { return static_cast<std::uint64_t>(std::fmax(0.0, std::floor(lines + 0.5))); }

void draw_lines(const PreparedScience& science, StreamKey key, std::uint32_t literature, Roster& roster) {
    const std::size_t labs = science.science.field.labs;
    if (science.lab_lines.size() == 1 && science.lab_lines[0].constant()) {
        double each = 0.0;
        science.lab_lines[0].draw(key, {}, Purpose::lab_lines, {0, nullptr, 1}, &each);
        roster.lines_each = whole(each);
        roster.lines = roster.lines_each * labs;
        return;
    }
    roster.first.resize(labs + 1, 0);
    std::vector<std::uint32_t> members;
    std::vector<double> drawn;
    for (std::size_t k = 0; k < science.lab_lines.size(); ++k) {
        members.clear();
        for (std::size_t i = 0; i < labs; ++i) {
            if (roster.kind.empty() || roster.kind[i] == k) members.push_back(static_cast<std::uint32_t>(i));
        }
        drawn.resize(members.size());
        science.lab_lines[k].draw(key, {literature, Purpose::lab_lines}, Purpose::lab_lines_again,
                                  {0, members.data(), members.size()}, drawn.data());
        for (std::size_t m = 0; m < members.size(); ++m) roster.first[members[m] + 1] = whole(drawn[m]);
    }
    for (std::size_t i = 0; i < labs; ++i) roster.first[i + 1] += roster.first[i];
    roster.lines = roster.first[labs];
}

}  // namespace

std::uint64_t Roster::lab_of_place(std::uint64_t place) const {
    if (first.empty()) return place / lines_each;
    return static_cast<std::uint64_t>(std::upper_bound(first.begin(), first.end(), place) - first.begin()) - 1;
}

Roster draw_roster(const PreparedScience& science, StreamKey key, std::uint32_t literature) {
    Roster roster;
    draw_kinds(science, key, literature, roster);
    draw_lines(science, key, literature, roster);
    if (roster.lines >= entity_limit) {
        Fault fault;
        fault.key = "lab.lines";
        fault.message = "the labs of one literature run 2^40 lines or more";
        fault.remedy = "lower field.labs or lab.lines";
        throw InputError(std::move(fault));
    }
    if (science.who_matters && roster.lines > 0) {
        roster.order.emplace(roster.lines, Stream(key, {literature, Purpose::line_order}, 0));
    }
    return roster;
}

}  // namespace lacuna
