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

/// Whether a load without decks of its own acts at a point.
inline bool acts_at(const runnel::AreaLoad& load, runnel::Point p) {
    return load.outline.empty() || (lies_in(load.outline, p) &&
                                    std::none_of(load.openings.begin(), load.openings.end(),
                                                 [p](const runnel::Ring& ring) { return lies_in(ring, p); }));
}

/// What the area loads of a case press on a point of a deck that they all act on; own weight left out.
inline double pressure_at(std::span<const runnel::AreaLoad> loads, const std::string& load_case,
                          runnel::Point p) {
    double q = 0;
    for (const runnel::AreaLoad& load : loads) {
        if (load.case_id == load_case && acts_at(load, p)) {
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

inline Corner seen_from(runnel::Point base, runnel::Point p) {
    return {static_cast<long double>(p.x) - static_cast<long double>(base.x),
            static_cast<long double>(p.y) - static_cast<long double>(base.y)};
}

/// A pressure q + x slope.x + y slope.y.
struct Pressure {
    long double q = 0;
    Corner slope;
};

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

/// Integral of a pressure over what a polygon and all rings have in common. A ring is the signed sum of the
/// triangles of a fan, so that nothing but convex polygons is cut, and signs do the rest.
inline long double integral_over(const Corners& polygon, std::span<const runnel::Ring> rings,
                                 runnel::Point base, const Pressure& pressure) {
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
            sum += area * (pressure.q + pressure.slope.x * (a.x + b.x + c.x) / 3 +
                           pressure.slope.y * (a.y + b.y + c.y) / 3);
        }
        return sum;
    }
    long double sum = 0;
    long double doubled = 0;
    const runnel::Ring& ring = rings.front();
    for (std::size_t i = 1; i + 1 < ring.size(); ++i) {
        const Corner a = seen_from(base, ring[0]);
        Corner b = seen_from(base, ring[i]);
        Corner c = seen_from(base, ring[i + 1]);
        const long double twice = (b.x - a.x) * (c.y - a.y) - (b.y - a.y) * (c.x - a.x);
        doubled += twice;
        if (twice == 0) {
            continue;
        }
        if (twice < 0) {
            std::swap(b, c);
        }
        const long double part =
            integral_over(cut(cut(cut(polygon, a, b), b, c), c, a), rings.subspan(1), base, pressure);
        sum += twice < 0 ? -part : part;
    }
    return doubled < 0 ? -sum : sum; // whichever way the ring runs
}

/// The plane as signed rings: 1 on the deck, inside a zone and outside its openings is the sum of their
/// signs. Openings lie in their outline and do not overlap each other.
struct Signed {
    long double sign = 1;
    runnel::Ring ring;
};
using Figure = std::vector<Signed>;

inline Figure figure(const runnel::Ring& outline, std::span<const runnel::Ring> openings) {
    Figure rings{{1, outline}};
    for (const runnel::Ring& opening : openings) {
        rings.push_back({-1, opening});
    }
    return rings;
}

/// Integral over what all figures have in common: multiplied out, a sum over one ring of each.
inline long double integral_over_figures(const Corners& all, std::span<const Figure> figures,
                                         runnel::Point base, const Pressure& pressure,
                                         std::vector<runnel::Ring>& chosen) {
    if (figures.empty()) {
        return integral_over(all, chosen, base, pressure);
    }
    long double sum = 0;
    for (const Signed& part : figures.front()) {
        chosen.push_back(part.ring);
        sum += part.sign * integral_over_figures(all, figures.subspan(1), base, pressure, chosen);
        chosen.pop_back();
    }
    return sum;
}

} // namespace exact

/// Force that area loads of a case put on a deck that they all act on, in long double.
inline long double force_on(const runnel::FramedDeck& deck, std::span<const runnel::AreaLoad> loads,
                            const std::string& load_case) {
    const runnel::Point base = deck.outline.front();
    const long double far = 1000; // any square around decks of these tests
    const exact::Corners all{{-far, -far}, {far, -far}, {far, far}, {-far, far}};
    long double force = 0;
    for (std::size_t i = 0; i < loads.size(); ++i) {
        const runnel::AreaLoad& load = loads[i];
        if (load.case_id != load_case) {
            continue;
        }
        const double q = pressure_of(load, base);
        const exact::Pressure pressure{
            static_cast<long double>(q),
            {static_cast<long double>(pressure_of(load, {base.x + 1, base.y}) - q),
             static_cast<long double>(pressure_of(load, {base.x, base.y + 1}) - q)}};
        std::vector<exact::Figure> own{exact::figure(deck.outline, deck.openings)};
        if (!load.outline.empty()) {
            own.push_back(exact::figure(load.outline, load.openings));
        }
        std::vector<exact::Figure> replacing;
        bool left = true;
        for (std::size_t k = i + 1; k < loads.size(); ++k) {
            if (loads[k].replaces && loads[k].case_id == load_case) {
                left = left && !loads[k].outline.empty();
                replacing.push_back(exact::figure(loads[k].outline, loads[k].openings));
            }
        }
        // Less what replaces it, by inclusion and exclusion.
        for (std::uint32_t chosen = 0; left && chosen < (1U << replacing.size()); ++chosen) {
            std::vector<exact::Figure> common = own;
            long double sign = 1;
            for (std::size_t k = 0; k < replacing.size(); ++k) {
                if ((chosen >> k & 1U) != 0) {
                    common.push_back(replacing[k]);
                    sign = -sign;
                }
            }
            std::vector<runnel::Ring> rings;
            force += sign * exact::integral_over_figures(all, common, base, pressure, rings);
        }
    }
    return force;
}

/// One or two openings in an upright rectangle, which may touch its edges and each other but share no area.
inline void add_openings(Random& random, runnel::AreaLoad& load) {
    const double x = load.outline[0].x; // where it begins whichever way it runs
    const double y = std::min(load.outline[0].y, load.outline[2].y);
    const double width = load.outline[2].x - x;
    const double depth = std::abs(load.outline[2].y - load.outline[0].y);
    const double middle = x + width * random.between(0.3, 0.7);
    const double bottom = y + depth / 4 * random.whole(0, 2);
    load.openings.push_back(
        {{x, bottom}, {middle, bottom}, {middle, bottom + depth / 4}, {x, bottom + depth / 4}});
    if (random.chance(0.5)) {
        load.openings.push_back({{middle, y}, {middle, y + depth / 2}, {x + width, y}});
    }
}

/// Area loads as they come: uniform or over a plane, everywhere or in a zone of any shape, and some replace,
/// not more than `most_replacing`, since the oracle goes through all their subsets.
inline std::vector<runnel::AreaLoad> random_area_loads(Random& random, double reach, int most = 5,
                                                       int most_replacing = 3) {
    std::vector<runnel::AreaLoad> loads;
    int replacing = 0;
    for (int i = random.whole(1, most); i > 0; --i) {
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
            if (load.outline.size() > 4 && random.chance(0.4)) { // fewer may leave their middle outside
                load.openings.push_back(random.star(centre, 0.01 * reach, 0.03 * reach, random.whole(3, 6)));
            }
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
            if (random.chance(0.4)) {
                add_openings(random, load);
            }
        }
        load.replaces = replacing < most_replacing && random.chance(0.35);
        replacing += load.replaces ? 1 : 0;
        loads.push_back(std::move(load));
    }
    return loads;
}

inline std::vector<runnel::AreaLoad> moved(std::vector<runnel::AreaLoad> loads, const Motion& move) {
    for (runnel::AreaLoad& load : loads) {
        load.outline = move(load.outline);
        for (runnel::Ring& opening : load.openings) {
            opening = move(opening);
        }
        if (load.plane) {
            for (runnel::Point& p : load.plane->at) {
                p = move(p);
            }
        }
    }
    return loads;
}

} // namespace support
