#include "load/phases.hpp"

#include "deck/pressure.hpp"
#include "geometry/line_pieces.hpp"
#include "load/strip_loads.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <array>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Coefficients of a polynomial of degree four at most.
using Polynomial = std::array<double, 5>;

/// What one unit of pressure on a cell brings to its carrier, as a line along it: the weight integrated over
/// the cell's breadth.
LinePiece line_of_unit_pressure(const Cell& cell, const Transfer& transfer) {
    const double stretch = std::abs(transfer.station_to - transfer.station_from);
    const bool rises = transfer.station_from < transfer.station_to;
    const double start = rises ? cell.high.start - cell.low.start : cell.high.end - cell.low.end;
    const double end = rises ? cell.high.end - cell.low.end : cell.high.start - cell.low.start;
    const double bulge = cell.high.bulge - cell.low.bulge;
    // Breadth over x = (station - from) / stretch: start + (end - start) x - bulge x (1 - x).
    const Polynomial breadth{start, end - start - bulge, bulge, 0, 0};
    LinePiece piece;
    piece.from = std::min(transfer.station_from, transfer.station_to);
    piece.to = std::max(transfer.station_from, transfer.station_to);
    double scale = (cell.to - cell.from) / stretch; // of the cell's levels to the carrier's stations
    for (std::size_t i = 0; i < breadth.size(); ++i) {
        piece.c[i] = transfer.weight * breadth[i] * scale;
        scale /= stretch;
    }
    return piece;
}

/// Extent of a convex polygon along the strips at a level across them.
struct Extent {
    double low = std::numeric_limits<double>::infinity();
    double high = -std::numeric_limits<double>::infinity();

    void add(double along) {
        low = std::min(low, along);
        high = std::max(high, along);
    }
};

Extent extent_at(const Convex& polygon, double across) {
    Extent extent;
    for (std::size_t i = 0; i < polygon.size(); ++i) {
        const Point a = polygon[i];
        const Point b = polygon[(i + 1) % polygon.size()];
        if (a.y == across) {
            extent.add(a.x);
        }
        if ((a.y < across && b.y > across) || (b.y < across && a.y > across)) {
            extent.add(between(a, b, (across - a.y) / (b.y - a.y)).x);
        }
    }
    return extent;
}

/// What a uniform pressure on a convex part of a cell brings to the carrier: linear between the part's
/// corners.
void lines_of_part(const Cell& cell, const Transfer& transfer, const Convex& part, double q, double noise,
                   std::vector<LinePiece>& pieces) {
    std::vector<double> levels;
    for (const Point& p : part) {
        levels.push_back(p.y);
    }
    std::sort(levels.begin(), levels.end());
    const auto station = [&](double across) {
        const double x = (across - cell.from) / (cell.to - cell.from);
        return (1 - x) * transfer.station_from + x * transfer.station_to;
    };
    // Corners that lie on one level but for noise are passed together: a level edge has its breadth only
    // behind them.
    for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
        const double from = levels[i];
        const double to = levels[i + 1];
        if (to - from <= noise) {
            continue;
        }
        const Extent at_from = extent_at(part, from);
        const Extent at_to = extent_at(part, to);
        Cell strip = cell;
        strip.from = from;
        strip.to = to;
        strip.low = {at_from.low, at_to.low, 0};
        strip.high = {at_from.high, at_to.high, 0};
        LinePiece piece =
            line_of_unit_pressure(strip, {transfer.carrier, station(from), station(to), transfer.weight});
        for (double& c : piece.c) {
            c *= q;
        }
        pieces.push_back(piece);
    }
}

Convex corners_of(const Cell& cell, double noise) {
    Convex corners;
    const std::array<Point, 4> all{Point{cell.low.start, cell.from}, Point{cell.high.start, cell.from},
                                   Point{cell.high.end, cell.to}, Point{cell.low.end, cell.to}};
    for (const Point& p : all) {
        if (corners.empty() || distance(p, corners.back()) > noise) {
            corners.push_back(p);
        }
    }
    while (corners.size() > 1 && distance(corners.front(), corners.back()) <= noise) {
        corners.pop_back();
    }
    return corners.size() < 3 ? Convex{} : corners;
}

/// A piece of line on a carrier before pieces are joined; `load_case` is `none` for the profile of unit
/// pressure.
struct RawLine {
    std::uint32_t carrier = none;
    std::uint32_t load_case = none;
    LinePiece piece;
};

/// All load of a cell whose transfers lead to single points of their carriers: slivers that the drawing left.
void put_cell_as_points(const Sharing& sharing, std::size_t c, double q, double area, std::uint32_t load_case,
                        std::uint32_t deck, Collector& collector) {
    for (const Transfer& transfer : sharing.transfers[c]) {
        collector.put_point(
            transfer.carrier, deck,
            {load_case, {SourceKind::deck, deck}, transfer.station_from, transfer.weight * q * area});
    }
}

void gather_cell_as_points(const Sharing& sharing, std::size_t c, const DeckPressure& pressure,
                           std::uint32_t deck, std::vector<DeckPressure::Piece>& parts,
                           Collector& collector) {
    const Cell& cell = sharing.cells[c];
    const double area =
        (cell.to - cell.from) * (cell.high.start - cell.low.start + cell.high.end - cell.low.end) / 2;
    for (const DeckPressure::Uniform& u : pressure.uniform()) {
        put_cell_as_points(sharing, c, u.q, area, u.load_case, deck, collector);
    }
    const Convex where = corners_of(cell, collector.noise());
    if (!pressure.has_zones() || where.empty()) {
        return;
    }
    pressure.zones_over(where, parts);
    for (const DeckPressure::Piece& part : parts) {
        const double part_area = moments_of(part.where, part.where.front()).area;
        put_cell_as_points(sharing, c, part.q, part_area, part.load_case, deck, collector);
    }
}

void gather_cells(const Sharing& sharing, std::size_t first, std::size_t last, const DeckPressure& pressure,
                  std::uint32_t deck, Collector& collector, std::vector<RawLine>& raw) {
    std::vector<DeckPressure::Piece> parts;
    std::vector<LinePiece> pieces;
    for (std::size_t c = first; c < last; ++c) {
        const Cell& cell = sharing.cells[c];
        const std::span<const Transfer> transfers = sharing.transfers[c];
        if (transfers.empty()) {
            continue;
        }
        if (transfers.front().station_from == transfers.front().station_to) {
            gather_cell_as_points(sharing, c, pressure, deck, parts, collector);
            continue;
        }
        for (const Transfer& transfer : transfers) {
            raw.push_back({transfer.carrier, none, line_of_unit_pressure(cell, transfer)});
        }
        if (!pressure.has_zones()) {
            continue;
        }
        const Convex where = corners_of(cell, collector.noise());
        if (where.empty()) {
            continue;
        }
        pressure.zones_over(where, parts);
        for (const DeckPressure::Piece& part : parts) {
            for (const Transfer& transfer : transfers) {
                pieces.clear();
                lines_of_part(cell, transfer, part.where, part.q, collector.noise(), pieces);
                for (const LinePiece& piece : pieces) {
                    raw.push_back({transfer.carrier, part.load_case, piece});
                }
            }
        }
    }
    std::stable_sort(raw.begin(), raw.end(),
                     [](const RawLine& l, const RawLine& r) { return l.carrier < r.carrier; });
}

/// Joins what came to one carrier from one deck, case by case, and hands it on.
void put_carrier(std::span<const RawLine> raw, const DeckPressure& pressure, std::uint32_t deck,
                 std::size_t cases, Collector& collector) {
    std::vector<LinePiece> profile;
    std::vector<std::vector<LinePiece>> zoned;
    for (const RawLine& line : raw) {
        if (line.load_case == none) {
            profile.push_back(line.piece);
        } else {
            zoned.resize(cases);
            zoned[line.load_case].push_back(line.piece);
        }
    }
    profile = merged(std::move(profile), collector.noise());
    const Source source{SourceKind::deck, deck};
    for (const DeckPressure::Uniform& u : pressure.uniform()) {
        for (LinePiece piece : profile) {
            for (double& c : piece.c) {
                c *= u.q;
            }
            if (zoned.empty() || zoned[u.load_case].empty()) {
                collector.put_line(raw.front().carrier, deck, {u.load_case, source, piece});
            } else {
                zoned[u.load_case].push_back(piece);
            }
        }
    }
    for (std::uint32_t c = 0; c < zoned.size(); ++c) {
        for (const LinePiece& piece : merged(std::move(zoned[c]), collector.noise())) {
            collector.put_line(raw.front().carrier, deck, {c, source, piece});
        }
    }
}

/// The account of what presses on a deck, from the deck alone: its rings and the zones, no carriers.
void account_applied(const FramedDeck& deck, std::uint32_t index, const DeckPressure& pressure,
                     const StripAxes& plain, Collector& collector) {
    const auto add = [&](std::uint32_t load_case, double q, const AreaMoments& area) {
        const Point about_origin = area.moment + area.area * plain.origin;
        collector.applied(index, load_case, q * area.area, q * about_origin, std::abs(q * area.area));
    };
    AreaMoments whole = moments_of(to_strip(plain, deck.outline), {0, 0});
    for (const Ring& opening : deck.openings) {
        const AreaMoments hole = moments_of(to_strip(plain, opening), {0, 0}); // clockwise: negative
        whole.area += hole.area;
        whole.moment = whole.moment + hole.moment;
    }
    for (const DeckPressure::Uniform& u : pressure.uniform()) {
        add(u.load_case, u.q, whole);
    }
    if (!pressure.has_zones()) {
        return;
    }
    std::vector<Ring> openings;
    for (const Ring& opening : deck.openings) {
        openings.push_back(to_strip(plain, opening));
    }
    std::vector<DeckPressure::Piece> parts;
    for (const Convex& piece : convex_pieces(to_strip(plain, deck.outline), openings, collector.noise())) {
        pressure.zones_over(piece, parts);
        for (const DeckPressure::Piece& part : parts) {
            add(part.load_case, part.q, moments_of(part.where, {0, 0}));
        }
    }
}

} // namespace

void load_areas(const Plan& plan, const Framing& framing, std::uint32_t level_index, const Sharing& sharing,
                Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const double noise = collector.noise();
    const Grouped<std::uint32_t> acting = area_loads_by_deck(level, noise);
    std::size_t first = 0;
    std::vector<RawLine> raw;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        std::size_t last = first;
        while (last < sharing.cells.size() && sharing.cells[last].deck == d) {
            ++last;
        }
        const StripAxes plain{level.decks[d].outline.front(), 1, 0};
        account_applied(level.decks[d], d, DeckPressure(plan, level, d, acting[d], plain, noise), plain,
                        collector);
        if (last > first) {
            const DeckPressure pressure(plan, level, d, acting[d], sharing.axes[sharing.cells[first].axes],
                                        noise);
            raw.clear();
            if (level.decks[d].span == SpanKind::one_way && level.decks[d].share != Share::half) {
                load_strips(sharing, d, first, last, pressure, collector);
            } else {
                gather_cells(sharing, first, last, pressure, d, collector, raw);
            }
            for (std::size_t i = 0; i < raw.size();) {
                std::size_t end = i + 1;
                while (end < raw.size() && raw[end].carrier == raw[i].carrier) {
                    ++end;
                }
                put_carrier(std::span(raw).subspan(i, end - i), pressure, d, plan.cases.size(), collector);
                i = end;
            }
        }
        first = last;
    }
}

void note_zones_off_decks(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                          Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const double noise = collector.noise();
    const Grouped<std::uint32_t> over = outlines_over_decks(level, noise);
    std::vector<Sum> on_decks(level.area_loads.size());
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        const StripAxes plain{deck.outline.front(), 1, 0};
        std::vector<Convex> pieces; // of the deck, made when a zone needs them
        std::vector<Ring> openings;
        for (const std::uint32_t i : over[d]) {
            const AreaLoad& load = level.area_loads[i];
            if (pieces.empty()) {
                for (const Ring& opening : deck.openings) {
                    openings.push_back(to_strip(plain, opening));
                }
                pieces = convex_pieces(to_strip(plain, deck.outline), openings, noise);
            }
            for (const Convex& zone : convex_zone(to_strip(plain, load.outline), noise)) {
                const Box box = box_of(zone);
                for (const Convex& piece : pieces) {
                    if (box.meets(box_of(piece))) {
                        on_decks[i].add(moments_of(clipped(piece, zone, noise), {0, 0}).area);
                    }
                }
            }
        }
    }
    for (std::size_t i = 0; i < level.area_loads.size(); ++i) {
        const AreaLoad& load = level.area_loads[i];
        if (load.outline.empty()) {
            continue;
        }
        double around = 0;
        for (std::size_t k = 0; k < load.outline.size(); ++k) {
            around += distance(load.outline[k], load.outline[(k + 1) % load.outline.size()]);
        }
        const double off = std::abs(signed_area(load.outline)) - on_decks[i].value();
        if (off > plan.settings.snap * around) {
            Problem problem =
                problem_at(ProblemCode::zone_off_decks, load.origin, "area_loads",
                           "Level " + level.id + ", area_loads[" + std::to_string(i) + "] (" + load.case_id +
                               "): " + area_text(off, plan.units) + " of its outline lie off every deck; " +
                               force_text(load.q * off, plan.units) + " there are not carried.",
                           {}, {});
            problem.point = load.outline.front();
            collector.problems.push_back(std::move(problem));
        }
    }
}

RUNNEL_NAMESPACE_END
