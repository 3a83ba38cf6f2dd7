#include <runnel/deck.hpp>

#include "geometry/basic.hpp"
#include "geometry/convex.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <numeric>

// Cells are joined to regions by cancelling the edges that two of them share, never by a boolean union:
// levels across the strips are the same doubles in all cells of a deck, so shared edges are found by
// comparing stretches of one level or of one carrier.

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Edge {
    Point a, b;
};

/// A stretch of a line with its direction: +1 runs with rising coordinate.
struct Stretch {
    double from, to;
    int direction;
};

/// What is left of stretches on one line when opposite directions cancel, cut at every end.
template <class F>
void cancel(std::vector<Stretch>& stretches, double noise, F keep) {
    std::vector<double> ends;
    for (const Stretch& s : stretches) {
        ends.push_back(s.from);
        ends.push_back(s.to);
    }
    std::sort(ends.begin(), ends.end());
    ends.erase(std::unique(ends.begin(), ends.end(), [noise](double l, double r) { return r - l <= noise; }),
               ends.end());
    const auto index = [&](double value) {
        return static_cast<std::size_t>(std::lower_bound(ends.begin(), ends.end(), value - noise) -
                                        ends.begin());
    };
    std::vector<int> steps(ends.size() + 1, 0);
    for (const Stretch& s : stretches) {
        steps[index(s.from)] += s.direction;
        steps[index(s.to)] -= s.direction;
    }
    int cover = 0;
    for (std::size_t i = 0; i + 1 < ends.size(); ++i) {
        cover += steps[i];
        if (cover != 0) {
            keep(ends[i], ends[i + 1], cover);
        }
    }
}

class RegionEdges {
public:
    explicit RegionEdges(double noise) : noise_(noise) {}

    void add(const Cell& cell) {
        const double start = cell.high.start - cell.low.start;
        const double end = cell.high.end - cell.low.end;
        if (start <= noise_ && end <= noise_) {
            return; // rounding between a carrier and the deck's edge under it
        }
        levels_[cell.from].push_back({cell.low.start, cell.high.start, 1});
        levels_[cell.to].push_back({cell.low.end, cell.high.end, -1});
        const Edge high{{cell.high.start, cell.from}, {cell.high.end, cell.to}};
        const Edge low{{cell.low.start, cell.from}, {cell.low.end, cell.to}};
        if (cell.carrier_side == Cell::CarrierSide::high) {
            on_carrier(high, 1);
        } else {
            edges_.push_back(high);
        }
        if (cell.carrier_side == Cell::CarrierSide::low) {
            on_carrier(low, -1);
        } else {
            edges_.push_back({low.b, low.a});
        }
    }

    std::vector<Edge> finish() {
        for (auto& [level, stretches] : levels_) {
            const double across = level;
            cancel(stretches, noise_, [&](double from, double to, int direction) {
                const Edge edge{{from, across}, {to, across}};
                edges_.push_back(direction > 0 ? edge : Edge{edge.b, edge.a});
            });
        }
        cancel(carrier_, 0, [&](double from, double to, int direction) {
            const Edge edge{{along_[from], from}, {along_[to], to}};
            edges_.push_back(direction > 0 ? edge : Edge{edge.b, edge.a});
        });
        return std::move(edges_);
    }

private:
    void on_carrier(const Edge& edge, int direction) {
        carrier_.push_back({edge.a.y, edge.b.y, direction});
        along_[edge.a.y] = edge.a.x;
        along_[edge.b.y] = edge.b.x;
    }

    double noise_;
    std::map<double, std::vector<Stretch>> levels_;
    std::vector<Stretch> carrier_;
    std::map<double, double> along_; ///< of the carrier, by level
    std::vector<Edge> edges_;
};

/// Joins directed edges to rings; where several leave a corner, the one that turns most to the left goes on.
class RingTracer {
public:
    RingTracer(std::vector<Edge> edges, double noise) : edges_(std::move(edges)), noise_(noise) {
        number_corners();
        std::vector<std::pair<std::uint32_t, std::uint32_t>> leaving;
        for (std::uint32_t e = 0; e < edges_.size(); ++e) {
            if (tail_[e] != head_[e]) {
                leaving.emplace_back(tail_[e], e);
            }
        }
        leaving_ = Grouped<std::uint32_t>::from_pairs(corners_.size(), std::move(leaving));
        used_.assign(edges_.size(), false);
    }

    std::vector<Ring> trace() {
        std::vector<Ring> rings;
        for (std::uint32_t e = 0; e < edges_.size(); ++e) {
            if (!used_[e] && tail_[e] != head_[e]) {
                Ring ring = without_needless(follow(e));
                if (ring.size() >= 3) {
                    rings.push_back(std::move(ring));
                }
            }
        }
        return rings;
    }

private:
    void number_corners() {
        std::vector<std::uint32_t> order(2 * edges_.size());
        std::iota(order.begin(), order.end(), 0U);
        const auto point = [this](std::uint32_t end) {
            return end % 2 == 0 ? edges_[end / 2].a : edges_[end / 2].b;
        };
        std::sort(order.begin(), order.end(), [&](std::uint32_t l, std::uint32_t r) {
            const Point p = point(l);
            const Point q = point(r);
            return p.y != q.y ? p.y < q.y : p.x < q.x;
        });
        tail_.resize(edges_.size());
        head_.resize(edges_.size());
        Point last{};
        for (const std::uint32_t end : order) {
            const Point p = point(end);
            if (corners_.empty() || p.y != last.y || p.x - last.x > noise_) {
                corners_.push_back(p);
            }
            last = p;
            (end % 2 == 0 ? tail_ : head_)[end / 2] = static_cast<std::uint32_t>(corners_.size() - 1);
        }
    }

    Ring follow(std::uint32_t first) {
        Ring ring;
        std::uint32_t edge = first;
        while (edge != none && !used_[edge]) {
            used_[edge] = true;
            ring.push_back(corners_[tail_[edge]]);
            edge = next_of(edge);
        }
        return ring;
    }

    [[nodiscard]] std::uint32_t next_of(std::uint32_t edge) const {
        const Point came = corners_[head_[edge]] - corners_[tail_[edge]];
        std::uint32_t best = none;
        double best_turn = 0;
        for (const std::uint32_t e : leaving_[head_[edge]]) {
            if (used_[e]) {
                continue;
            }
            const Point goes = corners_[head_[e]] - corners_[tail_[e]];
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

    std::vector<Edge> edges_;
    double noise_;
    std::vector<Point> corners_;
    std::vector<std::uint32_t> tail_, head_;
    Grouped<std::uint32_t> leaving_;
    std::vector<bool> used_;
};

/// Rounding in strip coordinates, from the size of what is there.
double noise_in(const Sharing& sharing) {
    double largest = 0;
    for (const StripAxes& axes : sharing.axes) {
        largest = std::max({largest, std::abs(axes.origin.x), std::abs(axes.origin.y)});
    }
    for (const Cell& cell : sharing.cells) {
        largest = std::max({largest, std::abs(cell.low.start), std::abs(cell.high.start), std::abs(cell.to)});
    }
    return 2 * noise_of(largest);
}

Region region_of(const Sharing& sharing, std::span<const std::uint32_t> cells, double noise) {
    Region region;
    region.deck = sharing.cells[cells.front()].deck;
    region.carrier = sharing.transfers[cells.front()].front().carrier;
    RegionEdges edges(noise);
    Sum area;
    Sum mx;
    Sum my;
    const StripAxes& axes = sharing.axes[sharing.cells[cells.front()].axes];
    for (const std::uint32_t c : cells) {
        const Cell& cell = sharing.cells[c];
        edges.add(cell);
        const std::array<Point, 4> corners{Point{cell.low.start, cell.from},
                                           Point{cell.high.start, cell.from}, Point{cell.high.end, cell.to},
                                           Point{cell.low.end, cell.to}};
        const AreaMoments moments = moments_of(corners, {0, 0});
        area.add(moments.area);
        mx.add(moments.moment.x);
        my.add(moments.moment.y);
    }
    region.area = area.value();
    if (region.area != 0) {
        region.centroid = axes.to_plan({mx.value() / region.area, my.value() / region.area});
    }
    region.rings = RingTracer(edges.finish(), noise).trace();
    std::sort(region.rings.begin(), region.rings.end(),
              [](const Ring& l, const Ring& r) { return signed_area(l) > signed_area(r); });
    for (Ring& ring : region.rings) {
        for (Point& p : ring) {
            p = axes.to_plan(p);
        }
    }
    return region;
}

} // namespace

std::vector<Region> regions_of(const Sharing& sharing, [[maybe_unused]] double chord_error) {
    std::vector<std::uint32_t> order;
    order.reserve(sharing.cells.size());
    for (std::uint32_t c = 0; c < sharing.cells.size(); ++c) {
        if (!sharing.transfers[c].empty()) {
            order.push_back(c);
        }
    }
    const auto key = [&](std::uint32_t c) {
        return std::pair(sharing.cells[c].deck, sharing.transfers[c].front().carrier);
    };
    std::stable_sort(order.begin(), order.end(),
                     [&](std::uint32_t l, std::uint32_t r) { return key(l) < key(r); });
    const double noise = noise_in(sharing);
    std::vector<Region> regions;
    for (std::size_t i = 0; i < order.size();) {
        std::size_t end = i + 1;
        while (end < order.size() && key(order[end]) == key(order[i])) {
            ++end;
        }
        Region region = region_of(sharing, std::span(order).subspan(i, end - i), noise);
        if (!region.rings.empty()) {
            regions.push_back(std::move(region));
        }
        i = end;
    }
    return regions;
}

RUNNEL_NAMESPACE_END
