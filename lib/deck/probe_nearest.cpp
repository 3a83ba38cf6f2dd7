#include "deck/probes.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Edge {
    Point a, b;
};

bool is_inside(std::span<const Edge> edges, Point p) {
    bool inside = false;
    for (const Edge& e : edges) {
        if ((e.a.y > p.y) != (e.b.y > p.y) &&
            p.x < e.a.x + (e.b.x - e.a.x) * ((p.y - e.a.y) / (e.b.y - e.a.y))) {
            inside = !inside;
        }
    }
    return inside;
}

double distance_to_edges(std::span<const Edge> edges, Point p) {
    double nearest = std::numeric_limits<double>::infinity();
    for (const Edge& e : edges) {
        nearest = std::min(nearest, distance_to_segment(p, e.a, e.b));
    }
    return nearest;
}

/// Length of a line within the closed deck, by pieces between its crossings with the edges and the feet of
/// their ends. A piece within `snap` of an edge lies along it.
double length_in(std::span<const Edge> edges, Point from, Point to, double snap) {
    std::vector<double> cuts{0, 1};
    const Point d = to - from;
    for (const Edge& edge : edges) {
        const Point e = edge.b - edge.a;
        if (const double turn = cross(d, e); turn != 0) {
            cuts.push_back(std::clamp(cross(edge.a - from, e) / turn, 0.0, 1.0));
        }
        cuts.push_back(std::clamp(dot(edge.a - from, d) / dot(d, d), 0.0, 1.0));
    }
    std::sort(cuts.begin(), cuts.end());
    double length = 0;
    for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
        const Point middle = between(from, to, (cuts[k] + cuts[k + 1]) / 2);
        if (cuts[k + 1] > cuts[k] && (is_inside(edges, middle) || distance_to_edges(edges, middle) <= snap)) {
            length += (cuts[k + 1] - cuts[k]) * norm(d);
        }
    }
    return length;
}

class NearestProbe : public OwnerProbe {
public:
    NearestProbe(const FramedDeck& deck, std::span<const ProbedCarrier> carriers, Tolerance tolerance)
        : snap_(tolerance.snap) {
        add_edges(deck.outline);
        for (const Ring& opening : deck.openings) {
            add_edges(opening);
        }
        double size = 0;
        for (const Point& p : deck.outline) {
            size = std::max(size, distance(p, deck.outline.front()));
        }
        constexpr double trusted_digits =
            1e-8; // of a deck's size: what an ill-conditioned border may be off by
        // Carriers may have been fitted to deck edges, or edges to carriers, by `snap`.
        margin_ = trusted_digits * size + 4 * tolerance.noise + tolerance.snap;
        for (const ProbedCarrier& carrier : carriers) {
            add_carrier(deck, carrier);
        }
    }

    [[nodiscard]] Answer ask(Point p) const override {
        Answer answer;
        if (distance_to_edges(edges_, p) <= margin_) {
            return answer;
        }
        answer.inside = is_inside(edges_, p);
        if (carriers_.empty()) {
            answer.clear = true;
            return answer;
        }
        double nearest = std::numeric_limits<double>::infinity();
        for (const Carrying& c : carriers_) {
            nearest = std::min(nearest, distance_to_segment(p, c.line.from, c.line.to));
        }
        std::vector<const Carrying*> tied;
        for (const Carrying& c : carriers_) {
            if (distance_to_segment(p, c.line.from, c.line.to) <= nearest + 4 * margin_) {
                tied.push_back(&c);
            }
        }
        decide(p, tied, answer);
        return answer;
    }

protected:
    struct Carrying {
        ProbedCarrier line;
        bool doubtful = false; ///< shares hardly more than a point with the deck
    };

    [[nodiscard]] const std::vector<Carrying>& carriers() const { return carriers_; }
    [[nodiscard]] double margin() const { return margin_; }

    /// Whether the straight way from a point of the deck to another place stays in it.
    [[nodiscard]] bool way_stays(Point p, Point q) const {
        return std::none_of(edges_.begin(), edges_.end(), [&](const Edge& e) {
            const Point d = q - p;
            const double to_a = cross(d, e.a - p);
            const double to_b = cross(d, e.b - p);
            const Point along = e.b - e.a;
            const double from_p = cross(along, p - e.a);
            const double from_q = cross(along, q - e.a);
            const double reach = norm(along) * (margin_ + snap_);
            return to_a * to_b < 0 && from_p * from_q < 0 && std::abs(from_q) > reach;
        });
    }

private:
    void add_edges(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            edges_.push_back({ring[i], ring[(i + 1) % ring.size()]});
        }
    }

    void add_carrier(const FramedDeck& deck, const ProbedCarrier& carrier) {
        if (deck.span == SpanKind::columns && carrier.column) {
            const double off = is_inside(edges_, carrier.from) ? 0 : distance_to_edges(edges_, carrier.from);
            if (off <= 2 * snap_) {
                carriers_.push_back({carrier, off > snap_ / 2});
            }
        } else if (!carrier.column) {
            // Whether it carries hangs on `snap` alone where a little more or less of it would change that.
            const double least = length_in(edges_, carrier.from, carrier.to, snap_ / 2);
            const double most = length_in(edges_, carrier.from, carrier.to, 2 * snap_);
            if (most > snap_ / 2) {
                carriers_.push_back({carrier, least <= 4 * snap_ || most - least > 4 * snap_});
            }
        }
    }

    static bool is_end(const ProbedCarrier& line, Point foot, double margin) {
        return distance(line.from, foot) <= margin || distance(line.to, foot) <= margin;
    }

    /// Between carriers that are equally near only a shared end decides.
    void decide(Point p, const std::vector<const Carrying*>& tied, Answer& answer) const {
        for (const Carrying* c : tied) {
            if (c->doubtful) {
                return;
            }
        }
        if (tied.size() == 1) {
            answer.clear = true;
            answer.carrier = tied.front()->line.number;
            return;
        }
        const double reach = snap_ + 8 * margin_;
        const ProbedCarrier& first = tied.front()->line;
        const Point end = distance(p, first.from) < distance(p, first.to) ? first.from : first.to;
        double best = std::numeric_limits<double>::infinity();
        double second = best;
        for (const Carrying* c : tied) {
            const ProbedCarrier& line = c->line;
            if (!is_end(line, end, reach)) {
                return; // equally near, but not by an end that they share
            }
            if (distance_to_segment(p, line.from, line.to) < distance(p, end) - 4 * margin_) {
                return;
            }
            const double angle = line.column ? -1 : angle_at(line, end, p);
            if (angle < best) {
                second = best;
                best = angle;
                answer.carrier = line.number;
            } else {
                second = std::min(second, angle);
            }
        }
        const double away = distance(p, end);
        answer.clear = (second - best) * away > 8 * margin_ + 2 * snap_;
    }

    /// Angle between the way to p and the line's own direction, seen from its end.
    static double angle_at(const ProbedCarrier& line, Point end, Point p) {
        const bool at_from = distance(line.from, end) < distance(line.to, end);
        const Point direction = at_from ? line.to - line.from : line.from - line.to;
        const Point way = p - end;
        return std::atan2(std::abs(cross(direction, way)), dot(direction, way));
    }

    double snap_;
    double margin_ = 0;
    std::vector<Edge> edges_;
    std::vector<Carrying> carriers_;
};

class FixityProbe : public NearestProbe {
public:
    using NearestProbe::NearestProbe;

    [[nodiscard]] Answer ask(Point p) const override {
        Answer answer = NearestProbe::ask(p);
        answer.clear = answer.clear && !carriers().empty(); // ties of the nearest are left out here too
        return answer;
    }

    [[nodiscard]] bool accepts(Point p, const Answer& answer, std::uint32_t owner) const override {
        if (owner == answer.carrier) {
            return true;
        }
        const Carrying* nearest = find(answer.carrier);
        const Carrying* taker = find(owner);
        if (nearest == nullptr || taker == nullptr) {
            return false;
        }
        const Point foot = foot_on(nearest->line, p);
        if (!way_stays(p, foot)) {
            return true; // no carrier of this panel
        }
        const Point a = taker->line.from;
        const Point d = taker->line.to - a;
        const double square_to_line = std::abs(cross(d, p - a)) / norm(d);
        return square_to_line <= std::sqrt(3.0) * (distance(p, foot) + margin()) + margin();
    }

private:
    [[nodiscard]] const Carrying* find(std::uint32_t number) const {
        for (const Carrying& c : carriers()) {
            if (c.line.number == number) {
                return &c;
            }
        }
        return nullptr;
    }
    static Point foot_on(const ProbedCarrier& line, Point p) {
        const Point d = line.to - line.from;
        return between(line.from, line.to, std::clamp(dot(p - line.from, d) / dot(d, d), 0.0, 1.0));
    }
};

} // namespace

std::unique_ptr<OwnerProbe> probe_fixity(const FramedDeck& deck, std::span<const ProbedCarrier> carriers,
                                         Tolerance tolerance) {
    return std::make_unique<FixityProbe>(deck, carriers, tolerance);
}

std::unique_ptr<OwnerProbe> probe_nearest(const FramedDeck& deck, std::span<const ProbedCarrier> carriers,
                                          Tolerance tolerance) {
    return std::make_unique<NearestProbe>(deck, carriers, tolerance);
}

RUNNEL_NAMESPACE_END
