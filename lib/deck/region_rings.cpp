#include "deck/region_rings.hpp"

#include "geometry/basic.hpp"

#include <runnel/framing.hpp>
#include <runnel/grouped.hpp>

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

class RingTracer {
public:
    RingTracer(const DirectedEdges& edges, double noise)
        : corners_(edges.corners), edges_(edges.edges), noise_(noise) {
        std::vector<std::pair<std::uint32_t, std::uint32_t>> leaving;
        for (std::uint32_t e = 0; e < edges_.size(); ++e) {
            if (edges_[e].tail != edges_[e].head) {
                leaving.emplace_back(edges_[e].tail, e);
            }
        }
        leaving_ = Grouped<std::uint32_t>::from_pairs(corners_.size(), std::move(leaving));
        used_.assign(edges_.size(), false);
    }

    std::vector<Ring> trace() {
        std::vector<Ring> rings;
        for (std::uint32_t e = 0; e < edges_.size(); ++e) {
            if (!used_[e] && edges_[e].tail != edges_[e].head) {
                Ring ring = without_needless(follow(e));
                if (ring.size() >= 3) {
                    rings.push_back(std::move(ring));
                }
            }
        }
        std::sort(rings.begin(), rings.end(),
                  [](const Ring& l, const Ring& r) { return signed_area(l) > signed_area(r); });
        return rings;
    }

private:
    Ring follow(std::uint32_t first) {
        Ring ring;
        std::uint32_t edge = first;
        do {
            used_[edge] = true;
            ring.push_back(corners_[edges_[edge].tail]);
            edge = next_of(edge, first);
        } while (edge != none && edge != first);
        return ring;
    }

    /// `first` closes the ring: it may be next although it is used.
    [[nodiscard]] std::uint32_t next_of(std::uint32_t edge, std::uint32_t first) const {
        const Point came = corners_[edges_[edge].head] - corners_[edges_[edge].tail];
        std::uint32_t best = none;
        double best_turn = 0;
        for (const std::uint32_t e : leaving_[edges_[edge].head]) {
            if (used_[e] && e != first) {
                continue;
            }
            const Point goes = corners_[edges_[e].head] - corners_[edges_[e].tail];
            const double turn = std::atan2(cross(came, goes), dot(came, goes));
            if (best == none || turn > best_turn) {
                best = e;
                best_turn = turn;
            }
        }
        return best;
    }

    /// Without corners on the straight between their neighbours. Begins at the corner farthest from the
    /// first, which is never on such a straight, so that of two corners side by side one always stays.
    [[nodiscard]] Ring without_needless(Ring ring) const {
        std::rotate(ring.begin(),
                    std::max_element(ring.begin(), ring.end(),
                                     [first = ring.front()](Point l, Point r) {
                                         return distance(first, l) < distance(first, r);
                                     }),
                    ring.end());
        Ring kept;
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point after = ring[(i + 1) % ring.size()];
            const double length = kept.empty() ? 0 : distance(kept.back(), after);
            if (!(length > 0) ||
                std::abs(cross(after - kept.back(), ring[i] - kept.back())) / length > 2 * noise_) {
                kept.push_back(ring[i]);
            }
        }
        return kept;
    }

    const std::vector<Point>& corners_;
    const std::vector<DirectedEdges::Edge>& edges_;
    double noise_;
    Grouped<std::uint32_t> leaving_;
    std::vector<bool> used_;
};

} // namespace

std::vector<Ring> trace_rings(const DirectedEdges& edges, double noise) {
    return RingTracer(edges, noise).trace();
}

RUNNEL_NAMESPACE_END
