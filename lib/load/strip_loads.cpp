#include "load/strip_loads.hpp"

#include "geometry/strip_piece.hpp"
#include "load/fit.hpp"
#include "load/strip_loads_window.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The levels at which a border passes from one stretch of a strip to the next.
void add_crossings(const StripAtLevels& strip, const StripPiece& piece, const Border& border,
                   std::vector<double>& levels) {
    const std::size_t at_from = strip.carriers_below(border.start, piece.from);
    const std::size_t at_to = strip.carriers_below(border.end, piece.to);
    for (std::size_t i = std::min(at_from, at_to); i < std::max(at_from, at_to); ++i) {
        for (const double x : crossings_of(border, strip.along(i, piece.from), strip.along(i, piece.to))) {
            levels.push_back((1 - x) * piece.from + x * piece.to);
        }
    }
}

/// Turns what presses on pieces of a strip into lines on its carriers.
class StripLoader {
public:
    StripLoader(const StripAtLevels& strip, double noise) : strip_(strip), noise_(noise) {}

    /// Calls put(i, line, error) for what a pressure on a piece of the strip brings its carriers, i of
    /// them; the line is off by no more than `error`.
    template <class Put>
    void carry(const StripPiece& piece, const Intensity& intensity, Put put) {
        std::vector<double> levels{piece.from};
        if (strip_.bends()) {
            add_crossings(strip_, piece, piece.low, levels);
            add_crossings(strip_, piece, piece.high, levels);
            std::sort(levels.begin(), levels.end());
        }
        // A level within noise of the last one, or of the end, is that level.
        double from = piece.from;
        for (const double level : levels) {
            if (level - from > noise_ && piece.to - level > noise_) {
                carry_smooth(between_levels(piece, from, level), intensity, put);
                from = level;
            }
        }
        if (piece.to > from) {
            carry_smooth(between_levels(piece, from, piece.to), intensity, put);
        }
    }

private:
    /// Where the borders stay in their stretches, so that what the carriers take is smooth.
    template <class Put>
    void carry_smooth(const StripPiece& part, const Intensity& intensity, Put& put) {
        const double middle = (part.from + part.to) / 2;
        const CarrierWindow window = window_around(strip_, part.low.at(0.5), part.high.at(0.5), middle);
        const Functions taken = [&](double y, std::span<double> values) {
            const double level = (1 - y) * part.from + y * part.to;
            const double low = part.low.at(y);
            const double high = part.high.at(y);
            set_beam(beam_, strip_, window, level, places_);
            beam_.add_line(low, high, intensity.at({low, level}), intensity.at({high, level}));
            beam_.reactions(values);
        };
        const std::optional<std::size_t> degree = degree_of(part, intensity, window);
        const QuarticFit fit =
            degree ? exact_quartics(window.size(), *degree, taken) : fit_quartics(window.size(), taken);
        put_fit(part, window, fit, put);
    }

    /// Degree of what the carriers take as a function of the level; nothing where that is no polynomial, or
    /// none of degree four at most.
    [[nodiscard]] std::optional<std::size_t> degree_of(const StripPiece& part, const Intensity& intensity,
                                                       const CarrierWindow& window) {
        const bool even = intensity.by_along == 0 && intensity.by_across == 0;
        if (strip_.alone()) {
            return even ? 1 : 2;
        }
        // Distances from the first carrier at both levels: if they grow in one ratio, so that every part
        // stays what it is, the pressure alone varies.
        const Distances carriers = distances(part, window);
        const bool similar =
            carriers.similar && keeps_place(part.low, carriers) && keeps_place(part.high, carriers);
        if (similar) {
            return carriers.parallel || even ? 1 : 2;
        }
        if (!carriers.parallel) {
            return std::nullopt;
        }
        if (!strip_.bends()) {
            return even ? 2 : 3;
        }
        return even ? std::optional<std::size_t>(4) : std::nullopt;
    }

    struct Distances {
        Border first;                  ///< along of the window's first carrier, over the part's levels
        double at_from = 0, at_to = 0; ///< from the first carrier to the last
        bool similar = true, parallel = true;
    };

    [[nodiscard]] Distances distances(const StripPiece& part, const CarrierWindow& window) const {
        Distances d;
        d.first = {strip_.along(window.first, part.from), strip_.along(window.first, part.to), 0};
        d.at_from = strip_.along(window.last - 1, part.from) - d.first.start;
        d.at_to = strip_.along(window.last - 1, part.to) - d.first.end;
        for (std::size_t i = window.first; i < window.last; ++i) {
            const Border along{strip_.along(i, part.from), strip_.along(i, part.to), 0};
            d.similar = d.similar && keeps_place(along, d);
            d.parallel = d.parallel &&
                         std::abs((along.end - d.first.end) - (along.start - d.first.start)) <= 2 * noise_;
        }
        return d;
    }

    [[nodiscard]] bool keeps_place(const Border& border, const Distances& d) const {
        const double off = (border.start - d.first.start) * d.at_to - (border.end - d.first.end) * d.at_from;
        return std::abs(off) <= 2 * noise_ * std::max(d.at_from, d.at_to);
    }

    template <class Put>
    void put_fit(const StripPiece& part, const CarrierWindow& window, const QuarticFit& fit, Put& put) {
        constexpr double worth_counting = 1e-17;
        double largest = 0;
        for (const QuarticFit::Piece& piece : fit.pieces) {
            largest = std::max(largest, size_of(piece.c));
        }
        for (const QuarticFit::Piece& piece : fit.pieces) {
            if (!(size_of(piece.c) > worth_counting * largest)) {
                continue;
            }
            const double from = (1 - piece.from) * part.from + piece.from * part.to;
            const double to = (1 - piece.to) * part.from + piece.to * part.to;
            const std::size_t carrier = window.first + piece.function;
            const double at_from = strip_.station(carrier, from);
            const double at_to = strip_.station(carrier, to);
            const double stretch = std::abs(at_to - at_from);
            if (!(stretch > 0)) {
                continue; // a piece as thin as rounding
            }
            const double rate = (to - from) / stretch;
            Quartic c = piece.c;
            for (double& k : c) {
                k *= rate;
            }
            put(carrier, line_between(at_from, at_to, c), piece.error * rate);
        }
    }

    static double size_of(const Quartic& c) {
        double size = 0;
        for (const double k : c) {
            size = std::max(size, std::abs(k));
        }
        return size;
    }

    const StripAtLevels& strip_;
    double noise_;
    StripBeam beam_;
    std::vector<double> places_;
};

std::array<Point, 4> corners_of(const StripPiece& piece) {
    return {Point{piece.low.start, piece.from}, Point{piece.high.start, piece.from},
            Point{piece.high.end, piece.to}, Point{piece.low.end, piece.to}};
}

/// Bound of the load on a piece, whichever way it acts.
double most_force(const StripPiece& piece, const Intensity& intensity) {
    double most = 0;
    for (const Point& corner : corners_of(piece)) {
        most = std::max(most, std::abs(intensity.at(corner)));
    }
    return most * std::abs(area_of(piece));
}

/// All load of a cell that goes to points of its carriers.
void load_sliver(const Sharing& sharing, std::size_t c, const DeckPressure& pressure, std::uint32_t deck,
                 std::vector<DeckPressure::Piece>& zones, Collector& collector) {
    const Cell& cell = sharing.cells[c];
    const StripPiece where{cell.from, cell.to, cell.low, cell.high};
    const auto put = [&](std::uint32_t load_case, double force) {
        for (const Transfer& transfer : sharing.transfers[c]) {
            collector.put_point(
                transfer.carrier, deck,
                {load_case, {SourceKind::deck, deck}, transfer.station_from, transfer.weight * force});
        }
    };
    double way = 0; // from the farthest corner to the farthest place where its load goes
    for (const Transfer& transfer : sharing.transfers[c]) {
        for (const Point& corner : corners_of(where)) {
            way = std::max(way, distance(sharing.axes[cell.axes].to_plan(corner),
                                         collector.at(transfer.carrier, transfer.station_from)));
        }
    }
    for (const DeckPressure::Uniform& u : pressure.uniform()) {
        put(u.load_case, u.q * area_of(where));
        collector.note_moved(deck, u.load_case, std::abs(u.q) * area_of(where) * way);
    }
    if (pressure.has_zones()) {
        pressure.zones_over(where, sharing.axes[cell.axes], zones);
        for (const DeckPressure::Piece& zone : zones) {
            put(zone.load_case, moments_of(zone.where, zone.intensity).area);
            collector.note_moved(deck, zone.load_case, most_force(zone.where, zone.intensity) * way);
        }
    }
}

/// Bound of the integral of |w|.
double most_force(const LinePiece& line) {
    const double length = line.to - line.from;
    double most = 0;
    double power = length;
    for (const double c : line.c) {
        most += std::abs(c) * power;
        power *= length;
    }
    return most;
}

/// Puts the area loads of one strip on its carriers.
class StripAreaLoads {
public:
    StripAreaLoads(const Sharing& sharing, std::uint32_t index, Collector& collector)
        : strip_(sharing.strips[index]), axes_(sharing.axes[strip_.axes]),
          levels_(sharing, index), whole_{strip_.from, strip_.to, strip_.low, strip_.high},
          collector_(collector) {
        if (levels_.alone()) {
            for (const Point& corner : corners_of(whole_)) {
                way_to_carrier_ = std::max(way_to_carrier_, std::abs(corner.x - levels_.along(0, corner.y)));
            }
        }
        beside_axis_.reserve(levels_.size());
        for (std::size_t i = 0; i < levels_.size(); ++i) {
            beside_axis_.push_back(std::max(off_axis(i, strip_.from), off_axis(i, strip_.to)));
        }
    }

    void put_uniform(const DeckPressure& pressure) {
        StripLoader loader(levels_, collector_.noise());
        loader.carry(whole_, {1, 0, 0}, [&](std::size_t i, const LinePiece& unit, double error) {
            for (const DeckPressure::Uniform& u : pressure.uniform()) {
                LinePiece line = unit;
                for (double& c : line.c) {
                    c *= u.q;
                }
                put(i, u.load_case, line, std::abs(u.q) * error);
            }
        });
    }

    void put_zones(const DeckPressure& pressure, std::vector<DeckPressure::Piece>& zones) {
        StripLoader loader(levels_, collector_.noise());
        pressure.zones_over(whole_, axes_, zones);
        for (const DeckPressure::Piece& zone : zones) {
            loader.carry(zone.where, zone.intensity, [&](std::size_t i, const LinePiece& line, double error) {
                put(i, zone.load_case, line, error);
            });
        }
    }

private:
    /// How far a carrier that was drawn beside the deck's edge, by no more than `snap`, was moved on to it.
    [[nodiscard]] double off_axis(std::size_t i, double level) const {
        const Point there = axes_.to_plan({levels_.along(i, level), level});
        const double off = distance(there, collector_.at(levels_.carrier(i), levels_.station(i, level)));
        return off > 4 * collector_.noise() ? off : 0;
    }

    void put(std::size_t i, std::uint32_t load_case, const LinePiece& line, double error) {
        const Source source{SourceKind::deck, strip_.deck};
        collector_.put_line(levels_.carrier(i), strip_.deck, {load_case, source, line}, error);
        if (const double way = way_to_carrier_ + beside_axis_[i]; way > 0) {
            collector_.note_moved(strip_.deck, load_case, way * most_force(line));
        }
    }

    const Strip& strip_;
    const StripAxes& axes_;
    StripAtLevels levels_;
    StripPiece whole_;
    Collector& collector_;
    double way_to_carrier_ = 0; ///< of a strip on one carrier alone, from its farthest corner
    std::vector<double> beside_axis_;
};

} // namespace

void load_strips(const Sharing& sharing, std::uint32_t deck, std::size_t first_cell, std::size_t last_cell,
                 const DeckPressure& pressure, Collector& collector) {
    std::vector<DeckPressure::Piece> zones;
    const auto first = std::lower_bound(sharing.strips.begin(), sharing.strips.end(), deck,
                                        [](const Strip& strip, std::uint32_t d) { return strip.deck < d; });
    for (auto it = first; it != sharing.strips.end() && it->deck == deck; ++it) {
        StripAreaLoads strip(sharing, static_cast<std::uint32_t>(it - sharing.strips.begin()), collector);
        strip.put_uniform(pressure);
        if (pressure.has_zones()) {
            strip.put_zones(pressure, zones);
        }
    }
    for (std::size_t c = first_cell; c < last_cell; ++c) {
        const std::span<const Transfer> transfers = sharing.transfers[c];
        if (!transfers.empty() && transfers.front().station_from == transfers.front().station_to) {
            load_sliver(sharing, c, pressure, deck, zones, collector);
        }
    }
}

RUNNEL_NAMESPACE_END
