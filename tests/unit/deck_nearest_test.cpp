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
