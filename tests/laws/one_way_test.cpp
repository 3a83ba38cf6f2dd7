#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <map>

using namespace runnel;
using support::HandFramed;
using support::Motion;
using support::Random;

namespace {

/// One random deck with carriers through it, zones on it, and line and point loads, drawn in plain position.
struct Drawing {
    Ring outline;
    std::vector<Ring> openings;
    std::vector<std::pair<Point, Point>> members;
    double direction = 0;
    std::vector<Ring> zones;
    std::vector<std::pair<Point, Point>> lines;
};

enum class Shape { convex, reentrant, rectangular };

Ring convex_ring(Random& random) {
    Ring ring;
    const int corners = random.whole(6, 12);
    for (int i = 0; i < corners; ++i) {
        const double a = 2 * std::numbers::pi * (i + random.between(0.2, 0.8)) / corners;
        ring.push_back({9 * std::cos(a), 7 * std::sin(a)});
    }
    return ring;
}

Drawing draw(Random& random, Shape shape) {
    Drawing d;
    d.outline = shape == Shape::convex      ? convex_ring(random)
                : shape == Shape::reentrant ? random.star({0, 0}, 3, 11, random.whole(9, 15))
                                            : Ring{{-9, -6}, {9, -6}, {9, 6}, {-9, 6}};
    d.direction = random.chance(0.4) ? 90.0 * random.whole(0, 3) : random.between(-180, 180);
    // Openings around the middle lie inside every outline of these.
    if (random.chance(0.6)) {
        d.openings.push_back(random.star({0, 0}, 0.3, 1.2, random.whole(3, 7)));
        std::reverse(d.openings.back().begin(), d.openings.back().end());
    }
    const Motion along{d.direction, {}};
    // Two carriers across all strips, so that nothing is unsupported; then some of any kind.
    d.members.emplace_back(along({-2, -30}), along({-2 + random.between(-0.4, 0.4), 30}));
    d.members.emplace_back(along({2.1, -30}), along({2.1 + random.between(-0.4, 0.4), 30}));
    if (random.chance(0.7)) { // edge beams all round
        for (std::size_t i = 0; i < d.outline.size(); ++i) {
            d.members.emplace_back(d.outline[i], d.outline[(i + 1) % d.outline.size()]);
        }
    }
    const int more = random.whole(0, 12);
    for (int i = 0; i < more; ++i) {
        const double x = random.between(-12, 12);
        const double lean = random.chance(0.5) ? 0 : random.chance(0.3) ? 1e-9 : random.between(-4, 4);
        const double from = random.between(-14, 8);
        const double to = from + random.between(0.5, 20);
        Point a = along({x, from});
        Point b = along({x + lean, to});
        if (random.chance(0.3) &&
            shape == Shape::rectangular) { // along an edge of the deck, or a joist between two edges
            a = {-7.5 + 1.1 * i, -6};      // no two along each other: that is refused before
            b = {a.x, 6};
        }
        d.members.emplace_back(a, b);
    }
    for (int i = random.whole(0, 3); i > 0; --i) {
        d.zones.push_back(
            random.star({random.between(-5, 5), random.between(-5, 5)}, 1, 6, random.whole(3, 8)));
    }
    for (int i = d.openings.empty() ? random.whole(0, 2) : 0; i > 0; --i) {
        // Inside the core that no shape leaves out.
        d.lines.emplace_back(Point{random.between(-1.5, 1.5), random.between(-1.5, 1.5)},
                             Point{random.between(-1.5, 1.5), random.between(-1.5, 1.5)});
    }
    return d;
}

HandFramed framed(const Drawing& d, const Motion& move, bool reversed = false) {
    HandFramed f;
    f.plan.settings.snap = 1e-7; // nothing here has been snapped: what lies beside each other is meant to
    auto members = d.members;
    if (reversed) {
        std::reverse(members.begin(), members.end());
    }
    for (const auto& [from, to] : members) {
        f.add_member(move(from), move(to));
    }
    std::vector<Ring> openings;
    for (const Ring& opening : d.openings) {
        openings.push_back(move(opening));
    }
    f.add_deck(move(d.outline), d.direction + move.degrees, openings);
    f.add_area_load("live", 2.5);
    f.add_area_load("dead", 1.25);
    for (std::size_t i = 0; i < d.zones.size(); ++i) {
        f.add_area_load(i % 2 == 0 ? "live" : "dead", 1.0 + static_cast<double>(i), move(d.zones[i]), i == 2);
    }
    for (const auto& [from, to] : d.lines) {
        f.level().line_loads.push_back({"live", 1.0, 3.0, move(from), move(to), {}, {}});
    }
    return f;
}

double worst_cover(const HandFramed& f, const Sharing& sharing) {
    Sum area;
    for (const Cell& cell : sharing.cells) {
        area.add((cell.to - cell.from) * (cell.high.start - cell.low.start + cell.high.end - cell.low.end) /
                 2);
    }
    const FramedDeck& deck = f.framing.levels[0].decks[0];
    double expected = signed_area(deck.outline);
    for (const Ring& opening : deck.openings) {
        expected += signed_area(opening);
    }
    return std::abs(area.value() - expected) / expected;
}

double worst_force(const LevelLoads& loads) {
    double worst = 0;
    for (const DeckBalance& row : loads.balance) {
        worst = std::max(worst, std::abs(row.applied.force - row.shared.force) / row.applied.magnitude);
    }
    return worst;
}

/// Total by carrier of a case, points and lines together.
std::vector<double> totals(const LevelLoads& loads, std::uint32_t load_case) {
    std::vector<double> result;
    for (std::size_t c = 0; c < loads.lines.size(); ++c) {
        result.push_back(support::total(loads.lines[c], load_case) +
                         support::total(loads.points[c], load_case));
    }
    return result;
}

} // namespace

TEST_CASE("one-way decks: cover, owner, force, order and motion on random decks") {
    const std::uint64_t seed = support::seed_of_run(20261201);
    MESSAGE("seed " << seed);
    Random random(seed);
    double cover = 0;
    double cover_far = 0;
    double force = 0;
    double force_far = 0;
    int supported = 0;
    for (int i = 0; i < 600; ++i) {
        CAPTURE(i);
        const Shape shape = static_cast<Shape>(i % 3);
        const Drawing d = draw(random, shape);
        const HandFramed plain = framed(d, {});
        const Sharing sharing = plain.share();
        const LevelLoads loads = plain.load(sharing);
        cover = std::max(cover, worst_cover(plain, sharing));
        CHECK(worst_cover(plain, sharing) <= 1e-12);
        // A strip that the outline or an opening cuts off from all carriers is told, and then its load is
        // missing.
        const bool whole = !has_errors(sharing.problems);
        supported += whole ? 1 : 0;
        if (whole) {
            CHECK(worst_force(loads) <= 1e-12);
            force = std::max(force, worst_force(loads));
        } else {
            CHECK(worst_force(loads) > 1e-12);
        }
        CHECK(check_owners(plain.plan, plain.framing, 0, sharing, 60, seed + static_cast<std::uint64_t>(i))
                  .empty());

        // Regions are drawn whole: their rings enclose the area of their cells.
        for (const Region& region : regions_of(sharing)) {
            double drawn = 0;
            for (const Ring& ring : region.rings) {
                drawn += signed_area(ring);
            }
            CHECK(drawn == doctest::Approx(region.area).epsilon(1e-9));
        }

        const Motion away{random.between(-180, 180),
                          {1e5 * random.between(-1, 1), 1e5 * random.between(-1, 1)}};
        const HandFramed moved = framed(d, away);
        const Sharing moved_sharing = moved.share();
        const LevelLoads moved_loads = moved.load(moved_sharing);
        cover_far = std::max(cover_far, worst_cover(moved, moved_sharing));
        CHECK(worst_cover(moved, moved_sharing) <= 1e-9);
        CHECK(has_errors(moved_sharing.problems) == !whole);
        if (whole) {
            CHECK(worst_force(moved_loads) <= 1e-9);
            force_far = std::max(force_far, worst_force(moved_loads));
        }
        CHECK(check_owners(moved.plan, moved.framing, 0, moved_sharing, 30, seed).empty());

        const HandFramed reversed = framed(d, {}, true);
        const LevelLoads reversed_loads = reversed.load(reversed.share());
        for (std::uint32_t load_case = 0; load_case < 2; ++load_case) {
            const std::vector<double> here = totals(loads, load_case);
            const std::vector<double> there = totals(moved_loads, load_case);
            const std::vector<double> back = totals(reversed_loads, load_case);
            const auto members = static_cast<std::size_t>(plain.framing.levels[0].members.size());
            for (std::size_t m = 0; m < members; ++m) {
                CHECK(std::abs(here[m] - there[m]) <= 1e-6);
                CHECK(std::abs(here[m] - back[members - 1 - m]) <= 1e-9);
            }
        }
    }
    CHECK(supported > 200);
    MESSAGE(supported << " of 600 decks wholly carried; largest relative error of area " << cover
                      << ", 100 km away " << cover_far << "; of force " << force << ", away " << force_far);
}
