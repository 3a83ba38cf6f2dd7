#include "deck/probes.hpp"
#include "geometry/box_tree.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Edge {
    Point a, b;
};

/// The edges of a deck, found by box: a big deck with many openings is asked often.
class DeckEdges {
public:
    explicit DeckEdges(const FramedDeck& deck) {
        add(deck.outline);
        for (const Ring& opening : deck.openings) {
            add(opening);
        }
        std::vector<Box> boxes;
        boxes.reserve(edges_.size());
        for (const Edge& e : edges_) {
            boxes.push_back(box_of(e.a, e.b));
            right_ = std::max(right_, boxes.back().high.x);
        }
        finder_ = BoxFinder(std::move(boxes));
    }

    /// Calls f(edge) for the edges whose boxes meet `box`.
    template <class F>
    void visit(const Box& box, F f) const {
        finder_.find(box, near_);
        for (const std::uint32_t i : near_) {
            f(edges_[i]);
        }
    }

    [[nodiscard]] bool is_inside(Point p) const {
        bool inside = false;
        visit({p, {std::max(p.x, right_), p.y}}, [&](const Edge& e) {
            if ((e.a.y > p.y) != (e.b.y > p.y) &&
                p.x < e.a.x + (e.b.x - e.a.x) * ((p.y - e.a.y) / (e.b.y - e.a.y))) {
                inside = !inside;
            }
        });
        return inside;
    }

    /// Distance to the nearest edge within `reach`; infinite if none is that near.
    [[nodiscard]] double distance_within(Point p, double reach) const {
        double nearest = std::numeric_limits<double>::infinity();
        visit(box_of(p, p).grown(2 * reach),
              [&](const Edge& e) { nearest = std::min(nearest, distance_to_segment(p, e.a, e.b)); });
        return nearest <= reach ? nearest : std::numeric_limits<double>::infinity();
    }

    /// Length of a line within the closed deck, by pieces between its crossings with the edges and the feet
    /// of their ends. A piece within `snap` of an edge lies along it.
    [[nodiscard]] double length_in(Point from, Point to, double snap) const {
        std::vector<double> cuts{0, 1};
        const Point d = to - from;
        const auto add_cut = [&](double at) {
            if (at > 0 && at < 1) {
                cuts.push_back(at);
            }
        };
        visit(box_of(from, to).grown(2 * snap), [&](const Edge& edge) {
            const Point e = edge.b - edge.a;
            if (const double turn = cross(d, e); turn != 0) {
                add_cut(cross(edge.a - from, e) / turn);
            }
            add_cut(dot(edge.a - from, d) / dot(d, d));
            add_cut(dot(edge.b - from, d) / dot(d, d));
        });
        std::sort(cuts.begin(), cuts.end());
        double length = 0;
        for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
            const Point middle = between(from, to, (cuts[k] + cuts[k + 1]) / 2);
            if (cuts[k + 1] > cuts[k] && (is_inside(middle) || distance_within(middle, snap) <= snap)) {
                length += (cuts[k + 1] - cuts[k]) * norm(d);
            }
        }
        return length;
    }

private:
    void add(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            edges_.push_back({ring[i], ring[(i + 1) % ring.size()]});
        }
    }

    std::vector<Edge> edges_;
    BoxFinder finder_;
    double right_ = -std::numeric_limits<double>::infinity();
    mutable std::vector<std::uint32_t> near_; ///< of one question; a probe serves one thread
};

class NearestProbe : public OwnerProbe {
public:
    NearestProbe(const FramedDeck& deck, std::span<const ProbedCarrier> carriers, Tolerance tolerance)
        : snap_(tolerance.snap), edges_(deck) {
        double size = 0;
        for (const Point& p : deck.outline) {
            size = std::max(size, distance(p, deck.outline.front()));
        }
        // Of a deck's size: a border that doubles place badly keeps that of the diagram's grid, whose steps
        // are about this long. Points that near to one are not judged.
        constexpr double trusted_digits = 1e-8;
        // Carriers may have been fitted to deck edges, or edges to carriers, by `snap`.
        margin_ = trusted_digits * size + 4 * tolerance.noise + tolerance.snap;
        candidates_.reserve(carriers.size());
        for (const ProbedCarrier& carrier : carriers) {
            if (!carrier.column || deck.span == SpanKind::columns) {
                candidates_.push_back({carrier, Part::unknown});
            }
        }
    }

    [[nodiscard]] Answer ask(Point p) const override {
        Answer answer;
        if (edges_.distance_within(p, margin_) <= margin_) {
            return answer;
        }
        answer.inside = edges_.is_inside(p);
        const std::vector<const Candidate*> tied = nearest_to(p);
        if (tied.empty()) {
            answer.clear = true;
            return answer;
        }
        decide(p, tied, answer);
        return answer;
    }

protected:
    /// What a carrier near a deck has to do with it.
    enum class Part : std::uint8_t {
        unknown,  ///< not asked yet
        idle,     ///< it does not carry the deck
        doubtful, ///< it shares hardly more than a point with the deck
        carries
    };
    struct Candidate {
        ProbedCarrier line;
        mutable Part part = Part::unknown;
    };

    [[nodiscard]] const std::vector<Candidate>& candidates() const { return candidates_; }
    [[nodiscard]] double margin() const { return margin_; }

    /// Told when first asked: few of a big deck's carriers are near any of the points asked for.
    [[nodiscard]] Part part_of(const Candidate& candidate) const {
        if (candidate.part == Part::unknown) {
            candidate.part = find_part(candidate.line);
        }
        return candidate.part;
    }

    /// Whether the straight way from a point of the deck to another place stays in it.
    [[nodiscard]] bool way_stays(Point p, Point q) const {
        bool stays = true;
        edges_.visit(box_of(p, q).grown(margin_), [&](const Edge& e) {
            const Point d = q - p;
            const double to_a = cross(d, e.a - p);
            const double to_b = cross(d, e.b - p);
            const Point along = e.b - e.a;
            const double from_p = cross(along, p - e.a);
            const double from_q = cross(along, q - e.a);
            const double reach = norm(along) * (margin_ + snap_);
            stays = stays && !(to_a * to_b < 0 && from_p * from_q < 0 && std::abs(from_q) > reach);
        });
        return stays;
    }

private:
    [[nodiscard]] Part find_part(const ProbedCarrier& carrier) const {
        if (carrier.column) {
            const double off =
                edges_.is_inside(carrier.from) ? 0 : edges_.distance_within(carrier.from, 2 * snap_);
            return off > 2 * snap_ ? Part::idle : off > snap_ / 2 ? Part::doubtful : Part::carries;
        }
        // Whether it carries hangs on `snap` alone where a little more or less of it would change that.
        const double most = edges_.length_in(carrier.from, carrier.to, 2 * snap_);
        if (!(most > snap_ / 2)) {
            return Part::idle;
        }
        const double least = edges_.length_in(carrier.from, carrier.to, snap_ / 2);
        return least <= 4 * snap_ || most - least > 4 * snap_ ? Part::doubtful : Part::carries;
    }

    /// The carriers of the deck that are as near to p as any, but for the margin; in the order given.
    [[nodiscard]] std::vector<const Candidate*> nearest_to(Point p) const {
        std::vector<std::pair<double, const Candidate*>> by_distance;
        by_distance.reserve(candidates_.size());
        for (const Candidate& c : candidates_) {
            if (c.part != Part::idle) {
                by_distance.emplace_back(distance_to_segment(p, c.line.from, c.line.to), &c);
            }
        }
        const auto farther = [](const auto& l, const auto& r) { return l.first > r.first; };
        std::make_heap(by_distance.begin(), by_distance.end(), farther);
        std::vector<const Candidate*> tied;
        double reach = std::numeric_limits<double>::infinity();
        while (!by_distance.empty() && by_distance.front().first <= reach) {
            const auto [distance, candidate] = by_distance.front();
            std::pop_heap(by_distance.begin(), by_distance.end(), farther);
            by_distance.pop_back();
            if (part_of(*candidate) != Part::idle) {
                reach = std::min(reach, distance + 4 * margin_);
                tied.push_back(candidate);
            }
        }
        std::sort(tied.begin(), tied.end());
        return tied;
    }

    static bool is_end(const ProbedCarrier& line, Point foot, double margin) {
        return distance(line.from, foot) <= margin || distance(line.to, foot) <= margin;
    }

    /// Between carriers that are equally near only a shared end decides.
    void decide(Point p, const std::vector<const Candidate*>& tied, Answer& answer) const {
        for (const Candidate* c : tied) {
            if (part_of(*c) == Part::doubtful) {
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
        for (const Candidate* c : tied) {
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
    DeckEdges edges_;
    std::vector<Candidate> candidates_;
};

class FixityProbe : public NearestProbe {
public:
    using NearestProbe::NearestProbe;

    [[nodiscard]] Answer ask(Point p) const override {
        Answer answer = NearestProbe::ask(p);
        // Ties of the nearest are left out here too.
        answer.clear = answer.clear && answer.carrier != none;
        return answer;
    }

    [[nodiscard]] bool accepts(Point p, const Answer& answer, std::uint32_t owner) const override {
        if (owner == answer.carrier) {
            return true;
        }
        const Candidate* nearest = find(answer.carrier);
        const Candidate* taker = find(owner);
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
    [[nodiscard]] const Candidate* find(std::uint32_t number) const {
        for (const Candidate& c : candidates()) {
            if (c.line.number == number && part_of(c) != Part::idle) {
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
