#include "geometry/basic.hpp"
#include "support/building_support.hpp"
#include "support/framing_support.hpp"
#include "support/random_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <numeric>
#include <string>

using namespace runnel;
using framing_support::PlanBuilder;
using support::Random;

namespace {

/// A slot, 0.05 to 1.5 wide, at any angle about a point.
Ring slot(Random& random, Point about, double longest) {
    const double a = random.chance(0.5) ? 0 : random.between(0, 3);
    const Point along{std::cos(a), std::sin(a)};
    const double half = random.between(0.1, longest / 2);
    const double wide = random.chance(0.5) ? random.between(0.05, 0.2) : random.between(0.2, 1.5);
    const auto at = [&](double u, double v) {
        return Point{about.x + u * along.x - v * along.y, about.y + u * along.y + v * along.x};
    };
    return {at(-half, 0), at(half, 0), at(half, wide), at(-half, wide)};
}

/// A slot right beside a member all along it, so that what it takes lies beyond.
Ring slot_beside(Random& random, const Member& member) {
    const Point d = member.to - member.from;
    const double length = std::hypot(d.x, d.y);
    const double wide = (random.chance(0.5) ? 1 : -1) * random.between(0.05, 0.4) / length;
    const Point aside{-wide * d.y, wide * d.x};
    return {member.from, member.to, member.to + aside, member.from + aside};
}

/// Cuts a notch in the edge from corner k of a ring on.
void notch(Random& random, Ring& ring) {
    const auto k = static_cast<std::size_t>(random.whole(0, static_cast<int>(ring.size()) - 1));
    const Point a = ring[k];
    const Point b = ring[(k + 1) % ring.size()];
    const double length = std::hypot(b.x - a.x, b.y - a.y);
    const Point d{(b.x - a.x) / length, (b.y - a.y) / length};
    const double from = random.between(0.1, 0.5) * length;
    const double to = from + random.between(0.05, 0.4) * length;
    const double deep = random.between(0.1, 3);
    const auto at = [&](double u, double v) {
        return Point{a.x + u * d.x - v * d.y, a.y + u * d.y + v * d.x};
    };
    const Ring corners{at(from, 0), at(from, deep), at(to, deep), at(to, 0)};
    ring.insert(ring.begin() + static_cast<std::ptrdiff_t>(k) + 1, corners.begin(), corners.end());
}

/// Holds the laws of a takedown's influence areas; false if errors stopped it.
bool hold_laws(const Plan& plan, double& worst) {
    if (has_errors(check_plan(plan))) {
        return false;
    }
    const Takedown t = take_down(plan);
    if (!t.complete) {
        return false;
    }
    for (const LevelTakedown& level : t.levels) {
        const double floor =
            std::accumulate(level.sharing.deck_area.begin(), level.sharing.deck_area.end(), 0.0);
        for (std::size_t c = 0; c < level.influence_area.size(); ++c) {
            CAPTURE(c);
            worst = std::max(worst, (level.tributary_area[c] - level.influence_area[c]) / floor);
            CHECK(level.tributary_area[c] <= level.influence_area[c] + 1e-9 * floor);
            CHECK(level.influence_area[c] <= floor * (1 + 1e-9));
        }
    }
    return true;
}

} // namespace

TEST_CASE("no carrier of a building feels less floor than is tributary to it, notches and slots included") {
    const std::uint64_t seed = support::seed_of_run(20261202);
    MESSAGE("seed ", seed);
    Random random(seed);
    int buildings = 0;
    int cut_decks = 0;
    double worst = 0;
    for (int trial = 0; trial < 300; ++trial) {
        CAPTURE(trial);
        Plan plan = support::random_building(random.whole(1, 1 << 20));
        int cut = 0;
        const int rule = trial % 4; // two-way, by fixity, on columns, mixed
        if (rule == 3) {
            support::mix_rules(plan, static_cast<std::uint64_t>(trial));
        }
        for (Level& level : plan.levels) {
            for (Deck& deck : level.decks) {
                if (rule != 3) {
                    deck.span = rule == 2 ? SpanKind::columns : SpanKind::two_way;
                    deck.corner_angles = rule == 1 ? CornerAngles::by_fixity : CornerAngles::equal;
                    deck.direction.reset();
                }
                const Deck whole = deck;
                const double lot = random.fraction();
                if (lot < 0.3) {
                    notch(random, deck.outline);
                } else if (lot < 0.7 && !level.members.empty()) {
                    const int last = static_cast<int>(level.members.size()) - 1;
                    deck.openings.push_back(
                        slot_beside(random, level.members[static_cast<std::size_t>(random.whole(0, last))]));
                } else {
                    const Point about = deck.outline[static_cast<std::size_t>(random.whole(0, 2))];
                    deck.openings.push_back(
                        slot(random, {about.x + random.between(-6, 6), about.y + random.between(-6, 6)}, 8));
                }
                if (has_errors(check_plan(plan))) {
                    deck = whole;
                } else {
                    ++cut;
                }
            }
        }
        if (hold_laws(plan, worst)) {
            ++buildings;
            cut_decks += cut;
        }
    }
    MESSAGE(cut_decks, " decks cut in ", buildings,
            " buildings, influence less than tributary area by at most ", worst, " of the floor");
    CHECK(buildings > 80);
    CHECK(cut_decks > 200);
}

TEST_CASE(
    "no beam of a random two-way deck feels less than is tributary to it, through whatever it carries") {
    const std::uint64_t seed = support::seed_of_run(20261203);
    MESSAGE("seed ", seed);
    Random random(seed);
    int decks = 0;
    double worst = 0;
    for (int trial = 0; trial < 600; ++trial) {
        CAPTURE(trial);
        const Point far{random.between(-1e4, 1e4), random.between(-1e4, 1e4)};
        PlanBuilder builder;
        const int girders = random.whole(1, 4);
        for (int i = 0; i < girders; ++i) { // in parallel, each on two or three columns, with overhangs
            const std::string n = std::to_string(i);
            const double y = far.y - 6 + 4 * i + random.between(-1, 1);
            const double left = far.x - random.between(2, 8);
            const double right = far.x + random.between(2, 8);
            builder.girder("G" + n, {left, y}, {right, y});
            builder.column("A" + n, {left, y}).column("B" + n, {far.x + random.between(-1, 1), y});
            if (random.chance(0.5)) {
                builder.column("C" + n, {right, y});
            }
            if (i > 0 && random.chance(0.7)) { // a beam from the girder before to this one
                const double x = far.x + random.between(-1.5, 1.5);
                builder.beam("M" + n, {x, builder.floor().members[builder.floor().members.size() - 2].from.y},
                             {x, y});
            }
        }
        Deck& deck = builder.deck("D", random.star(far, 4, 11, random.whole(3, 12)));
        deck.span = SpanKind::two_way;
        deck.corner_angles = random.chance(0.3) ? CornerAngles::by_fixity : CornerAngles::equal;
        for (int i = random.whole(0, 3); i > 0; --i) {
            deck.openings.push_back(
                slot(random, {far.x + random.between(-5, 5), far.y + random.between(-5, 5)}, 6));
        }
        decks += hold_laws(builder.plan, worst) ? 1 : 0;
    }
    MESSAGE(decks, " decks, influence less than tributary area by at most ", worst, " of the floor");
    CHECK(decks > 150);
}
