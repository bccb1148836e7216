#include "sim/engine/run.h"

#include <algorithm>
#include <mutex>

#include "sim/engine/scheduler.h"
#include "sim/literature/block.h"

namespace lacuna {

using Details = std::map<std::string, Batch>;
using Rows = std::vector<std::vector<double>>;  // per regime

/// Either whole literatures, or a stretch of one.
struct TaskResult {
    std::uint32_t first_literature = 0;
    std::vector<Rows> rows;   // of whole literatures
    std::vector<Tally> part;  // of a stretch, per regime
    bool opens = false, closes = false;
    std::uint64_t studies = 0;
    Details details;
};

namespace {

constexpr double studies_a_task = 65536.0;
constexpr std::uint64_t blocks_a_task = 8;

/// Scratch objects, as many as threads ever needed at once.
class ScratchPool {
public:
    std::unique_ptr<BlockScratch> take() {
        const std::lock_guard lock(mutex_);
        if (free_.empty()) return std::make_unique<BlockScratch>();
        auto scratch = std::move(free_.back());
        free_.pop_back();
        return scratch;
    }
    void give(std::unique_ptr<BlockScratch> scratch) {
        const std::lock_guard lock(mutex_);
        free_.push_back(std::move(scratch));
    }

private:
    std::mutex mutex_;
    std::vector<std::unique_ptr<BlockScratch>> free_;
};

/// The rosters of the literature whose stretches are under way: drawn once, shared by its tasks.
class RosterCache {
public:
    using Rosters = std::shared_ptr<const std::vector<Roster>>;

    template <class Draw>
    Rosters get(std::uint32_t literature, Draw draw) {
        const std::lock_guard lock(mutex_);
        if (const auto found = known_.find(literature); found != known_.end()) return found->second;
        if (known_.size() > 4) known_.erase(known_.begin());
        return known_[literature] = std::make_shared<const std::vector<Roster>>(draw());
    }

private:
    std::mutex mutex_;
    std::map<std::uint32_t, Rosters> known_;
};

class Simulation {
public:
    Simulation(const Scenario& scenario, const RunOptions& options, const Sinks& sinks)
        : scenario_(scenario),
          options_(options),
          sinks_(sinks),
          prepared_(scenario),
          blocks_(cut_into_blocks(scenario)),
          key_{scenario.run.seed} {
        for (const TableSpec& table : detail_tables(scenario)) empty_details_[table.name] = empty_batch(table);
        const double wanted = studies_a_task / std::max(blocks_.studies_a_literature, 1.0);
        literatures_a_task_ = static_cast<std::uint64_t>(std::clamp(wanted, 1.0, 256.0));
        stretches_ = (blocks_.count + blocks_a_task - 1) / blocks_a_task;
        progress_.literatures_total = scenario.run.literatures;
        progress_.studies_total =
            static_cast<double>(scenario.run.literatures - options.first_literature) * blocks_.studies_together;
    }

    RunOutcome run() {
        Schedule schedule;
        const std::uint64_t literatures = scenario_.run.literatures - options_.first_literature;
        schedule.tasks =
            whole() ? (literatures + literatures_a_task_ - 1) / literatures_a_task_ : literatures * stretches_;
        schedule.threads = options_.threads;
        schedule.stop = options_.stop;
        schedule.work = [this](std::uint64_t task) { return whole() ? whole_task(task) : stretch_task(task); };
        schedule.deliver = [this](const std::shared_ptr<TaskResult>& result) { deliver(*result); };
        outcome_.literatures = options_.first_literature;
        outcome_.stopped = run_in_order(schedule) < schedule.tasks;
        return outcome_;
    }

private:
    bool whole() const { return blocks_.count == 1; }

    std::vector<Tally> new_tallies() const {
        std::vector<Tally> tallies;
        for (std::size_t r = 0; r < prepared_.rules.size(); ++r) {
            const PreparedScience& science = prepared_.sciences[prepared_.groups.science_of[r]];
            tallies.emplace_back(science.science.labs.size(), prepared_.rules[r].findings, science.scale);
        }
        return tallies;
    }

    std::shared_ptr<TaskResult> whole_task(std::uint64_t task) {
        auto result = std::make_shared<TaskResult>();
        result->details = empty_details_;
        auto scratch = pool_.take();
        const std::uint64_t first = options_.first_literature + task * literatures_a_task_;
        const std::uint64_t last = std::min<std::uint64_t>(scenario_.run.literatures, first + literatures_a_task_);
        result->first_literature = static_cast<std::uint32_t>(first);
        std::vector<Tally> tallies = new_tallies();
        for (std::uint64_t l = first; l < last; ++l) {
            const auto literature = static_cast<std::uint32_t>(l);
            for (Tally& tally : tallies) tally.clear();
            result->studies +=
                simulate_block(prepared_, key_, literature, draw_rosters(prepared_, key_, literature),
                               blocks_.range(0), *scratch, tallies, result->details);
            Rows rows;
            for (const Tally& tally : tallies) rows.push_back(tally.row());
            result->rows.push_back(std::move(rows));
        }
        pool_.give(std::move(scratch));
        return result;
    }

    std::shared_ptr<TaskResult> stretch_task(std::uint64_t task) {
        auto result = std::make_shared<TaskResult>();
        result->details = empty_details_;
        auto scratch = pool_.take();
        const auto literature = static_cast<std::uint32_t>(options_.first_literature + task / stretches_);
        const std::uint64_t stretch = task % stretches_;
        result->first_literature = literature;
        result->opens = stretch == 0;
        result->closes = stretch + 1 == stretches_;
        result->part = new_tallies();
        const auto rosters = rosters_.get(literature, [&] { return draw_rosters(prepared_, key_, literature); });
        const std::uint64_t last = std::min(blocks_.count, (stretch + 1) * blocks_a_task);
        for (std::uint64_t b = stretch * blocks_a_task; b < last; ++b) {
            result->studies += simulate_block(prepared_, key_, literature, *rosters, blocks_.range(b), *scratch,
                                              result->part, result->details);
        }
        pool_.give(std::move(scratch));
        return result;
    }

    void deliver(TaskResult& result) {
        if (sinks_.rows) {
            for (auto& [table, batch] : result.details) {
                if (batch.rows > 0) sinks_.rows(table, std::move(batch));
            }
        }
        if (whole()) {
            for (std::size_t i = 0; i < result.rows.size(); ++i) {
                hand_on(static_cast<std::uint32_t>(result.first_literature + i), result.rows[i]);
            }
        } else {
            take_part(result);
        }
        outcome_.studies += result.studies;
        progress_.studies_done = outcome_.studies;
        progress_.literatures_done = outcome_.literatures;
        if (options_.progress) options_.progress(progress_);
    }

    void take_part(TaskResult& result) {
        if (result.opens) {
            sum_ = std::move(result.part);
        } else {
            for (std::size_t r = 0; r < sum_.size(); ++r) sum_[r].merge(result.part[r]);
        }
        if (!result.closes) return;
        Rows rows;
        for (const Tally& tally : sum_) rows.push_back(tally.row());
        hand_on(result.first_literature, rows);
    }

    void hand_on(std::uint32_t literature, const Rows& rows) {
        sinks_.literature(literature, rows);
        ++outcome_.literatures;
    }

    const Scenario& scenario_;
    const RunOptions& options_;
    const Sinks& sinks_;
    PreparedScenario prepared_;
    Blocks blocks_;
    StreamKey key_;
    Details empty_details_;
    std::uint64_t literatures_a_task_ = 1, stretches_ = 1;
    ScratchPool pool_;
    RosterCache rosters_;
    std::vector<Tally> sum_;  // of the literature whose stretches are being delivered
    Progress progress_;
    RunOutcome outcome_;
};

}  // namespace

RunOutcome simulate(const Scenario& scenario, const RunOptions& options, const Sinks& sinks) {
    return Simulation(scenario, options, sinks).run();
}

}  // namespace lacuna
