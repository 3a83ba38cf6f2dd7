#include "plan/ring_checks.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>
#include <set>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Up to here looking at all is faster than any index.
constexpr std::size_t small_ring = 16;

bool segments_meet(Point a, Point b, Point c, Point d) {
    const double ca = cross(d - c, a - c);
    const double cb = cross(d - c, b - c);
    const double ac = cross(b - a, c - a);
    const double ad = cross(b - a, d - a);
    return (ca < 0) != (cb < 0) && (ac < 0) != (ad < 0);
}

/// Where two segments cross, or come within `snap` of each other.
std::optional<SelfContact> contact_of(Point a, Point b, Point c, Point d, double snap) {
    if (segments_meet(a, b, c, d)) {
        const double ca = cross(d - c, a - c);
        const double cb = cross(d - c, b - c);
        return SelfContact{between(a, b, ca / (ca - cb)), 0};
    }
    // Apart, they are nearest to each other at an end of one.
    SelfContact nearest{a, distance_to_segment(a, c, d)};
    const auto see = [&nearest](Point p, double gap) {
        if (gap < nearest.gap) {
            nearest = {p, gap};
        }
    };
    see(b, distance_to_segment(b, c, d));
    see(c, distance_to_segment(c, a, b));
    see(d, distance_to_segment(d, a, b));
    return nearest.gap <= snap ? std::optional(nearest) : std::nullopt;
}

class SelfContactSweep {
public:
    SelfContactSweep(const Ring& ring, double snap) : ring_(ring), snap_(snap), order_(Below{this}) {
        // Turned by an angle that no plan is drawn at, so that hardly an edge stands upright in the sweep.
        constexpr double turn = 0.7345;
        const double c = std::cos(turn);
        const double s = std::sin(turn);
        turned_.reserve(ring.size());
        for (const Point& p : ring) {
            const Point q = p - ring.front();
            turned_.push_back({q.x * c - q.y * s, q.x * s + q.y * c});
        }
    }

    std::optional<SelfContact> run() {
        struct Event {
            double x;
            bool starts;
            std::uint32_t edge;
        };
        std::vector<Event> events;
        const auto n = static_cast<std::uint32_t>(ring_.size());
        events.reserve(std::size_t{2} * n);
        for (std::uint32_t e = 0; e < n; ++e) {
            events.push_back({low(e).x, true, e});
            events.push_back({high(e).x, false, e});
        }
        std::sort(events.begin(), events.end(), [](const Event& l, const Event& r) {
            return l.x != r.x ? l.x < r.x : l.starts != r.starts ? !l.starts : l.edge < r.edge;
        });
        std::vector<Order::iterator> handles(n, order_.end());
        for (const Event& event : events) {
            x_ = event.x;
            const std::optional<SelfContact> found =
                event.starts ? enter(event.edge, handles) : leave(event.edge, handles);
            if (found) {
                return found;
            }
        }
        return std::nullopt;
    }

private:
    struct Below {
        const SelfContactSweep* sweep;
        bool operator()(std::uint32_t e, std::uint32_t f) const { return sweep->is_below(e, f); }
    };
    using Order = std::set<std::uint32_t, Below>;

    [[nodiscard]] Point end(std::uint32_t e, bool second) const {
        const std::size_t i = second ? (e + 1) % turned_.size() : e;
        return turned_[i];
    }
    [[nodiscard]] bool runs_forward(std::uint32_t e) const {
        const Point a = end(e, false);
        const Point b = end(e, true);
        return a.x != b.x ? a.x < b.x : a.y < b.y;
    }
    [[nodiscard]] Point low(std::uint32_t e) const { return end(e, !runs_forward(e)); }
    [[nodiscard]] Point high(std::uint32_t e) const { return end(e, runs_forward(e)); }
    [[nodiscard]] double height(std::uint32_t e) const {
        const Point a = low(e);
        const Point b = high(e);
        const double width = b.x - a.x;
        return width > 0 ? a.y + (b.y - a.y) * std::clamp((x_ - a.x) / width, 0.0, 1.0) : a.y;
    }
    [[nodiscard]] bool is_below(std::uint32_t e, std::uint32_t f) const {
        if (e == f) {
            return false;
        }
        const double he = height(e);
        const double hf = height(f);
        if (he != hf) {
            return he < hf;
        }
        const Point de = high(e) - low(e);
        const Point df = high(f) - low(f);
        const double turn = cross(de, df);
        return turn != 0 ? turn > 0 : e < f;
    }

    std::optional<SelfContact> compare(std::uint32_t e, std::uint32_t f) const {
        const auto n = static_cast<std::uint32_t>(ring_.size());
        if ((e + 1) % n == f || (f + 1) % n == e) {
            return std::nullopt; // neighbours are looked at by themselves
        }
        return contact_of(ring_[e], ring_[(e + 1) % n], ring_[f], ring_[(f + 1) % n], snap_);
    }

    std::optional<SelfContact> enter(std::uint32_t e, std::vector<Order::iterator>& handles) {
        const auto it = order_.insert(e).first;
        handles[e] = it;
        if (it != order_.begin()) {
            if (const auto found = compare(*std::prev(it), e)) {
                return found;
            }
        }
        const auto above = std::next(it);
        return above != order_.end() ? compare(e, *above) : std::nullopt;
    }
    std::optional<SelfContact> leave(std::uint32_t e, std::vector<Order::iterator>& handles) {
        const auto it = handles[e];
        if (it == order_.end()) {
            return std::nullopt;
        }
        const auto above = std::next(it);
        std::optional<SelfContact> found;
        if (it != order_.begin() && above != order_.end()) {
            found = compare(*std::prev(it), *above);
        }
        order_.erase(it);
        return found;
    }

    const Ring& ring_;
    double snap_;
    std::vector<Point> turned_;
    double x_ = 0;
    Order order_;
};

std::optional<SelfContact> contact_of_neighbours(const Ring& ring, double snap) {
    const std::size_t n = ring.size();
    for (std::size_t i = 0; i < n; ++i) {
        const Point before = ring[i];
        const Point corner = ring[(i + 1) % n];
        const Point after = ring[(i + 2) % n];
        if (const double gap = distance_to_segment(before, corner, after); gap <= snap) {
            return SelfContact{before, gap};
        }
        if (const double gap = distance_to_segment(after, before, corner); gap <= snap) {
            return SelfContact{after, gap};
        }
    }
    return std::nullopt;
}

std::optional<SelfContact> contact_of_all(const Ring& ring, double snap) {
    const std::size_t n = ring.size();
    for (std::size_t i = 0; i < n; ++i) {
        for (std::size_t j = i + 2; j < n; ++j) {
            if (i == 0 && j + 1 == n) {
                continue;
            }
            if (const auto p = contact_of(ring[i], ring[i + 1], ring[j], ring[(j + 1) % n], snap)) {
                return p;
            }
        }
    }
    return std::nullopt;
}

} // namespace

double mean_width(const Ring& ring) {
    double around = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        around += distance(ring[i], ring[(i + 1) % ring.size()]);
    }
    return around > 0 ? 2 * std::abs(signed_area(ring)) / around : 0;
}

Ring without_repeats(const Ring& ring, double snap) {
    Ring kept;
    kept.reserve(ring.size());
    for (const Point& p : ring) {
        if (kept.empty() || distance(kept.back(), p) > snap) {
            kept.push_back(p);
        }
    }
    while (kept.size() > 1 && distance(kept.front(), kept.back()) <= snap) {
        kept.pop_back();
    }
    return kept;
}

std::optional<SelfContact> self_contact(const Ring& ring, double snap) {
    if (const auto p = contact_of_neighbours(ring, snap)) {
        return p;
    }
    return ring.size() <= small_ring ? contact_of_all(ring, snap) : SelfContactSweep(ring, snap).run();
}

RingQuery::RingQuery(const Ring& ring, double snap) : ring_(ring), snap_(snap), box_(box_of(ring)) {
    if (ring.size() > small_ring) {
        std::vector<Box> boxes;
        boxes.reserve(ring.size());
        for (std::uint32_t i = 0; i < ring.size(); ++i) {
            boxes.push_back(box_of(corner(i), corner(i + 1)));
        }
        tree_.emplace(boxes);
    }
}

void RingQuery::edges_near(const Box& box, std::vector<std::uint32_t>& found) const {
    if (tree_) {
        tree_->find(box, found);
        return;
    }
    found.clear();
    for (std::uint32_t i = 0; i < ring_.size(); ++i) {
        if (box_of(corner(i), corner(i + 1)).meets(box)) {
            found.push_back(i);
        }
    }
}

bool RingQuery::holds(Point p) const {
    if (!box_.meets({p, p})) {
        return false;
    }
    std::vector<std::uint32_t> edges;
    edges_near({p, {box_.high.x, p.y}}, edges);
    bool inside = false;
    for (const std::uint32_t i : edges) {
        const Point a = corner(i);
        const Point b = corner(i + 1);
        if ((a.y > p.y) != (b.y > p.y)) {
            const bool rises = b.y > a.y;
            inside = inside != ((cross(b - a, p - a) > 0) == rises);
        }
    }
    return inside;
}

bool RingQuery::is_near(Point p) const {
    std::vector<std::uint32_t> edges;
    edges_near(Box{p, p}.grown(snap_), edges);
    return std::any_of(edges.begin(), edges.end(), [&](std::uint32_t i) {
        return distance_to_segment(p, corner(i), corner(i + 1)) <= snap_;
    });
}

bool RingQuery::is_beyond(Point p, Side side) const {
    return holds(p) == (side == Side::inside) && !is_near(p);
}

/// An edge that comes near no edge of the ring lies on one side of it; another is looked at in the pieces
/// into which the ring's edges and corners part it.
std::optional<Point> RingQuery::point_beyond(const Ring& other, Side side) const {
    if (is_beyond(other.front(), side)) {
        return other.front();
    }
    std::vector<std::uint32_t> near;
    std::vector<double> parts;
    for (std::size_t i = 0; i < other.size(); ++i) {
        const Point a = other[i];
        const Point b = other[(i + 1) % other.size()];
        edges_near(box_of(a, b).grown(snap_), near);
        if (near.empty()) {
            continue;
        }
        parts.assign({0, 0, 1, 1}); // the ends twice: they are looked at themselves
        const double length = distance(a, b);
        for (const std::uint32_t e : near) {
            const Point c = corner(e);
            const Point d = corner(e + 1);
            if (distance_to_segment(c, a, b) <= snap_) {
                parts.push_back(std::clamp(station_of(c, a, b) / length, 0.0, 1.0));
            }
            if (segments_meet(a, b, c, d)) {
                const double ca = cross(d - c, a - c);
                const double cb = cross(d - c, b - c);
                parts.push_back(ca / (ca - cb));
            }
        }
        std::sort(parts.begin(), parts.end());
        for (std::size_t k = 0; k + 1 < parts.size(); ++k) {
            const Point p = between(a, b, (parts[k] + parts[k + 1]) / 2);
            if (is_beyond(p, side)) {
                return p;
            }
        }
    }
    return std::nullopt;
}

Point interior_point(const Ring& ring) {
    std::vector<double> levels;
    for (const Point& p : ring) {
        levels.push_back(p.y);
    }
    std::sort(levels.begin(), levels.end());
    double y = levels.front();
    double highest = 0;
    for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
        if (levels[i + 1] - levels[i] > highest) {
            highest = levels[i + 1] - levels[i];
            y = (levels[i] + levels[i + 1]) / 2;
        }
    }
    std::vector<double> crossings;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if ((a.y > y) != (b.y > y)) {
            crossings.push_back(a.x + (b.x - a.x) * ((y - a.y) / (b.y - a.y)));
        }
    }
    std::sort(crossings.begin(), crossings.end());
    Point best = ring.front();
    double widest = 0;
    for (std::size_t i = 0; i + 1 < crossings.size(); i += 2) {
        if (crossings[i + 1] - crossings[i] > widest) {
            widest = crossings[i + 1] - crossings[i];
            best = {(crossings[i] + crossings[i + 1]) / 2, y};
        }
    }
    return best;
}

std::optional<Point> shared_point(const RingQuery& a, const Ring& ring_a, const RingQuery& b,
                                  const Ring& ring_b) {
    if (const auto p = b.point_beyond(ring_a, Side::inside)) {
        return p;
    }
    if (const auto p = a.point_beyond(ring_b, Side::inside)) {
        return p;
    }
    // Neither boundary enters the other: apart, or the same ring twice.
    const Point p = interior_point(ring_a);
    return b.holds(p) ? std::optional(p) : std::nullopt;
}

RUNNEL_NAMESPACE_END
