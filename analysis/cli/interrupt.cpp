#include "analysis/cli/interrupt.h"

#include <signal.h>
#include <unistd.h>

#include <atomic>
#include <cstring>

namespace lacuna {

namespace {

// A signal handler reaches nothing but what is static.
std::atomic<int> signals_seen{0};
static_assert(std::atomic<int>::is_always_lock_free);
char partial_path[4096] = "";

extern "C" void on_signal(int number) {
    if (signals_seen.fetch_add(1) == 0) return;
    if (partial_path[0] != '\0') unlink(partial_path);
    _exit(128 + number);
}

void install(void (*handler)(int)) {
    struct sigaction action {};
    action.sa_handler = handler;
    sigemptyset(&action.sa_mask);
    action.sa_flags = SA_RESTART;
    sigaction(SIGINT, &action, nullptr);
    sigaction(SIGTERM, &action, nullptr);
}

}  // namespace

Interrupt::Interrupt(const std::string& partial_file) {
    if (partial_file.size() < sizeof partial_path) std::strcpy(partial_path, partial_file.c_str());
    signals_seen = 0;
    install(on_signal);
}

Interrupt::~Interrupt() {
    install(SIG_DFL);
    partial_path[0] = '\0';
}

bool Interrupt::requested() const { return signals_seen.load(std::memory_order_relaxed) > 0; }

void ignore_write_signals() {
    signal(SIGPIPE, SIG_IGN);
#ifdef SIGXFSZ
    signal(SIGXFSZ, SIG_IGN);
#endif
}

}  // namespace lacuna
