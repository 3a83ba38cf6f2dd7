#include "report/region_tints.hpp"

#include <algorithm>
#include <array>
#include <tuple>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Corner {
    Point at;
    std::uint32_t region;
};

bool before(const Corner& a, const Corner& b) {
    return std::tuple(a.at.x, a.at.y, a.region) < std::tuple(b.at.x, b.at.y, b.region);
}

/// Regions of one deck share their corners exactly, so that equal points are neighbours.
Grouped<std::uint32_t> neighbours_of(std::span<const Region> regions) {
    std::vector<Corner> corners;
    for (std::uint32_t r = 0; r < regions.size(); ++r) {
        for (const Ring& ring : regions[r].rings) {
            for (const Point& point : ring) {
                corners.push_back({point, r});
            }
        }
    }
    std::sort(corners.begin(), corners.end(), before);
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    for (std::size_t i = 0; i < corners.size(); ++i) {
        // Only a few regions meet at a corner; a corner of many is left to chance.
        constexpr std::size_t most = 8;
        for (std::size_t j = i + 1; j < corners.size() && j < i + most && corners[j].at == corners[i].at;
             ++j) {
            pairs.emplace_back(corners[i].region, corners[j].region);
            pairs.emplace_back(corners[j].region, corners[i].region);
        }
    }
    return Grouped<std::uint32_t>::from_pairs(regions.size(), std::move(pairs));
}

} // namespace

std::vector<std::uint8_t> choose_tints(std::span<const Region> regions) {
    const Grouped<std::uint32_t> neighbours = neighbours_of(regions);
    std::vector<std::uint8_t> tints(regions.size(), tint_count);
    std::unordered_map<std::uint32_t, std::uint8_t> of_carrier;
    for (std::size_t r = 0; r < regions.size(); ++r) {
        std::array<std::uint32_t, tint_count + 1> used{}; // the last: neighbours that have none yet
        for (const std::uint32_t other : neighbours[r]) {
            ++used[tints[other]];
        }
        const auto known = of_carrier.find(regions[r].carrier);
        std::size_t best = known != of_carrier.end() ? known->second : r % tint_count;
        for (std::size_t step = 0; step < tint_count; ++step) {
            const std::size_t tint = (r + step) % tint_count;
            best = used[tint] < used[best] ? tint : best;
        }
        tints[r] = static_cast<std::uint8_t>(best);
        of_carrier.emplace(regions[r].carrier, tints[r]);
    }
    return tints;
}

RUNNEL_NAMESPACE_END
