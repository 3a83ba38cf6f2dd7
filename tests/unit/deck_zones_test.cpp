#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include "deck/level_zones.hpp"
#include "deck/lost_loads.hpp"
#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <string>
#include <vector>

using namespace runnel;
using doctest::Approx;
using support::HandFramed;
using support::Random;

namespace {

bool is_inside(const Ring& ring, Point p) {
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (b.x - a.x) * ((p.y - a.y) / (b.y - a.y))) {
            inside = !inside;
        }
    }
    return inside;
}

double distance_to(const Ring& ring, Point p) {
    double nearest = 1e300;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        nearest = std::min(nearest, distance_to_segment(p, ring[i], ring[(i + 1) % ring.size()]));
    }
    return nearest;
}

StripAxes axes_at(Point origin, double radians) {
    return {origin, std::cos(radians), std::sin(radians)};
}

} // namespace

TEST_CASE("pieces of a zone add up to it in axes of any direction, however many there are and far out") {
    const std::uint64_t seed = support::seed_of_run(20261301);
    MESSAGE("seed " << seed);
    for (std::uint64_t i = 0; i < 60; ++i) {
        CAPTURE(i);
        Random random(seed + i);
        const double far = i % 2 == 1 ? 1e6 : 0;
        HandFramed f;
        f.add_area_load("live", 1); // no outline: no pieces
        f.add_area_load("live", 1, random.star({far, -far}, 0.5, 9, random.whole(3, 40)));
        if (random.chance(0.5)) {
            std::reverse(f.level().area_loads[1].outline.begin(), f.level().area_loads[1].outline.end());
        }
        const Ring& outline = f.level().area_loads[1].outline;
        const double noise = noise_of(far + 10);
        LevelZones zones(f.level(), noise);
        const Box all = box_of(outline);
        for (int k = 0; k < 40; ++k) { // more directions than have pieces of their own
            std::vector<Convex> pieces;
            zones.find(1, all, axes_at({far + random.between(-9, 9), -far}, random.between(-3, 3)), pieces);
            double area = 0;
            for (const Convex& piece : pieces) {
                CHECK(signed_area(piece) >= 0);
                area += signed_area(piece);
            }
            CHECK(area == Approx(std::abs(signed_area(outline))).epsilon(1e-10));
        }
        std::vector<Convex> none_of_it;
        zones.find(0, all, StripAxes{}, none_of_it);
        zones.find(1, Box{{far + 20, -far}, {far + 21, 1 - far}}, StripAxes{}, none_of_it);
        CHECK(none_of_it.empty());
    }
}

TEST_CASE("pieces found near a deck hold every point of the zone there, once") {
    const std::uint64_t seed = support::seed_of_run(20261302);
    MESSAGE("seed " << seed);
    int inside = 0;
    for (std::uint64_t i = 0; i < 60; ++i) {
        CAPTURE(i);
        Random random(seed + i);
        HandFramed f;
        f.add_area_load("live", 1, random.star({0, 0}, 0.5, 9, random.whole(3, 200)));
        const Ring& outline = f.level().area_loads[0].outline;
        LevelZones zones(f.level(), noise_of(10));
        std::vector<Convex> pieces;
        for (int k = 0; k < 40; ++k) {
            const Point low{random.between(-9, 6), random.between(-9, 6)};
            const Box near{low, low + Point{2, 3}};
            const StripAxes axes = axes_at({random.between(-9, 9), 3}, random.between(-3, 3));
            pieces.clear();
            zones.find(0, near, axes, pieces);
            const Point p{random.between(near.low.x, near.high.x), random.between(near.low.y, near.high.y)};
            std::size_t holders = 0;
            double from_edge = distance_to(outline, p);
            for (const Convex& piece : pieces) {
                holders += is_inside(piece, axes.to_strip(p)) ? 1 : 0;
                from_edge = std::min(from_edge, distance_to(piece, axes.to_strip(p)));
            }
            if (from_edge > 1e-9) {
                CHECK(holders == (is_inside(outline, p) ? 1 : 0));
                inside += is_inside(outline, p) ? 1 : 0;
            }
        }
    }
    CHECK(inside > 500);
}

TEST_CASE("what no deck without a carrier can carry is told deck by deck") {
    HandFramed f;
    f.add_area_load("live", 2);
    f.add_area_load("dead", 1, {{0, 0}, {9, 0}, {9, 1}, {0, 1}});
    for (const double x : {0.0, 3.0, 6.0}) {
        f.add_deck({{x, 0}, {x + 2, 0}, {x + 2, 2}, {x, 2}}, 90);
        f.level().decks.back().span = x == 3 ? SpanKind::one_way : SpanKind::two_way;
    }
    f.level().area_loads[1].decks = {"D1", "D2"};
    const Sharing sharing = f.share();
    REQUIRE(sharing.problems.size() == 3);
    CHECK(sharing.problems[0].message.find("(live 8 kN would be lost)") != std::string::npos);
    CHECK(sharing.problems[1].message.find("(dead 2 kN, live 8 kN would be lost)") != std::string::npos);
    CHECK(sharing.problems[2].message.find("(dead 2 kN, live 8 kN would be lost)") != std::string::npos);
    CHECK(sharing.problems[2].message.find("first corner at (6, 0)") != std::string::npos);
}
