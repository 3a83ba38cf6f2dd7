#include "support/deck_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using doctest::Approx;
using support::HandFramed;
using support::Motion;

namespace {

const std::vector<Motion> motions{{0, {}}, {17, {}}, {17, {1e5, -7e4}}, {90, {3, 4}}, {-128.5, {-2e5, 1e5}}};

const Region* region_of(const std::vector<Region>& regions, std::uint32_t carrier) {
    const auto it =
        std::find_if(regions.begin(), regions.end(), [&](const Region& r) { return r.carrier == carrier; });
    return it == regions.end() ? nullptr : &*it;
}

void check_laws(const HandFramed& f, const Sharing& sharing) {
    CHECK(check_cover(f.framing, 0, sharing, 1e-11).empty());
    CHECK(check_owners(f.plan, f.framing, 0, sharing, 200, 7).empty());
}

} // namespace

TEST_CASE("an inner joist takes half the span on either side and an edge joist half of one") {
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        HandFramed f;
        for (const double x : {0.0, 2.0, 5.0}) {
            f.add_member(move({x, 0}), move({x, 6}));
        }
        f.add_deck(move(Ring{{0, 0}, {5, 0}, {5, 6}, {0, 6}}), move.degrees);
        f.add_area_load("live", 2.0);
        const Sharing sharing = f.share();
        check_laws(f, sharing);
        CHECK(sharing.problems.empty());
        const std::vector<Region> regions = regions_of(sharing);
        REQUIRE(regions.size() == 3);
        CHECK(regions[0].area == Approx(6.0).epsilon(1e-9));
        CHECK(regions[1].area == Approx(15.0).epsilon(1e-9));
        CHECK(regions[2].area == Approx(9.0).epsilon(1e-9));
        for (const Region& region : regions) {
            CHECK(region.rings.size() == 1);
            CHECK(region.rings[0].size() == 4);
        }
        const LevelLoads loads = f.load(sharing);
        CHECK(loads.problems.empty());
        REQUIRE(loads.lines[1].size() == 1);
        CHECK(loads.lines[1][0].piece.c[0] == Approx(5.0).epsilon(1e-9));
        CHECK(loads.lines[1][0].piece.to == Approx(6.0).epsilon(1e-9));
        CHECK(std::abs(loads.lines[1][0].piece.c[1]) < 1e-8);
    }
}

TEST_CASE("an overhang goes whole to its carrier") {
    HandFramed f;
    f.add_member({1, 0}, {1, 4});
    f.add_member({5, 0}, {5, 4});
    f.add_deck({{0, 0}, {6.5, 0}, {6.5, 4}, {0, 4}}, 0);
    const Sharing sharing = f.share();
    check_laws(f, sharing);
    CHECK(sharing.problems.empty());
    const std::vector<Region> regions = regions_of(sharing);
    REQUIRE(regions.size() == 2);
    CHECK(regions[0].area == Approx(12.0));
    CHECK(regions[1].area == Approx(14.0));
}

TEST_CASE("a strip on one carrier and an overhang longer than half its back span are warned of") {
    HandFramed f;
    f.add_member({1, 0}, {1, 4});
    f.add_member({5, 0}, {5, 2});
    f.add_deck({{0, 0}, {8, 0}, {8, 4}, {0, 4}}, 0);
    const Sharing sharing = f.share();
    check_laws(f, sharing);
    // Above y = 2 all strips hang on the first joist; below, 3 m overhang a back span of 4 m.
    REQUIRE(sharing.problems.size() == 2);
    CHECK(sharing.problems[0].code == ProblemCode::strip_cantilevers);
    CHECK(sharing.problems[0].message.find("16 m2") != std::string::npos);
    CHECK(sharing.problems[1].code == ProblemCode::strip_cantilevers);
    CHECK(sharing.problems[1].message.find("6 m2") != std::string::npos);
}

TEST_CASE("a strip that no carrier crosses is an error with its area, load and place") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({5, 0}, {5, 4});
    f.add_deck({{0, 0}, {5, 0}, {5, 5}, {0, 5}}, 0);
    f.add_area_load("live", 3.0);
    const Sharing sharing = f.share();
    REQUIRE(sharing.problems.size() == 1);
    CHECK(sharing.problems[0].code == ProblemCode::strip_unsupported);
    CHECK(sharing.problems[0].message.find("5 m2") != std::string::npos);
    CHECK(sharing.problems[0].message.find("live 15 kN") != std::string::npos);
    REQUIRE(sharing.problems[0].point);
    CHECK(sharing.problems[0].point->x == Approx(2.5));
    CHECK(sharing.problems[0].point->y == Approx(4.5));
}

TEST_CASE("an opening interrupts the strips, and trimmers along its edges carry up to it") {
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        HandFramed f;
        f.add_member(move({0, 0}), move({0, 6}));
        f.add_member(move({3, 0}), move({3, 6})); // trimmers
        f.add_member(move({5, 0}), move({5, 6}));
        f.add_member(move({9, 0}), move({9, 6}));
        f.add_deck(move(Ring{{0, 0}, {9, 0}, {9, 6}, {0, 6}}), move.degrees,
                   {move(Ring{{3, 2}, {3, 4}, {5, 4}, {5, 2}})});
        f.add_area_load("live", 1.0);
        const Sharing sharing = f.share();
        check_laws(f, sharing);
        CHECK(sharing.problems.empty());
        const std::vector<Region> regions = regions_of(sharing);
        REQUIRE(regions.size() == 4);
        CHECK(region_of(regions, 0)->area == Approx(9.0));
        CHECK(region_of(regions, 1)->area == Approx(1.5 * 6 + 1.0 * 4));
        CHECK(region_of(regions, 2)->area == Approx(2.0 * 6 + 1.0 * 4));
        CHECK(region_of(regions, 1)->rings.size() == 1);
        CHECK(region_of(regions, 1)->rings[0].size() == 8);
        const LevelLoads loads = f.load(sharing);
        REQUIRE(loads.lines[1].size() == 3);
        CHECK(loads.lines[1][0].piece.c[0] == Approx(2.5));
        CHECK(loads.lines[1][1].piece.c[0] == Approx(1.5));
        CHECK(loads.lines[1][2].piece.c[0] == Approx(2.5));
    }
}

TEST_CASE("an opening on the edge of the deck is no unsupported strip") {
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        HandFramed f;
        f.add_member(move({0, 0}), move({0, 6}));
        f.add_member(move({2, 0}), move({2, 6}));
        f.add_member(move({5, 0}), move({5, 6}));
        f.add_deck(move(Ring{{0, 0}, {5, 0}, {5, 6}, {0, 6}}), move.degrees,
                   {move(Ring{{0, 2}, {0, 4}, {2, 4}, {2, 2}})});
        const Sharing sharing = f.share();
        check_laws(f, sharing);
        CHECK(sharing.problems.empty());
        const std::vector<Region> regions = regions_of(sharing);
        CHECK(region_of(regions, 0)->area == Approx(4.0));
        CHECK(region_of(regions, 0)->rings.size() == 2);
        CHECK(region_of(regions, 1)->area == Approx(9.0 + 4.0));
    }
}

TEST_CASE("a skew joist takes a region that widens and a line load that rises") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({2, 0}, {4, 4});
    f.add_member({8, 0}, {8, 4});
    f.add_deck({{0, 0}, {8, 0}, {8, 4}, {0, 4}}, 0);
    f.add_area_load("live", 5.0);
    const Sharing sharing = f.share();
    check_laws(f, sharing);
    const LevelLoads loads = f.load(sharing);
    // The skew joist takes 4 m of strip everywhere; along its own length that is 4 x 5 x 4 / sqrt(20).
    REQUIRE(loads.lines[1].size() == 1);
    CHECK(loads.lines[1][0].piece.c[0] == Approx(80 / std::sqrt(20.0)));
    CHECK(std::abs(loads.lines[1][0].piece.c[1]) < 1e-12);
    // The straight one: half of 2 m at its start, half of 4 m at its end.
    REQUIRE(loads.lines[0].size() == 1);
    CHECK(loads.lines[0][0].piece.c[0] == Approx(5.0));
    CHECK(loads.lines[0][0].piece.at(4) == Approx(10.0));
}

TEST_CASE("members along the strips take nothing, crossing members are noded") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({6, 0}, {6, 4});
    f.add_member({0, 2}, {6, 2}, Role::beam);
    f.add_member({1, 0}, {5, 4}, Role::beam); // crosses the one before
    f.add_member({5, 0}, {1, 4}, Role::girder);
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    f.add_area_load("dead", 1.0);
    const Sharing sharing = f.share();
    check_laws(f, sharing);
    const LevelLoads loads = f.load(sharing);
    CHECK(loads.lines[2].empty());
    double sum = 0;
    for (std::uint32_t c = 0; c < 5; ++c) {
        sum += support::total(loads.lines[c], 0);
    }
    CHECK(sum == Approx(24.0).epsilon(1e-13));
    CHECK(support::total(loads.lines[3], 0) == Approx(support::total(loads.lines[4], 0)));
}

TEST_CASE("a deck reaching past a member's end, and a member reaching past the deck, are split there") {
    HandFramed f;
    f.add_member({0, -3}, {0, 9});
    f.add_member({4, 0}, {4, 3});
    f.add_member({8, -1}, {8, 7});
    f.add_deck({{0, 0}, {8, 0}, {8, 6}, {0, 6}}, 0);
    f.add_area_load("live", 1.0);
    const Sharing sharing = f.share();
    check_laws(f, sharing);
    const LevelLoads loads = f.load(sharing);
    CHECK(support::total(loads.lines[1], 1) == Approx(12.0));
    CHECK(support::total(loads.lines[0], 1) == Approx(6.0 + 12.0));
    REQUIRE(loads.lines[0].size() == 2);
    CHECK(loads.lines[0][0].piece.from == Approx(3.0));
    CHECK(loads.lines[0][1].piece.to == Approx(9.0));
}

TEST_CASE("zones of area load: what two carriers share, what replaces what") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({4, 0}, {4, 4});
    f.add_deck({{0, 0}, {4, 0}, {4, 4}, {0, 4}}, 0);
    f.add_area_load("live", 2.0);
    f.add_area_load("live", 3.0, {{1, 1}, {3, 1}, {3, 3}, {1, 3}});
    f.add_area_load("dead", 1.0);
    f.add_area_load("dead", 10.0, {{0, 0}, {1, 0}, {1, 4}, {0, 4}}, true);
    const Sharing sharing = f.share();
    const LevelLoads loads = f.load(sharing);
    CHECK(loads.problems.empty());
    CHECK(support::total(loads.lines[0], 1) == Approx(2 * 8 + 3 * 2));
    CHECK(support::total(loads.lines[1], 1) == Approx(2 * 8 + 3 * 2));
    REQUIRE(loads.lines[0].size() >= 4);
    CHECK(support::total(loads.lines[0], 0) == Approx(10 * 4 + 1 * 4));
    CHECK(support::total(loads.lines[1], 0) == Approx(8));
    for (const DeckBalance& row : loads.balance) {
        CHECK(row.applied.force == Approx(row.shared.force).epsilon(1e-13));
    }
}

TEST_CASE("an L-shaped zone half off the deck: the part off is noted, the part on is carried") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({4, 0}, {4, 4});
    f.add_deck({{0, 0}, {4, 0}, {4, 4}, {0, 4}}, 0);
    f.add_area_load("live", 1.0, {{2, 2}, {6, 2}, {6, 3}, {3, 3}, {3, 5}, {2, 5}});
    const LevelLoads loads = f.load(f.share());
    REQUIRE(loads.problems.size() == 1);
    CHECK(loads.problems[0].code == ProblemCode::zone_off_decks);
    CHECK(loads.problems[0].message.find("3 m2") != std::string::npos);
    CHECK(support::total(loads.lines[0], 1) + support::total(loads.lines[1], 1) == Approx(3.0));
    CHECK(support::total(loads.lines[0], 1) == Approx(0.0));
}

TEST_CASE("a point load in a span goes to its carriers by the lever, on an overhang whole") {
    HandFramed f;
    f.add_member({1, 0}, {1, 4});
    f.add_member({5, 0}, {5, 4});
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    f.level().point_loads.push_back({"live", 8.0, {2, 1}, {}, {}});
    f.level().point_loads.push_back({"dead", 4.0, {5.5, 3}, {}, {}});
    const LevelLoads loads = f.load(f.share());
    REQUIRE(loads.points[0].size() == 1);
    CHECK(loads.points[0][0].p == Approx(6.0));
    CHECK(loads.points[0][0].station == Approx(1.0));
    REQUIRE(loads.points[1].size() == 2);
    CHECK(support::total(loads.points[1], 1) == Approx(2.0));
    CHECK(support::total(loads.points[1], 0) == Approx(4.0));
}

TEST_CASE("a partition across joists, along a joist and between two") {
    HandFramed f;
    for (const double x : {0.0, 2.0, 4.0}) {
        f.add_member({x, 0}, {x, 6});
    }
    f.add_deck({{0, 0}, {4, 0}, {4, 6}, {0, 6}}, 0);
    f.level().line_loads.push_back({"dead", 3.0, 3.0, {0, 1}, {4, 1}, {}, {}});
    const LevelLoads across = f.load(f.share());
    REQUIRE(across.points[0].size() == 1);
    CHECK(across.points[0][0].p == Approx(3.0));
    CHECK(support::total(across.points[1], 0) == Approx(6.0));
    CHECK(support::total(across.points[2], 0) == Approx(3.0));
    CHECK(across.points[1][0].station == Approx(1.0));

    f.level().line_loads[0] = {"dead", 3.0, 3.0, {2, 1}, {2, 5}, {}, {}};
    const LevelLoads along = f.load(f.share());
    REQUIRE(along.lines[1].size() == 1);
    CHECK(along.lines[1][0].piece.from == Approx(1.0));
    CHECK(along.lines[1][0].piece.to == Approx(5.0));
    CHECK(along.lines[1][0].piece.c[0] == Approx(3.0));
    CHECK(along.lines[0].empty());

    f.level().line_loads[0] = {"dead", 2.0, 6.0, {2.5, 1}, {2.5, 5}, {}, {}};
    const LevelLoads between = f.load(f.share());
    REQUIRE(between.lines[1].size() == 1);
    CHECK(between.lines[1][0].piece.c[0] == Approx(1.5));
    CHECK(between.lines[1][0].piece.at(5) == Approx(4.5));
    CHECK(support::total(between.lines[2], 0) == Approx(4.0));
}

TEST_CASE("a skew line over skew joists keeps its force, and what each joist gets is smooth") {
    HandFramed f;
    f.add_member({0, 0}, {0, 6});
    f.add_member({2, 0}, {4, 6});
    f.add_deck({{0, 0}, {2, 0}, {4, 6}, {0, 6}}, 0);
    f.level().line_loads.push_back({"live", 1.0, 4.0, {0.5, 0.5}, {3, 5.5}, {}, {}});
    const LevelLoads loads = f.load(f.share());
    CHECK(loads.problems.empty());
    const double force = 2.5 * std::hypot(2.5, 5.0);
    const double left = support::total(loads.lines[0], 1);
    const double right = support::total(loads.lines[1], 1);
    CHECK(left + right == Approx(force).epsilon(1e-13));
    // By Simpson's rule on a thousand strips.
    double expected = 0;
    const int n = 1000;
    for (int i = 0; i <= n; ++i) {
        const double t = static_cast<double>(i) / n;
        const double y = 0.5 + 5 * t;
        const double f_right = (0.5 + 2.5 * t) / (2 + y / 3);
        const double weight = i == 0 || i == n ? 1 : i % 2 == 1 ? 4 : 2;
        expected += weight / (3.0 * n) * (1 + 3 * t) * f_right * std::hypot(2.5, 5.0);
    }
    CHECK(right == Approx(expected).epsilon(1e-10));
}

TEST_CASE("loads that stand on nothing, beside or past their carrier are told") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({4, 0}, {4, 4});
    f.add_deck({{0, 0}, {4, 0}, {4, 4}, {0, 4}}, 0);
    f.level().line_loads.push_back({"dead", 1.0, 1.0, {1, 2}, {6, 2}, {}, {}});
    f.level().point_loads.push_back({"dead", 1.0, {9, 9}, {}, {}});
    f.level().line_loads.push_back({"dead", 1.0, 1.0, {4.2, 0}, {4.2, 4}, "M1", {}});
    f.level().line_loads.push_back({"dead", 1.0, 1.0, {4, 0}, {4, 4.5}, "M1", {}});
    const LevelLoads loads = f.load(f.share());
    REQUIRE(loads.problems.size() == 4);
    CHECK(loads.problems[0].code == ProblemCode::load_off_decks);
    CHECK(loads.problems[0].message.find("2 m of its 5 m") != std::string::npos);
    CHECK(loads.problems[1].code == ProblemCode::load_off_its_carrier);
    CHECK(loads.problems[1].message.find("0.2 m beside") != std::string::npos);
    CHECK(loads.problems[2].code == ProblemCode::load_beyond_its_carrier);
    CHECK(loads.problems[2].message.find("0.5 m past") != std::string::npos);
    CHECK(loads.problems[3].code == ProblemCode::load_off_decks);
}

TEST_CASE("a line load a little outside the deck's edge goes to what is there") {
    HandFramed f;
    f.add_member({1, 0}, {1, 4});
    f.add_member({4, 0}, {4, 4});
    f.add_deck({{0, 0}, {4, 0}, {4, 4}, {0, 4}}, 0);
    f.level().line_loads.push_back({"dead", 2.0, 2.0, {-0.003, 0}, {-0.003, 4.002}, {}, {}});
    const LevelLoads loads = f.load(f.share());
    CHECK(loads.problems.empty());
    CHECK(support::total(loads.lines[0], 0) == Approx(8.004).epsilon(1e-12));
}
