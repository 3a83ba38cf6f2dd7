#include "report/region_tints.hpp"

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The edges of all regions, to be found by place.
class RegionBorders {
public:
    explicit RegionBorders(std::span<const Region> regions) {
        std::vector<Box> boxes;
        for (std::uint32_t r = 0; r < regions.size(); ++r) {
            for (const Ring& ring : regions[r].rings) {
                for (std::size_t i = 0; i < ring.size(); ++i) {
                    edges_.push_back({ring[i], ring[(i + 1) % ring.size()], r});
                    boxes.push_back(box_of(edges_.back().a, edges_.back().b));
                    largest_ = std::max({largest_, std::abs(ring[i].x), std::abs(ring[i].y)});
                }
            }
        }
        edges_at_ = BoxFinder(std::move(boxes));
    }

    /// Calls f(r, other) for the regions whose borders touch. Where two of them share a stretch, a corner of
    /// the one lies on an edge of the other.
    template <class F>
    void for_each_touch(F f) const {
        const double noise = 4 * noise_of(largest_);
        std::vector<std::uint32_t> near;
        for (const Edge& edge : edges_) {
            edges_at_.find(box_of(edge.a, edge.a).grown(noise), near);
            for (const std::uint32_t i : near) {
                const Edge& other = edges_[i];
                if (other.region != edge.region && distance_to_segment(edge.a, other.a, other.b) <= noise) {
                    f(edge.region, other.region);
                }
            }
        }
    }

private:
    struct Edge {
        Point a, b;
        std::uint32_t region;
    };
    std::vector<Edge> edges_;
    BoxFinder edges_at_;
    double largest_ = 0;
};

/// The regions of other carriers that touch each region.
Grouped<std::uint32_t> neighbours_of(std::span<const Region> regions) {
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    RegionBorders(regions).for_each_touch([&](std::uint32_t r, std::uint32_t other) {
        if (regions[r].carrier != regions[other].carrier) {
            pairs.emplace_back(r, other);
            pairs.emplace_back(other, r);
        }
    });
    std::sort(pairs.begin(), pairs.end());
    pairs.erase(std::unique(pairs.begin(), pairs.end()), pairs.end());
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
