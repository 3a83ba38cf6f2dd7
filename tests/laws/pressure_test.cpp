#include "support/deck_support.hpp"
#include "support/nearest_support.hpp"
#include "support/pressure_support.hpp"
#include "support/random_support.hpp"

#include "deck/pressure.hpp"
#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <array>

using namespace runnel;
using support::BeamAndColumn;
using support::between_all;
using support::far_away;
using support::HandFramed;
using support::Motion;
using support::one_on;
using support::Random;
using support::random_nearest;
using support::rectangle;
using support::Stretch;
using support::totals;
using support::worst_force;

namespace {

const std::array<std::string, 2> case_names{"dead", "live"};

/// Largest disagreement of what the carriers got and the oracle, over all cases, by the size of the load.
double worst_against_oracle(const HandFramed& f, const LevelLoads& loads, double least) {
    double worst = 0;
    for (const DeckBalance& row : loads.balance) {
        if (row.deck != 0) {
            continue;
        }
        const FramedLevel& level = f.framing.levels[0];
        const long double expected =
            support::force_on(level.decks[0], level.area_loads, case_names[row.load_case]);
        const double off =
            static_cast<double>(std::abs(expected - static_cast<long double>(row.shared.force)));
        worst = std::max(worst, off / std::max(row.applied.magnitude, least));
    }
    return worst;
}

/// A one-way deck of any shape on two members across all its strips.
HandFramed random_one_way(Random& random, const Motion& move, std::vector<AreaLoad>& loads) {
    HandFramed f;
    f.plan.settings.snap = 1e-7;
    const Ring outline =
        random.chance(0.5) ? random.star({0, 0}, 3, 9, random.whole(5, 13)) : rectangle(-6, -4, 6, 4);
    std::vector<Ring> openings;
    if (random.chance(0.5)) {
        openings.push_back(random.star({0, 0}, 0.3, 1.4, random.whole(3, 6)));
        std::reverse(openings.back().begin(), openings.back().end());
        openings.back() = move(openings.back());
    }
    const double direction = random.chance(0.4) ? 90.0 * random.whole(0, 3) : random.between(-180, 180);
    const Motion along{direction, {}};
    for (const double x : {-2.5, 0.1, 2.6}) {
        f.add_member(move(along({x, -20})), move(along({x + random.between(-0.5, 0.5), 20})));
    }
    for (std::size_t k = 0; k < outline.size(); ++k) { // edge beams
        f.add_member(move(outline[k]), move(outline[(k + 1) % outline.size()]));
    }
    f.add_deck(move(outline), direction + move.degrees, openings);
    loads = support::random_area_loads(random, 6);
    f.level().area_loads = support::moved(loads, move);
    return f;
}

/// Ordinates at which an upright line crosses a ring.
void cross_upright(const Ring& ring, double x, std::vector<double>& breaks) {
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if ((a.x > x) != (b.x > x)) {
            breaks.push_back(a.y + (x - a.x) / (b.x - a.x) * (b.y - a.y));
        }
    }
}

/// What a strip square to the drawn beam brings it, at a station: the pressure along the strip from edge to
/// edge of whatever lies on it, each part by the value at its middle, which is exact for planes.
double ordinate_at(const BeamAndColumn& d, const std::vector<AreaLoad>& loads, const std::string& load_case,
                   double station) {
    std::vector<double> breaks{d.opening_near, d.opening_far};
    for (const AreaLoad& load : loads) {
        cross_upright(load.outline, station, breaks);
        for (const Ring& opening : load.openings) {
            cross_upright(opening, station, breaks);
        }
    }
    double sum = 0;
    for (const Stretch& part : between_all(breaks, 0, std::min(d.depth, d.border_at(station)))) {
        const bool open = d.has_opening() && station > d.opening_from && station < d.opening_to &&
                          part.middle() > d.opening_near && part.middle() < d.opening_far;
        if (!open) {
            sum += (part.to - part.from) * support::pressure_at(loads, load_case, {station, part.middle()});
        }
    }
    return sum;
}

double line_at(std::span<const CarrierLine> lines, std::uint32_t load_case, double station) {
    double sum = 0;
    for (const CarrierLine& line : lines) {
        if (line.load_case == load_case && station >= line.piece.from && station < line.piece.to) {
            sum += line.piece.at(station);
        }
    }
    return sum;
}

} // namespace

TEST_CASE("pressures on one-way decks: what acts is shared, whatever replaces, varies or has holes") {
    const std::uint64_t seed = support::seed_of_run(20261202);
    MESSAGE("seed " << seed);
    double closing = 0;
    double closing_far = 0;
    double oracle = 0;
    int whole = 0;
    for (std::uint64_t i = 0; i < 1500; ++i) {
        CAPTURE(i);
        std::vector<AreaLoad> loads;
        Random random(seed + i);
        const HandFramed f = random_one_way(random, {}, loads);
        const Sharing sharing = f.share();
        if (has_errors(sharing.problems)) {
            continue; // a strip past all carriers
        }
        ++whole;
        const LevelLoads shared = f.load(sharing);
        CHECK(worst_force(shared, one_on(sharing)) <= 1e-12);
        closing = std::max(closing, worst_force(shared, one_on(sharing)));
        const double off = worst_against_oracle(f, shared, one_on(sharing));
        CHECK(off <= 1e-11);
        oracle = std::max(oracle, off);

        Random again(seed + i);
        const HandFramed away = random_one_way(again, far_away(random), loads);
        const Sharing away_sharing = away.share();
        REQUIRE_FALSE(has_errors(away_sharing.problems));
        const LevelLoads away_shared = away.load(away_sharing);
        CHECK(worst_force(away_shared, one_on(sharing)) <= 1e-9);
        closing_far = std::max(closing_far, worst_force(away_shared, one_on(sharing)));
    }
    CHECK(whole > 1000);
    MESSAGE(whole << " decks; force closes within " << closing << ", 1,000 km away " << closing_far
                  << "; against inclusion and exclusion in long double " << oracle);
}

TEST_CASE(
    "pressures on decks that load what is nearest: what acts is shared, and goes along when they move") {
    const std::uint64_t seed = support::seed_of_run(20261206);
    MESSAGE("seed " << seed);
    double closing = 0;
    double closing_far = 0;
    double oracle = 0;
    for (std::uint64_t i = 0; i < 1000; ++i) {
        CAPTURE(i);
        std::vector<AreaLoad> loads;
        Random random(seed + i);
        HandFramed f = random_nearest(random, {}, loads);
        const bool by_fixity = i % 4 == 0 && f.framing.levels[0].decks[0].span == SpanKind::two_way;
        const auto corner_angles = by_fixity ? CornerAngles::by_fixity : CornerAngles::equal;
        f.level().decks[0].corner_angles = corner_angles;
        const Sharing sharing = f.share();
        REQUIRE_FALSE(has_errors(sharing.problems));
        const LevelLoads shared = f.load(sharing);
        CHECK(worst_force(shared, one_on(sharing)) <= 1e-12);
        closing = std::max(closing, worst_force(shared, one_on(sharing)));
        const double off = worst_against_oracle(f, shared, one_on(sharing));
        CHECK(off <= 1e-11);
        oracle = std::max(oracle, off);

        Random again(seed + i);
        HandFramed away = random_nearest(again, far_away(random), loads);
        away.level().decks[0].corner_angles = corner_angles;
        const LevelLoads away_shared = away.load(away.share());
        CHECK(worst_force(away_shared, one_on(sharing)) <= 1e-9);
        closing_far = std::max(closing_far, worst_force(away_shared, one_on(sharing)));
        for (std::uint32_t load_case = 0; load_case < 2; ++load_case) {
            const std::vector<double> here = totals(shared, load_case);
            const std::vector<double> there = totals(away_shared, load_case);
            for (std::size_t c = 0; c < here.size(); ++c) {
                CHECK(std::abs(here[c] - there[c]) <= 1e-6);
            }
        }
    }
    MESSAGE("force closes within " << closing << ", 1,000 km away " << closing_far
                                   << "; against inclusion and exclusion in long double " << oracle);
}

TEST_CASE("pressures between a beam and a column: force, ordinates and the column's share are exact") {
    const std::uint64_t seed = support::seed_of_run(20261203);
    MESSAGE("seed " << seed);
    double closing = 0;
    double closing_far = 0;
    double oracle = 0;
    double ordinates = 0;
    for (std::uint64_t i = 0; i < 1500; ++i) {
        CAPTURE(i);
        Random random(seed + i);
        const BeamAndColumn d = BeamAndColumn::random(random);
        const std::vector<AreaLoad> loads = support::random_area_loads(random, 5);
        const Motion here{random.chance(0.5) ? 0 : random.between(-180, 180), {}};
        const HandFramed f = d.framed(here, loads);
        const Sharing sharing = d.sharing(here);
        const LevelLoads shared = f.load(sharing);
        CHECK(worst_force(shared, one_on(sharing)) <= 1e-12);
        closing = std::max(closing, worst_force(shared, one_on(sharing)));
        const double off = worst_against_oracle(f, shared, one_on(sharing));
        CHECK(off <= 1e-11);
        oracle = std::max(oracle, off);
        for (int k = 0; k < 20; ++k) {
            const double station = random.between(0, d.length);
            for (std::uint32_t c = 0; c < 2; ++c) {
                const double expected = ordinate_at(d, loads, case_names[c], station);
                const double error = std::abs(line_at(shared.lines[0], c, station) - expected) / 5;
                CHECK(error <= 1e-9);
                ordinates = std::max(ordinates, error);
            }
        }

        const Motion away = far_away(random);
        const LevelLoads moved = d.framed(away, loads).load(d.sharing(away));
        CHECK(worst_force(moved, one_on(sharing)) <= 1e-9);
        closing_far = std::max(closing_far, worst_force(moved, one_on(sharing)));
        for (std::uint32_t c = 0; c < 2; ++c) {
            CHECK(std::abs(support::total(moved.points[1], c) - support::total(shared.points[1], c)) <= 1e-6);
        }
    }
    MESSAGE("force closes within " << closing << ", 1,000 km away " << closing_far
                                   << "; against inclusion and exclusion in long double " << oracle
                                   << "; ordinates of 5 kN/m off by " << ordinates << " of that at most");
}

TEST_CASE(
    "zones over a piece press on each of its points as the plan says, in whatever axes it is asked for") {
    const std::uint64_t seed = support::seed_of_run(20261204);
    MESSAGE("seed " << seed);
    double worst = 0;
    for (std::uint64_t i = 0; i < 2000; ++i) {
        CAPTURE(i);
        Random random(seed + i);
        HandFramed f;
        f.add_deck(rectangle(-20, -20, 20, 20), 0);
        const int most = i % 10 == 0 ? 60 : 5; // many: large pieces are halved until few zones are near
        f.level().area_loads = support::random_area_loads(random, 6, most, most);
        const auto axes_at = [&random] {
            const double a = random.between(-3.2, 3.2);
            return StripAxes{{random.between(-9, 9), random.between(-9, 9)}, std::cos(a), std::sin(a)};
        };
        const StripAxes home = axes_at();
        const StripAxes asked = random.chance(0.3) ? home : axes_at();
        const double noise = noise_of(30);
        const auto acting = area_loads_by_deck(f.framing.levels[0], noise);
        const DeckPressure pressure(f.plan, f.framing.levels[0], 0, acting[0], home, noise);

        StripPiece area;
        area.from = random.between(-6, 4);
        area.to = area.from + random.between(0.1, 8);
        area.low = {random.between(-6, 0), random.between(-6, 0), random.between(-3, 3)};
        area.high = {area.low.start + random.between(0, 6), area.low.end + random.between(0, 6),
                     area.low.bulge - random.between(0, 3)};
        std::vector<DeckPressure::Piece> pieces;
        pressure.zones_over(area, asked, pieces);
        for (int k = 0; k < 25; ++k) {
            const double x = random.fraction();
            const Point at{random.between(area.low.at(x), area.high.at(x)),
                           (1 - x) * area.from + x * area.to};
            std::array<double, 2> found{};
            for (const DeckPressure::Uniform& u : pressure.uniform()) {
                found[u.load_case] += u.q;
            }
            for (const DeckPressure::Piece& piece : pieces) {
                const double y = piece.where.fraction(at.y);
                if (y >= 0 && y < 1 && at.x >= piece.where.low.at(y) && at.x < piece.where.high.at(y)) {
                    found[piece.load_case] += piece.intensity.at(at);
                }
            }
            for (std::uint32_t c = 0; c < 2; ++c) {
                const double expected =
                    support::pressure_at(f.framing.levels[0].area_loads, case_names[c], asked.to_plan(at));
                CHECK(std::abs(found[c] - expected) <= 1e-11);
                worst = std::max(worst, std::abs(found[c] - expected));
            }
        }
    }
    MESSAGE("pressures at points off by " << worst << " kN/m2 at most");
}
