#include "support/deck_support.hpp"

#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <map>

using namespace runnel;
using support::HandFramed;
using support::Motion;

namespace {

double area_of(const Cell& cell) {
    const double start = cell.high.start - cell.low.start;
    const double end = cell.high.end - cell.low.end;
    return (cell.to - cell.from) * ((start + end) / 2 - (cell.high.bulge - cell.low.bulge) / 6);
}

struct Shared {
    std::map<std::uint32_t, double> area;    ///< by carrier number, line and point loads together
    std::map<std::uint32_t, double> at_ends; ///< what goes there as a point load
    double all = 0;
};

Shared shared(const Sharing& sharing) {
    Shared result;
    Sum all;
    for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
        const double area = area_of(sharing.cells[c]);
        all.add(area);
        for (const Transfer& transfer : sharing.transfers[c]) {
            result.area[transfer.carrier] += transfer.weight * area;
            if (transfer.station_from == transfer.station_to) {
                result.at_ends[transfer.carrier] += transfer.weight * area;
            }
        }
    }
    result.all = all.value();
    return result;
}

void add_edges(HandFramed& f, const Ring& ring) {
    for (std::size_t i = 0; i < ring.size(); ++i) {
        f.add_member(ring[i], ring[(i + 1) % ring.size()], Role::beam);
    }
}

HandFramed two_way(const Ring& outline, std::vector<Ring> openings = {}) {
    HandFramed f;
    f.add_deck(outline, 0, std::move(openings));
    f.level().decks.back().span = SpanKind::two_way;
    return f;
}

/// As drawn, and turned and moved.
const std::vector<Motion>& motions() {
    static const std::vector<Motion> all{{0, {}}, {17, {3, -8}}, {90, {}}, {-123, {120, 40}}};
    return all;
}

bool has(const Sharing& sharing, ProblemCode code) {
    return std::any_of(sharing.problems.begin(), sharing.problems.end(),
                       [code](const Problem& problem) { return problem.code == code; });
}

} // namespace

TEST_CASE("a rectangle with beams all round is shared at 45 degrees: trapezoids and triangles") {
    for (const Motion& move : motions()) {
        const Ring ring = move(Ring{{0, 0}, {9, 0}, {9, 5}, {0, 5}});
        HandFramed f = two_way(ring);
        add_edges(f, ring);
        const Shared s = shared(f.share());
        CHECK(s.area.at(0) == doctest::Approx(16.25).epsilon(1e-12));
        CHECK(s.area.at(1) == doctest::Approx(6.25).epsilon(1e-12));
        CHECK(s.area.at(2) == doctest::Approx(16.25).epsilon(1e-12));
        CHECK(s.area.at(3) == doctest::Approx(6.25).epsilon(1e-12));
        CHECK(s.at_ends.empty());
        CHECK(f.share().problems.empty());
    }
}

TEST_CASE("triangles and trapezoids: each edge takes what lies nearest to it") {
    const std::vector<std::pair<Ring, std::vector<double>>> rows{
        // The bisectors of a triangle meet in the incircle's centre, 1 m from the edges of 3, 5, 4 m.
        {{{0, 0}, {3, 0}, {0, 4}}, {1.5, 2.5, 2.0}},
        {{{0, 0}, {10, 0}, {7, 4}, {3, 4}}, {12, 5, 6, 5}},
        // Edges in one line are divided square to it.
        {{{0, 0}, {2, 0}, {9, 0}, {9, 5}, {0, 5}}, {2, 14.25, 6.25, 16.25, 6.25}}};
    for (const auto& [outline, areas] : rows) {
        for (const Motion& move : motions()) {
            const Ring ring = move(outline);
            HandFramed f = two_way(ring);
            add_edges(f, ring);
            const Shared s = shared(f.share());
            for (std::size_t i = 0; i < areas.size(); ++i) {
                CHECK(s.area.at(static_cast<std::uint32_t>(i)) == doctest::Approx(areas[i]).epsilon(1e-12));
            }
        }
    }
}

TEST_CASE("the same areas come out of the diagram, where a bay is not handled by itself") {
    // An opening in a corner of what one beam takes, far from the borders, leaves the others alone.
    for (const Motion& move : motions()) {
        const Ring ring = move(Ring{{0, 0}, {9, 0}, {9, 5}, {0, 5}});
        HandFramed f = two_way(ring, {move(Ring{{4, 0.5}, {4, 1}, {5, 1}, {5, 0.5}})});
        add_edges(f, ring);
        const Sharing sharing = f.share();
        const Shared s = shared(sharing);
        CHECK(s.area.at(0) == doctest::Approx(15.75).epsilon(1e-12));
        CHECK(s.area.at(1) == doctest::Approx(6.25).epsilon(1e-12));
        CHECK(s.area.at(2) == doctest::Approx(16.25).epsilon(1e-12));
        CHECK(s.area.at(3) == doctest::Approx(6.25).epsilon(1e-12));
        // Above the opening 1 m of deck, 1.5 m deep, has its way across it.
        REQUIRE(has(sharing, ProblemCode::way_leaves_deck));
        CHECK(sharing.problems.front().message.find("1.5 m2") != std::string::npos);
    }
}

TEST_CASE("beside a re-entrant corner the border is a parabola") {
    for (const Motion& move : motions()) {
        const Ring ring = move(Ring{{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}});
        HandFramed f = two_way(ring);
        add_edges(f, ring);
        const Sharing sharing = f.share();
        const Shared s = shared(sharing);
        CHECK(s.all == doctest::Approx(27).epsilon(1e-13));
        CHECK(s.area.at(0) == doctest::Approx(6.8897).epsilon(1e-5));
        CHECK(s.area.at(5) == doctest::Approx(6.8897).epsilon(1e-5));
        CHECK(s.area.at(1) == doctest::Approx(2.25).epsilon(1e-12));
        CHECK(s.area.at(4) == doctest::Approx(2.25).epsilon(1e-12));
        CHECK(s.area.at(2) == doctest::Approx(4.3603).epsilon(1e-5));
        CHECK(s.area.at(3) == doctest::Approx(4.3603).epsilon(1e-5));
        CHECK(s.at_ends.at(2) == doctest::Approx(s.at_ends.at(3)).epsilon(1e-12));
    }
}

TEST_CASE("columns take what lies nearest to them") {
    for (const Motion& move : motions()) {
        HandFramed f;
        std::uint32_t index = 0;
        for (const double y : {0.0, 5.0, 11.0}) {
            for (const double x : {0.0, 6.0, 14.0, 20.0}) {
                Column column;
                column.id = "C" + std::to_string(index);
                column.at = move(Point{x, y});
                f.plan.columns.push_back(column);
                f.level().columns.push_back(index++);
            }
        }
        f.add_deck(move(Ring{{-1, -0.5}, {21, -0.5}, {21, 11.5}, {-1, 11.5}}), 0);
        f.level().decks.back().span = SpanKind::columns;
        const Shared s = shared(f.share());
        const std::vector<double> areas{12, 21, 21, 12, 22, 38.5, 38.5, 22, 14, 24.5, 24.5, 14};
        for (std::uint32_t c = 0; c < 12; ++c) {
            CHECK(s.area.at(c) == doctest::Approx(areas[c]).epsilon(1e-12));
            CHECK(s.at_ends.at(c) == s.area.at(c));
        }
    }
}

TEST_CASE("three columns at the corners of a triangle") {
    for (const Motion& move : motions()) {
        HandFramed f;
        const Ring ring = move(Ring{{0, 0}, {8, 0}, {4, 6}});
        for (std::uint32_t i = 0; i < 3; ++i) {
            Column column;
            column.id = "C" + std::to_string(i);
            column.at = ring[i];
            f.plan.columns.push_back(column);
            f.level().columns.push_back(i);
        }
        f.add_deck(ring, 0);
        f.level().decks.back().span = SpanKind::columns;
        const Shared s = shared(f.share());
        CHECK(s.area.at(0) == doctest::Approx(23.0 / 3).epsilon(1e-12));
        CHECK(s.area.at(1) == doctest::Approx(23.0 / 3).epsilon(1e-12));
        CHECK(s.area.at(2) == doctest::Approx(26.0 / 3).epsilon(1e-12));
    }
}

TEST_CASE("a beam that ends inside a deck takes the zone around its end as a point load") {
    for (const Motion& move : motions()) {
        const Ring ring = move(Ring{{0, 0}, {10, 0}, {10, 4}, {0, 4}});
        HandFramed f = two_way(ring);
        f.add_member(move(Point{2, 2}), move(Point{7, 2}), Role::beam);
        const Sharing sharing = f.share();
        const Shared s = shared(sharing);
        CHECK(s.all == doctest::Approx(40).epsilon(1e-13));
        CHECK(s.area.at(0) == doctest::Approx(40).epsilon(1e-13));
        CHECK(s.at_ends.at(0) == doctest::Approx(2 * 4 + 3 * 4).epsilon(1e-13));
        double at_from = 0;
        for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
            const Transfer& transfer = sharing.transfers[c].front();
            at_from += transfer.station_from == 0 && transfer.station_to == 0 ? area_of(sharing.cells[c]) : 0;
        }
        CHECK(at_from == doctest::Approx(8).epsilon(1e-13));
    }
}

TEST_CASE("the zone at an end that two beams share is divided by the bisector of their angle") {
    for (const Motion& move : motions()) {
        // Beams from (4, 4) to the left and downwards; what lies above and to the right of both is halved.
        const Ring ring = move(Ring{{0, 0}, {8, 0}, {8, 8}, {0, 8}});
        HandFramed f = two_way(ring);
        f.add_member(move(Point{4, 4}), move(Point{0, 4}), Role::beam);
        f.add_member(move(Point{4, 4}), move(Point{4, 0}), Role::beam);
        const Shared s = shared(f.share());
        CHECK(s.at_ends.at(0) == doctest::Approx(8).epsilon(1e-13));
        CHECK(s.at_ends.at(1) == doctest::Approx(8).epsilon(1e-13));
        CHECK(s.area.at(0) == doctest::Approx(32).epsilon(1e-13));
        CHECK(s.area.at(1) == doctest::Approx(32).epsilon(1e-13));
    }
}

TEST_CASE("a column at a wall's end takes what is nearest to that end") {
    HandFramed f;
    f.plan.walls.push_back({"W", {2, 2}, {7, 2}, "ground", "L", {}, {}});
    f.level().walls.push_back(0);
    Column column;
    column.id = "C";
    column.at = {7, 2};
    f.plan.columns.push_back(column);
    f.level().columns.push_back(0);
    f.add_deck({{0, 0}, {10, 0}, {10, 4}, {0, 4}}, 0);
    f.level().decks.back().span = SpanKind::columns;
    const Sharing sharing = f.share();
    const Shared s = shared(sharing);
    CHECK(s.area.at(sharing.number_of({CarrierKind::column, 0})) == doctest::Approx(12).epsilon(1e-13));
    CHECK(s.area.at(sharing.number_of({CarrierKind::wall, 0})) == doctest::Approx(28).epsilon(1e-13));
}

TEST_CASE("members under a deck on columns take nothing of it, and a note says so") {
    HandFramed f;
    const Ring ring{{0, 0}, {6, 0}, {6, 6}, {0, 6}};
    f.add_deck(ring, 0);
    f.level().decks.back().span = SpanKind::columns;
    add_edges(f, ring);
    f.add_member({6, 3}, {9, 3}); // touches it only
    for (std::uint32_t i = 0; i < 4; ++i) {
        Column column;
        column.id = "C" + std::to_string(i);
        column.at = ring[i];
        f.plan.columns.push_back(column);
        f.level().columns.push_back(i);
    }
    const Sharing sharing = f.share();
    const Shared s = shared(sharing);
    for (std::uint32_t c = 0; c < 4; ++c) {
        CHECK(s.area.at(sharing.number_of({CarrierKind::column, c})) == doctest::Approx(9).epsilon(1e-13));
    }
    CHECK(s.area.size() == 4);
    REQUIRE(sharing.problems.size() == 1);
    CHECK(sharing.problems[0].code == ProblemCode::carries_nothing);
    CHECK(sharing.problems[0].severity == Severity::note);
    CHECK(sharing.problems[0].ids == std::vector<std::string>{"D0", "M0", "M1", "M2", "M3"});
}

TEST_CASE("a deck without any carrier is an error with what would be lost") {
    for (const SpanKind span : {SpanKind::two_way, SpanKind::columns}) {
        HandFramed f = two_way({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, {{{1, 1}, {1, 2}, {3, 2}, {3, 1}}});
        f.level().decks.back().span = span;
        f.add_member({6, 2}, {9, 2}); // touches it only
        f.add_member({-1, -0.2}, {9, -0.2});
        f.add_area_load("live", 2);
        f.add_area_load("dead", 1, {{0, 0}, {3, 0}, {3, 1}, {0, 1}});
        const Sharing sharing = f.share();
        REQUIRE(sharing.problems.size() == 1);
        CHECK(sharing.problems[0].code == ProblemCode::strip_unsupported);
        CHECK(sharing.problems[0].message.find("22 m2") != std::string::npos);
        CHECK(sharing.problems[0].message.find("live 44 kN") != std::string::npos);
        CHECK(sharing.problems[0].message.find("dead 3 kN") != std::string::npos);
        double area = 0;
        for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
            area += area_of(sharing.cells[c]);
            CHECK(sharing.transfers[c].empty());
        }
        CHECK(area == doctest::Approx(22));
    }
}

TEST_CASE("a way past a re-entrant corner leaves the deck, one beside it does not") {
    // A U: only the left leg's outer edge and the bottom carry.
    const Ring ring{{0, 0}, {9, 0}, {9, 6}, {6, 6}, {6, 2}, {3, 2}, {3, 6}, {0, 6}};
    HandFramed f = two_way(ring);
    f.add_member({0, 6}, {0, 0}, Role::beam);
    const Sharing sharing = f.share();
    REQUIRE(sharing.problems.size() == 1);
    CHECK(sharing.problems[0].code == ProblemCode::way_leaves_deck);
    CHECK(sharing.problems[0].severity == Severity::warning);
    CHECK(sharing.problems[0].message.find("12 m2") != std::string::npos); // the right leg above y = 2
    REQUIRE(sharing.problems[0].point);
    CHECK(sharing.problems[0].point->x > 6);
    CHECK(sharing.problems[0].ids == std::vector<std::string>{"D0", "M0"});

    f.add_member({9, 0}, {9, 6}, Role::beam);
    CHECK(f.share().problems.empty());
}

TEST_CASE("a gap no wider than snap between carrier and deck is none") {
    HandFramed f = two_way({{0, 0}, {6, 0}, {6, 4}, {0, 4}});
    f.add_member({0, -0.004}, {6, -0.004}, Role::beam);
    f.add_member({6, 4.004}, {0, 4.004}, Role::beam);
    const Sharing sharing = f.share();
    const Shared s = shared(sharing);
    CHECK(s.all == doctest::Approx(24).epsilon(1e-13));
    CHECK(s.area.at(0) == doctest::Approx(12).epsilon(1e-13));
    CHECK(sharing.problems.empty());
}

TEST_CASE("bays of one deck and the same bays as decks of their own are shared alike") {
    const auto member_areas = [](bool one_deck, const Motion& move) {
        HandFramed f;
        const std::vector<double> xs{0, 6, 13, 18};
        const std::vector<double> ys{0, 5, 9};
        for (const double y : ys) {
            f.add_member(move(Point{xs.front(), y}), move(Point{xs.back(), y}), Role::girder);
        }
        for (const double x : xs) {
            for (std::size_t r = 0; r + 1 < ys.size(); ++r) {
                f.add_member(move(Point{x, ys[r]}), move(Point{x, ys[r + 1]}), Role::beam);
            }
        }
        const auto add = [&](double x0, double y0, double x1, double y1) {
            f.add_deck(move(Ring{{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}}), 0);
            f.level().decks.back().span = SpanKind::two_way;
        };
        if (one_deck) {
            add(xs.front(), ys.front(), xs.back(), ys.back());
        } else {
            for (std::size_t r = 0; r + 1 < ys.size(); ++r) {
                for (std::size_t c = 0; c + 1 < xs.size(); ++c) {
                    add(xs[c], ys[r], xs[c + 1], ys[r + 1]);
                }
            }
        }
        return shared(f.share()).area;
    };
    for (const Motion& move : motions()) {
        const auto whole = member_areas(true, move);
        const auto bays = member_areas(false, move);
        REQUIRE(whole.size() == bays.size());
        for (const auto& [member, area] : whole) {
            CHECK(area == doctest::Approx(bays.at(member)).epsilon(1e-12));
        }
    }
}

// A joint beside a corner, far from the plan's origin: rounding bends the beam there by more than it would a
// long one.
TEST_CASE("a joint close to a corner of a bay loses no area far from the origin") {
    for (const Point shift : {Point{0, 0}, Point{-284432.0606548303, -737426.50509824115}, Point{9e5, 3e5}}) {
        const Motion move{1.8071, shift};
        const Ring ring = move(Ring{{7.75, 3.57}, {-7.75, 3.55}, {-0.6, -7}});
        HandFramed f = two_way(ring);
        add_edges(f, ring);
        f.add_member(move(Point{0.25, 0.125}), move(Point{4.09820106, 4.46995812}), Role::beam);
        f.add_member(move(Point{3.65966146, -1.58925733}), move(Point{2.07229054, 4.70878963}), Role::beam);
        f.add_member(move(Point{0.25, 0.125}), move(Point{6.68396262, 2.7590036}), Role::beam);
        f.add_member(move(Point{0.287219194, 0.16702375}), move(Point{-3.57004593, -3.06400812}),
                     Role::joist);
        const double area = shared(f.share()).all;
        CHECK(area == doctest::Approx(signed_area(ring)).epsilon(1e-10));
    }
}

TEST_CASE(
    "a beam drawn a little beside a two-way deck's edge is told with its gap; one farther off is not meant") {
    for (const double gap : {0.003, 0.008, 0.05, 0.3}) {
        CAPTURE(gap);
        support::HandFramed f;
        f.add_member({0, 0}, {6, 0}, Role::beam);
        f.add_member({0, 4}, {6, 4}, Role::beam);
        f.add_member({6 + gap, 0}, {6 + gap, 4}, Role::beam);
        f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
        f.level().decks[0].span = SpanKind::two_way;
        const Sharing sharing = f.share();
        const bool told = std::any_of(sharing.problems.begin(), sharing.problems.end(), [](const Problem& p) {
            return p.code == ProblemCode::near_miss && p.ids == std::vector<std::string>{"D0", "M2"};
        });
        CHECK(told == (gap > 0.005 && gap < 0.1));
    }
}
