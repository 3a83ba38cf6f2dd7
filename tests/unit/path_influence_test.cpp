#include "path/influence.hpp"
#include "path/influence_columns.hpp"
#include "support/building_support.hpp"
#include "support/deck_support.hpp"
#include "support/framing_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <numeric>
#include <string>

using namespace runnel;
using doctest::Approx;
using framing_support::PlanBuilder;
using framing_support::rectangle;

namespace {

/// Columns on a grid of 6 by 8, 4 bays by 3; girders along x over each line of columns, joists 2 apart along
/// y from girder to girder, a one-way deck along x over all. The deck reaches `beyond` past the first line of
/// columns on both sides, there with girders and joists that run on.
struct RegularGrid {
    static constexpr double a = 6, b = 8, spacing = 1.5;
    static constexpr int nx = 4, ny = 3;
    PlanBuilder builder;
    double beyond_x = 0, beyond_y = 0;

    explicit RegularGrid(double past_x = 0, double past_y = 0) : beyond_x(past_x), beyond_y(past_y) {
        for (int j = 0; j <= ny; ++j) {
            for (int i = 0; i <= nx; ++i) {
                builder.column(name("C", i, j), {a * i, b * j});
            }
            // Past the last joist, which would else carry the girder's end.
            const double end = beyond_x > 0 ? beyond_x + 0.25 : 0;
            builder.girder("G" + std::to_string(j), {-end, b * j}, {a * nx, b * j});
        }
        const int joists = static_cast<int>(a / spacing) * nx;
        const int before = static_cast<int>(beyond_x / spacing);
        for (int k = -before; k <= joists; ++k) {
            builder.joist(name("J", k + before, 0), {spacing * k, -beyond_y}, {spacing * k, b * ny});
        }
    }
    static std::string name(const std::string& letter, int i, int j) {
        return letter + std::to_string(i) + '_' + std::to_string(j);
    }
    void one_deck() { builder.deck("D", rectangle(-beyond_x, -beyond_y, a * nx, b * ny)).direction = 0; }
    void deck_bay_by_bay() {
        for (int j = 0; j < ny; ++j) {
            for (int i = 0; i < nx; ++i) {
                builder.deck(name("D", i, j), rectangle(a * i, b * j, a * (i + 1), b * (j + 1))).direction =
                    0;
            }
        }
    }
    [[nodiscard]] Takedown take_down() const {
        Takedown takedown = runnel::take_down(builder.plan);
        for (const Problem& problem : takedown.problems) {
            INFO(problem.message);
            CHECK(problem.severity != Severity::error);
        }
        REQUIRE(takedown.complete);
        return takedown;
    }
};

const Lift& lift_of(const Takedown& takedown, const std::string& id) {
    for (std::size_t c = 0; c < takedown.plan.columns.size(); ++c) {
        if (takedown.plan.columns[c].id == id) {
            return takedown.columns[c].lifts.front();
        }
    }
    FAIL("no column ", id);
    return takedown.columns.front().lifts.front();
}

Takedown completed(const PlanBuilder& builder) {
    Takedown takedown = runnel::take_down(builder.plan);
    REQUIRE(takedown.complete);
    return takedown;
}

struct Areas {
    double region = 0, tributary = 0, influence = 0;
};

Areas areas_of(const Takedown& takedown, const std::string& member) {
    const std::uint32_t m = framing_support::member_index(takedown.framing.levels[0], member);
    const LevelTakedown& level = takedown.levels[0];
    return {level.region_area[m], level.tributary_area[m], level.influence_area[m]};
}

double ratio(const Lift& lift) {
    return lift.influence_area / lift.tributary_area;
}

} // namespace

// K_LL: ASCE/SEI 7-16, table 4.7-1. It is the ratio of influence to tributary area, rounded down.
TEST_CASE("columns of a regular grid have the published ratios of influence to tributary area") {
    RegularGrid grid;
    grid.one_deck();
    const Takedown t = grid.take_down();
    CHECK(lift_of(t, "C2_1").tributary_area == Approx(48));
    CHECK(ratio(lift_of(t, "C2_1")) == Approx(4)); // interior
    CHECK(ratio(lift_of(t, "C2_0")) == Approx(4)); // exterior, without cantilever slab
    CHECK(ratio(lift_of(t, "C0_1")) == Approx(4));
    CHECK(ratio(lift_of(t, "C0_0")) == Approx(4)); // corner
}

TEST_CASE("floors that cantilever half a bay give edge columns 3 and corner columns no less than 2") {
    RegularGrid grid(RegularGrid::a / 2, RegularGrid::b / 2);
    grid.one_deck();
    const Takedown t = grid.take_down();
    CHECK(ratio(lift_of(t, "C2_0")) == Approx(3)); // edge column, with cantilever slab
    CHECK(ratio(lift_of(t, "C0_1")) == Approx(3));
    CHECK(ratio(lift_of(t, "C2_1")) == Approx(4));
    CHECK(lift_of(t, "C0_0").influence_area == Approx((3 + 6) * (4 + 8)));
    CHECK(ratio(lift_of(t, "C0_0")) == Approx(2.25));
}

TEST_CASE("interior beams have twice their tributary area, and edge beams without cantilever too") {
    RegularGrid grid;
    grid.one_deck();
    const Takedown t = grid.take_down();
    const Areas inner = areas_of(t, "J4_0");
    CHECK(inner.influence / inner.tributary == Approx(2));
    const Areas edge = areas_of(t, "J0_0");
    CHECK(edge.influence == Approx(1.5 * 24));
    CHECK(edge.influence / edge.tributary == Approx(2));
    // A girder: its joists' spans on both sides, and what joists share counts once.
    CHECK(areas_of(t, "G1").influence == Approx(24 * 16));
    CHECK(areas_of(t, "G0").influence == Approx(24 * 8));
}

TEST_CASE("influence areas do not depend on how decks are outlined") {
    RegularGrid whole;
    whole.one_deck();
    RegularGrid bays;
    bays.deck_bay_by_bay();
    const Takedown a = whole.take_down();
    const Takedown b = bays.take_down();
    const std::vector<double>& one = a.levels[0].influence_area;
    const std::vector<double>& many = b.levels[0].influence_area;
    REQUIRE(one.size() == many.size());
    for (std::size_t c = 0; c < one.size(); ++c) {
        CAPTURE(c);
        CHECK(many[c] == Approx(one[c]).epsilon(1e-12));
    }
}

TEST_CASE("where two decks meet and no carrier runs, neither is felt by the carriers of the other") {
    for (const SpanKind span : {SpanKind::one_way, SpanKind::two_way}) {
        PlanBuilder builder;
        for (const double x : {0.0, 6.0}) {
            const std::string n = std::to_string(static_cast<int>(x));
            builder.column("S" + n, {x, 0}).column("N" + n, {x, 4}).girder("G" + n, {x, 0}, {x, 4});
        }
        const auto areas_with = [&](double joint) {
            builder.floor().decks.clear();
            for (const auto& [from, to] : {std::pair(0.0, joint), std::pair(joint, 6.0)}) {
                if (to > from) {
                    Deck& deck = builder.deck("D" + std::to_string(from), rectangle(from, 0, to, 4));
                    deck.span = span;
                    if (span == SpanKind::one_way) {
                        deck.direction = 0;
                    }
                }
            }
            const Takedown t = completed(builder);
            return std::pair(areas_of(t, "G0"), areas_of(t, "G6"));
        };
        const std::pair<Areas, Areas> whole = areas_with(0);
        CHECK(whole.first.tributary == Approx(12));
        CHECK(whole.first.influence == Approx(24));
        CHECK(whole.second.influence == Approx(24));
        const std::pair<Areas, Areas> apart = areas_with(2);
        CHECK(apart.first.tributary == Approx(8)); // as the load goes
        CHECK(apart.first.influence == Approx(8));
        CHECK(apart.second.tributary == Approx(16));
        CHECK(apart.second.influence == Approx(16));
    }
}

namespace {

/// Marks the carriers that feel a load at a station of one: upwards from the load, the other way round than
/// the library goes. A member passes it to the bearings at both ends of its span.
void mark_felt(const FramedLevel& framed, const Sharing& sharing, std::uint32_t carrier, double station,
               std::vector<bool>& felt) {
    felt[carrier] = true;
    if (carrier >= sharing.members) {
        return;
    }
    const std::span<const Bearing> bearings = framed.bearings[carrier];
    for (std::size_t b = 0; b < bearings.size(); ++b) {
        const bool after_last = b > 0 && station <= bearings[b - 1].station;
        const bool before_next = b + 1 < bearings.size() && station >= bearings[b + 1].station;
        if (!after_last && !before_next) {
            mark_felt(framed, sharing, sharing.number_of(bearings[b].on), bearings[b].on_station, felt);
        }
    }
}

std::vector<bool> felt_from(const FramedLevel& framed, const Sharing& sharing, const Bay& bay, double x) {
    std::vector<bool> felt(sharing.carrier_count());
    if (bay.low_carrier != none) {
        mark_felt(framed, sharing, bay.low_carrier, (1 - x) * bay.low_station_from + x * bay.low_station_to,
                  felt);
    }
    if (bay.high_carrier != none) {
        mark_felt(framed, sharing, bay.high_carrier,
                  (1 - x) * bay.high_station_from + x * bay.high_station_to, felt);
    }
    return felt;
}

} // namespace

TEST_CASE("an influence area is the floor from which loads reach the carrier, looked for point by point") {
    constexpr std::uint64_t buildings = 40;
    for (std::uint64_t seed = 1; seed <= buildings; ++seed) {
        CAPTURE(seed);
        const Takedown t = runnel::take_down(support::random_building(seed));
        REQUIRE(t.complete);
        for (std::size_t l = 0; l < t.levels.size(); ++l) {
            const FramedLevel& framed = t.framing.levels[l];
            const LevelTakedown& level = t.levels[l];
            const Sharing& sharing = level.sharing;
            // Slices of each bay, each taken by its middle: what is wrong is at most a slice at each change.
            constexpr int slices = 200;
            std::vector<double> expected(sharing.carrier_count());
            std::vector<double> slack(sharing.carrier_count(), 1e-9);
            for (const Bay& bay : sharing.bays) {
                std::vector<bool> before;
                for (int i = 0; i < slices; ++i) {
                    const double x = (i + 0.5) / slices;
                    const double slice = (bay.to - bay.from) / slices * (bay.high.at(x) - bay.low.at(x));
                    const std::vector<bool> felt = felt_from(framed, sharing, bay, x);
                    for (std::uint32_t c = 0; c < felt.size(); ++c) {
                        expected[c] += felt[c] ? slice : 0;
                        slack[c] += i > 0 && felt[c] != before[c] ? slice : 0;
                    }
                    before = felt;
                }
            }
            for (std::uint32_t c = 0; c < expected.size(); ++c) {
                CAPTURE(c);
                CHECK(std::abs(level.influence_area[c] - expected[c]) <= 1.5 * slack[c] + 1e-9 * expected[c]);
                CHECK(level.tributary_area[c] <= level.influence_area[c] * (1 + 1e-12) + 1e-9);
            }
        }
    }
}

TEST_CASE("turning, moving and renumbering a building changes no influence area") {
    for (std::uint64_t seed = 1; seed <= 20; ++seed) {
        CAPTURE(seed);
        const Takedown t = runnel::take_down(support::random_building(seed));
        const Takedown moved = runnel::take_down(support::random_building(seed, {33, {4000, -700}, true}));
        REQUIRE(t.complete);
        REQUIRE(moved.complete);
        for (std::size_t c = 0; c < t.columns.size(); ++c) {
            const auto same =
                std::find_if(moved.plan.columns.begin(), moved.plan.columns.end(),
                             [&](const Column& column) { return column.id == t.plan.columns[c].id; });
            const auto& lifts =
                moved.columns[static_cast<std::size_t>(same - moved.plan.columns.begin())].lifts;
            REQUIRE(lifts.size() == t.columns[c].lifts.size());
            for (std::size_t l = 0; l < lifts.size(); ++l) {
                CHECK(lifts[l].influence_area == Approx(t.columns[c].lifts[l].influence_area).epsilon(1e-9));
            }
        }
    }
}

namespace {

/// Influence areas of the first level, by carrier.
std::vector<double> influence_of_panels(const Plan& plan, const Framing& framing) {
    const Sharing sharing = share_decks(plan, framing, 0);
    const Tolerance tolerance{noise_of(framing.largest_coordinate), plan.settings.snap};
    return influence_areas(framing.levels[0], sharing, find_landings(framing.levels[0], sharing),
                           floor_pieces(plan, framing.levels[0], sharing, tolerance), tolerance);
}

} // namespace

// K_LL 4 for columns and 2 for beams as above: the tributary areas are a bay, half a bay and a quarter for
// columns, and for a beam of one span a quarter of the panel on each side.
TEST_CASE("on two-way panels a column feels the panels around it, a beam those on both sides") {
    constexpr double a = 6, b = 8;
    PlanBuilder builder;
    for (int j = 0; j <= 2; ++j) {
        for (int i = 0; i <= 3; ++i) {
            builder.column(RegularGrid::name("C", i, j), {a * i, b * j});
        }
        builder.girder("X" + std::to_string(j), {0, b * j}, {3 * a, b * j});
    }
    for (int i = 0; i <= 3; ++i) {
        for (int j = 0; j < 2; ++j) {
            builder.girder(RegularGrid::name("Y", i, j), {a * i, b * j}, {a * i, b * (j + 1)});
        }
    }
    builder.deck("D", rectangle(0, 0, 3 * a, 2 * b)).span = SpanKind::two_way;
    const auto check = [&] {
        const Framing framing = frame_plan(builder.plan);
        const std::vector<double> areas = influence_of_panels(builder.plan, framing);
        const std::size_t members = framing.levels[0].members.size();
        const auto of_column = [&](int i, int j) {
            return areas[members + static_cast<std::size_t>(4 * j + i)];
        };
        CHECK(of_column(1, 1) == Approx(4 * a * b));
        CHECK(of_column(1, 0) == Approx(2 * a * b));
        CHECK(of_column(0, 1) == Approx(2 * a * b));
        CHECK(of_column(3, 2) == Approx(a * b));
        const auto of_member = [&](const std::string& id) {
            return areas[framing_support::member_index(framing.levels[0], id)];
        };
        CHECK(of_member("Y1_0") == Approx(2 * a * b));
        CHECK(of_member("Y0_0") == Approx(a * b));
        CHECK(of_member("X1") == Approx(6 * a * b));
        CHECK(of_member("X0") == Approx(3 * a * b));
    };
    check();
    builder.floor().decks.clear(); // the same floor, outlined panel by panel
    for (int j = 0; j < 2; ++j) {
        for (int i = 0; i < 3; ++i) {
            builder.deck(RegularGrid::name("D", i, j), rectangle(a * i, b * j, a * (i + 1), b * (j + 1)))
                .span = SpanKind::two_way;
        }
    }
    check();
}

TEST_CASE("a beam feels what it takes from across a slot, besides the panel that it lies along") {
    PlanBuilder builder;
    builder.column("A", {0.2, 0}).column("B", {0.2, 4}).girder("G", {0.2, 0}, {0.2, 4});
    Deck& deck = builder.deck("D", rectangle(0, 0, 3, 4));
    deck.span = SpanKind::two_way;
    deck.openings.push_back({{0.2, 0}, {0.4, 0}, {0.4, 4}, {0.2, 4}});
    const Takedown t = completed(builder);
    const Areas areas = areas_of(t, "G");
    CHECK(areas.tributary == Approx(11.2));
    CHECK(areas.influence == Approx(11.2));
    CHECK(lift_of(t, "A").influence_area == Approx(11.2));
}

// By hand. Two panels that meet at no carrier: the left one between W and M, the right one between N and E,
// with a slot 1 wide between M and N. The strip beyond the slot that no carrier touches is halved.
TEST_CASE("of a panel across an opening a beam feels what goes to it, and the beams along it the whole") {
    PlanBuilder builder;
    for (const double x : {0.0, 4.0, 10.0}) {
        builder.column("C" + std::to_string(static_cast<int>(x)) + "s", {x, 0});
        builder.column("C" + std::to_string(static_cast<int>(x)) + "n", {x, 6});
        builder.girder("G" + std::to_string(static_cast<int>(x)), {x, 0}, {x, 6});
    }
    Deck& deck = builder.deck("D", rectangle(0, 0, 10, 6));
    deck.span = SpanKind::two_way;
    deck.openings.push_back({{4, 0}, {5, 0}, {5, 6}, {4, 6}});
    const Takedown t = completed(builder);
    CHECK(areas_of(t, "G0").influence == Approx(24));
    CHECK(areas_of(t, "G4").tributary == Approx(12 + 2 * 6)); // from x = 5 to x = 7, across the slot
    CHECK(areas_of(t, "G4").influence == Approx(24 + 2 * 6));
    CHECK(areas_of(t, "G10").influence == Approx(5 * 6));
}

TEST_CASE("of a girder's two spans only the one that floor across a slot goes to brings it to its columns") {
    PlanBuilder builder;
    builder.column("A", {0, 0}).column("B", {6, 0}).column("C", {12, 0}).girder("G", {0, 0}, {12, 0});
    Deck& deck = builder.deck("D", {{0, -1}, {12, -1}, {12, 0}, {5, 0}, {5, 3}, {0, 3}});
    deck.span = SpanKind::two_way;
    deck.openings.push_back({{0, 0}, {5, 0}, {5, 1}, {0, 1}});
    const Takedown t = completed(builder);
    CHECK(areas_of(t, "G").influence == Approx(12 + 10));
    CHECK(lift_of(t, "A").influence_area == Approx(12 + 10));
    CHECK(lift_of(t, "B").influence_area == Approx(12 + 10));
    CHECK(lift_of(t, "C").influence_area == Approx(12));
}

namespace {

/// A flat slab on columns 6 by 8 apart, 4 bays by 3, that reaches past the first lines of columns on two
/// sides.
PlanBuilder flat_slab(double past_x, double past_y) {
    PlanBuilder builder;
    for (int j = 0; j <= 3; ++j) {
        for (int i = 0; i <= 4; ++i) {
            builder.column(RegularGrid::name("C", i, j), {6.0 * i, 8.0 * j});
        }
    }
    builder.deck("D", rectangle(-past_x, -past_y, 24, 24)).span = SpanKind::columns;
    return builder;
}

} // namespace

// K_LL: ASCE/SEI 7-16, table 4.7-1.
TEST_CASE("columns of a flat slab have the published ratios of influence to tributary area") {
    const Takedown plain = completed(flat_slab(0, 0));
    for (const char* id : {"C2_1", "C2_0", "C0_1", "C0_0", "C4_3"}) {
        CAPTURE(id);
        CHECK(ratio(lift_of(plain, id)) == Approx(4));
    }
    const Takedown reaching = completed(flat_slab(3, 4));
    CHECK(ratio(lift_of(reaching, "C2_1")) == Approx(4));
    CHECK(ratio(lift_of(reaching, "C2_0")) == Approx(3));
    CHECK(ratio(lift_of(reaching, "C0_1")) == Approx(3));
    CHECK(ratio(lift_of(reaching, "C0_0")) == Approx(2.25));
    // Beside the corner column the slab beyond the edge counts as far as the next columns, and no farther.
    CHECK(lift_of(reaching, "C1_0").influence_area == Approx(12 * 12));
}

TEST_CASE(
    "a flat slab turned and moved, or with columns set back from its edge, has the same influence areas") {
    const Takedown plain = completed(flat_slab(3, 4));
    PlanBuilder moved = flat_slab(3, 4);
    const support::Motion motion{17, {3000, -800}};
    support::for_each_point(moved.plan, [&](Point& p) { p = motion(p); });
    const Takedown far = completed(moved);
    PlanBuilder off = flat_slab(3, 4);
    for (Column& column : off.plan.columns) {
        column.at.y += column.id == "C2_0" || column.id == "C1_0" ? 0.3 : 0;
    }
    const Takedown near = completed(off);
    for (std::size_t c = 0; c < plain.columns.size(); ++c) {
        CAPTURE(plain.plan.columns[c].id);
        const double area = plain.columns[c].lifts[0].influence_area;
        CHECK(far.columns[c].lifts[0].influence_area == Approx(area).epsilon(1e-9));
        CHECK(near.columns[c].lifts[0].influence_area == Approx(area).epsilon(0.05));
    }
}

TEST_CASE("an opening in a flat slab's bay is taken off, and the bay is felt by its columns all the same") {
    PlanBuilder builder = flat_slab(0, 0);
    builder.floor().decks[0].openings.push_back({{8, 2}, {10, 2}, {10, 6}, {8, 6}}); // over a bay's middle
    const Takedown t = completed(builder);
    CHECK(lift_of(t, "C1_0").influence_area == Approx(2 * 48 - 8));
    CHECK(lift_of(t, "C1_1").influence_area == Approx(4 * 48 - 8));
    CHECK(lift_of(t, "C4_3").influence_area == Approx(48));
}

TEST_CASE("a slab on two columns is felt by both, but for what reaches past one of them") {
    PlanBuilder builder;
    builder.column("A", {0, 0}).column("B", {6, 0}).column("C", {6, 20});
    builder.deck("D", rectangle(-2, -1, 9, 1)).span = SpanKind::columns;
    const Takedown t = completed(builder);
    CHECK(lift_of(t, "A").influence_area == Approx(8 * 2));
    CHECK(lift_of(t, "B").influence_area == Approx(9 * 2));
}

TEST_CASE("between a wall and the columns next to it a slab is felt by both, from column to column") {
    PlanBuilder builder;
    builder.wall("W", {0, 0}, {24, 0});
    for (int j = 1; j <= 2; ++j) {
        for (int i = 0; i <= 4; ++i) {
            builder.column(RegularGrid::name("C", i, j), {6.0 * i, 8.0 * j});
        }
    }
    builder.deck("D", rectangle(0, 0, 24, 16)).span = SpanKind::columns;
    const Takedown t = completed(builder);
    CHECK(lift_of(t, "C2_1").influence_area == Approx(12 * 16));
    CHECK(lift_of(t, "C0_1").influence_area == Approx(6 * 16));
    CHECK(lift_of(t, "C2_2").influence_area == Approx(12 * 8));
    CHECK(t.walls[0].lifts[0].influence_area == Approx(24 * 8));
}

TEST_CASE("around a corner that is not there a flat slab's columns feel no more than the bays that are") {
    PlanBuilder builder; // an L: 2 by 2 bays less one
    for (int j = 0; j <= 2; ++j) {
        for (int i = 0; i <= 2; ++i) {
            if (i < 2 || j < 2) {
                builder.column(RegularGrid::name("C", i, j), {6.0 * i, 6.0 * j});
            }
        }
    }
    builder.deck("D", {{0, 0}, {12, 0}, {12, 6}, {6, 6}, {6, 12}, {0, 12}}).span = SpanKind::columns;
    const Takedown t = completed(builder);
    CHECK(lift_of(t, "C1_1").influence_area == Approx(3 * 36));
    CHECK(lift_of(t, "C2_1").influence_area == Approx(36));
    CHECK(lift_of(t, "C1_0").influence_area == Approx(2 * 36));
    CHECK(lift_of(t, "C0_0").influence_area == Approx(36));
}

TEST_CASE("parts of random slabs felt alike add up to the slab, and no column feels less than its own cell") {
    const std::uint64_t seed = support::seed_of_run(20261201);
    MESSAGE("seed ", seed);
    support::Random random(seed);
    std::size_t slabs = 0;
    double worst = 0;
    for (int trial = 0; trial < 300; ++trial) {
        CAPTURE(trial);
        PlanBuilder builder;
        const Point far{random.between(-1e4, 1e4), random.between(-1e4, 1e4)};
        const int columns = random.whole(1, 30);
        const bool on_grid = random.chance(0.3);
        for (int i = 0; i < columns; ++i) {
            const Point p = on_grid ? Point{4.0 * random.whole(-4, 4), 4.0 * random.whole(-4, 4)}
                                    : Point{random.between(-18, 18), random.between(-18, 18)};
            builder.column("C" + std::to_string(i), p + far);
        }
        for (int i = random.whole(-2, 3); i > 0; --i) {
            const Point p{random.between(-15, 15), random.between(-15, 15)};
            const Point d{random.between(-8, 8), random.between(-8, 8)};
            builder.wall("W" + std::to_string(i), p + far, p + d + far);
        }
        builder.deck("D", random.star(far, 6, 20, random.whole(3, 12))).span = SpanKind::columns;
        if (random.chance(0.3)) {
            builder.floor().decks[0].openings.push_back(random.star(far, 0.5, 2, 5));
        }
        if (has_errors(check_plan(builder.plan))) {
            continue;
        }
        const Framing framing = frame_plan(builder.plan);
        if (has_errors(framing.problems)) {
            continue;
        }
        const Sharing sharing = share_decks(builder.plan, framing, 0);
        if (has_errors(sharing.problems) || sharing.transfers.items().size() != sharing.cells.size()) {
            continue;
        }
        std::vector<std::uint32_t> cells(sharing.cells.size());
        std::iota(cells.begin(), cells.end(), 0U);
        const Tolerance tolerance{noise_of(framing.largest_coordinate), builder.plan.settings.snap};
        const std::vector<FeltArea> felt =
            felt_areas(builder.plan, framing.levels[0].decks[0], sharing, cells, tolerance);
        double sum = 0;
        std::vector<double> by_carrier(sharing.carrier_count());
        for (const FeltArea& one : felt) {
            sum += one.area;
            CHECK(one.area > -1e-9);
            for (const std::uint32_t carrier : one.carriers) {
                by_carrier[carrier] += one.area;
            }
        }
        double whole = 0;
        for (const Cell& cell : sharing.cells) {
            whole += area_of(StripPiece{cell.from, cell.to, cell.low, cell.high});
        }
        worst = std::max(worst, std::abs(sum - whole) / whole);
        CHECK(std::abs(sum - whole) <= 1e-9 * whole);
        const std::vector<double> own = runnel::areas_of(sharing).area;
        for (std::uint32_t c = 0; c < own.size(); ++c) {
            CHECK(by_carrier[c] >= own[c] - 1e-9 * sharing.deck_area[0]);
        }
        ++slabs;
    }
    MESSAGE(slabs, " slabs close within ", worst);
    CHECK(slabs > 150);
}

TEST_CASE("what lands right over a bearing is felt there, and not at the bearings next to it") {
    FramedLevel framed; // B lands on the girder G where G passes over H
    framed.members.resize(3);
    for (FramedMember& member : framed.members) {
        member.length = 8;
    }
    const std::uint32_t b = 0;
    const std::uint32_t g = 1;
    const std::uint32_t h = 2;
    const auto bearing = [](double station, Carrier on, double on_station) {
        Bearing made;
        made.station = station;
        made.on = on;
        made.on_station = on_station;
        return made;
    };
    const auto column = [](std::uint32_t index) { return Carrier{CarrierKind::column, index}; };
    framed.bearings = Grouped<Bearing>::from_pairs(3, {{b, bearing(0, {CarrierKind::member, g}, 4)},
                                                       {b, bearing(8, column(0), 0)},
                                                       {g, bearing(0, column(1), 0)},
                                                       {g, bearing(4, {CarrierKind::member, h}, 3)},
                                                       {g, bearing(8, column(2), 0)},
                                                       {h, bearing(0, column(3), 0)},
                                                       {h, bearing(8, column(4), 0)}});
    framed.columns = {0, 1, 2, 3, 4};
    Sharing sharing;
    sharing.members = 3;
    sharing.columns = 5;
    FloorPieces pieces;
    pieces.areas = {10};
    pieces.within = {none};
    pieces.beside = Grouped<Beside>::from_pairs(8, {{b, {0, 0, 8, true}}});
    const std::vector<double> areas =
        influence_areas(framed, sharing, find_landings(framed, sharing), pieces, {1e-12, 0.005});
    CHECK(areas == std::vector<double>{10, 10, 10, 10, 0, 0, 10, 10});
}

TEST_CASE(
    "a short stretch of floor around a bearing, by less than snap on both sides, is felt all the same") {
    FramedLevel framed;
    framed.members.resize(1);
    framed.members[0].length = 8;
    std::vector<std::pair<std::uint32_t, Bearing>> bearings(3);
    for (std::uint32_t i = 0; i < 3; ++i) {
        bearings[i].second.station = 4.0 * i;
        bearings[i].second.on = {CarrierKind::column, i};
    }
    framed.bearings = Grouped<Bearing>::from_pairs(1, bearings);
    framed.columns = {0, 1, 2};
    Sharing sharing;
    sharing.members = 1;
    sharing.columns = 3;
    FloorPieces pieces;
    pieces.areas = {10};
    pieces.within = {none};
    pieces.beside = Grouped<Beside>::from_pairs(4, {{0, {0, 3.998, 4.004, true}}});
    const std::vector<double> areas =
        influence_areas(framed, sharing, find_landings(framed, sharing), pieces, {1e-12, 0.005});
    CHECK(areas == std::vector<double>{10, 0, 10, 10});
}

TEST_CASE("a slab beyond an edge column that is set back is felt by it and by its neighbour on that side") {
    PlanBuilder builder;
    builder.column("A", {0, 0}).column("M", {6, 1.2}).column("B", {12, 0});
    builder.column("C", {0, 8}).column("D", {6, 8}).column("E", {12, 8});
    builder.deck("S", rectangle(0, -4, 12, 8)).span = SpanKind::columns;
    const Takedown t = completed(builder);
    // By hand. M: all but what lies beyond A and B square to the lines AM and MB, 0.8 wide at the far edge.
    CHECK(lift_of(t, "M").influence_area == Approx(144 - 2 * 1.6));
    // A: its bay, the slab before it up to M, and beyond that up to the line square to AM.
    CHECK(lift_of(t, "A").influence_area == Approx(44.4 + 27.6 + 2.704));
    CHECK(lift_of(t, "B").influence_area == Approx(44.4 + 27.6 + 2.704));
}

TEST_CASE("columns face each other across floor only: the legs of a U do not feel each other's tips") {
    PlanBuilder builder;
    builder.column("A", {0, 0}).column("B", {6, 0}).column("P", {0, 10}).column("Q", {6, 10});
    builder.deck("U", {{-1, -1}, {7, -1}, {7, 11}, {5, 11}, {5, 1}, {1, 1}, {1, 11}, {-1, 11}}).span =
        SpanKind::columns;
    const Takedown t = completed(builder);
    CHECK(lift_of(t, "P").influence_area == Approx(2 * 11 + 2 * 1)); // its leg, and A's cell beside that
    CHECK(lift_of(t, "Q").influence_area == Approx(24));
}

TEST_CASE("under any mixture of rules a tributary area lies in the influence area, and that on the floor") {
    for (std::uint64_t seed = 1; seed <= 60; ++seed) {
        CAPTURE(seed);
        Plan plan = support::random_building(seed);
        support::mix_rules(plan, seed);
        const Takedown t = runnel::take_down(plan);
        REQUIRE(t.complete);
        for (const LevelTakedown& level : t.levels) {
            const double floor =
                std::accumulate(level.sharing.deck_area.begin(), level.sharing.deck_area.end(), 0.0);
            for (std::size_t c = 0; c < level.influence_area.size(); ++c) {
                CAPTURE(c);
                CHECK(level.tributary_area[c] <= level.influence_area[c] + 1e-9 * floor);
                CHECK(level.influence_area[c] <= floor * (1 + 1e-9));
            }
        }
    }
}
