#pragma once

#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <span>
#include <vector>

/// What area loads mean, written down once more without any cutting of polygons: the oracle of tests on
/// pressures.
namespace support {

/// Pressure of an area load at a point, by the weights of its three points.
inline double pressure_of(const runnel::AreaLoad& load, runnel::Point p) {
    if (!load.plane) {
        return load.q;
    }
    const auto& [at, values] = *load.plane;
    const auto twice = [](runnel::Point a, runnel::Point b, runnel::Point c) {
        return (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x);
    };
    return (values[0] * twice(p, at[1], at[2]) + values[1] * twice(at[0], p, at[2]) +
            values[2] * twice(at[0], at[1], p)) /
           twice(at[0], at[1], at[2]);
}

inline bool lies_in(const runnel::Ring& ring, runnel::Point p) {
    bool in = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const runnel::Point a = ring[i];
        const runnel::Point b = ring[(i + 1) % ring.size()];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x)) {
            in = !in;
        }
    }
    return in;
}

/// What the area loads of a case press on a point of a deck that they all act on; own weight left out.
inline double pressure_at(std::span<const runnel::AreaLoad> loads, const std::string& load_case,
                          runnel::Point p) {
    double q = 0;
    for (const runnel::AreaLoad& load : loads) {
        if (load.case_id == load_case && (load.outline.empty() || lies_in(load.outline, p))) {
            q = (load.replaces ? 0 : q) + pressure_of(load, p);
        }
    }
    return q;
}

namespace exact {

struct Corner {
    long double x = 0, y = 0;
};
using Corners = std::vector<Corner>;

inline Corners cut(const Corners& polygon, Corner a, Corner b) {
    Corners left;
    const auto side = [&](const Corner& p) { return (b.x - a.x) * (p.y - a.y) - (b.y - a.y) * (p.x - a.x); };
    for (std::size_t i = 0; i < polygon.size(); ++i) {
        const Corner p = polygon[i];
        const Corner q = polygon[(i + 1) % polygon.size()];
        const long double here = side(p);
        const long double there = side(q);
        if (here >= 0) {
            left.push_back(p);
        }
        if ((here > 0 && there < 0) || (here < 0 && there > 0)) {
            const long double t = here / (here - there);
            left.push_back({p.x + t * (q.x - p.x), p.y + t * (q.y - p.y)});
        }
    }
    return left;
}

/// Integral of q + g.x x + g.y y over what a polygon and all rings have in common. A ring is the signed sum
/// of the triangles of a fan, so that nothing but convex polygons is cut, and signs do the rest.
inline long double integral_over(const Corners& polygon, std::span<const runnel::Ring> rings,
                                 runnel::Point base, long double q, runnel::Point g) {
    if (polygon.size() < 3) {
        return 0;
    }
    if (rings.empty()) {
        long double sum = 0;
        for (std::size_t i = 1; i + 1 < polygon.size(); ++i) {
            const Corner& a = polygon[0];
            const Corner& b = polygon[i];
            const Corner& c = polygon[i + 1];
            const long double area = ((b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x)) / 2;
            sum += area * (q + g.x * (a.x + b.x + c.x) / 3 + g.y * (a.y + b.y + c.y) / 3);
        }
        return sum;
    }
    long double sum = 0;
    long double doubled = 0;
    const runnel::Ring& ring = rings.front();
    const auto corner = [&](std::size_t i) {
        return Corner{static_cast<long double>(ring[i].x) - base.x,
                      static_cast<long double>(ring[i].y) - base.y};
    };
    for (std::size_t i = 1; i + 1 < ring.size(); ++i) {
        const Corner a = corner(0);
        Corner b = corner(i);
        Corner c = corner(i + 1);
        const long double twice = (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x);
        doubled += twice;
        if (twice == 0) {
            continue;
        }
        if (twice < 0) {
            std::swap(b, c);
        }
        const long double part =
            integral_over(cut(cut(cut(polygon, a, b), b, c), c, a), rings.subspan(1), base, q, g);
        sum += twice < 0 ? -part : part;
    }
    return doubled < 0 ? -sum : sum; // whichever way the ring runs
}

} // namespace exact

/// Force that area loads of a case put on a deck that they all act on, in long double.
inline long double force_on(const runnel::FramedDeck& deck, std::span<const runnel::AreaLoad> loads,
                            const std::string& load_case) {
    const runnel::Point base = deck.outline.front();
    const double far = 1e3; // any square around decks of these tests
    const exact::Corners all{{-far, -far}, {far, -far}, {far, far}, {-far, far}};
    long double force = 0;
    for (std::size_t i = 0; i < loads.size(); ++i) {
        const runnel::AreaLoad& load = loads[i];
        if (load.case_id != load_case) {
            continue;
        }
        const double q = pressure_of(load, base);
        const runnel::Point slope{pressure_of(load, {base.x + 1, base.y}) - q,
                                  pressure_of(load, {base.x, base.y + 1}) - q};
        std::vector<runnel::Ring> own{deck.outline};
        if (!load.outline.empty()) {
            own.push_back(load.outline);
        }
        std::vector<runnel::Ring> replacing;
        bool left = true;
        for (std::size_t k = i + 1; k < loads.size(); ++k) {
            if (loads[k].replaces && loads[k].case_id == load_case) {
                left = left && !loads[k].outline.empty();
                replacing.push_back(loads[k].outline);
            }
        }
        // Less what replaces it and less the openings, by inclusion and exclusion. Openings lie in the
        // outline and do not overlap each other.
        for (std::uint32_t chosen = 0; left && chosen < (1U << replacing.size()); ++chosen) {
            std::vector<runnel::Ring> common = own;
            double sign = 1;
            for (std::size_t k = 0; k < replacing.size(); ++k) {
                if ((chosen >> k & 1U) != 0) {
                    common.push_back(replacing[k]);
                    sign = -sign;
                }
            }
            force += sign * exact::integral_over(all, common, base, q, slope);
            for (const runnel::Ring& opening : deck.openings) {
                common[0] = opening;
                force -= sign * exact::integral_over(all, common, base, q, slope);
            }
        }
    }
    return force;
}

/// Area loads as they come: uniform or over a plane, everywhere or in a zone of any shape, and some replace.
inline std::vector<runnel::AreaLoad> random_area_loads(Random& random, double reach) {
    std::vector<runnel::AreaLoad> loads;
    int replacing = 0;
    for (int i = random.whole(1, 5); i > 0; --i) {
        runnel::AreaLoad load;
        load.case_id = random.chance(0.6) ? "live" : "dead";
        load.q = random.chance(0.15) ? 0 : random.between(-1, 5);
        if (random.chance(0.5)) {
            runnel::PlaneOfLoad plane;
            const double turn = random.between(0, 6);
            for (std::size_t k = 0; k < 3; ++k) {
                const double a = turn + 2 * std::numbers::pi * static_cast<double>(k) / 3;
                const double r = random.between(0.5, 2) * reach;
                plane.at[k] = {r * std::cos(a), r * std::sin(a)};
                plane.values[k] = random.between(-1, 6);
            }
            load.plane = plane;
        }
        const runnel::Point centre{random.between(-reach, reach), random.between(-reach, reach)};
        if (random.chance(0.4)) {
            load.outline = random.star(centre, 0.1 * reach, reach, random.whole(3, 11));
        } else if (random.chance(0.6)) { // upright, often along edges and other zones
            const double step = reach / 6;
            const double x = step * random.whole(-7, 5);
            const double y = step * random.whole(-7, 5);
            const double r = x + step * random.whole(1, 8);
            const double t = y + step * random.whole(1, 8);
            load.outline = {{x, y}, {r, y}, {r, t}, {x, t}};
            if (random.chance(0.5)) {
                std::reverse(load.outline.begin(), load.outline.end());
            }
        }
        load.replaces = replacing < 3 && random.chance(0.35);
        replacing += load.replaces ? 1 : 0;
        loads.push_back(std::move(load));
    }
    return loads;
}

inline std::vector<runnel::AreaLoad> moved(std::vector<runnel::AreaLoad> loads, const Motion& move) {
    for (runnel::AreaLoad& load : loads) {
        load.outline = move(load.outline);
        if (load.plane) {
            for (runnel::Point& p : load.plane->at) {
                p = move(p);
            }
        }
    }
    return loads;
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
