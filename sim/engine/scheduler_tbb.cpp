#ifndef LACUNA_PLAIN_THREADS

#include <tbb/global_control.h>
#include <tbb/parallel_for.h>
#include <tbb/parallel_pipeline.h>
#include <tbb/task_arena.h>

#include <thread>

#include "sim/engine/scheduler.h"

namespace lacuna {

unsigned thread_count(unsigned threads) {
    return threads > 0 ? threads : static_cast<unsigned>(tbb::info::default_concurrency());
}

std::uint64_t run_in_order(const Schedule& schedule) {
    const unsigned threads = thread_count(schedule.threads);
    // Without the limit oneTBB would use no more threads than there are processors.
    const tbb::global_control limit(tbb::global_control::max_allowed_parallelism, threads);
    tbb::task_arena arena(static_cast<int>(threads));
    std::uint64_t next = 0;
    std::uint64_t delivered = 0;
    const auto start = [&](tbb::flow_control& flow) -> std::uint64_t {
        if (next == schedule.tasks || (schedule.stop && schedule.stop())) {
            flow.stop();
            return 0;
        }
        return next++;
    };
    const auto deliver = [&](const std::shared_ptr<TaskResult>& result) {
        schedule.deliver(result);
        ++delivered;
    };
    arena.execute([&] {
        tbb::parallel_pipeline(
            3 * threads,
            tbb::make_filter<void, std::uint64_t>(tbb::filter_mode::serial_in_order, start) &
                tbb::make_filter<std::uint64_t, std::shared_ptr<TaskResult>>(tbb::filter_mode::parallel,
                                                                             schedule.work) &
                tbb::make_filter<std::shared_ptr<TaskResult>, void>(tbb::filter_mode::serial_in_order, deliver));
    });
    return delivered;
}

void parallel_for_each_index(std::size_t count, const std::function<void(std::size_t)>& body) {
    // Isolated: a thread that waits here must not pick up a task of the pipeline around it.
    tbb::this_task_arena::isolate([&] { tbb::parallel_for(std::size_t{0}, count, body); });
}

}  // namespace lacuna

#endif
