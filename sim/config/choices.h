// The words of a config that stand for enumerators.
#pragma once

#include <array>
#include <string_view>
#include <utility>

#include "sim/base/fault.h"
#include "sim/model/scenario.h"

namespace lacuna {

/// choices<E>: pairs of word and enumerator, in the order in which messages list them.
template <class E>
inline constexpr std::array<std::pair<std::string_view, E>, 0> choices{};

template <>
inline constexpr std::array<std::pair<std::string_view, Test>, 7> choices<Test>{
    {{"two-means", Test::two_means},
     {"paired-means", Test::paired_means},
     {"one-mean", Test::one_mean},
     {"correlation", Test::correlation},
     {"two-proportions", Test::two_proportions},
     {"known-variance", Test::known_variance},
     {"several-means", Test::several_means}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Looks::Boundary>, 4> choices<Looks::Boundary>{
    {{"pocock", Looks::Boundary::pocock},
     {"obrien-fleming", Looks::Boundary::obrien_fleming},
     {"spending-pocock", Looks::Boundary::spending_pocock},
     {"spending-obrien-fleming", Looks::Boundary::spending_obrien_fleming}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Findings>, 2> choices<Findings>{
    {{"either", Findings::either}, {"predicted", Findings::predicted}}};
template <>
inline constexpr std::array<std::pair<std::string_view, EffectEstimate>, 2> choices<EffectEstimate>{
    {{"d", EffectEstimate::d}, {"g", EffectEstimate::g}}};
template <>
inline constexpr std::array<std::pair<std::string_view, SizePlan::Kind>, 4> choices<SizePlan::Kind>{
    {{"fixed", SizePlan::Kind::fixed},
     {"distribution", SizePlan::Kind::distribution},
     {"power", SizePlan::Kind::power},
     {"exact-power", SizePlan::Kind::exact_power}}};
template <>
inline constexpr std::array<std::pair<std::string_view, LineRule::Kind>, 3> choices<LineRule::Kind>{
    {{"fixed", LineRule::Kind::fixed},
     {"until-positive", LineRule::Kind::until_positive},
     {"until-failures", LineRule::Kind::until_failures}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Unit>, 3> choices<Unit>{
    {{"study", Unit::study}, {"line", Unit::line}, {"findings", Unit::findings}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Acceptance::Kind>, 2> choices<Acceptance::Kind>{
    {{"class", Acceptance::Kind::by_class}, {"p", Acceptance::Kind::by_p}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Detail>, 3> choices<Detail>{
    {{"literatures", Detail::literatures}, {"manuscripts", Detail::manuscripts}, {"studies", Detail::studies}}};
template <>
inline constexpr std::array<std::pair<std::string_view, Family>, 9> choices<Family>{
    {{"fixed", Family::fixed},
     {"normal", Family::normal},
     {"half-normal", Family::half_normal},
     {"lognormal", Family::lognormal},
     {"gamma", Family::gamma},
     {"beta", Family::beta},
     {"uniform", Family::uniform},
     {"poisson", Family::poisson},
     {"discrete", Family::discrete}}};

/// Rounding is a flag in the model and a word in a config.
template <>
inline constexpr std::array<std::pair<std::string_view, bool>, 2> choices<bool>{
    {{"nearest", false}, {"down", true}}};

/// The word for an enumerator.
template <class E>
std::string_view word_for(E value) {
    for (const auto& [word, its] : choices<E>) {
        if (its == value) return word;
    }
    throw Defect("word_for: an enumerator without a word");
}

}  // namespace lacuna
