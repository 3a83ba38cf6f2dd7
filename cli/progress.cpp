#include "progress.hpp"

#include <unistd.h>

#include <chrono>
#include <cstdio>

namespace runnel_cli {

Progress::Progress(const char* what) : what_(what) {
    if (isatty(fileno(stderr)) == 1) {
        thread_ = std::thread([this] { show(); });
    }
}

Progress::~Progress() {
    if (thread_.joinable()) {
        {
            const std::scoped_lock lock(guard_);
            end_ = true;
        }
        ended_.notify_one();
        thread_.join();
    }
}

void Progress::show() {
    constexpr const char* clear_line = "\r\x1B[K";
    std::unique_lock lock(guard_);
    int shown = 0;
    for (int seconds = 1; !ended_.wait_for(lock, std::chrono::seconds(1), [this] { return end_; });
         ++seconds) {
        std::fprintf(stderr, "%s%s, %d s", clear_line, what_.load(), seconds);
        std::fflush(stderr);
        shown = seconds;
    }
    if (shown > 0) {
        std::fputs(clear_line, stderr);
    }
}

} // namespace runnel_cli
