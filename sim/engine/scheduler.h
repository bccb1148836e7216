// Work in parallel, delivery in order. The scheduler is behind this one function so that a plain
// std::thread twin can stand in for oneTBB under the thread sanitizer, which oneTBB's packages confuse.
#pragma once

#include <cstdint>
#include <functional>
#include <memory>

namespace lacuna {

/// What a task hands on.
struct TaskResult;

struct Schedule {
    std::uint64_t tasks = 0;
    unsigned threads = 0;                                                 // 0: as many as the machine has
    std::function<bool()> stop;                                           // asked before each task starts
    std::function<std::shared_ptr<TaskResult>(std::uint64_t task)> work;  // from many threads
    std::function<void(const std::shared_ptr<TaskResult>&)> deliver;      // one at a time, in order of tasks
};

/// Runs the tasks; at most a few per thread are under way, so memory does not grow with their number.
/// An exception from `work` or `deliver` ends the run and is thrown again. Returns how many tasks were
/// delivered: always the first ones.
std::uint64_t run_in_order(const Schedule& schedule);

/// Threads that `run_in_order` uses when asked for `threads`.
unsigned thread_count(unsigned threads);

/// A parallel loop over 0 .. count - 1, for work inside a delivery.
void parallel_for_each_index(std::size_t count, const std::function<void(std::size_t)>& body);

}  // namespace lacuna
