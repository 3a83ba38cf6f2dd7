#pragma once

#include <runnel/geometry.hpp>

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <cstdlib>
#include <numbers>
#include <random>
#include <string>
#include <vector>

namespace support {

/// The seed of a random test: RUNNEL_SEED from the environment, else a fixed one, so that a failure can be
/// repeated.
inline std::uint64_t seed_of_run(std::uint64_t usual) {
    const char* given = std::getenv("RUNNEL_SEED");
    return given != nullptr ? std::strtoull(given, nullptr, 10) : usual;
}

class Random {
public:
    explicit Random(std::uint64_t seed) : engine_(seed) {}

    double between(double low, double high) { return low + (high - low) * fraction(); }
    double fraction() { return static_cast<double>(engine_() >> 11) * 0x1p-53; }
    int whole(int low, int high) {
        return low + static_cast<int>(engine_() % static_cast<std::uint64_t>(high - low + 1));
    }
    bool chance(double p) { return fraction() < p; }

    /// A ring around a centre whose corners lie at random distances: often re-entrant, never crossing itself.
    runnel::Ring star(runnel::Point centre, double least, double most, int corners) {
        runnel::Ring ring;
        for (int i = 0; i < corners; ++i) {
            const double a = 2 * std::numbers::pi * (i + between(0.1, 0.9)) / corners;
            const double r = between(least, most);
            ring.push_back({centre.x + r * std::cos(a), centre.y + r * std::sin(a)});
        }
        return ring;
    }

private:
    std::mt19937_64 engine_;
};

} // namespace support
