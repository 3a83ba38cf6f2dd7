#include "geometry/basic.hpp"
#include "load/fit.hpp"
#include "load/strip_loads.hpp"
#include "load/strip_loads_window.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A stretch of line load over a strip, in strip axes; t runs over it from 0 to 1.
struct StandingLine {
    Point a, b;
    double length = 0;
    double w_a = 0, w_b = 0;
    std::uint32_t load_case = none;
    Source source;

    [[nodiscard]] Point at(double t) const { return between(a, b, t); }
    [[nodiscard]] double w(double t) const { return (1 - t) * w_a + t * w_b; }
};

/// Shares line loads that stand on one strip among its carriers.
class StandingSharer {
public:
    StandingSharer(const Sharing& sharing, std::uint32_t strip, Collector& collector)
        : strip_(sharing, strip), collector_(collector) {}

    /// Along the strips: on each carrier a point, where its part of the load acts. A part that pushes both
    /// ways may act beyond the stretch; then one point at each end keeps force and moment.
    void put_points(const StandingLine& line) {
        struct Part {
            double force = 0, moment = 0; // about t = 0
        };
        std::vector<Part> parts(strip_.size());
        const std::vector<double> stops = stops_of(line);
        constexpr std::size_t points = 5;
        for (std::size_t k = 0; k + 1 < stops.size(); ++k) {
            const CarrierWindow window = window_of(line, stops[k], stops[k + 1]);
            values_.resize(window.size());
            for_gauss_points(points, [&](double y, double weight) {
                const double t = (1 - y) * stops[k] + y * stops[k + 1];
                take(line, window, t, values_);
                for (std::size_t i = 0; i < window.size(); ++i) {
                    const double force = weight * (stops[k + 1] - stops[k]) * line.length * values_[i];
                    parts[window.first + i].force += force;
                    parts[window.first + i].moment += force * t;
                }
            });
        }
        for (std::size_t i = 0; i < parts.size(); ++i) {
            const Part& part = parts[i];
            const bool within =
                part.moment * part.force >= 0 && std::abs(part.moment) <= std::abs(part.force);
            if (part.force == 0 && part.moment == 0) {
                continue;
            }
            if (line.a.y == line.b.y) {
                put_point(line, i, 0, part.force);
            } else if (within) {
                put_point(line, i, part.moment / part.force, part.force);
            } else {
                put_point(line, i, 0, part.force - part.moment);
                put_point(line, i, 1, part.moment);
            }
        }
    }

    /// Across the strips: on each carrier a line.
    void put_lines(const StandingLine& line) {
        const std::vector<double> stops = stops_of(line);
        for (std::size_t k = 0; k + 1 < stops.size(); ++k) {
            const double from = stops[k];
            const double to = stops[k + 1];
            const CarrierWindow window = window_of(line, from, to);
            const Functions taken = [&](double y, std::span<double> values) {
                take(line, window, (1 - y) * from + y * to, values);
            };
            const std::optional<std::size_t> degree = degree_of(line, window, from, to);
            const QuarticFit fit =
                degree ? exact_quartics(window.size(), *degree, taken) : fit_quartics(window.size(), taken);
            for (const QuarticFit::Piece& piece : fit.pieces) {
                put_piece(line, window.first + piece.function, (1 - piece.from) * from + piece.from * to,
                          (1 - piece.to) * from + piece.to * to, piece.c, piece.error);
            }
        }
    }

private:
    /// 0, 1, and where the line crosses carriers: there a strip of several spans passes to the next.
    [[nodiscard]] std::vector<double> stops_of(const StandingLine& line) const {
        std::vector<double> stops{0, 1};
        if (strip_.bends()) {
            const std::size_t at_a = strip_.carriers_below(line.a.x, line.a.y);
            const std::size_t at_b = strip_.carriers_below(line.b.x, line.b.y);
            for (std::size_t i = std::min(at_a, at_b); i < std::max(at_a, at_b); ++i) {
                const double off_a = line.a.x - strip_.along(i, line.a.y);
                const double off_b = line.b.x - strip_.along(i, line.b.y);
                const double t = off_a / (off_a - off_b);
                if (t > 0 && t < 1) {
                    stops.push_back(t);
                }
            }
            std::sort(stops.begin(), stops.end());
        }
        return stops;
    }

    [[nodiscard]] CarrierWindow window_of(const StandingLine& line, double from, double to) const {
        // At one level the span is the same for both ends, but for the carriers' lean.
        const Point a = line.at(from);
        const Point b = line.at(to);
        const CarrierWindow at_a = window_around(strip_, a.x, a.x, a.y);
        const CarrierWindow at_b = window_around(strip_, b.x, b.x, b.y);
        return {std::min(at_a.first, at_b.first), std::max(at_a.last, at_b.last)};
    }

    /// What the carriers take per length of the line at t.
    void take(const StandingLine& line, const CarrierWindow& window, double t, std::span<double> values) {
        const Point p = line.at(t);
        set_beam(beam_, strip_, window, p.y, places_);
        beam_.add_point(p.x, line.w(t));
        beam_.reactions(values);
    }

    [[nodiscard]] std::optional<std::size_t> degree_of(const StandingLine& line, const CarrierWindow& window,
                                                       double from, double to) const {
        if (strip_.alone()) {
            return 1;
        }
        const double level_from = line.at(from).y;
        const double level_to = line.at(to).y;
        const double first_from = strip_.along(window.first, level_from);
        const double first_to = strip_.along(window.first, level_to);
        for (std::size_t i = window.first; i < window.last; ++i) {
            const double grown =
                (strip_.along(i, level_to) - first_to) - (strip_.along(i, level_from) - first_from);
            if (std::abs(grown) > 2 * collector_.noise()) {
                return std::nullopt;
            }
        }
        return strip_.bends() ? 4 : 2;
    }

    void put_point(const StandingLine& line, std::size_t carrier, double t, double force) {
        collector_.put_point(strip_.carrier(carrier), none,
                             {line.load_case, line.source, strip_.station(carrier, line.at(t).y), force});
    }

    void put_piece(const StandingLine& line, std::size_t carrier, double from, double to, Quartic c,
                   double error) {
        if (std::all_of(c.begin(), c.end(), [](double k) { return k == 0; })) {
            return;
        }
        const double at_from = strip_.station(carrier, line.at(from).y);
        const double at_to = strip_.station(carrier, line.at(to).y);
        const double stretch = std::abs(at_to - at_from);
        if (!(stretch > 0)) {
            const double force =
                line.length * (to - from) * (c[0] + c[1] / 2 + c[2] / 3 + c[3] / 4 + c[4] / 5);
            collector_.put_point(strip_.carrier(carrier), none,
                                 {line.load_case, line.source, at_from, force});
            return;
        }
        const double rate = line.length * (to - from) / stretch;
        for (double& k : c) {
            k *= rate;
        }
        collector_.put_line(strip_.carrier(carrier), none,
                            {line.load_case, line.source, line_between(at_from, at_to, c)}, error * rate);
    }

    StripAtLevels strip_;
    Collector& collector_;
    StripBeam beam_;
    std::vector<double> places_, values_;
};

} // namespace

void share_line_on_strip(const Sharing& sharing, std::uint32_t strip, Point a, Point b, double w_a,
                         double w_b, double snap, std::uint32_t load_case, Source source,
                         Collector& collector) {
    const StripAxes& axes = sharing.axes[sharing.strips[strip].axes];
    const StandingLine line{axes.to_strip(a), axes.to_strip(b), distance(a, b), w_a, w_b, load_case, source};
    StandingSharer sharer(sharing, strip, collector);
    if (std::abs(line.b.y - line.a.y) <= snap) {
        sharer.put_points(line);
    } else {
        sharer.put_lines(line);
    }
}

void share_point_on_strip(const Sharing& sharing, std::uint32_t strip, Point at, double p,
                          std::uint32_t load_case, Source source, Collector& collector) {
    const Point q = sharing.axes[sharing.strips[strip].axes].to_strip(at);
    const StripAtLevels levels(sharing, strip);
    const CarrierWindow window = window_around(levels, q.x, q.x, q.y);
    StripBeam beam;
    std::vector<double> places;
    std::vector<double> taken(window.size());
    set_beam(beam, levels, window, q.y, places);
    beam.add_point(q.x, p);
    beam.reactions(taken);
    for (std::size_t i = 0; i < taken.size(); ++i) {
        if (taken[i] != 0) {
            const std::size_t carrier = window.first + i;
            collector.put_point(levels.carrier(carrier), none,
                                {load_case, source, levels.station(carrier, q.y), taken[i]});
        }
    }
}

RUNNEL_NAMESPACE_END
