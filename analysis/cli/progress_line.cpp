#include "analysis/cli/progress_line.h"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "analysis/report/number.h"

namespace lacuna {

namespace {

std::string time_text(double seconds) {
    if (!std::isfinite(seconds) || seconds > 3.6e8) return "unknown";
    const auto whole = static_cast<long>(std::ceil(seconds));
    if (whole >= 3600) return fmt::format("{}:{:02}:{:02}", whole / 3600, whole / 60 % 60, whole % 60);
    return fmt::format("{}:{:02}", whole / 60, whole % 60);
}

}  // namespace

std::string progress_text(const Progress& progress, double seconds) {
    const auto studies = static_cast<double>(progress.studies_done);
    const double share = progress.studies_total > 0 ? std::min(1.0, studies / progress.studies_total) : 0.0;
    const double rate = seconds > 0 ? studies / seconds : 0.0;
    const double left = rate > 0 ? std::max(0.0, progress.studies_total - studies) / rate : INFINITY;
    return fmt::format("{:3.0f} %  {} of {} literatures  {} M studies/s  {} left", std::floor(100 * share),
                       show_count(static_cast<double>(progress.literatures_done)),
                       show_count(static_cast<double>(progress.literatures_total)), show_number(rate / 1e6, 3),
                       time_text(left));
}

ProgressLine::ProgressLine(bool shown, bool terminal, Clock clock, Write write)
    : shown_(shown),
      terminal_(terminal),
      clock_(std::move(clock)),
      write_(std::move(write)),
      start_(clock_()),
      last_(start_) {}

void ProgressLine::update(const Progress& progress) {
    if (!shown_) return;
    const double now = clock_();
    if (now - last_ < (terminal_ ? 0.2 : 1.0)) return;
    last_ = now;
    const std::string text = progress_text(progress, now - start_);
    write_(terminal_ ? fmt::format("\r\x1b[K{}", text) : fmt::format("{}\n", text));
    visible_ = terminal_;
}

void ProgressLine::erase() {
    if (visible_) write_("\r\x1b[K");
    visible_ = false;
}

}  // namespace lacuna
