#include "support/deck_support.hpp"

#include <doctest/doctest.h>

#include <cmath>

using namespace runnel;

// Each law checker must see what it is there for: splits and loads broken on purpose, one fault at a time.

namespace {

/// Three beams under a strip of floor, 0 to 8 m, 5 m broad.
support::HandFramed floor_on_three_beams() {
    support::HandFramed f;
    f.add_member({0, 0}, {0, 5});
    f.add_member({4, 0}, {4, 5});
    f.add_member({8, 0}, {8, 5});
    f.add_deck({{0, 0}, {8, 0}, {8, 5}, {0, 5}}, 0);
    f.add_area_load("live", 3);
    return f;
}

/// The cell of a beam that begins at a place along the strips and has an area.
std::size_t cell_from(const Sharing& sharing, double along) {
    for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
        const Cell& cell = sharing.cells[c];
        if (std::abs(cell.low.start - along) < 1e-9 && cell.high.start - cell.low.start > 1e-6) {
            return c;
        }
    }
    FAIL("no such cell");
    return 0;
}

ProblemCode only_code(const std::vector<Problem>& problems) {
    REQUIRE_FALSE(problems.empty());
    for (const Problem& problem : problems) {
        CHECK(problem.code == problems.front().code);
        CHECK(problem.point.has_value());
        CHECK(problem.ids.front() == "D0");
    }
    return problems.front().code;
}

} // namespace

TEST_CASE("a sound split and its loads hold all laws") {
    const support::HandFramed f = floor_on_three_beams();
    const Sharing sharing = f.share();
    const LevelLoads loads = f.load(sharing);
    CHECK(check_cover(f.framing, 0, sharing).empty());
    CHECK(check_disjoint(f.framing, 0, sharing).empty());
    CHECK(check_owners(f.plan, f.framing, 0, sharing, 400, 1).empty());
    CHECK(check_force(f.plan, f.framing, 0, sharing, loads).empty());
    CHECK(check_moment(f.plan, f.framing, 0, sharing, loads).empty());
}

TEST_CASE("a cell too narrow breaks the cover") {
    const support::HandFramed f = floor_on_three_beams();
    Sharing sharing = f.share();
    sharing.cells[cell_from(sharing, 2)].high.start -= 1e-6;
    CHECK(only_code(check_cover(f.framing, 0, sharing)) == ProblemCode::cover_broken);
}

TEST_CASE("cells that reach into each other are seen, though areas add up") {
    const support::HandFramed f = floor_on_three_beams();
    Sharing sharing = f.share();
    Cell& cell = sharing.cells[cell_from(sharing, 2)];
    cell.low.start -= 1e-3;  // into its neighbour ...
    cell.high.start -= 1e-3; // ... and as much less on the other side
    CHECK(check_cover(f.framing, 0, sharing).empty());
    CHECK(only_code(check_disjoint(f.framing, 0, sharing)) == ProblemCode::cells_overlap);
}

TEST_CASE("a bulge counts as area and as overlap") {
    const support::HandFramed f = floor_on_three_beams();
    Sharing sharing = f.share();
    sharing.cells[cell_from(sharing, 0)].high.bulge = -0.5; // bulges out into the next cell
    CHECK(only_code(check_cover(f.framing, 0, sharing)) == ProblemCode::cover_broken);
    CHECK(only_code(check_disjoint(f.framing, 0, sharing)) == ProblemCode::cells_overlap);
}

TEST_CASE("a cell given to the wrong carrier has a wrong owner") {
    const support::HandFramed f = floor_on_three_beams();
    Sharing sharing = f.share();
    sharing.transfers[cell_from(sharing, 0)].front().carrier = 1;
    CHECK(only_code(check_owners(f.plan, f.framing, 0, sharing, 400, 1)) == ProblemCode::owner_broken);
}

TEST_CASE("a load that is lost or moved on its way is seen") {
    support::HandFramed f = floor_on_three_beams();
    f.level().decks[0].share = Share::lever;
    Sharing sharing = f.share();
    LevelLoads loads = f.load(sharing);
    REQUIRE_FALSE(loads.lines[1].empty());
    loads.lines[1].front().piece.c[0] += 1e-6;
    CHECK(only_code(check_force(f.plan, f.framing, 0, sharing, loads)) == ProblemCode::force_broken);

    loads = f.load(sharing);
    loads.lines[0].front().piece.c[0] += 1e-3;
    loads.lines[2].front().piece.c[0] += 1e-3;
    loads.lines[1].front().piece.c[0] -= 2e-3;
    CHECK(check_force(f.plan, f.framing, 0, sharing, loads).empty());
    CHECK(
        check_moment(f.plan, f.framing, 0, sharing, loads).empty()); // even on both sides: the place is kept

    loads.lines[0].front().piece.c[0] += 1e-3;
    loads.lines[2].front().piece.c[0] -= 1e-3;
    CHECK(check_force(f.plan, f.framing, 0, sharing, loads).empty());
    CHECK(only_code(check_moment(f.plan, f.framing, 0, sharing, loads)) == ProblemCode::moment_broken);
}

TEST_CASE("on two-way decks and decks on columns a wrong owner is seen as well") {
    support::HandFramed f;
    f.add_member({0, 0}, {6, 0});
    f.add_member({6, 0}, {6, 4});
    f.add_member({6, 4}, {0, 4});
    f.add_member({0, 4}, {0, 0});
    for (const Point at : {Point{0, 0}, Point{6, 0}, Point{6, 4}, Point{0, 4}}) {
        f.level().columns.push_back(static_cast<std::uint32_t>(f.plan.columns.size()));
        f.plan.columns.emplace_back().at = at;
    }
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    FramedDeck& deck = f.level().decks[0];
    for (const SpanKind span : {SpanKind::two_way, SpanKind::columns}) {
        for (const CornerAngles angles : {CornerAngles::equal, CornerAngles::by_fixity}) {
            CAPTURE(name_of(span));
            deck.span = span;
            deck.corner_angles = angles;
            Sharing sharing = f.share();
            CHECK(check_owners(f.plan, f.framing, 0, sharing, 400, 1).empty());
            CHECK(check_disjoint(f.framing, 0, sharing).empty());
            const std::uint32_t first = sharing.transfers[0].front().carrier;
            for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
                std::uint32_t& carrier = sharing.transfers[c].front().carrier;
                carrier = carrier == first ? first + 1 : carrier;
            }
            CHECK(only_code(check_owners(f.plan, f.framing, 0, sharing, 400, 1)) ==
                  ProblemCode::owner_broken);
        }
    }
}

TEST_CASE("on a big deck with many openings owners are told as on a small one") {
    // 4 x 4 bays of 6 m, an opening in each; every second opening takes the place of a beam's middle. Beams
    // outside the deck and one across the openings only are none of its carriers.
    support::HandFramed f;
    std::vector<Ring> openings;
    for (int i = 0; i <= 4; ++i) {
        for (int k = 0; k < 4; ++k) {
            const double at = 6.0 * i;
            const double from = 6.0 * k;
            f.add_member({from, at}, {from + 6, at});
            f.add_member({at, from}, {at, from + 6});
            if (i < 4) {
                const double y = k % 2 == 0 || i == 3 ? at + 2 : at + 5;
                openings.push_back({{from + 2, y}, {from + 2, y + 2}, {from + 4, y + 2}, {from + 4, y}});
            }
        }
    }
    f.add_member({2.5, 3}, {3.5, 3}); // within an opening: nearest to its surroundings, but no carrier
    f.add_member({24, 12}, {30, 12});
    f.add_deck({{0, 0}, {24, 0}, {24, 24}, {0, 24}}, 0, std::move(openings));
    FramedDeck& deck = f.level().decks[0];
    for (const CornerAngles angles : {CornerAngles::equal, CornerAngles::by_fixity}) {
        deck.span = SpanKind::two_way;
        deck.corner_angles = angles;
        Sharing sharing = f.share();
        REQUIRE_FALSE(has_errors(sharing.problems));
        CHECK(check_owners(f.plan, f.framing, 0, sharing, 4000, 1).empty());
        std::size_t moved = 0;
        for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
            std::uint32_t& carrier = sharing.transfers[c].front().carrier;
            if (carrier == 10) {
                carrier = 11;
                ++moved;
            }
        }
        REQUIRE(moved > 0);
        CHECK(only_code(check_owners(f.plan, f.framing, 0, sharing, 4000, 1)) == ProblemCode::owner_broken);
    }
}
