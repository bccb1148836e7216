#ifdef LACUNA_PLAIN_THREADS

#include <condition_variable>
#include <exception>
#include <map>
#include <mutex>
#include <thread>
#include <vector>

#include "sim/engine/scheduler.h"

namespace lacuna {

namespace {

/// Shared state of one run: which task is next, what waits for delivery, what went wrong.
struct Board {
    std::mutex mutex;
    std::condition_variable changed;
    std::uint64_t next = 0, delivered = 0;
    bool ended = false;       // no further task starts
    bool delivering = false;  // someone is in deliver()
    std::map<std::uint64_t, std::shared_ptr<TaskResult>> waiting;
    std::exception_ptr error;
};

void deliver_waiting(const Schedule& schedule, Board& board, std::unique_lock<std::mutex>& lock) {
    while (!board.delivering && !board.error && !board.waiting.empty() &&
           board.waiting.begin()->first == board.delivered) {
        const auto result = board.waiting.begin()->second;
        board.waiting.erase(board.waiting.begin());
        board.delivering = true;
        lock.unlock();
        std::exception_ptr error;
        try {
            schedule.deliver(result);
        } catch (...) {
            error = std::current_exception();
        }
        lock.lock();
        board.delivering = false;
        if (error)
            board.error = error;
        else
            ++board.delivered;
        board.changed.notify_all();
    }
}

void run_worker(const Schedule& schedule, Board& board, std::uint64_t ahead) {
    std::unique_lock lock(board.mutex);
    for (;;) {
        board.changed.wait(lock,
                           [&] { return board.ended || board.error || board.next < board.delivered + ahead; });
        if (board.ended || board.error) return;
        if (board.next == schedule.tasks || (schedule.stop && schedule.stop())) {
            board.ended = true;
            board.changed.notify_all();
            return;
        }
        const std::uint64_t task = board.next++;
        lock.unlock();
        std::shared_ptr<TaskResult> result;
        std::exception_ptr error;
        try {
            result = schedule.work(task);
        } catch (...) {
            error = std::current_exception();
        }
        lock.lock();
        if (error)
            board.error = error;
        else
            board.waiting.emplace(task, result);
        deliver_waiting(schedule, board, lock);
        board.changed.notify_all();
    }
}

}  // namespace

unsigned thread_count(unsigned threads) {
    const unsigned machine = std::thread::hardware_concurrency();
    return threads > 0 ? threads : (machine > 0 ? machine : 1u);
}

std::uint64_t run_in_order(const Schedule& schedule) {
    Board board;
    std::vector<std::thread> workers;
    const unsigned threads = thread_count(schedule.threads);
    for (unsigned t = 0; t < threads; ++t) {
        workers.emplace_back([&] { run_worker(schedule, board, 3 * threads); });
    }
    for (std::thread& worker : workers) worker.join();
    if (board.error) std::rethrow_exception(board.error);
    return board.delivered;
}

void parallel_for_each_index(std::size_t count, const std::function<void(std::size_t)>& body) {
    for (std::size_t i = 0; i < count; ++i) body(i);
}

}  // namespace lacuna

#endif
