#include "sim/literature/bend.h"

#include <algorithm>

#include "sim/design/studies.h"
#include "sim/random/chance.h"

namespace lacuna {

namespace {

/// Which studies are run with optional stopping.
void choose(const PreparedScience& science, const StudyRound& round, const std::uint8_t* kind, BentStudies& scratch,
            std::uint8_t* stopped) {
    const std::size_t count = round.entities.count;
    const Address address = round.address(Purpose::optional_stopping);
    scratch.words.resize(count + 16);
    words(round.key, address, round.entities, scratch.words.data());
    std::vector<Chance> chance;
    for (const LabKind& lab : science.science.labs) {
        chance.emplace_back(lab.practices.any() ? lab.practices.optional_stopping.chance : 0.0);
    }
    decide(
        round.key, address, count, scratch.words.data(),
        [&](std::size_t i) -> const Chance& { return chance[kind ? kind[i] : 0]; },
        [&](std::size_t i) { return round.entity(i); }, stopped);
}

}  // namespace

void bend_studies(const PreparedScience& science, const StudyRound& round, const std::uint8_t* kind,
                  SamplingScratch& sampling, BentStudies& scratch, StudyBatch batch, std::uint8_t* stopped) {
    choose(science, round, kind, scratch, stopped);
    std::fill(batch.looks, batch.looks + round.entities.count, std::uint16_t{1});
    for (std::size_t k = 0; k < science.table.unplanned_looks.size(); ++k) {
        const LookRows& looks = science.table.unplanned_looks[k];
        if (looks.empty()) continue;
        scratch.entry.clear();
        for (std::size_t i = 0; i < round.entities.count; ++i) {
            if (stopped[i] && (kind ? kind[i] : 0u) == k) scratch.entry.push_back(static_cast<std::uint32_t>(i));
        }
        const std::size_t bent = scratch.entry.size();
        const std::size_t room = bent + 16;
        for (auto* column : {&scratch.theta, &scratch.statistic, &scratch.estimate}) column->resize(room);
        for (auto* column : {&scratch.offsets, &scratch.row}) column->resize(room);
        scratch.claim.resize(room);
        scratch.looks.resize(room);
        for (std::size_t b = 0; b < bent; ++b) {
            const std::uint32_t i = scratch.entry[b];
            scratch.offsets[b] = round.entities.offsets ? round.entities.offsets[i] : i;
            scratch.row[b] = batch.row[i];
            scratch.theta[b] = batch.theta[i];
        }
        StudyRound its = round;
        its.entities = {round.entities.first, scratch.offsets.data(), bent};
        draw_sequential_studies(its, science.science.design, science.table, looks, sampling,
                                {scratch.row.data(), scratch.theta.data(), scratch.statistic.data(), scratch.estimate.data(),
                                 scratch.claim.data(), nullptr, nullptr, scratch.looks.data()});
        for (std::size_t b = 0; b < bent; ++b) {
            const std::uint32_t i = scratch.entry[b];
            batch.row[i] = scratch.row[b];
            batch.statistic[i] = scratch.statistic[b];
            batch.estimate[i] = scratch.estimate[b];
            batch.claim[i] = scratch.claim[b];
            batch.looks[i] = scratch.looks[b];
        }
    }
}

}  // namespace lacuna
