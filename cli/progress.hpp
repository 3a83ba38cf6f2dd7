#pragma once

#include <atomic>
#include <condition_variable>
#include <mutex>
#include <thread>

namespace runnel_cli {

/// Shows on standard error, where that is a terminal, what goes on once it lasts longer than a second.
class Progress {
public:
    explicit Progress(const char* what);
    ~Progress();
    Progress(const Progress&) = delete;
    Progress& operator=(const Progress&) = delete;

    void now(const char* what) { what_ = what; }

private:
    void show();

    std::atomic<const char*> what_;
    std::mutex guard_;
    std::condition_variable ended_;
    bool end_ = false;
    std::thread thread_;
};

} // namespace runnel_cli
