#include "deck/marks.hpp"

#include "geometry/box_tree.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct DeckEdge {
    Point a, b;
};

class MarkFitter {
public:
    MarkFitter(const Ring& outline, const std::vector<Ring>& openings, Tolerance tolerance)
        : edges_(edges_of(outline, openings)), tree_(boxes_of(edges_)), tolerance_(tolerance) {}

    void fit(Point a, Point b, std::uint32_t carrier, std::vector<CarrierMark>& marks) {
        const double length = distance(a, b);
        // Both ends may be off by `snap`, either way.
        if (std::abs(b.y - a.y) <= 2 * tolerance_.snap || !(length > 0)) {
            return;
        }
        tree_.find(box_of(a, b).grown(tolerance_.snap), near_);
        stretches_.clear();
        for (const std::uint32_t e : near_) {
            lay_along(edges_[e], a, b, length, carrier);
        }
        if (stretches_.empty()) {
            marks.push_back({{end_at(a), end_at(b)}, carrier, 0, length});
            return;
        }
        std::sort(stretches_.begin(), stretches_.end(),
                  [](const CarrierMark& l, const CarrierMark& r) { return l.station_a < r.station_a; });
        double from = 0;
        for (CarrierMark stretch : stretches_) {
            if (stretch.station_b - from <= 2 * tolerance_.snap) {
                continue; // an opening's edge on the deck's edge: one of them will do
            }
            if (stretch.station_a < from) {
                const double t = (from - stretch.station_a) / (stretch.station_b - stretch.station_a);
                stretch.line.a = between(stretch.line.a, stretch.line.b, t);
                stretch.station_a = from;
            }
            free_stretch(a, b, length, from, stretch.station_a, carrier, marks);
            marks.push_back(stretch);
            from = stretch.station_b;
        }
        free_stretch(a, b, length, from, length, carrier, marks);
    }

private:
    static std::vector<DeckEdge> edges_of(const Ring& outline, const std::vector<Ring>& openings) {
        std::vector<DeckEdge> edges;
        const auto add = [&edges](const Ring& ring) {
            for (std::size_t i = 0; i < ring.size(); ++i) {
                edges.push_back({ring[i], ring[(i + 1) % ring.size()]});
            }
        };
        add(outline);
        for (const Ring& opening : openings) {
            add(opening);
        }
        return edges;
    }

    static std::vector<Box> boxes_of(const std::vector<DeckEdge>& edges) {
        std::vector<Box> boxes;
        boxes.reserve(edges.size());
        for (const DeckEdge& edge : edges) {
            boxes.push_back(box_of(edge.a, edge.b));
        }
        return boxes;
    }

    /// The stretch of the carrier along an edge, moved on to it where it lies beside it by more than
    /// rounding.
    void lay_along(const DeckEdge& edge, Point a, Point b, double length, std::uint32_t carrier) {
        const double edge_length = distance(edge.a, edge.b);
        const double snap = tolerance_.snap;
        if (edge_length <= snap) {
            return;
        }
        const double ea = station_of(a, edge.a, edge.b);
        const double eb = station_of(b, edge.a, edge.b);
        double low = std::max(0.0, std::min(ea, eb));
        double high = std::min(edge_length, std::max(ea, eb));
        if (high - low <= 2 * snap) {
            return;
        }
        low = low <= snap ? 0 : low;
        high = high >= edge_length - snap ? edge_length : high;
        const Point p = between(edge.a, edge.b, low / edge_length);
        const Point q = between(edge.a, edge.b, high / edge_length);
        const double off = std::max(distance_to_segment(p, a, b), distance_to_segment(q, a, b));
        if (off > snap || off <= tolerance_.noise) {
            return;
        }
        const double sp = std::clamp(station_of(p, a, b), 0.0, length);
        const double sq = std::clamp(station_of(q, a, b), 0.0, length);
        if (std::abs(sp - sq) <= 2 * snap) {
            return; // it crosses the edge
        }
        stretches_.push_back(sp < sq ? CarrierMark{{p, q}, carrier, sp, sq}
                                     : CarrierMark{{q, p}, carrier, sq, sp});
    }

    /// A stretch beside no edge. One within `snap` is but the turn from one edge to the next.
    void free_stretch(Point a, Point b, double length, double from, double to, std::uint32_t carrier,
                      std::vector<CarrierMark>& marks) {
        if (to - from <= 2 * tolerance_.snap) {
            return;
        }
        const Point p = between(a, b, from / length);
        const Point q = between(a, b, to / length);
        marks.push_back({{end_at(p), end_at(q)}, carrier, from, to});
    }

    /// The nearest point on an edge within `snap`; the point itself where there is none, or where it is on
    /// one but for rounding.
    [[nodiscard]] Point end_at(Point p) {
        tree_.find(box_of(p, p).grown(tolerance_.snap), beside_);
        double nearest = tolerance_.snap;
        Point best = p;
        for (const std::uint32_t e : beside_) {
            const DeckEdge& edge = edges_[e];
            const Point d = edge.b - edge.a;
            const double square = dot(d, d);
            const double t = square > 0 ? std::clamp(dot(p - edge.a, d) / square, 0.0, 1.0) : 0.0;
            const Point foot = between(edge.a, edge.b, t);
            const double off = distance(p, foot);
            if (off <= tolerance_.noise) {
                return p;
            }
            if (off < nearest) {
                nearest = off;
                best = foot;
            }
        }
        return best;
    }

    std::vector<DeckEdge> edges_;
    BoxFinder tree_;
    Tolerance tolerance_;
    std::vector<std::uint32_t> near_, beside_;
    std::vector<CarrierMark> stretches_; ///< of one carrier along edges
};

} // namespace

std::vector<CarrierMark> fit_marks(const Ring& outline, const std::vector<Ring>& openings,
                                   std::span<const LineCarrier> carriers, const StripAxes& axes,
                                   Tolerance tolerance) {
    MarkFitter fitter(outline, openings, tolerance);
    std::vector<CarrierMark> marks;
    marks.reserve(carriers.size());
    for (std::uint32_t i = 0; i < carriers.size(); ++i) {
        fitter.fit(axes.to_strip(carriers[i].from), axes.to_strip(carriers[i].to), i, marks);
    }
    return marks;
}

RUNNEL_NAMESPACE_END
