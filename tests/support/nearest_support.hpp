#pragma once

#include "support/deck_support.hpp"
#include "support/pressure_support.hpp"
#include "support/random_support.hpp"

#include <runnel/deck.hpp>
#include <runnel/load.hpp>

#include <algorithm>
#include <cmath>
#include <vector>

/// Decks whose load goes to the nearest carrier, some shared by hand, and what laws of loads ask of them.
namespace support {

/// 1 kN/m2 on the whole deck: loads that touch a deck by less do not make errors look large.
inline double one_on(const runnel::Sharing& sharing) {
    return sharing.deck_area[0];
}

/// Largest disagreement of what was put on and what the carriers got, over all cases, by the size of the
/// load.
inline double worst_force(const runnel::LevelLoads& loads, double least) {
    double worst = 0;
    for (const runnel::DeckBalance& row : loads.balance) {
        if (row.deck == runnel::none && runnel::has_errors(loads.problems)) {
            continue; // a line or point load that stands off the deck
        }
        worst = std::max(worst, std::abs(row.applied.force - row.shared.force) /
                                    std::max(row.applied.magnitude, least));
    }
    return worst;
}

/// Total by carrier of a case, points and lines together.
inline std::vector<double> totals(const runnel::LevelLoads& loads, std::uint32_t load_case) {
    std::vector<double> result;
    for (std::size_t c = 0; c < loads.lines.size(); ++c) {
        result.push_back(total(loads.lines[c], load_case) + total(loads.points[c], load_case));
    }
    return result;
}

inline runnel::Ring rectangle(double x0, double y0, double x1, double y1) {
    return {{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}};
}

inline Motion far_away(Random& random) {
    return {random.between(-180, 180), {1e6 * random.between(-1, 1), 1e6 * random.between(-1, 1)}};
}

/// Pieces of a stretch between breakpoints at which something begins or ends; the middles are inside.
struct Stretch {
    double from, to;
    [[nodiscard]] double middle() const { return (from + to) / 2; }
};

inline std::vector<Stretch> between_all(std::vector<double> breaks, double from, double to) {
    breaks.push_back(from);
    breaks.push_back(to);
    std::sort(breaks.begin(), breaks.end());
    std::vector<Stretch> parts;
    for (std::size_t i = 0; i + 1 < breaks.size(); ++i) {
        if (breaks[i] >= from && breaks[i + 1] <= to && breaks[i + 1] > breaks[i]) {
            parts.push_back({breaks[i], breaks[i + 1]});
        }
    }
    return parts;
}

/// A deck of any shape whose load goes to the nearest of beams round it and through it, or of columns in it.
inline HandFramed random_nearest(Random& random, const Motion& move, std::vector<runnel::AreaLoad>& loads) {
    HandFramed f;
    f.plan.settings.snap = 1e-7;
    const runnel::Ring outline =
        random.chance(0.5) ? random.star({0, 0}, 3, 9, random.whole(5, 13)) : rectangle(-6, -4, 6, 4);
    std::vector<runnel::Ring> openings;
    if (random.chance(0.5)) {
        openings.push_back(random.star({0, 0}, 0.3, 1.4, random.whole(3, 6)));
        std::reverse(openings.back().begin(), openings.back().end());
        openings.back() = move(openings.back());
    }
    const bool on_columns = random.chance(0.5);
    for (std::size_t k = 0; k < outline.size(); ++k) {
        f.add_member(move(outline[k]), move(outline[(k + 1) % outline.size()]));
    }
    f.add_member(move({-2, -1.5}), move({2, -1.7}));
    f.add_deck(move(outline), 0, openings);
    f.level().decks[0].span = on_columns ? runnel::SpanKind::columns : runnel::SpanKind::two_way;
    for (int k = random.whole(1, 7); on_columns && k > 0; --k) {
        runnel::Column support;
        support.id = "C" + std::to_string(k);
        support.at = move(k == 1 ? outline[0] : runnel::Point{random.between(-2, 2), random.between(-2, 2)});
        f.level().columns.push_back(static_cast<std::uint32_t>(f.plan.columns.size()));
        f.plan.columns.push_back(support);
    }
    loads = random_area_loads(random, 6);
    f.level().area_loads = moved(loads, move);
    f.level().line_loads.push_back({"live", 1, 3, move({-2, -1}), move({2, 1.5}), {}, {}});
    f.level().point_loads.push_back({"dead", 5, move({1.5, -1.6}), {}, {}});
    return f;
}

/// Axes of what goes square to a line: across is the station on it, along the distance to its right.
inline runnel::StripAxes axes_square_to(runnel::Point from, runnel::Point to) {
    const double length = std::hypot(to.x - from.x, to.y - from.y);
    return {from, (to.y - from.y) / length, (from.x - to.x) / length};
}

/// Adds a cell, in axes already in the sharing, whose load goes to one carrier.
inline void add_cell(runnel::Sharing& sharing, std::uint32_t axes, const runnel::Cell& shape,
                     std::uint32_t carrier, double station_from, double station_to) {
    runnel::Cell cell = shape;
    cell.deck = 0;
    cell.axes = axes;
    sharing.cells.push_back(cell);
    sharing.transfers.push(runnel::Transfer{carrier, station_from, station_to, 1});
    sharing.transfers.end_group();
}

/// A rectangular deck with a wall or beam along one side and a column inside it, shared by what is nearest:
/// the border is a parabola. Drawn with the beam's start at the origin, along +x, the deck on its left; then
/// placed.
struct BeamAndColumn {
    double length = 8, depth = 5;
    runnel::Point column;                     ///< as drawn
    double opening_from = 0, opening_to = 0;  ///< along the beam; equal: none
    double opening_near = 0, opening_far = 0; ///< off the beam, nearer to it than any border

    static BeamAndColumn random(Random& random) {
        BeamAndColumn d;
        d.length = random.between(3, 12);
        d.depth = random.between(2, 8);
        d.column = {random.between(-0.2, 1.2) * d.length, random.between(0.05, 1) * d.depth};
        d.column.x = std::clamp(d.column.x, 0.0, d.length);
        if (random.chance(0.5)) {
            d.opening_from = random.between(0.05, 0.5) * d.length;
            d.opening_to = d.opening_from + random.between(0.05, 0.4) * d.length;
            d.opening_near = random.between(0.1, 0.4) * d.column.y / 2;
            d.opening_far = random.between(0.5, 0.9) * d.column.y / 2;
        }
        return d;
    }

    [[nodiscard]] bool has_opening() const { return opening_to > opening_from; }
    /// Distance from the beam of the points as near to the column, over a station: Galilei's parabola.
    [[nodiscard]] double border_at(double station) const {
        const double off = station - column.x;
        return (off * off + column.y * column.y) / (2 * column.y);
    }
    [[nodiscard]] bool beam_is_nearer(runnel::Point drawn) const {
        return drawn.y < std::hypot(drawn.x - column.x, drawn.y - column.y);
    }

    [[nodiscard]] HandFramed framed(const Motion& move, const std::vector<runnel::AreaLoad>& loads) const {
        HandFramed f;
        f.plan.settings.snap = 1e-4;
        f.add_member(move({0, 0}), move({length, 0}));
        runnel::Column support;
        support.id = "C";
        support.at = move(column);
        f.plan.columns.push_back(support);
        f.level().columns = {0};
        std::vector<runnel::Ring> openings;
        if (has_opening()) {
            openings.push_back(move(runnel::Ring{{opening_from, opening_near},
                                                 {opening_from, opening_far},
                                                 {opening_to, opening_far},
                                                 {opening_to, opening_near}}));
        }
        f.add_deck(move(runnel::Ring{{0, 0}, {length, 0}, {length, depth}, {0, depth}}), 0, openings);
        f.level().decks[0].span = runnel::SpanKind::two_way;
        f.level().area_loads = moved(loads, move);
        return f;
    }

    [[nodiscard]] runnel::Sharing sharing(const Motion& move) const {
        runnel::Sharing s;
        s.members = 1;
        s.columns = 1;
        s.axes = {axes_square_to(move({0, 0}), move({length, 0}))};
        std::vector<double> levels{0, length};
        const double half_chord = std::sqrt(std::max(0.0, 2 * column.y * depth - column.y * column.y));
        for (const double level : {column.x - half_chord, column.x + half_chord, opening_from, opening_to}) {
            if (level > 0 && level < length) {
                levels.push_back(level);
            }
        }
        std::sort(levels.begin(), levels.end());
        for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
            add_slab(s, levels[i], levels[i + 1]);
        }
        s.deck_area = {length * depth - (opening_to - opening_from) * (opening_far - opening_near)};
        return s;
    }

private:
    /// The deck lies on the beam's left, where distances along are negative.
    void add_slab(runnel::Sharing& s, double from, double to) const {
        using Side = runnel::Cell::CarrierSide;
        const auto cell = [&](const runnel::Border& low, const runnel::Border& high, Side side) {
            runnel::Cell c;
            c.from = from;
            c.to = to;
            c.low = low;
            c.high = high;
            c.carrier_side = side;
            return c;
        };
        const auto straight = [](double off) { return runnel::Border{-off, -off, 0}; };
        const bool border = border_at((from + to) / 2) < depth;
        const runnel::Border far = border ? runnel::Border{-border_at(from), -border_at(to),
                                                           -(to - from) * (to - from) / (2 * column.y)}
                                          : straight(depth);
        const bool opening = has_opening() && from < opening_to && to > opening_from;
        if (opening) {
            add_cell(s, 0, cell(straight(opening_near), straight(0), Side::high), 0, from, to);
        }
        add_cell(s, 0, cell(far, straight(opening ? opening_far : 0), opening ? Side::neither : Side::high),
                 0, from, to);
        if (border) {
            add_cell(s, 0, cell(straight(depth), far, Side::neither), 1, 0, 0);
        }
    }
};

} // namespace support
