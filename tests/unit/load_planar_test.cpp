#include "support/nearest_support.hpp"
#include "support/pressure_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <array>
#include <cmath>
#include <string>
#include <vector>

using namespace runnel;
using doctest::Approx;
using support::HandFramed;

namespace {

constexpr std::uint32_t dead = 0;
constexpr std::uint32_t live = 1;

Ring rectangle(double x0, double y0, double x1, double y1) {
    return {{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}};
}

void add_plane(HandFramed& f, std::array<Point, 3> at, std::array<double, 3> values, Ring outline = {},
               bool replaces = false) {
    f.add_area_load("live", 0, std::move(outline), replaces);
    f.level().area_loads.back().plane = PlaneOfLoad{at, values};
}

/// Intensity of a case at a station, over all its lines.
double line_at(const LevelLoads& loads, std::uint32_t carrier, std::uint32_t load_case, double station) {
    double sum = 0;
    for (const CarrierLine& line : loads.lines[carrier]) {
        if (line.load_case == load_case && station >= line.piece.from && station < line.piece.to) {
            sum += line.piece.at(station);
        }
    }
    return sum;
}

double line_total(const LevelLoads& loads, std::uint32_t carrier, std::uint32_t load_case = live) {
    return support::total(loads.lines[carrier], load_case);
}

/// A deck of 6 x 4 that spans along x between two beams along y.
HandFramed deck_on_two_beams() {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({6, 0}, {6, 4});
    f.add_deck(rectangle(0, 0, 6, 4), 0);
    return f;
}

LevelLoads loaded(const HandFramed& f) {
    const Sharing sharing = f.share();
    return f.load(sharing);
}

/// A rectangular deck of 9 x 5 on beams all round, by the 45-degree rule: beams 0 to 3 from the south edge
/// counter-clockwise, the deck on the left of each.
struct TwoWay {
    HandFramed f;
    Sharing sharing;

    TwoWay() {
        const Ring ring = rectangle(0, 0, 9, 5);
        for (std::size_t i = 0; i < 4; ++i) {
            f.add_member(ring[i], ring[(i + 1) % 4]);
            sharing.axes.push_back(support::axes_square_to(ring[i], ring[(i + 1) % 4]));
        }
        f.add_deck(ring, 0);
        f.level().decks[0].span = SpanKind::two_way;
        sharing.members = 4;
        sharing.deck_area = {45};
        for (const std::uint32_t beam : {0U, 2U}) { // long edges: trapezoids
            add(beam, 0, 2.5, 0, -2.5);
            add(beam, 2.5, 6.5, -2.5, -2.5);
            add(beam, 6.5, 9, -2.5, 0);
        }
        for (const std::uint32_t beam : {1U, 3U}) { // short edges: triangles
            add(beam, 0, 2.5, 0, -2.5);
            add(beam, 2.5, 5, -2.5, 0);
        }
    }

    void add(std::uint32_t beam, double from, double to, double start, double end) {
        Cell cell;
        cell.from = from;
        cell.to = to;
        cell.low = {start, end, 0};
        cell.carrier_side = Cell::CarrierSide::high;
        support::add_cell(sharing, beam, cell, beam, from, to);
    }
};

const Problem* find(const LevelLoads& loads, ProblemCode code) {
    for (const Problem& problem : loads.problems) {
        if (problem.code == code) {
            return &problem;
        }
    }
    return nullptr;
}

} // namespace

TEST_CASE("a plane that rises along the span loads each beam by what lies on its half") {
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {1, 4, 1}); // 1 + x/2
    const LevelLoads loads = loaded(f);
    CHECK(line_at(loads, 0, live, 2) == Approx(5.25)); // 3 m of 1 to 2.5
    CHECK(line_at(loads, 1, live, 2) == Approx(9.75)); // 3 m of 2.5 to 4
    CHECK(loads.lines[0].size() == 1);
    CHECK(loads.balance.at(0).applied.force == Approx(60));
    CHECK(loads.balance.at(0).applied.moment.x == Approx(4 * (18 + 36.0))); // integral of x + x2/2
}

TEST_CASE("a plane that rises along the beams makes their loads rise, as one piece") {
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {0, 0, 8}); // 2 y
    const LevelLoads loads = loaded(f);
    for (const std::uint32_t beam : {0U, 1U}) {
        REQUIRE(loads.lines[beam].size() == 1);
        CHECK(line_at(loads, beam, live, 0) == Approx(0));
        CHECK(line_at(loads, beam, live, 1.5) == Approx(9));
        CHECK(line_total(loads, beam) == Approx(48));
    }
}

TEST_CASE("a plane through any three of its points is the same plane") {
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {1, 4, 9}); // 1 + x/2 + 2 y
    HandFramed g = deck_on_two_beams();
    add_plane(g, {{{-10, 3}, {20, 20}, {5, -7}}}, {1 - 5 + 6, 1 + 10 + 40, 1 + 2.5 - 14});
    const LevelLoads one = loaded(f);
    const LevelLoads other = loaded(g);
    for (const std::uint32_t beam : {0U, 1U}) {
        for (const double station : {0.0, 0.7, 3.9}) {
            CHECK(line_at(one, beam, live, station) == Approx(line_at(other, beam, live, station)));
        }
    }
}

TEST_CASE("a snow drift is a triangle against the wall it lies at") {
    // 2.4 kN/m2 at the wall at x = 0, nothing 2 m from it; the drift stands on the west half alone.
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {2, 0}, {0, 4}}}, {2.4, 0, 2.4}, rectangle(0, 0, 2, 4));
    const LevelLoads loads = loaded(f);
    CHECK(line_at(loads, 0, live, 1) == Approx(2.4));
    CHECK(line_total(loads, 0) == Approx(9.6));
    CHECK(loads.lines[1].empty());
    CHECK(loads.problems.empty()); // zero at its end is not below zero
}

TEST_CASE("soil that deepens towards a corner: force of a prism, whose height is that over the centroid") {
    // 18 kN/m3; 0.2 m deep at the origin, 0.5 m more over 6 m, 0.4 m more over 4 m.
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {3.6, 12.6, 10.8});
    const LevelLoads loads = loaded(f);
    CHECK(line_total(loads, 0) == Approx(12 * (3.6 + 1.5 * 1.5 + 2 * 1.8)));
    CHECK(line_total(loads, 1) == Approx(12 * (3.6 + 4.5 * 1.5 + 2 * 1.8)));
}

TEST_CASE("a plane on a deck that narrows gives a curved load: here a parabola") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_deck({{0, 0}, {6, 0}, {0, 4}}, 0);             // a triangle, all of it on the one beam
    add_plane(f, {{{0, 0}, {1, 0}, {0, 1}}}, {0, 1, 0}); // x
    const LevelLoads loads = loaded(f);
    REQUIRE(loads.lines[0].size() == 1);
    for (const double y : {0.0, 1.0, 3.0}) {
        const double breadth = 6 * (1 - y / 4);
        CHECK(line_at(loads, 0, live, y) == Approx(breadth * breadth / 2));
    }
    CHECK(line_total(loads, 0) == Approx(24)); // half of 6 x 4 x 6 / 3
}

TEST_CASE("a load that replaces by nothing leaves a hole, and one on top of it is not cut by it") {
    HandFramed f = deck_on_two_beams();
    f.add_area_load("live", 5);
    f.add_area_load("dead", 1);
    f.add_area_load("live", 0, rectangle(1, 1, 2, 3), true);
    f.add_area_load("live", 3, rectangle(1, 1, 2, 2));
    const LevelLoads loads = loaded(f);
    CHECK(line_at(loads, 0, live, 0.5) == Approx(15));
    CHECK(line_at(loads, 0, live, 1.5) == Approx(10 + 3));
    CHECK(line_at(loads, 0, live, 2.5) == Approx(10));
    CHECK(line_at(loads, 0, live, 3.5) == Approx(15));
    CHECK(line_total(loads, 0) + line_total(loads, 1) == Approx(5 * 22 + 3));
    CHECK(line_total(loads, 0, dead) == Approx(12)); // another case is not replaced
}

TEST_CASE("a ring of load: a zone whose middle a later one takes out, and puts other load into") {
    for (const double turn : {0.0, 33.0}) {
        CAPTURE(turn);
        const support::Motion move{turn, {100, -50}};
        HandFramed f;
        f.add_member(move({0, 0}), move({0, 4}));
        f.add_member(move({6, 0}), move({6, 4}));
        f.add_deck(move(rectangle(0, 0, 6, 4)), turn);
        f.add_area_load("live", 2);
        f.add_area_load("live", 7, move(rectangle(1, 0.5, 5, 3.5)), true);
        f.add_area_load("live", 1, move(rectangle(2, 1, 4, 3)), true);
        const LevelLoads loads = loaded(f);
        // 24 m2 less 12 m2 of 2, 12 less 4 of 7, 4 of 1; all of it symmetric.
        CHECK(line_total(loads, 0) == Approx((24 + 56 + 4) / 2.0));
        CHECK(line_total(loads, 1) == Approx((24 + 56 + 4) / 2.0));
        CHECK(line_at(loads, 0, live, 2) == Approx(2 + 7 + 1));
    }
}

TEST_CASE("a zone with an opening is a ring of load, and what was there before stays in the opening") {
    for (const double turn : {0.0, 33.0}) {
        CAPTURE(turn);
        const support::Motion move{turn, {100, -50}};
        HandFramed f;
        f.add_member(move({0, 0}), move({0, 4}));
        f.add_member(move({6, 0}), move({6, 4}));
        f.add_deck(move(rectangle(0, 0, 6, 4)), turn);
        f.add_area_load("live", 2);
        f.add_area_load("live", 7, move(rectangle(1, 0.5, 5, 3.5)), true);
        f.level().area_loads.back().openings = {move(rectangle(2, 1, 4, 3))};
        f.add_area_load("dead", 3, move(rectangle(1, 0.5, 5, 3.5)));
        f.level().area_loads.back().openings = {move(rectangle(2, 1, 4, 3))};
        const LevelLoads loads = loaded(f);
        // 24 m2, of which the ring of 12 - 4 m2 has 7 instead of 2; all of it symmetric.
        CHECK(line_total(loads, 0) == Approx((16 * 2 + 8 * 7) / 2.0));
        CHECK(line_total(loads, 1) == Approx((16 * 2 + 8 * 7) / 2.0));
        CHECK(line_at(loads, 0, live, 2) == Approx(2 + 7 + 2));
        CHECK(line_at(loads, 0, live, 0.75) == Approx(2 + 14));
        CHECK(line_at(loads, 0, live, 0.25) == Approx(6));
        CHECK(line_total(loads, 0, dead) == Approx(8 * 3 / 2.0));
        CHECK(line_at(loads, 0, dead, 2) == Approx(3));
    }
}

TEST_CASE("a ring of load along the edges of a two-way deck goes to each beam by its corners' bisectors") {
    TwoWay t;
    t.f.add_area_load("live", 3, rectangle(0, 0, 9, 5));
    t.f.level().area_loads.back().openings = {rectangle(1, 1, 8, 4)};
    t.f.add_area_load("dead", 6, rectangle(0, 0, 2, 2)); // an L around the corner
    t.f.level().area_loads.back().openings = {rectangle(0, 0, 1, 1)};
    const LevelLoads loads = t.f.load(t.sharing);
    // A metre deep: trapezoids of (9 + 7) / 2 and (5 + 3) / 2 m2.
    for (const std::uint32_t beam : {0U, 2U}) {
        CHECK(line_total(loads, beam) == Approx(3 * 8));
        CHECK(line_total(loads, beam + 1) == Approx(3 * 4));
        CHECK(line_at(loads, beam, live, 4) == Approx(3));
        CHECK(line_at(loads, beam, live, 0.5) == Approx(1.5));
    }
    CHECK(line_total(loads, 0, dead) == Approx(6 * 1.5));
    CHECK(line_total(loads, 3, dead) == Approx(6 * 1.5));
    CHECK(line_at(loads, 0, dead, 0.5) == Approx(0));
    CHECK(line_at(loads, 0, dead, 1.5) == Approx(9));
}

TEST_CASE("a plane that replaces stands instead of what lay there, and is replaced itself") {
    HandFramed f = deck_on_two_beams();
    f.add_area_load("live", 4);
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {0, 6, 0}, {}, true); // x, everywhere
    f.add_area_load("live", 0, rectangle(0, 0, 3, 2), true);
    const LevelLoads loads = loaded(f);
    CHECK(line_at(loads, 0, live, 1) == Approx(0));
    CHECK(line_at(loads, 0, live, 3) == Approx(4.5));
    CHECK(line_at(loads, 1, live, 3) == Approx(13.5));
}

TEST_CASE("on an opening nothing stands, whatever the pressure") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({6, 0}, {6, 4});
    f.add_deck(rectangle(0, 0, 6, 4), 0, {Ring{{2, 1}, {2, 3}, {4, 3}, {4, 1}}});
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {0, 6, 0}); // x
    const LevelLoads loads = loaded(f);
    // Beside the opening each edge strip hangs on its own beam.
    CHECK(line_at(loads, 0, live, 2) == Approx(2));      // x from 0 to 2
    CHECK(line_at(loads, 1, live, 2) == Approx(10));     // x from 4 to 6
    CHECK(line_at(loads, 0, live, 0.5) == Approx(4.5));  // x from 0 to 3
    CHECK(line_at(loads, 1, live, 3.5) == Approx(13.5)); // x from 3 to 6
    CHECK(loads.balance.at(0).applied.force == Approx(4 * 18 - 2 * 6));
}

TEST_CASE("a plane on the 45-degree rule: ordinates of degree two, forces of prisms on triangles") {
    TwoWay t;
    add_plane(t.f, {{{0, 0}, {1, 0}, {0, 1}}}, {0, 1, 0}); // x
    const LevelLoads loads = t.f.load(t.sharing);
    // The triangle at x = 0 has its centroid at 2.5/3, the one at x = 9 at 9 - 2.5/3.
    CHECK(line_total(loads, 3) == Approx(6.25 * 2.5 / 3));
    CHECK(line_total(loads, 1) == Approx(6.25 * (9 - 2.5 / 3)));
    CHECK(line_total(loads, 0) == Approx((202.5 - 56.25) / 2));
    CHECK(line_total(loads, 2) == Approx((202.5 - 56.25) / 2));
    // The west beam runs south: 1 m from its start the strip is 1 m long and x rises along it to 1.
    CHECK(line_at(loads, 3, live, 1) == Approx(0.5));
    CHECK(line_at(loads, 0, live, 4) == Approx(10));
    CHECK(line_at(loads, 2, live, 1) == Approx(8)); // runs west from x = 9; 1 m long there
    CHECK(loads.balance.at(0).shared.force == Approx(202.5));
}

TEST_CASE("zones on the 45-degree rule are cut by the borders of the beams' regions") {
    TwoWay t;
    t.f.add_area_load("live", 2);
    t.f.add_area_load("live", 6, rectangle(0, 0, 2, 2), true);
    const LevelLoads loads = t.f.load(t.sharing);
    // 2 m2 of the zone lie with each of the beams that meet at the corner.
    CHECK(line_total(loads, 0) == Approx(2 * 16.25 + 4 * 2));
    CHECK(line_total(loads, 3) == Approx(2 * 6.25 + 4 * 2));
    CHECK(line_total(loads, 1) == Approx(2 * 6.25));
    CHECK(line_at(loads, 0, live, 1) == Approx(6));
    CHECK(line_at(loads, 0, live, 2.2) == Approx(4.4));
}

TEST_CASE("between a wall and a column the border is a parabola, and so is the load on the wall") {
    support::BeamAndColumn d;
    d.length = 8;
    d.depth = 5;
    d.column = {4, 4};
    HandFramed f = d.framed({}, {});
    f.add_area_load("live", 2);
    const LevelLoads loads = f.load(d.sharing({}));
    // Nearer to the line y = 0 than to (4, 4): y < 2 + (x - 4)^2 / 8, which is 4 at the ends: 21.333 m2.
    REQUIRE(loads.lines[0].size() == 1);
    CHECK(line_at(loads, 0, live, 4) == Approx(4));
    CHECK(line_at(loads, 0, live, 1) == Approx(2 * (2 + 9.0 / 8)));
    CHECK(line_total(loads, 0) == Approx(2 * (16 + 16.0 / 3)));
    REQUIRE(loads.points[1].size() == 1);
    CHECK(loads.points[1][0].p == Approx(2 * (40 - 16 - 16.0 / 3)));
}

TEST_CASE("a plane over a parabola is a quartic: force and moment as by counting small squares") {
    support::BeamAndColumn d;
    d.length = 8;
    d.depth = 5;
    d.column = {3, 3};
    HandFramed f = d.framed({}, {});
    add_plane(f, {{{0, 0}, {8, 0}, {0, 5}}}, {1, 3, 4}); // 1 + x/4 + 3 y/5
    const LevelLoads loads = f.load(d.sharing({}));
    // By the midpoint rule in x and, exactly for a plane, one midpoint in y.
    double force = 0;
    double moment = 0;
    constexpr int strips = 20000;
    for (int i = 0; i < strips; ++i) {
        const double x = 8 * (i + 0.5) / strips;
        const double y = std::min(5.0, (9 + (x - 3) * (x - 3)) / 6);
        const double w = y * (1 + x / 4 + 0.3 * y) * 8 / strips;
        force += w;
        moment += w * x;
    }
    double found = 0;
    double found_moment = 0;
    for (const CarrierLine& line : loads.lines[0]) {
        found += line.piece.total();
        found_moment += line.piece.first_moment() + line.piece.from * line.piece.total();
    }
    CHECK(found == Approx(force).epsilon(1e-7));
    CHECK(found_moment == Approx(moment).epsilon(1e-7));
    CHECK(loads.lines[0][0].piece.c[4] != 0);
}

TEST_CASE("on a two-way deck a line load goes to the beams whose regions it runs over, a point to one") {
    TwoWay t;
    t.f.level().line_loads.push_back({"live", 3, 3, {1, 1}, {8, 1}, {}, {}});   // along the south beam
    t.f.level().line_loads.push_back({"live", 2, 2, {4, 0.5}, {4, 4}, {}, {}}); // square to it
    t.f.level().point_loads.push_back({"dead", 10, {0.5, 2}, {}, {}});
    const LevelLoads loads = t.f.load(t.sharing);
    CHECK(loads.problems.empty());
    CHECK(line_at(loads, 0, live, 2) == Approx(3));
    CHECK(line_total(loads, 0) == Approx(21));
    // The second puts 2 m on the south beam and 1.5 m on the north one, as points.
    REQUIRE(loads.points[0].size() == 1);
    CHECK(loads.points[0][0].p == Approx(4));
    CHECK(loads.points[0][0].station == Approx(4));
    REQUIRE(loads.points[2].size() == 1);
    CHECK(loads.points[2][0].p == Approx(3));
    CHECK(loads.points[2][0].station == Approx(5)); // it runs west
    REQUIRE(loads.points[3].size() == 1);
    CHECK(loads.points[3][0].p == Approx(10));
    CHECK(loads.points[3][0].station == Approx(3)); // it runs south from y = 5
}

TEST_CASE(
    "a line load that leans across a two-way deck is stretched or squeezed on to its beams, none lost") {
    TwoWay t;
    t.f.level().line_loads.push_back({"live", 1, 4, {0.2, 0.1}, {8.7, 4.9}, {}, {}});
    const LevelLoads loads = t.f.load(t.sharing);
    CHECK(loads.problems.empty());
    double sum = 0;
    for (std::uint32_t beam = 0; beam < 4; ++beam) {
        sum += line_total(loads, beam) + support::total(loads.points[beam], live);
    }
    CHECK(sum == Approx(2.5 * std::hypot(8.5, 4.8)));
    CHECK(line_total(loads, 0) > 0);
    CHECK(line_total(loads, 2) > 0);
}

TEST_CASE("near a column a line load is one point load on it, with the load's force") {
    support::BeamAndColumn d;
    d.length = 8;
    d.depth = 5;
    d.column = {4, 4};
    HandFramed f = d.framed({}, {});
    f.level().line_loads.push_back({"live", 2, 2, {2, 4.5}, {6, 4.5}, {}, {}});
    f.level().line_loads.push_back({"live", 1, 1, {0, 3}, {8, 3}, {}, {}});
    const LevelLoads loads = f.load(d.sharing({}));
    CHECK(loads.problems.empty());
    // y = 3 lies above the border where (x - 4)^2 < 8.
    const double chord = 2 * std::sqrt(8.0);
    REQUIRE(loads.points[1].size() == 2);
    CHECK(loads.points[1][0].p == Approx(8));
    CHECK(loads.points[1][1].p == Approx(chord));
    CHECK(line_total(loads, 0) == Approx(8 - chord));
    CHECK(loads.lines[0].size() == 2); // on both sides of the column's region
}

TEST_CASE("what stands beside a two-way deck by no more than snap stands on it, by more it is refused") {
    for (const double off : {0.00005, 0.0005}) {
        CAPTURE(off);
        support::BeamAndColumn d;
        HandFramed f = d.framed({}, {}); // its snap is 0.1 mm
        f.level().line_loads.push_back({"live", 2, 2, {1, 5 + off}, {7, 5 + off}, {}, {}});
        f.level().point_loads.push_back({"live", 3, {8 + off, 2.5}, {}, {}});
        d.column = {4, 4};
        const LevelLoads loads = f.load(d.sharing({}));
        CHECK((find(loads, ProblemCode::load_off_decks) == nullptr) == (off < 0.0001));
        if (off < 0.0001) {
            CHECK(line_total(loads, 0) + support::total(loads.points[0], live) +
                      support::total(loads.points[1], live) ==
                  Approx(15));
        }
    }
}

TEST_CASE("what of a plane lies off the decks is told by its own integral, not by its outline's area") {
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {6, 0}, {0, 4}}}, {0, 6, 0}, Ring{{4, 0}, {4, 4}, {8, 4}, {8, 0}}); // x
    const LevelLoads loads = loaded(f);
    const Problem* note = find(loads, ProblemCode::zone_off_decks);
    REQUIRE(note != nullptr);
    CHECK(note->severity == Severity::note);
    CHECK(note->message ==
          "Level L, area_loads[0] (live): 8 m2 of its outline lie off every deck; 56 kN there "
          "are not carried.");
    CHECK(find(loads, ProblemCode::pressure_below_zero) == nullptr);
}

TEST_CASE(
    "a plane that falls below zero where it acts is told with the place; below zero all over is uplift") {
    // A drift drawn a metre too long.
    HandFramed f = deck_on_two_beams();
    add_plane(f, {{{0, 0}, {2, 0}, {0, 4}}}, {2, 0, 2}, rectangle(0, 0, 3, 4));
    const LevelLoads loads = loaded(f);
    const Problem* warning = find(loads, ProblemCode::pressure_below_zero);
    REQUIRE(warning != nullptr);
    CHECK(warning->severity == Severity::warning);
    CHECK(warning->message.find("falls to -1 kN/m2 at (3, ") != std::string::npos);
    REQUIRE(warning->point.has_value());
    CHECK(warning->point->x == Approx(3));
    CHECK(line_total(loads, 0) == Approx(4 * 1.5)); // 2 + 0 - 0.5: it counts all the same

    HandFramed everywhere = deck_on_two_beams();
    add_plane(everywhere, {{{0, 0}, {6, 0}, {0, 4}}}, {-1, 5, -1});
    CHECK(find(loaded(everywhere), ProblemCode::pressure_below_zero) != nullptr);

    HandFramed uplift = deck_on_two_beams();
    add_plane(uplift, {{{0, 0}, {6, 0}, {0, 4}}}, {-1, -2, -1});
    CHECK(find(loaded(uplift), ProblemCode::pressure_below_zero) == nullptr);

    HandFramed off = deck_on_two_beams(); // below zero only where there is no deck
    add_plane(off, {{{0, 0}, {6, 0}, {0, 4}}}, {6, 0, 6}, rectangle(3, 0, 9, 4));
    CHECK(find(loaded(off), ProblemCode::pressure_below_zero) == nullptr);
}

TEST_CASE("the opening of a zone is no part of what lies off the decks, and none of what lies on them") {
    HandFramed f = deck_on_two_beams();
    f.add_area_load("live", 1, rectangle(4, 0, 8, 4));
    f.level().area_loads.back().openings = {rectangle(5, 1, 7, 3)};
    const LevelLoads loads = loaded(f);
    const Problem* note = find(loads, ProblemCode::zone_off_decks);
    REQUIRE(note != nullptr);
    CHECK(note->message ==
          "Level L, area_loads[0] (live): 6 m2 of its outline lie off every deck; 6 kN there "
          "are not carried.");
    CHECK(line_total(loads, 1) == Approx(6));

    HandFramed inside = deck_on_two_beams();
    inside.add_area_load("live", 1, rectangle(1, 1, 5, 3));
    inside.level().area_loads.back().openings = {rectangle(2, 1, 4, 3)};
    CHECK(find(loaded(inside), ProblemCode::zone_off_decks) == nullptr);

    HandFramed around = deck_on_two_beams(); // the whole deck lies in the opening
    around.add_area_load("live", 1, rectangle(-1, -1, 7, 5));
    around.level().area_loads.back().openings = {rectangle(0, 0, 6, 4)};
    CHECK(loaded(around).balance.empty());
}

TEST_CASE("a zone drawn along a deck's edge on the outside puts nothing on it, not even rounding") {
    const support::Motion move{31, {400000, 3200000}};
    HandFramed f;
    f.add_member(move({0, 0}), move({0, 4}));
    f.add_member(move({6, 0}), move({6, 4}));
    f.add_deck(move(rectangle(0, 0, 6, 4)), 31);
    f.add_area_load("live", 1, move(rectangle(6, -1, 9, 5)));
    const LevelLoads loads = loaded(f);
    CHECK(loads.balance.empty());
    CHECK(loads.lines[0].empty());
    CHECK(loads.lines[1].empty());
}

TEST_CASE("a plane in a plan file goes down to the ground") {
    const PlanReading reading = read_plan(R"({"runnel": "plan/1", "units": {"length": "m", "force": "kN"},
        "cases": [{"id": "dead", "kind": "dead"}, {"id": "snow", "kind": "snow"}],
        "columns": [{"id": "A", "at": [0, 0], "top": "R"}, {"id": "B", "at": [6, 0], "top": "R"},
                    {"id": "C", "at": [0, 4], "top": "R"}, {"id": "D", "at": [6, 4], "top": "R"}],
        "levels": [{"id": "R", "elevation": 3,
            "members": [{"id": "west", "role": "beam", "from": [0, 0], "to": [0, 4]},
                        {"id": "east", "role": "beam", "from": [6, 0], "to": [6, 4]}],
            "decks": [{"id": "D1", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], "direction": 0}],
            "area_loads": [{"case": "snow", "q": {"at": [[0, 0], [6, 0], [0, 4]], "values": [1, 4, "1 kN/m2"]}}]}]})");
    REQUIRE(reading.problems.empty());
    const Takedown takedown = take_down(reading.plan);
    CHECK_FALSE(has_errors(takedown.problems));
    REQUIRE(takedown.foundations.size() == 4);
    CHECK(takedown.foundations[0].reactions.at(1) == Approx(10.5));
    CHECK(takedown.foundations[1].reactions.at(1) == Approx(19.5));
}

TEST_CASE("openings of an area load are read, in any unit, and repeated by a level like its own") {
    const PlanReading reading = read_plan(R"({"runnel": "plan/1", "units": {"length": "m", "force": "kN"},
        "cases": [{"id": "dead", "kind": "dead"}, {"id": "live", "kind": "live"}],
        "columns": [{"id": "A", "at": [0, 0], "top": "R"}, {"id": "B", "at": [6, 0], "top": "R"},
                    {"id": "C", "at": [0, 4], "top": "R"}, {"id": "D", "at": [6, 4], "top": "R"}],
        "levels": [{"id": "F", "elevation": 3,
            "members": [{"id": "west", "role": "beam", "from": [0, 0], "to": [0, 4]},
                        {"id": "east", "role": "beam", "from": [6, 0], "to": [6, 4]}],
            "decks": [{"id": "D1", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], "direction": 0}],
            "area_loads": [{"case": "live", "q": 3, "outline": [[0, 0], [6, 0], [6, 4], [0, 4]],
                            "openings": [[[1, 1], ["500 cm", 1], [5, 3], [1, 3]],
                                         [[0, 0], [1, 0], [1, 1], [0, 1]]]}]},
            {"id": "R", "elevation": 6, "like": "F"}]})");
    REQUIRE(reading.problems.empty());
    REQUIRE(reading.plan.levels.at(0).area_loads.at(0).openings.size() == 2);
    CHECK(reading.plan.levels[0].area_loads[0].openings[0] == rectangle(1, 1, 5, 3));
    const Takedown takedown = take_down(reading.plan);
    CHECK_FALSE(has_errors(takedown.problems));
    double all = 0;
    for (const auto& foundation : takedown.foundations) {
        all += foundation.reactions.at(1);
    }
    CHECK(all == Approx(2 * 3 * (24 - 8 - 1)));
}
