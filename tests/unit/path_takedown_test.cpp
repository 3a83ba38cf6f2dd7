#include "path_building.hpp"

using namespace path_building;
using doctest::Approx;

namespace {

/// Two columns 6 apart and a girder of 6 over them at each of two levels, 3 m a storey.
struct TwoStoreys {
    Building building;
    std::uint32_t roof = building.level("roof", 6);
    std::uint32_t floor = building.level("floor", 3);
    Carrier c1 = building.column("C1", {0, 0}, roof, none, 0.5);
    Carrier c2 = building.column("C2", {6, 0}, roof, none, 0.5);
    Carrier g_roof = girder(roof);
    Carrier g_floor = girder(floor);

    Carrier girder(std::uint32_t level) {
        const Carrier g = building.member(level, "G1", {0, 0}, {6, 0});
        building.bears(level, g, 0, c1);
        building.bears(level, g, 6, c2);
        return g;
    }
};

} // namespace

TEST_CASE("two storeys on stacked columns add up lift by lift, with own weight at the foot") {
    TwoStoreys b;
    b.building.uniform(b.roof, b.g_roof, dead, 0, 6, 2); // 12: 6 and 6
    b.building.point(b.floor, b.g_floor, live, 2, 9);    // 9 at 2 of 6: 6 and 3
    b.building.area(b.roof, b.g_roof, 0, 6, 4);          // 24 m2: 12 and 12
    b.building.area(b.floor, b.g_floor, 0, 4, 3);        // 12 m2 up to 4: 9 and 3
    const Takedown t = b.building.take_down();
    check_all_close(t);

    const auto& lifts = t.columns[0].lifts;
    REQUIRE(lifts.size() == 2);
    CHECK(lifts[0].level == b.roof);
    CHECK(lifts[0].height == Approx(3));
    CHECK(lifts[0].added[dead] == Approx(6));
    CHECK(lifts[0].self_weight == Approx(1.5));
    CHECK(lifts[0].total[dead] == Approx(7.5));
    CHECK(lifts[0].floors == 1);
    CHECK(lifts[1].added[dead] == 0);
    CHECK(lifts[1].added[live] == Approx(6));
    CHECK(lifts[1].total[dead] == Approx(9)); // 7.5 from above and 1.5 own weight
    CHECK(lifts[1].total[live] == Approx(6));
    CHECK(lifts[1].tributary_area == Approx(9));
    CHECK(lifts[1].area_total == Approx(21));
    CHECK(lifts[1].floors == 2);

    REQUIRE(t.foundations.size() == 2);
    CHECK(t.foundations[1].under == b.c2);
    CHECK(t.foundations[1].reactions[dead] == Approx(9));
    CHECK(t.foundations[1].reactions[live] == Approx(3));
    CHECK(t.balance[dead].applied.force == Approx(18));
    CHECK(t.balance[dead].arrived.moment.x == Approx(9 * 6));
    CHECK(t.uplift.empty());
}

TEST_CASE("a beam brings its reaction to the girder as a point load with its source kept") {
    Building building;
    const auto level = building.level("floor", 3);
    const Carrier c1 = building.column("C1", {0, 0}, level);
    const Carrier c2 = building.column("C2", {6, 0}, level);
    const Carrier c3 = building.column("C3", {2, 4}, level);
    const Carrier beam = building.member(level, "B1", {2, 4}, {2, 0});
    const Carrier girder = building.member(level, "G1", {0, 0}, {6, 0});
    building.bears(level, beam, 0, c3);
    building.bears(level, beam, 4, girder, 2);
    building.bears(level, girder, 0, c1);
    building.bears(level, girder, 6, c2);
    building.uniform(level, beam, dead, 0, 4, 6); // 24: 12 and 12; on the girder 8 and 4
    building.uniform(level, beam, live, 2, 4, 4); // 8 at 3 of 4: 2 and 6; on the girder 4 and 2
    const Takedown t = building.take_down();
    check_all_close(t);

    CHECK(reaction(t, level, beam, 1, live) == Approx(6));
    CHECK(reaction(t, level, girder, 0, dead) == Approx(8));
    CHECK(reaction(t, level, girder, 1, live) == Approx(2));
    const auto points = t.levels[level].points[girder.index];
    REQUIRE(points.size() == 2);
    CHECK(points[0].source == Source{SourceKind::member, beam.index});
    CHECK(points[0].load_case == dead);
    CHECK(points[0].station == 2);
    CHECK(points[0].p == Approx(12));
    const auto columns = t.levels[level].columns[girder.index];
    REQUIRE(columns.size() == 2);
    CHECK(columns[1].source == Source{SourceKind::member, beam.index});
    CHECK(columns[1].load_case == live);
    CHECK(t.columns[2].lifts[0].from[0].source == Source{SourceKind::member, beam.index});
}

TEST_CASE("a load on an overhang lifts the far column, and the uplift is named down to the foundation") {
    Building building;
    const auto level = building.level("floor", 3);
    const Carrier c1 = building.column("C1", {0, 0}, level);
    const Carrier c2 = building.column("C2", {6, 0}, level);
    const Carrier girder = building.member(level, "G1", {0, 0}, {8, 0});
    building.bears(level, girder, 0, c1);
    building.bears(level, girder, 6, c2);
    building.uniform(level, girder, live, 6, 8, 10);
    building.area(level, girder, 0, 8, 1);
    const Takedown t = building.take_down();
    check_all_close(t);
    CHECK(reaction(t, level, girder, 0, live) == Approx(-10.0 / 3));
    REQUIRE(t.uplift.size() == 2);
    CHECK(t.uplift[0].member == girder.index);
    CHECK(t.uplift[0].bearing == 0);
    CHECK(t.uplift[0].on == c1);
    CHECK(t.uplift[0].value == Approx(-10.0 / 3));
    CHECK(t.uplift[1].level == none);
    CHECK(t.uplift[1].on == c1);
    // The area of the overhang goes whole to its bearing, though its load lifts the other.
    CHECK(t.columns[0].lifts[0].tributary_area == Approx(3));
    CHECK(t.columns[1].lifts[0].tributary_area == Approx(5));
    REQUIRE(t.levels[level].spans[girder.index].size() == 2);
    CHECK(t.levels[level].spans[girder.index][1].overhang);
    REQUIRE(t.levels[level].columns[girder.index].size() == 1);
    CHECK(t.levels[level].columns[girder.index][0].span == 1);
}

TEST_CASE("load columns are kept by case, span and source, and add up to the reactions") {
    Building building;
    const auto level = building.level("floor", 3);
    std::vector<Carrier> columns;
    for (double x = 0; x < 13; x += 4) {
        columns.push_back(building.column("C" + std::to_string(columns.size() + 1), {x, 0}, level));
    }
    const Carrier girder = building.member(level, "G1", {0, 0}, {13, 0});
    for (std::size_t i = 0; i < columns.size(); ++i) {
        building.bears(level, girder, 4 * static_cast<double>(i), columns[i]);
    }
    building.uniform(level, girder, dead, 0, 13, 3);
    building.point(level, girder, live, 4, 10);  // over the second bearing: with the span that begins there
    building.point(level, girder, live, 12, 20); // over the last bearing: with the span that ends there
    building.point(level, girder, live, 0, 30);  // over the first: with the first span
    const Takedown t = building.take_down();
    check_all_close(t);

    const auto kept = t.levels[level].columns[girder.index];
    REQUIRE(kept.size() == 7);
    for (std::uint32_t span = 0; span < 4; ++span) {
        CHECK(kept[span].load_case == dead);
        CHECK(kept[span].span == span);
    }
    CHECK(kept[4].span == 0);
    CHECK(kept[5].span == 1);
    CHECK(kept[6].span == 2);
    const double* const rows = &t.levels[level].column_reactions[t.levels[level].column_start[girder.index]];
    CHECK(rows[6 * 4 + 3] == Approx(20));
    for (std::size_t b = 0; b < 4; ++b) {
        double sum = 0;
        for (std::size_t k = 0; k < 4; ++k) {
            sum += rows[k * 4 + b];
        }
        CHECK(reaction(t, level, girder, b, dead) == Approx(sum).epsilon(1e-14));
    }
    REQUIRE(problems_of(t, ProblemCode::stiffness_assumed).size() == 1);
    CHECK(problems_of(t, ProblemCode::stiffness_assumed)[0]->ids == std::vector<std::string>{"G1"});
}

TEST_CASE("a column standing on a girder is carried by it, with the area and floors it brings") {
    TwoStoreys b;
    const auto top = b.building.level("penthouse", 9);
    // A column stands at a third of the roof girder and carries, with C3, a beam of 2 in the penthouse.
    const Carrier post = b.building.column("P1", {2, 0}, top, b.roof, 1);
    const Carrier c3 = b.building.column("C3", {2, 2}, top);
    const Carrier beam = b.building.member(top, "B1", {2, 0}, {2, 2});
    b.building.bears(top, beam, 0, post);
    b.building.bears(top, beam, 2, c3);
    b.building.stands(b.roof, post, b.g_roof, 2);
    b.building.uniform(top, beam, live, 0, 2, 12); // 24: 12 each
    b.building.area(top, beam, 0, 2, 5);           // 10 m2: 5 each
    b.building.area(b.roof, b.g_roof, 0, 6, 4);
    const Takedown t = b.building.take_down();
    check_all_close(t);

    // 12 at 2 of 6: 8 and 4. Own weight of the post, 3 m x 1: 2 and 1.
    CHECK(reaction(t, b.roof, b.g_roof, 0, live) == Approx(8));
    CHECK(reaction(t, b.roof, b.g_roof, 1, dead) == Approx(1));
    const auto points = t.levels[b.roof].points[b.g_roof.index];
    REQUIRE(points.size() == 2);
    CHECK(points[1].source == Source{SourceKind::column, post.index});
    // The post stands in the first half of the girder: its area goes to C1.
    const Lift& lift = t.columns[b.c1.index].lifts[0];
    CHECK(lift.tributary_area == Approx(12));
    CHECK(lift.area_total == Approx(17));
    CHECK(lift.floors == 2);
    CHECK(lift.added[live] == Approx(8));
    CHECK(t.columns[b.c2.index].lifts[0].area_total == Approx(12));
    CHECK(t.columns[b.c2.index].lifts[0].floors == 1);
    // On the roof level the post counts as applied; in the building only what was put on the plan.
    CHECK(t.level_balance[b.roof][live].applied.force == Approx(12));
    CHECK(t.level_balance[b.roof][live].arrived.force == Approx(12));
    CHECK(t.balance[live].applied.force == Approx(24));
}

TEST_CASE("an area under a parabola is divided at the middle of the span") {
    Building building;
    const auto roof = building.level("roof", 3);
    const Carrier c1 = building.column("C1", {0, 0}, roof);
    const Carrier c2 = building.column("C2", {10, 0}, roof);
    const Carrier beam = building.member(roof, "B1", {0, 0}, {10, 0});
    building.bears(roof, beam, 0, c1);
    building.bears(roof, beam, 10, c2);
    // From 2 to 8, over x = 0 to 1: breadth 1 + 2 x + 6 x (1 - x). Up to the middle 6 (1/2 + 1/4) + 36 / 12,
    // in all 6 (1 + 1) + 36 / 6.
    building.parts[roof].areas.push_back({beam, {2, 8, 1, 3, -6}});
    const Takedown t = building.take_down();
    CHECK(t.columns[c1.index].lifts[0].tributary_area == Approx(7.5));
    CHECK(t.columns[c2.index].lifts[0].tributary_area == Approx(10.5));
    CHECK(t.levels[roof].region_area[beam.index] == Approx(18));
}

TEST_CASE("a column standing on a column passes straight through, not counted on the level") {
    Building building;
    const auto roof = building.level("roof", 6);
    const auto floor = building.level("floor", 3);
    const Carrier upper = building.column("U", {1, 1}, roof, floor, 2);
    const Carrier lower = building.column("L", {1.003, 1}, floor, none, 3);
    building.stands(floor, upper, lower, 0);
    building.point(roof, upper, live, 0, 40);
    building.parts[roof].areas.push_back({upper, {0, 0, 7, 7}});
    const Takedown t = building.take_down();
    check_all_close(t);
    const Lift& lift = t.columns[lower.index].lifts[0];
    REQUIRE(lift.from.size() == 2);
    CHECK(lift.from[0].source == Source{SourceKind::column, upper.index});
    CHECK(lift.added[live] == 0);
    CHECK(lift.total[live] == Approx(40));
    CHECK(lift.total[dead] == Approx(2 * 3 + 3 * 3));
    CHECK(lift.area_total == Approx(7));
    CHECK(lift.tributary_area == 0);
    CHECK(lift.floors == 1);
    CHECK(t.level_balance[floor][live].applied.force == 0);
    // 3 mm beside each other: the step is taken off where arrivals are counted, and nothing is off.
    CHECK(t.balance[live].arrived.moment.x == Approx(40).epsilon(1e-14));
}

TEST_CASE("a wall gathers lines and points and passes them straight down") {
    Building building;
    const auto roof = building.level("roof", 6);
    const auto floor = building.level("floor", 3);
    const Carrier wall =
        building.wall("W1", {0, 0}, {10, 0}, roof, none, 2); // 2 kN/m2 x 3 m = 6 kN/m a storey
    const Carrier c1 = building.column("C1", {4, 5}, roof);
    const Carrier beam = building.member(roof, "B1", {4, 5}, {4, 0});
    building.bears(roof, beam, 0, c1);
    building.bears(roof, beam, 5, wall, 4);
    building.uniform(roof, beam, live, 0, 5, 4); // 10 on the wall at 4
    building.uniform(roof, wall, live, 0, 10, 1);
    building.uniform(floor, wall, live, 5, 10, 2);
    building.area(roof, beam, 0, 5, 2);
    building.area(floor, wall, 5, 10, 3);
    const Takedown t = building.take_down();
    check_all_close(t);

    const auto& lifts = t.walls[wall.index].lifts;
    REQUIRE(lifts.size() == 2);
    CHECK(lifts[0].total[live] == Approx(20));
    CHECK(lifts[0].self_weight == Approx(60));
    REQUIRE(lifts[0].point.size() == 1);
    CHECK(lifts[0].point[0].source == Source{SourceKind::member, beam.index});
    CHECK(lifts[0].tributary_area == Approx(5));
    CHECK(lifts[1].total[live] == Approx(30));
    CHECK(lifts[1].total[dead] == Approx(120));
    CHECK(lifts[1].area_total == Approx(20));
    CHECK(lifts[1].floors == 2);
    REQUIRE(lifts[1].line.size() == 3); // dead whole; live up to 5 and beyond
    CHECK(lifts[1].line[0].piece.at(3) == Approx(12));
    CHECK(lifts[1].line[2].piece.from == 5);
    CHECK(lifts[1].line[2].piece.at(7) == Approx(3));
    REQUIRE(lifts[1].point.size() == 1);
    CHECK(lifts[1].point[0].station == 4);
    CHECK(lifts[1].point[0].source == Source{SourceKind::wall, wall.index});
}

TEST_CASE("a wall standing on two girders loads each with its own stretch, whichever way they run") {
    Building building;
    const auto roof = building.level("roof", 6);
    const auto floor = building.level("floor", 3);
    const Carrier wall = building.wall("W1", {1, 0}, {9, 0}, roof, floor);
    const Carrier c1 = building.column("C1", {0, 0}, floor);
    const Carrier c2 = building.column("C2", {5, 0}, floor);
    const Carrier c3 = building.column("C3", {10, 0}, floor);
    const Carrier g1 = building.member(floor, "G1", {0, 0}, {5, 0});
    const Carrier g2 = building.member(floor, "G2", {10, 0}, {5, 0}); // runs the other way
    building.bears(floor, g1, 0, c1);
    building.bears(floor, g1, 5, c2);
    building.bears(floor, g2, 0, c3);
    building.bears(floor, g2, 5, c2);
    building.stands(floor, wall, g1, 1, 0, 4, 5);
    building.stands(floor, wall, g2, 5, 4, 8, 1);
    // A load that grows from 0 at the wall's start to 8 at its end, 32 in all, and a point of 10 at 6.
    building.parts[roof].lines.push_back({wall, {live, {SourceKind::line_load, 0}, {0, 8, {0, 1, 0, 0, 0}}}});
    building.point(roof, wall, dead, 6, 10);
    building.parts[roof].areas.push_back({wall, {0, 8, 2, 2}});
    const Takedown t = building.take_down();
    check_all_close(t);
    const auto on_g1 = t.levels[floor].lines[g1.index];
    REQUIRE(on_g1.size() == 1);
    CHECK(on_g1[0].source == Source{SourceKind::wall, wall.index});
    CHECK(on_g1[0].piece.from == Approx(1));
    CHECK(on_g1[0].piece.at(5) == Approx(4));
    const auto on_g2 = t.levels[floor].lines[g2.index];
    REQUIRE(on_g2.size() == 1);
    CHECK(on_g2[0].piece.from == Approx(1));
    CHECK(on_g2[0].piece.to == Approx(5));
    CHECK(on_g2[0].piece.at(1) == Approx(8));
    CHECK(on_g2[0].piece.at(5) == Approx(4));
    // G1: total 8 with its centre 8/3 from 1: 8 x (1 + 8/3) / 5 on C2. G2: 24, centre from C2's end: 4 + 3 +
    // ...
    CHECK(reaction(t, floor, g1, 1, live) == Approx(8 * (1 + 8.0 / 3) / 5));
    CHECK(reaction(t, floor, g2, 0, dead) == Approx(10 * (5 - 3) / 5.0)); // the point at x = 7, 3 from C3
    CHECK(t.columns[0].lifts[0].area_total + t.columns[1].lifts[0].area_total +
              t.columns[2].lifts[0].area_total ==
          Approx(16));
    CHECK(t.columns[1].lifts[0].floors == 1);
}

TEST_CASE("a built-in cantilever warns that its moment leaves the path, and the balance counts it") {
    Building building;
    const auto level = building.level("floor", 3);
    const Carrier c1 = building.column("C1", {2, 1}, level);
    const Carrier c2 = building.column("C2", {9, 1}, level);
    const Carrier from = building.member(level, "K1", {2, 1}, {2, 4});
    const Carrier to = building.member(level, "K2", {6, 1}, {9, 1});
    building.bears(level, from, 0, c1, 0, true);
    building.bears(level, to, 3, c2, 0, true);
    building.point(level, from, live, 3, 5);    // 15 kNm
    building.uniform(level, to, dead, 0, 3, 2); // 6 x 1.5 = 9 kNm
    const Takedown t = building.take_down();
    check_all_close(t);
    const auto& moments = t.levels[level].fixed_moments;
    REQUIRE(moments.size() == 4);
    CHECK(moments[live] == Approx(15));
    CHECK(moments[2 + dead] == Approx(9)); // positive where it holds a cantilever of falling stations
    const auto warnings = problems_of(t, ProblemCode::moment_not_carried_down);
    REQUIRE(warnings.size() == 2);
    CHECK(warnings[0]->severity == Severity::warning);
    CHECK(warnings[0]->message.find("15 kN m") != std::string::npos);
    CHECK(warnings[0]->ids == std::vector<std::string>{"K1", "C1"});
    CHECK(t.balance[live].arrived.moment.y == Approx(5 * 4));
    CHECK(t.balance[dead].arrived.moment.x == Approx(6 * 7.5));
}

TEST_CASE("a member that moves freely stops the takedown with a sentence, never with a number") {
    TwoStoreys b;
    b.building.parts[b.floor].framed.members[b.g_floor.index].hinges = {3};
    const Takedown t = b.building.take_down();
    CHECK_FALSE(t.complete);
    REQUIRE(problems_of(t, ProblemCode::mechanism).size() == 1);
    CHECK(problems_of(t, ProblemCode::mechanism)[0]->ids == std::vector<std::string>{"floor/G1"});
    CHECK(has_errors(t.problems));
}

TEST_CASE("pieces laid end to end carry as simple spans and need no stiffness") {
    Building building;
    const auto level = building.level("floor", 3);
    std::vector<Carrier> columns;
    for (double x = 0; x < 13; x += 4) {
        columns.push_back(building.column("C" + std::to_string(columns.size() + 1), {x, 0}, level));
    }
    const Carrier girder = building.member(level, "G1", {0, 0}, {12, 0}, {4, 8.004});
    for (std::size_t i = 0; i < columns.size(); ++i) {
        building.bears(level, girder, 4 * static_cast<double>(i), columns[i]);
    }
    building.uniform(level, girder, live, 4, 8, 5);
    const Takedown t = building.take_down();
    check_all_close(t);
    CHECK(std::abs(reaction(t, level, girder, 0, live)) < 1e-13);
    CHECK(reaction(t, level, girder, 1, live) == Approx(10));
    CHECK(reaction(t, level, girder, 2, live) == Approx(10));
    CHECK(problems_of(t, ProblemCode::stiffness_assumed).empty());
}

TEST_CASE("a beam at the middle of a girder gives half of its area to each side") {
    Building building;
    const auto level = building.level("floor", 3);
    const Carrier c1 = building.column("C1", {0, 0}, level);
    const Carrier c2 = building.column("C2", {6, 0}, level);
    const Carrier c3 = building.column("C3", {3, 4}, level);
    const Carrier beam = building.member(level, "B1", {3, 4}, {3, 0});
    const Carrier girder = building.member(level, "G1", {0, 0}, {6, 0});
    building.bears(level, beam, 0, c3);
    building.bears(level, beam, 4, girder, 3);
    building.bears(level, girder, 0, c1);
    building.bears(level, girder, 6, c2);
    building.area(level, beam, 0, 4, 3);
    const Takedown t = building.take_down();
    CHECK(t.levels[level].region_area[girder.index] == 0);
    CHECK(t.levels[level].tributary_area[girder.index] == Approx(6));
    CHECK(t.columns[0].lifts[0].tributary_area == Approx(3));
    CHECK(t.columns[1].lifts[0].tributary_area == Approx(3));
    CHECK(t.columns[2].lifts[0].tributary_area == Approx(6));
}

TEST_CASE("carriers a few millimetres off the axes they carry: the balance closes, gaps counted") {
    Building building;
    const auto roof = building.level("roof", 6);
    const auto floor = building.level("floor", 3);
    const Carrier c1 = building.column("C1", {0.003, -0.002}, floor, none, 1);
    const Carrier c2 = building.column("C2", {6.001, 0.004}, floor, none, 1);
    const Carrier c3 = building.column("C3", {2, 4.003}, floor);
    const Carrier post = building.column("P1", {4.002, 0.001}, roof, floor);
    const Carrier beam = building.member(floor, "B1", {2, 4}, {2, 0.004});
    const Carrier girder = building.member(floor, "G1", {0, 0}, {6, 0});
    building.bears(floor, beam, 0, c3);
    building.bears(floor, beam, 3.996, girder, 2);
    building.bears(floor, girder, 0, c1);
    building.bears(floor, girder, 6, c2);
    building.stands(floor, post, girder, 4);
    building.point(roof, post, live, 0, 60);
    building.uniform(floor, beam, live, 0, 3.996, 10);
    const Takedown t = building.take_down();
    check_all_close(t);
    // What reaches the ground stands where the columns are: without the gaps the moments would not agree.
    Point at_columns;
    for (const Foundation& foundation : t.foundations) {
        at_columns = at_columns + foundation.reactions[live] * t.plan.columns[foundation.under.index].at;
    }
    CHECK(std::abs(at_columns.x - t.balance[live].shared.moment.x) > 1e-3);
    CHECK(t.balance[live].arrived.moment.x == Approx(t.balance[live].shared.moment.x).epsilon(1e-13));
    CHECK(t.balance[live].arrived.moment.y == Approx(t.balance[live].shared.moment.y).epsilon(1e-13));
}

TEST_CASE("the checker of balances finds what was changed after the takedown") {
    TwoStoreys b;
    b.building.uniform(b.roof, b.g_roof, dead, 0, 6, 2);
    b.building.point(b.floor, b.g_floor, live, 2, 9);
    const Takedown sound = b.building.take_down();
    REQUIRE(check_balance(sound).empty());

    SUBCASE("a reaction") {
        Takedown t = sound;
        t.levels[b.roof].reactions[dead] += 1e-6;
        CHECK_FALSE(check_balance(t).empty());
    }
    SUBCASE("a load on a member") {
        Takedown t = sound;
        t.levels[b.floor].points[b.g_floor.index][0].station += 1e-6;
        CHECK_FALSE(check_balance(t).empty());
    }
    SUBCASE("a lift's total") {
        Takedown t = sound;
        t.columns[0].lifts[0].total[live] += 1e-6;
        CHECK_FALSE(check_balance(t).empty());
    }
    SUBCASE("a foundation") {
        Takedown t = sound;
        t.foundations[0].reactions[dead] *= 1 + 1e-6;
        CHECK_FALSE(check_balance(t).empty());
    }
    SUBCASE("what was put on a deck") {
        Takedown t = sound;
        t.levels[b.floor].loads.balance[live].applied.force += 1e-6;
        CHECK_FALSE(check_balance(t).empty());
    }
}
