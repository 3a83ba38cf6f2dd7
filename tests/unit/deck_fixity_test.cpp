#include "support/fixity_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using doctest::Approx;
using support::FixityShared;
using support::HandFramed;
using support::Motion;
using support::share_by_fixity;

namespace {

/// 60 degrees from the continuous long side and 45 elsewhere: the dividing lines meet h from the other sides.
double beside_one_continuous_long_side() {
    const double h = 4 / (1 + std::sqrt(3.0));
    return 24 - 2 * (4 * h / 2) - (6 - h) * h;
}

const Ring panel_6_by_4{{0, 0}, {6, 0}, {6, 4}, {0, 4}};

/// Beams around the panel 6 x 4 (bottom, right, top, left) and decks beyond the sides named.
HandFramed panel(std::vector<std::size_t> continuous, const Motion& move = {}) {
    HandFramed f;
    const Ring ring = move(panel_6_by_4);
    support::add_beams_around(f, ring);
    f.add_deck(ring, 0);
    for (const std::size_t side : continuous) {
        support::add_deck_beyond(f, ring[side], ring[(side + 1) % 4]);
    }
    return f;
}

} // namespace

TEST_CASE("a cell lies square to its beam: on its left below zero, on its right above") {
    const FixityShared shared = share_by_fixity(panel({}));
    REQUIRE(shared.fits);
    const Sharing& sharing = shared.sharing;
    CHECK(sharing.axes.size() == 4); // one for each beam
    REQUIRE(sharing.cells.size() == sharing.transfers.size());
    for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
        const Cell& cell = sharing.cells[c];
        CHECK(cell.carrier_side == Cell::CarrierSide::high); // the panel is left of every beam
        CHECK(cell.high == Border{0, 0, 0});
        CHECK(cell.low.start <= 0);
        REQUIRE(sharing.transfers[c].size() == 1);
        const Transfer& transfer = sharing.transfers[c][0];
        CHECK(transfer.station_from == cell.from);
        CHECK(transfer.station_to == cell.to);
        CHECK(sharing.axes[cell.axes].origin == panel_6_by_4[transfer.carrier]);
    }
    // The bottom beam: a triangle, a rectangle, a triangle.
    CHECK(std::count_if(sharing.transfers.items().begin(), sharing.transfers.items().end(),
                        [](const Transfer& t) { return t.carrier == 0; }) == 3);
}

TEST_CASE("a side is continuous where deck lies beyond more than half of it") {
    const double simple = 8;
    const double continuous = beside_one_continuous_long_side();
    for (const Motion& move : {Motion{}, Motion{90, {0, 0}}, Motion{33, {1e5, -2e5}}}) {
        CAPTURE(move.degrees);
        for (const double length : {0.0, 2.9, 3.1, 6.0}) {
            CAPTURE(length);
            HandFramed f = panel({}, move);
            if (length > 0) {
                support::add_deck_beyond(f, move({6 - length, 0}), move({6, 0}));
            }
            CHECK(share_by_fixity(f).area(0) == Approx(length > 3 ? continuous : simple).epsilon(1e-8));
        }
    }
    // Two decks side by side, and one that lies off by less than snap.
    HandFramed f = panel({});
    support::add_deck_beyond(f, {0, 0}, {2, 0});
    support::add_deck_beyond(f, {2, -0.0005}, {4, -0.0005});
    CHECK(share_by_fixity(f).area(0) == Approx(continuous).epsilon(1e-6));
    // A gap between decks is no continuity.
    HandFramed apart = panel({});
    support::add_deck_beyond(apart, {0, -0.02}, {6, -0.02});
    CHECK(share_by_fixity(apart).area(0) == Approx(simple));
}

TEST_CASE("a deck continues over an inner beam, but not where an opening lies behind it") {
    const auto shared = [](double opening_length) {
        HandFramed f;
        support::add_beams_around(f, {{0, 0}, {6, 0}, {6, 8}, {0, 8}});
        f.add_member({0, 4}, {6, 4});
        std::vector<Ring> openings;
        if (opening_length > 0) {
            openings.push_back({{0, 4}, {0, 5}, {opening_length, 5}, {opening_length, 4}});
        }
        f.add_deck({{0, 0}, {6, 0}, {6, 8}, {0, 8}}, 0, openings);
        return share_by_fixity(f);
    };
    const FixityShared whole = shared(0);
    REQUIRE(whole.fits);
    CHECK(whole.area(4) == Approx(2 * beside_one_continuous_long_side()));
    CHECK(whole.area(0) == Approx(6.6410162));
    // Half of what lies on the beam's other side is missing: from below it is simply supported, and what the
    // opening takes from above is cut out.
    const FixityShared half = shared(3.5);
    REQUIRE(half.fits);
    CHECK(half.area(0) == Approx(8));
    CHECK(support::covered_area(half.sharing) == Approx(48 - 3.5).epsilon(1e-14));
    const FixityShared less = shared(2.5);
    CHECK(less.area(0) == Approx(6.6410162));
    CHECK(support::covered_area(less.sharing) == Approx(48 - 2.5).epsilon(1e-14));
}

TEST_CASE("a free side takes nothing") {
    HandFramed f;
    f.add_member({0, 0}, {6, 0});
    f.add_member({6, 4}, {0, 4});
    f.add_deck(panel_6_by_4, 0);
    const FixityShared shared = share_by_fixity(f);
    CHECK(shared.area(0) == Approx(12));
    CHECK(shared.area(1) == Approx(12));
    // With a deck going on over one of them its strip is sqrt(3) times as broad as the other's.
    support::add_deck_beyond(f, {0, 0}, {6, 0});
    const FixityShared uneven = share_by_fixity(f);
    CHECK(uneven.area(0) == Approx(24 * std::sqrt(3.0) / (1 + std::sqrt(3.0))));
}

TEST_CASE("what lies beyond a beam's end goes to that end as to a point") {
    // A triangle with a right angle at the corner (0, 0): the beam along the slope is shorter than the slope.
    HandFramed f;
    f.add_member({1, 3}, {4, 0}); // the slope from (4, 0) to (0, 4), its last quarter free
    f.add_deck({{0, 0}, {4, 0}, {0, 4}}, 0);
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    double at_from = 0;
    double along = 0;
    for (std::size_t c = 0; c < shared.sharing.cells.size(); ++c) {
        const Cell& cell = shared.sharing.cells[c];
        const Transfer& transfer = shared.sharing.transfers[c][0];
        const double area =
            (cell.to - cell.from) * (cell.high.start - cell.low.start + cell.high.end - cell.low.end) / 2;
        if (transfer.station_from == transfer.station_to) {
            CHECK(transfer.station_from == 0);
            CHECK(cell.carrier_side == Cell::CarrierSide::neither);
            at_from += area;
        } else {
            CHECK(transfer.station_from >= 0);
            CHECK(transfer.station_to <= std::sqrt(18.0) * (1 + 1e-15));
            along += area;
        }
    }
    CHECK(at_from == Approx(1));
    CHECK(along == Approx(7));
}

TEST_CASE("two beams along a side, with a gap between them, part it in the middle of the gap") {
    HandFramed f;
    f.add_member({0, 0}, {2, 0});
    f.add_member({6, 0}, {3, 0});
    f.add_deck(panel_6_by_4, 0);
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    CHECK(shared.area(0) == Approx(2.5 * 4));
    CHECK(shared.area(1) == Approx(3.5 * 4));
    const CarrierAreas areas = areas_of(shared.sharing);
    double at_end = 0;
    for (const CarrierAreas::Piece& piece : areas.pieces[0]) {
        if (piece.from == piece.to) {
            CHECK(piece.from == Approx(2));
            at_end += piece.start;
        }
    }
    CHECK(at_end == Approx(2));
}

TEST_CASE("an opening inside a panel carries nothing and borders nothing") {
    HandFramed f = panel({0});
    f.level().decks[0].openings.push_back({{1, 0.5}, {1, 1}, {5, 1}, {5, 0.5}});
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    CHECK(shared.area(0) == Approx(beside_one_continuous_long_side() - 2));
    CHECK(shared.area(1) == Approx(2.9282032));
    CHECK(support::covered_area(shared.sharing) == Approx(22).epsilon(1e-14));
}

TEST_CASE(
    "where a panel is not fit and its sides differ, it goes to the nearest lines, with area and place") {
    HandFramed f = panel({0});
    const double lone = share_by_fixity(f).area(0);
    Point place;
    double area = 24;
    SUBCASE("a beam ends inside") {
        f.add_member({3, 4}, {3, 2});
        place = {3, 2};
    }
    SUBCASE("a wall stands free inside") {
        f.add_member({2, 2}, {4, 2});
        place = {2, 2};
    }
    SUBCASE("not convex") {
        f.level().decks[0].outline = {{0, 0}, {6, 0}, {6, 4}, {3, 4}, {3, 2}, {0, 2}};
        place = {3, 2};
        area = 18;
    }
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    REQUIRE(!shared.sharing.problems.empty());
    const Problem& problem = shared.sharing.problems.back();
    CHECK(problem.code == ProblemCode::fixity_set_aside);
    CHECK(problem.severity == Severity::warning);
    CHECK(problem.ids == std::vector<std::string>{"D0"});
    REQUIRE(problem.point);
    CHECK(problem.point->x == Approx(place.x));
    CHECK(problem.point->y == Approx(place.y));
    CHECK(problem.message.find(area == 24 ? "24 m2" : "18 m2") != std::string::npos);
    CHECK(support::covered_area(shared.sharing) == Approx(area).epsilon(1e-14));
    CHECK(shared.area(0) < lone);
}

TEST_CASE("a slab edge beyond its edge beams goes to them whole, and makes them continuous") {
    HandFramed f;
    support::add_beams_around(f, panel_6_by_4);
    f.add_deck({{-0.5, -0.5}, {6.5, -0.5}, {6.5, 4.5}, {-0.5, 4.5}}, 0);
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    CHECK(shared.sharing.problems.empty()); // all sides alike: the nearest line is what the rule gives
    CHECK(support::covered_area(shared.sharing) == Approx(35).epsilon(1e-14));
    CHECK(shared.area(0) == Approx(8 + 3 + 0.25));
    CHECK(shared.area(1) == Approx(4 + 2 + 0.25));
}

TEST_CASE("an opening in a panel that is not fit is cut out of it; other panels keep their rule") {
    HandFramed f;
    support::add_beams_around(f, panel_6_by_4);
    f.add_member({0, 6}, {6, 6});
    f.add_member({3, 4}, {3, 5}); // ends in the panel between
    f.add_deck({{0, 0}, {6, 0}, {6, 6}, {0, 6}}, 0, {{{1, 4.5}, {1, 5.5}, {2, 5.5}, {2, 4.5}}});
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    CHECK(support::covered_area(shared.sharing) == Approx(35).epsilon(1e-14));
    CHECK(shared.area(0) == Approx(6.6410162));
    CHECK(shared.area(1) == Approx(2.9282032));
    REQUIRE(!shared.sharing.problems.empty());
    CHECK(shared.sharing.problems.back().message.find("11 m2") != std::string::npos);
}

TEST_CASE(
    "a deck with a panel that is not convex but alike all round goes to the nearest lines, without a word") {
    const auto shared = [](CornerAngles angles) {
        HandFramed f;
        const Ring ell{{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}};
        support::add_beams_around(f, ell);
        f.add_deck(ell, 0);
        f.level().decks[0].span = SpanKind::two_way;
        f.level().decks[0].corner_angles = angles;
        return f.share();
    };
    const Sharing fallen_back = shared(CornerAngles::by_fixity);
    CHECK(fallen_back.problems.size() == shared(CornerAngles::equal).problems.size());
    for (const Problem& problem : fallen_back.problems) {
        CHECK(problem.code != ProblemCode::fixity_set_aside);
    }
    CHECK(areas_of(fallen_back).area == areas_of(shared(CornerAngles::equal)).area);
}

TEST_CASE("a deck that no beam touches is left to the nearest line, which says so") {
    HandFramed f;
    f.add_deck(panel_6_by_4, 0);
    const FixityShared shared = share_by_fixity(f);
    CHECK(!shared.fits);
    CHECK(shared.sharing.problems.empty());
}

TEST_CASE("beams a little off the deck's edge, and a strip of deck thinner than snap, are no obstacle") {
    for (const double off : {-0.8e-3, 1e-9, 0.8e-3}) {
        CAPTURE(off);
        HandFramed f;
        f.add_member({0, off}, {6, off});
        f.add_member({6 + off, 0}, {6 + off, 4});
        f.add_member({6, 4}, {2, 4});
        f.add_member({2, 4 - off}, {0, 4 - off});
        f.add_member({0, 4}, {off, off});
        f.add_deck(panel_6_by_4, 0);
        const FixityShared shared = share_by_fixity(f);
        REQUIRE(shared.fits);
        CHECK(support::covered_area(shared.sharing) == Approx(24).epsilon(1e-14));
        CHECK(shared.area(0) == Approx(8).epsilon(1e-3));
        CHECK(shared.area(2) + shared.area(3) == Approx(8).epsilon(1e-3));
    }
}

TEST_CASE("with nothing beyond any side, a beam along a part of one gives what the nearest line gives") {
    for (const Motion& move : {Motion{}, Motion{33, {1e3, -2e3}}}) {
        CAPTURE(move.degrees);
        HandFramed f;
        f.add_member(move({0, 0}), move({1.8, 0})); // the rest of the side is free
        f.add_member(move({6, 0}), move({6, 4}));
        f.add_member(move({6, 4}), move({0, 4}));
        f.add_member(move({0, 4}), move({0, 0}));
        f.add_deck(move(panel_6_by_4), 0);
        const std::vector<double> areas = areas_of(share_by_fixity(f).sharing).area;
        const std::vector<double> equal = areas_of(support::share_equal(f)).area;
        REQUIRE(areas.size() == equal.size());
        for (std::size_t m = 0; m < areas.size(); ++m) {
            CHECK(areas[m] == Approx(equal[m]).epsilon(1e-10));
        }
        // Put together by hand: from the short beam's end a parabola against the top and right beams.
        CHECK(areas[0] == Approx(5.274).epsilon(1e-4));
        CHECK(areas[1] == Approx(6.403).epsilon(1e-4));
        CHECK(areas[2] == Approx(8.323).epsilon(1e-4));
        CHECK(areas[3] == Approx(4.001).epsilon(1e-4));
        CHECK(share_by_fixity(f).sharing.problems.empty());

        // Where a deck lies beyond another side the rule would differ, but it does not fit.
        support::add_deck_beyond(f, move({6, 4}), move({0, 4}));
        const FixityShared uneven = share_by_fixity(f);
        CHECK(uneven.area(0) == Approx(equal[0]).epsilon(1e-10));
        CHECK(uneven.area(2) == Approx(equal[2]).epsilon(1e-10));
        const Problem* problem = support::problem_of(uneven.sharing, ProblemCode::fixity_set_aside);
        REQUIRE(problem != nullptr);
        CHECK(problem->message.find("24 m2") != std::string::npos);
        CHECK(problem->message.find("a part of its length") != std::string::npos);
        CHECK(problem->message.find("not convex") == std::string::npos);
        REQUIRE(problem->point);
        CHECK(distance(*problem->point, move({1.8, 0})) <= 1e-6);
    }
}

TEST_CASE("a beam that stops short of the corner by no more than snap carries its whole side") {
    HandFramed f;
    const double snap = f.plan.settings.snap;
    f.add_member({0.8 * snap, 0}, {3 - 0.4 * snap, 0});
    f.add_member({3 + 0.4 * snap, 0}, {6 - 0.8 * snap, 0});
    f.add_member({6, 0}, {6, 4});
    f.add_member({6, 4}, {0, 4});
    f.add_member({0, 4}, {0, 0});
    f.add_deck(panel_6_by_4, 0);
    support::add_deck_beyond(f, {0, 0}, {6, 0});
    const FixityShared shared = share_by_fixity(f);
    CHECK(shared.sharing.problems.empty());
    CHECK(shared.area(0) + shared.area(1) == Approx(beside_one_continuous_long_side()).epsilon(2e-3));
}

TEST_CASE("beyond a free side the nearest line may be one that does not touch the bay") {
    // Two bays of one deck on either side of a notch 1 m broad; the left one's side at the notch is free.
    HandFramed f;
    f.add_member({0, 0}, {9, 0});
    f.add_member({0, 4}, {0, 0});
    f.add_member({5, 4}, {5, 1});
    f.add_deck({{0, 0}, {9, 0}, {9, 4}, {5, 4}, {5, 1}, {4, 1}, {4, 4}, {0, 4}}, 0);
    const FixityShared shared = share_by_fixity(f);
    const Sharing equal = support::share_equal(f);
    for (std::uint32_t m = 0; m < 3; ++m) {
        CHECK(shared.area(m) == Approx(areas_of(equal).area[m]).epsilon(1e-10));
    }
    const Problem* told = support::problem_of(shared.sharing, ProblemCode::way_leaves_deck);
    const Problem* expected = support::problem_of(equal, ProblemCode::way_leaves_deck);
    REQUIRE(told != nullptr);
    REQUIRE(expected != nullptr);
    CHECK(told->message == expected->message);
    CHECK(told->ids == expected->ids);
}

TEST_CASE("an overhang that a slot cuts off goes to the deck's nearest beam; bays keep their rule") {
    HandFramed f;
    support::add_beams_around(f, {{0, 0}, {6, 0}, {6, 8}, {0, 8}});
    f.add_member({0, 4}, {6, 4});
    f.level().members[1].to = {6, 6}; // the right beam stops short: the upper bay does not fit
    f.level().members[1].length = 6;
    // A slot behind the left beams, right through; what lies left of it touches no beam.
    f.add_deck({{-2, 0}, {6, 0}, {6, 8}, {-2, 8}}, 0, {{{-1, 0}, {-1, 8}, {0, 8}, {0, 0}}});
    const FixityShared shared = share_by_fixity(f);
    REQUIRE(shared.fits);
    CHECK(support::covered_area(shared.sharing) == Approx(56).epsilon(1e-12));
    CHECK(shared.area(0) == Approx(6.6410162)); // of the lower bay, continuous over its upper beam
    CHECK(shared.area(3) > 2.9282032 + 8);
    const Problem* set_aside = support::problem_of(shared.sharing, ProblemCode::fixity_set_aside);
    REQUIRE(set_aside != nullptr);
    CHECK(set_aside->message.find("24 m2") != std::string::npos);
    const Problem* way = support::problem_of(shared.sharing, ProblemCode::way_leaves_deck);
    REQUIRE(way != nullptr);
    CHECK(way->message.find("8 m2") != std::string::npos);
}

TEST_CASE("what goes to its beam across an opening is told once, with the area of all bays") {
    HandFramed f;
    support::add_beams_around(f, {{0, 0}, {6, 0}, {6, 8}, {0, 8}});
    f.add_member({0, 4}, {6, 4});
    f.level().members[2].from = {5, 8}; // the upper bay does not fit
    f.add_deck({{0, 0}, {6, 0}, {6, 8}, {0, 8}}, 0);
    CHECK(support::problem_of(share_by_fixity(f).sharing, ProblemCode::way_leaves_deck) == nullptr);
    // One slot in each, 1 m long.
    f.level().decks[0].openings = {{{2.5, 0.4}, {2.5, 0.5}, {3.5, 0.5}, {3.5, 0.4}},
                                   {{2.5, 4.4}, {2.5, 4.5}, {3.5, 4.5}, {3.5, 4.4}}};
    const FixityShared shared = share_by_fixity(f);
    const Problem* way = support::problem_of(shared.sharing, ProblemCode::way_leaves_deck);
    REQUIRE(way != nullptr);
    // Behind it, below: up to where the beams part, at 4 m / (1 + sqrt(3)), from 0.5 m on; above: from 0.5 m
    // up to the middle of 4 m.
    CHECK(way->message.find("2.4641 m2") != std::string::npos);
    CHECK(std::find(way->ids.begin(), way->ids.end(), "M0") != way->ids.end());
    CHECK(std::find(way->ids.begin(), way->ids.end(), "M4") != way->ids.end());
    REQUIRE(way->point);
    CHECK(way->point->x == Approx(3));
    CHECK(way->point->y > 4.5); // the larger part
}

TEST_CASE("a beam drawn askew, beside a side for half of its length, carries it as by the nearest line") {
    HandFramed f = panel({0});
    f.level().members[3].from = {-1.8 * f.plan.settings.snap, 4}; // the left beam leaves the deck's edge
    const FixityShared shared = share_by_fixity(f);
    const std::vector<double> equal = areas_of(support::share_equal(f)).area;
    CHECK(equal[3] > 3.9);
    for (std::uint32_t m = 0; m < 4; ++m) {
        CHECK(shared.area(m) == Approx(equal[m]).epsilon(1e-10));
    }
    const Problem* problem = support::problem_of(shared.sharing, ProblemCode::fixity_set_aside);
    REQUIRE(problem != nullptr);
    CHECK(problem->message.find("a part of its length") != std::string::npos);
}

TEST_CASE("a beam that only meets the end of a free side does not carry it") {
    HandFramed f;
    f.add_member({-1, 0}, {6, 0});
    f.add_member({0, 0}, {1, 8}); // leaves a triangle with a free side, which the beam below meets at its tip
    f.add_member({6, 0}, {6, 8});
    f.add_member({0, 8}, {6, 8});
    f.add_deck({{0, 0}, {6, 0}, {6, 8}, {0, 8}}, 0);
    support::add_deck_beyond(f, {6, 8}, {0, 8}); // and whose other sides are both continuous ...
    CHECK(share_by_fixity(f).sharing.problems.empty());
    f.level().decks.pop_back(); // ... or unlike
    CHECK(share_by_fixity(f).sharing.problems.empty());
}
