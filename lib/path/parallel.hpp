#pragma once

#include <runnel/export.hpp>

#include <algorithm>
#include <atomic>
#include <cstddef>
#include <exception>
#include <mutex>
#include <thread>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Calls f(0) ... f(count - 1), each once, on up to `threads` threads. Each call must write only what is its
/// own; then the result does not depend on the number of threads. The first exception is thrown again when
/// all have stopped.
template <class F>
void for_each_index(std::size_t count, unsigned threads, F f) {
    const std::size_t hands = std::min<std::size_t>(std::max(threads, 1U), count);
    if (hands <= 1) {
        for (std::size_t i = 0; i < count; ++i) {
            f(i);
        }
        return;
    }
    std::atomic<std::size_t> next{0};
    std::exception_ptr first;
    std::mutex guard;
    const auto work = [&] {
        try {
            for (std::size_t i = next++; i < count; i = next++) {
                f(i);
            }
        } catch (...) {
            const std::scoped_lock lock(guard);
            if (!first) {
                first = std::current_exception();
            }
            next = count;
        }
    };
    {
        std::vector<std::jthread> others;
        for (std::size_t i = 1; i < hands; ++i) {
            others.emplace_back(work);
        }
        work();
    }
    if (first) {
        std::rethrow_exception(first);
    }
}

RUNNEL_NAMESPACE_END
