#include "deck/region_edges.hpp"
#include "geometry/basic.hpp"

#include <algorithm>
#include <map>
#include <numeric>

// Levels across the strips are the same doubles in all cells of a one-way deck, so shared edges are found by
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

/// Corners with one number each; strips meet at the same levels, bit for bit.
DirectedEdges numbered(std::span<const Edge> edges, double noise) {
    std::vector<std::uint32_t> order(2 * edges.size());
    std::iota(order.begin(), order.end(), 0U);
    const auto point = [edges](std::uint32_t end) {
        return end % 2 == 0 ? edges[end / 2].a : edges[end / 2].b;
    };
    std::sort(order.begin(), order.end(), [&](std::uint32_t l, std::uint32_t r) {
        const Point p = point(l);
        const Point q = point(r);
        return p.y != q.y ? p.y < q.y : p.x < q.x;
    });
    DirectedEdges result;
    result.edges.resize(edges.size());
    Point last{};
    for (const std::uint32_t end : order) {
        const Point p = point(end);
        if (result.corners.empty() || p.y != last.y || p.x - last.x > noise) {
            result.corners.push_back(p);
        }
        last = p;
        DirectedEdges::Edge& edge = result.edges[end / 2];
        (end % 2 == 0 ? edge.tail : edge.head) = static_cast<std::uint32_t>(result.corners.size() - 1);
    }
    return result;
}

} // namespace

DirectedEdges edges_of_strips(const Sharing& sharing, std::span<const std::uint32_t> cells, double noise) {
    RegionEdges edges(noise);
    for (const std::uint32_t c : cells) {
        edges.add(sharing.cells[c]);
    }
    return numbered(edges.finish(), noise);
}

RUNNEL_NAMESPACE_END
