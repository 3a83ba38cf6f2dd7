#include "deck/probes.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// What a straight line along the strip meets on one side of a point: the nearest edge and the nearest
/// carrier.
struct Beside {
    double edge = std::numeric_limits<double>::infinity();
    double carrier = std::numeric_limits<double>::infinity();
    double second = std::numeric_limits<double>::infinity(); ///< the next carrier, to see near ties
    double blur = 0; ///< how far fitting may move the carrier or the edge along the strip
    std::uint32_t number = none;
};

class StripProbe : public OwnerProbe {
public:
    StripProbe(const FramedDeck& deck, const StripAxes& axes, std::span<const ProbedCarrier> carriers,
               Tolerance tolerance)
        : axes_(axes), noise_(4 * tolerance.noise), reach_(2 * tolerance.snap),
          margin_(4 * tolerance.noise + 2 * tolerance.snap) {
        add_edges(deck.outline);
        for (const Ring& opening : deck.openings) {
            add_edges(opening);
        }
        for (const ProbedCarrier& carrier : carriers) {
            const Line line{axes_.to_strip(carrier.from), axes_.to_strip(carrier.to), carrier.number};
            if (!carrier.column && std::abs(line.b.y - line.a.y) > tolerance.snap) {
                carriers_.push_back(line);
            }
        }
    }

    /// Clear only if all points within reach have the same answer: carriers and edges may have been fitted to
    /// each other by that much.
    [[nodiscard]] Answer ask(Point plan_point) const override {
        const Point p = axes_.to_strip(plan_point);
        Answer answer = ask_once(p);
        for (const Point d : {Point{reach_, 0}, Point{-reach_, 0}, Point{0, reach_}, Point{0, -reach_}}) {
            if (!answer.clear) {
                break;
            }
            const Answer beside = ask_once(p + d);
            answer.clear = beside.clear && beside.inside == answer.inside && beside.carrier == answer.carrier;
        }
        return answer;
    }

private:
    struct Line {
        Point a, b;
        std::uint32_t number = none;
    };

    void add_edges(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            edges_.push_back({axes_.to_strip(ring[i]), axes_.to_strip(ring[(i + 1) % ring.size()]), none});
        }
    }

    [[nodiscard]] Answer ask_once(Point p) const {
        Beside low;
        Beside high;
        std::size_t crossings = 0;
        Answer answer;
        for (const Line& line : edges_) {
            if (near_end(line, p.y)) {
                return answer;
            }
            if (const auto along = at(line, p.y)) {
                crossings += *along > p.x ? 1 : 0;
                Beside& side = *along > p.x ? high : low;
                const double d = std::abs(*along - p.x);
                if (d < side.edge) {
                    side.edge = d;
                    side.blur = std::max(side.blur, blur_of(line));
                }
            }
        }
        for (const Line& line : carriers_) {
            if (near_end(line, p.y)) {
                return answer;
            }
            if (const auto along = at(line, p.y)) {
                Beside& side = *along > p.x ? high : low;
                const double d = std::abs(*along - p.x);
                if (d < side.carrier) {
                    side.second = side.carrier;
                    side.carrier = d;
                    side.number = line.number;
                    side.blur = std::max(side.blur, blur_of(line));
                } else {
                    side.second = std::min(side.second, d);
                }
            }
        }
        answer.inside = crossings % 2 == 1;
        decide(low, high, answer);
        return answer;
    }

    [[nodiscard]] bool near_end(const Line& line, double across) const {
        return std::abs(line.a.y - across) <= margin_ || std::abs(line.b.y - across) <= margin_;
    }
    /// A line that meets the strips at a flat angle moves far along them when it moves a little square to
    /// itself.
    [[nodiscard]] double blur_of(const Line& line) const {
        return margin_ * distance(line.a, line.b) / std::abs(line.b.y - line.a.y);
    }
    static std::optional<double> at(const Line& line, double across) {
        if ((line.a.y > across) == (line.b.y > across)) {
            return std::nullopt;
        }
        return line.a.x + (line.b.x - line.a.x) * ((across - line.a.y) / (line.b.y - line.a.y));
    }

    void decide(const Beside& low, const Beside& high, Answer& answer) const {
        // A carrier on the deck's edge carries it: it counts as before the edge. One a little behind it may
        // have been fitted to it or not.
        const auto behind = [&](const Beside& side) {
            return side.carrier > side.edge + noise_ && side.carrier <= side.edge + side.blur;
        };
        if (behind(low) || behind(high)) {
            return;
        }
        const bool low_first = low.carrier <= low.edge + noise_ && low.number != none;
        const bool high_first = high.carrier <= high.edge + noise_ && high.number != none;
        const bool tie =
            (low_first && high_first && std::abs(low.carrier - high.carrier) <= low.blur + high.blur) ||
            (low_first && low.second - low.carrier <= low.blur) ||
            (high_first && high.second - high.carrier <= high.blur) || low.edge <= low.blur ||
            high.edge <= high.blur || low.carrier <= low.blur || high.carrier <= high.blur;
        if (tie) {
            return;
        }
        answer.clear = true;
        if (low_first && (!high_first || low.carrier < high.carrier)) {
            answer.carrier = low.number;
        } else if (high_first) {
            answer.carrier = high.number;
        }
    }

    StripAxes axes_;
    double noise_;
    double reach_;
    double margin_; ///< points nearer than this to a border are left out
    std::vector<Line> edges_;
    std::vector<Line> carriers_;
};

} // namespace

std::unique_ptr<OwnerProbe> probe_strips(const FramedDeck& deck, const StripAxes& axes,
                                         std::span<const ProbedCarrier> carriers, Tolerance tolerance) {
    return std::make_unique<StripProbe>(deck, axes, carriers, tolerance);
}

RUNNEL_NAMESPACE_END
