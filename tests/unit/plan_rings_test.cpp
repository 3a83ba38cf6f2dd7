#include "plan/ring_checks.hpp"

#include "geometry/basic.hpp"
#include "support/random_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

using namespace runnel;

namespace {

constexpr double snap = 0.005;

/// Looks at every pair of edges: what the sweep must agree with.
bool crosses_by_all_pairs(const Ring& ring) {
    const std::size_t n = ring.size();
    const auto side = [](Point a, Point b, Point p) { return cross(b - a, p - a); };
    for (std::size_t i = 0; i < n; ++i) {
        for (std::size_t j = i + 2; j < n; ++j) {
            if (i == 0 && j + 1 == n) {
                continue;
            }
            const Point a = ring[i], b = ring[i + 1], c = ring[j], d = ring[(j + 1) % n];
            const bool meet = side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;
            if (meet || distance_to_segment(a, c, d) <= snap || distance_to_segment(b, c, d) <= snap ||
                distance_to_segment(c, a, b) <= snap || distance_to_segment(d, a, b) <= snap) {
                return true;
            }
        }
    }
    return false;
}

Ring turned(const Ring& ring, double degrees, Point by) {
    const double c = std::cos(degrees * std::numbers::pi / 180);
    const double s = std::sin(degrees * std::numbers::pi / 180);
    Ring result;
    for (const Point& p : ring) {
        result.push_back({by.x + p.x * c - p.y * s, by.y + p.x * s + p.y * c});
    }
    return result;
}

} // namespace

TEST_CASE("the sweep finds a ring's contact with itself exactly where looking at all pairs does") {
    const std::uint64_t seed = support::seed_of_run(20261201);
    CAPTURE(seed);
    support::Random random(seed);
    int crossing = 0;
    for (int trial = 0; trial < 3000; ++trial) {
        CAPTURE(trial);
        Ring ring = random.star({0, 0}, 2, 9, random.whole(17, 60));
        if (random.chance(0.5)) { // move a corner: often across another edge
            ring[static_cast<std::size_t>(random.whole(0, 16))] = {random.between(-9, 9),
                                                                   random.between(-9, 9)};
        }
        ring = without_repeats(turned(ring, random.between(0, 360), {random.between(-1e5, 1e5), 3e4}), snap);
        const auto contact = self_contact(ring, snap);
        const bool expected = crosses_by_all_pairs(ring);
        crossing += expected ? 1 : 0;
        CHECK(contact.has_value() == expected);
        if (contact) {
            CHECK(contact->gap >= 0);
            CHECK(contact->gap <= snap);
        }
    }
    CHECK(crossing > 300);
    CHECK(crossing < 2700);
}

TEST_CASE("a ring that crosses itself has no gap there, one with a slit has the slit's width") {
    for (const double angle : {0.0, 17.0, 42.08, 90.0}) {
        CAPTURE(angle);
        const Ring bow_tie = turned({{0, 0}, {6, 4}, {6, 0}, {0, 4}}, angle, {5e4, -2e4});
        REQUIRE(self_contact(bow_tie, snap));
        CHECK(self_contact(bow_tie, snap)->gap == 0);
        const Ring slit =
            turned({{0, 0}, {2, 0}, {2, 3}, {2.01, 3}, {2.004, 0.5}, {2.01, 0}, {4, 0}, {4, 6}, {0, 6}},
                   angle, {5e4, -2e4});
        REQUIRE(self_contact(slit, snap));
        CHECK(self_contact(slit, snap)->gap == doctest::Approx(0.004).epsilon(1e-6));
        CHECK_FALSE(self_contact(slit, 0.003));
    }
}

TEST_CASE("rings of upright and level edges: combs, steps and slots") {
    for (const double angle : {0.0, 17.0, 42.08, 90.0}) {
        CAPTURE(angle);
        Ring comb;
        for (int i = 0; i < 50; ++i) {
            comb.insert(comb.end(), {{2.0 * i, 10}, {2.0 * i, 0}, {2.0 * i + 1, 0}, {2.0 * i + 1, 10}});
        }
        comb.push_back({99, 12});
        comb.push_back({0, 12});
        CHECK_FALSE(self_contact(turned(comb, angle, {5e4, -2e4}), snap));
        comb[81].y = 12.5; // one tooth through the back
        comb[82].y = 12.5;
        CHECK(self_contact(turned(comb, angle, {5e4, -2e4}), snap));
    }
}

TEST_CASE("a ring of 200,000 corners is looked at in a moment, and one bad corner in it is found") {
    Ring ring;
    const int n = 200000;
    for (int i = 0; i < n; ++i) { // a saw of long slanting teeth, against which boxes are no help
        ring.push_back({i * 0.1, i % 2 == 0 ? 0.0 : 5000.0});
    }
    ring.push_back({n * 0.1, -10});
    ring.push_back({-1, -10});
    CHECK_FALSE(self_contact(ring, 1e-4).has_value());
    ring[100000].y = -11;
    CHECK(self_contact(ring, 1e-4).has_value());
}

TEST_CASE("points are told inside and outside like by a winding number") {
    const std::uint64_t seed = support::seed_of_run(7);
    CAPTURE(seed);
    support::Random random(seed);
    for (int trial = 0; trial < 200; ++trial) {
        const Ring ring = random.star({3, 4}, 1, 6, random.whole(5, 40));
        const RingQuery query(ring, snap);
        for (int k = 0; k < 20; ++k) {
            const Point p{random.between(-4, 10), random.between(-3, 11)};
            double turn = 0;
            for (std::size_t i = 0; i < ring.size(); ++i) {
                const Point a = ring[i] - p;
                const Point b = ring[(i + 1) % ring.size()] - p;
                turn += std::atan2(cross(a, b), dot(a, b));
            }
            CHECK(query.holds(p) == (std::abs(turn) > std::numbers::pi));
        }
        CHECK(query.holds(interior_point(ring)));
    }
}

TEST_CASE("rings that share area are told from rings that touch, whichever comes first and however turned") {
    struct Pair {
        const char* name;
        Ring a, b;
        bool share;
    };
    const Ring square{{0, 0}, {2, 0}, {2, 2}, {0, 2}};
    const std::vector<Pair> pairs{
        {"apart", square, {{3, 0}, {5, 0}, {5, 2}, {3, 2}}, false},
        {"along an edge", square, {{2, 0}, {4, 0}, {4, 2}, {2, 2}}, false},
        {"along part of an edge", square, {{2, 0.5}, {4, 0.5}, {4, 1}, {2, 1}}, false},
        {"at a corner", square, {{2, 2}, {4, 2}, {4, 4}, {2, 4}}, false},
        {"by less than snap", square, {{1.996, 0}, {4, 0}, {4, 2}, {1.996, 2}}, false},
        {"by more than snap", square, {{1.98, 0}, {4, 0}, {4, 2}, {1.98, 2}}, true},
        {"the same", square, {{2, 2}, {0, 2}, {0, 0}, {2, 0}}, true},
        {"one inside the other", square, {{0.5, 0.5}, {1, 0.5}, {1, 1}}, true},
        {"one inside the other along an edge", square, {{0, 0.5}, {1, 0.5}, {1, 1}, {0, 1}}, true},
        {"half of the other", square, {{0, 0}, {2, 0}, {2, 1}, {0, 1}}, true},
        {"a plus", {{0, 1}, {3, 1}, {3, 2}, {0, 2}}, {{1, 0}, {2, 0}, {2, 3}, {1, 3}}, true},
    };
    for (const Pair& pair : pairs) {
        for (const double angle : {0.0, 30.0, 45.0, 211.7}) {
            CAPTURE(pair.name);
            CAPTURE(angle);
            const Ring a = turned(pair.a, angle, {8e3, -5e3});
            const Ring b = turned(pair.b, angle, {8e3, -5e3});
            const RingQuery of_a(a, snap);
            const RingQuery of_b(b, snap);
            CHECK(shared_point(of_a, a, of_b, b).has_value() == pair.share);
            CHECK(shared_point(of_b, b, of_a, a).has_value() == pair.share);
        }
    }
}
