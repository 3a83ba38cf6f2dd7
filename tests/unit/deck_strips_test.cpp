#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include "deck/strips_chains.hpp"
#include "load/fit.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <array>
#include <cmath>

using namespace runnel;
using doctest::Approx;
using support::HandFramed;
using support::Motion;

namespace {

const std::vector<Motion> motions{{0, {}}, {17, {}}, {17, {1e5, -7e4}}, {90, {3, 4}}, {-128.5, {-2e5, 1e5}}};
constexpr std::uint32_t live = 1;

/// A deck of breadth 4 between x = low and x = high, along x, on joists across it.
HandFramed floor_on(const std::vector<double>& joists, double low, double high, Share share,
                    const Motion& move = {}) {
    HandFramed f;
    for (const double x : joists) {
        f.add_member(move({x, 0}), move({x, 4}));
    }
    f.add_deck(move(Ring{{low, 0}, {high, 0}, {high, 4}, {low, 4}}), move.degrees);
    f.level().decks[0].share = share;
    return f;
}

/// The only line of a carrier, which has to be even from end to end: kN/m.
double even_line(const LevelLoads& loads, std::uint32_t carrier) {
    REQUIRE(loads.lines[carrier].size() == 1);
    const LinePiece& piece = loads.lines[carrier][0].piece;
    CHECK(piece.from == Approx(0).epsilon(1e-9));
    CHECK(piece.to == Approx(4).epsilon(1e-9));
    CHECK(piece.at(piece.to) == Approx(piece.c[0]).epsilon(1e-8));
    return piece.c[0];
}

const DeckBalance& balance_of(const LevelLoads& loads, std::uint32_t deck, std::uint32_t load_case) {
    const auto it = std::find_if(loads.balance.begin(), loads.balance.end(), [&](const DeckBalance& row) {
        return row.deck == deck && row.load_case == load_case;
    });
    REQUIRE(it != loads.balance.end());
    return *it;
}

void check_kept(const LevelLoads& loads) {
    for (const DeckBalance& row : loads.balance) {
        CHECK(row.shared.force == Approx(row.applied.force).epsilon(1e-9));
        CHECK(row.shared.moment.x == Approx(row.applied.moment.x).epsilon(1e-9));
        CHECK(row.shared.moment.y == Approx(row.applied.moment.y).epsilon(1e-9));
    }
}

} // namespace

TEST_CASE("lever: an overhang's load presses on its carrier and lifts the one behind") {
    // By moments about the near carrier: w a^2 / 2 / L = 10 x 2^2 / 2 / 6 = 3.33 up at the far one.
    for (const Motion& move : motions) {
        HandFramed f = floor_on({0, 6}, 0, 8, Share::lever, move);
        f.add_area_load("live", 10, move(Ring{{6, 0}, {8, 0}, {8, 4}, {6, 4}}));
        const Sharing sharing = f.share();
        CHECK(sharing.problems.empty());
        const LevelLoads loads = f.load(sharing);
        CHECK(even_line(loads, 0) == Approx(-10.0 / 3).epsilon(1e-9));
        CHECK(even_line(loads, 1) == Approx(20 + 10.0 / 3).epsilon(1e-9));
        CHECK(loads.curve_error == 0);
        check_kept(loads);
    }
}

TEST_CASE("lever: regions stay the halves while the loads follow statics") {
    HandFramed f = floor_on({0, 6}, 0, 8, Share::lever);
    f.add_area_load("live", 10);
    const Sharing sharing = f.share();
    const std::vector<Region> regions = regions_of(sharing);
    REQUIRE(regions.size() == 2);
    CHECK(regions[0].area == Approx(12));
    CHECK(regions[1].area == Approx(20));
    CHECK(check_owners(f.plan, f.framing, 0, sharing, 200, 7).empty());
    const LevelLoads loads = f.load(sharing);
    CHECK(even_line(loads, 0) == Approx(10 * (8 * 2.0 / 6)).epsilon(1e-12)); // resultant 80 at 4 - 8/2 + 4
    CHECK(even_line(loads, 1) == Approx(10 * (8 * 4.0 / 6)).epsilon(1e-12));
}

TEST_CASE("lever: a load on part of a span goes to the nearer carrier for the most") {
    // A band 1 m wide at 1..2 of a span of 6: resultant at 1.5, so a quarter to the far carrier.
    HandFramed f = floor_on({0, 6}, 0, 6, Share::lever);
    f.add_area_load("live", 4, Ring{{1, 0}, {2, 0}, {2, 4}, {1, 4}});
    const LevelLoads loads = f.load(f.share());
    CHECK(even_line(loads, 0) == Approx(3).epsilon(1e-12));
    CHECK(even_line(loads, 1) == Approx(1).epsilon(1e-12));
}

TEST_CASE("continuous: strips over equal and unequal spans give the reactions of beam tables") {
    // Common beam tables: two spans 0.375, 1.25, 0.375; three 0.4, 1.1, 1.1, 0.4; four 0.393, 1.143, 0.929
    // (11/28, 8/7, 13/14) of w L. 6 + 4 m: M = -w (6^3 + 4^3) / (8 x 10) = -3.5 w.
    struct Row {
        std::vector<double> joists;
        std::vector<double> expected; ///< for w = 1
    };
    const std::vector<Row> rows{
        {{0, 5, 10}, {0.375 * 5, 1.25 * 5, 0.375 * 5}},
        {{0, 6, 10}, {3 - 3.5 / 6, 5 + 3.5 / 6 + 3.5 / 4, 2 - 3.5 / 4}},
        {{0, 2, 4, 6}, {0.8, 2.2, 2.2, 0.8}},
        {{0, 1, 2, 3, 4}, {11.0 / 28, 8.0 / 7, 13.0 / 14, 8.0 / 7, 11.0 / 28}},
    };
    for (const Row& row : rows) {
        for (const Motion& move : motions) {
            HandFramed f = floor_on(row.joists, 0, row.joists.back(), Share::continuous, move);
            f.add_area_load("live", 1);
            const Sharing sharing = f.share();
            CHECK(sharing.problems.empty());
            REQUIRE(sharing.strips.size() == 1);
            const LevelLoads loads = f.load(sharing);
            for (std::uint32_t c = 0; c < row.expected.size(); ++c) {
                CHECK(even_line(loads, c) == Approx(row.expected[c]).epsilon(1e-8));
            }
            CHECK(loads.curve_error == 0);
            check_kept(loads);
        }
    }
    HandFramed f = floor_on({0, 6, 10}, 0, 10, Share::continuous);
    f.add_area_load("live", 1);
    const LevelLoads loads = f.load(f.share());
    CHECK(even_line(loads, 0) == Approx(2.4167).epsilon(1e-4));
    CHECK(even_line(loads, 1) == Approx(6.4583).epsilon(1e-4));
    CHECK(even_line(loads, 2) == Approx(1.125).epsilon(1e-12));
}

TEST_CASE("continuous: a load on one of two spans lifts the far end") {
    // Common beam tables, one of two equal spans loaded: 7/16, 5/8, -1/16 of w L.
    HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
    f.add_area_load("live", 1, Ring{{0, 0}, {4, 0}, {4, 4}, {0, 4}});
    const LevelLoads loads = f.load(f.share());
    CHECK(even_line(loads, 0) == Approx(4 * 7.0 / 16).epsilon(1e-12));
    CHECK(even_line(loads, 1) == Approx(4 * 5.0 / 8).epsilon(1e-12));
    CHECK(even_line(loads, 2) == Approx(-4.0 / 16).epsilon(1e-12));
}

TEST_CASE("continuous: an overhang turns into a moment that halves and changes sign") {
    // An overhang of 1 m beside two spans of 4: M1 = -w / 2; M2 = -M1 h / (2 (h + h)) = w / 8 from it alone.
    HandFramed f = floor_on({1, 5, 9}, 0, 9, Share::continuous);
    f.add_area_load("live", 8, Ring{{0, 0}, {1, 0}, {1, 4}, {0, 4}});
    const LevelLoads loads = f.load(f.share());
    CHECK(even_line(loads, 0) == Approx(8 + (1.0 + 4.0) / 4).epsilon(1e-12));
    CHECK(even_line(loads, 1) == Approx(-(1.0 + 4.0) / 4 - 1.0 / 4).epsilon(1e-12));
    CHECK(even_line(loads, 2) == Approx(1.0 / 4).epsilon(1e-12));
    check_kept(loads);
}

TEST_CASE("continuous: an opening interrupts the beam, a joist that ends cuts it at its end") {
    HandFramed f;
    for (const double x : {0.0, 3.0, 5.0, 8.0}) {
        f.add_member({x, 0}, {x, 4});
    }
    f.add_deck({{0, 0}, {8, 0}, {8, 4}, {0, 4}}, 0, {{{3, 1}, {3, 3}, {5, 3}, {5, 1}}});
    f.level().decks[0].share = Share::continuous;
    f.add_area_load("live", 1);
    const Sharing sharing = f.share();
    CHECK(sharing.problems.empty());
    std::vector<std::pair<double, std::size_t>> found; // level, carriers
    for (std::size_t s = 0; s < sharing.strips.size(); ++s) {
        found.emplace_back(sharing.strips[s].from, sharing.strip_carriers[s].size());
    }
    std::sort(found.begin(), found.end());
    const std::vector<std::pair<double, std::size_t>> expected{{0, 4}, {1, 2}, {1, 2}, {3, 4}};
    CHECK(found == expected);
    const LevelLoads loads = f.load(sharing);
    check_kept(loads);
    // Spans of 3, 2, 3: M (2 x 5 + 2) = -(27 + 8) / 4.
    const double moment = 35.0 / 48;
    CHECK(support::total(loads.lines[1], live) == Approx(2 * 1.5 + 2 * (2.5 + moment / 3)).epsilon(1e-12));
    CHECK(support::total(loads.lines[0], live) == Approx(2 * 1.5 + 2 * (1.5 - moment / 3)).epsilon(1e-12));
}

TEST_CASE("a joist that stops half-way cuts its own chains only") {
    HandFramed f;
    f.add_member({0, 0}, {0, 4});
    f.add_member({2, 0}, {2, 2});
    f.add_member({4, 0}, {4, 4});
    f.add_member({8, 0}, {8, 4});
    f.add_deck({{0, 0}, {8, 0}, {8, 4}, {0, 4}}, 0);
    f.level().decks[0].share = Share::continuous;
    const Sharing sharing = f.share();
    REQUIRE(sharing.strips.size() == 2);
    CHECK(sharing.strip_carriers[0].size() == 4);
    CHECK(sharing.strip_carriers[1].size() == 3);
    CHECK(sharing.strips[1].from == Approx(2));
}

TEST_CASE("a strip on one carrier alone is an error under lever and continuous, with area and place") {
    for (const Share share : {Share::lever, Share::continuous}) {
        HandFramed f;
        f.add_member({1, 0}, {1, 4});
        f.add_member({5, 0}, {5, 2});
        f.add_deck({{0, 0}, {8, 0}, {8, 4}, {0, 4}}, 0);
        f.level().decks[0].share = share;
        f.add_area_load("live", 1);
        const Sharing sharing = f.share();
        // Above y = 2 all strips hang on the first joist; below, 3 m overhang a back span of 4 m, by statics.
        REQUIRE(sharing.problems.size() == 1);
        CHECK(sharing.problems[0].code == ProblemCode::strip_unstable);
        CHECK(sharing.problems[0].severity == Severity::error);
        CHECK(sharing.problems[0].message.find("16 m2") != std::string::npos);
        REQUIRE(sharing.problems[0].point);
        CHECK(sharing.problems[0].point->y == Approx(3));
        // Nothing is lost all the same.
        CHECK(balance_of(f.load(sharing), 0, live).shared.force == Approx(32));
    }
}

TEST_CASE("a back span shorter than a twentieth of its overhang is an error, one as long is none") {
    for (const double back : {0.09, 0.11}) {
        HandFramed f = floor_on({0, back}, 0, back + 2, Share::lever);
        const Sharing sharing = f.share();
        if (back < 0.1) {
            REQUIRE(sharing.problems.size() == 1);
            CHECK(sharing.problems[0].code == ProblemCode::strip_unstable);
            CHECK(sharing.problems[0].message.find("8 m2") != std::string::npos);
        } else {
            CHECK(sharing.problems.empty());
        }
    }
}

TEST_CASE("continuous over twin beams clamps the deck: a warning, and one of the pair is lifted") {
    // The three-moment equation by hand. Spans 6, 0.25, 5.75 under 1 kN/m, moments M1 and M2 at the pair:
    // 12.5 M1 + 0.25 M2 = -(216 + 0.25^3) / 4, 0.25 M1 + 12 M2 = -(0.25^3 + 5.75^3) / 4.
    const double c = 0.25 * 0.25 * 0.25;
    const double r1 = -(216 + c) / 4;
    const double r2 = -(c + 5.75 * 5.75 * 5.75) / 4;
    const double m1 = (12 * r1 - 0.25 * r2) / (12.5 * 12 - 0.0625);
    const double m2 = (12.5 * r2 - 0.25 * r1) / (12.5 * 12 - 0.0625);
    for (const Motion& move : motions) {
        HandFramed f = floor_on({0, 6, 6.25, 12}, 0, 12, Share::continuous, move);
        f.add_area_load("live", 1);
        const Sharing sharing = f.share();
        REQUIRE(sharing.problems.size() == 1);
        const Problem& problem = sharing.problems[0];
        CHECK(problem.code == ProblemCode::strip_clamped);
        CHECK(problem.severity == Severity::warning);
        CHECK(problem.ids == std::vector<std::string>{"D0", "M1", "M2"});
        CHECK(problem.message.find("47 m2") != std::string::npos); // both long spans
        CHECK(sharing.strips.size() == 1);
        const LevelLoads loads = f.load(sharing);
        const double r = (m2 - m1) / 0.25;
        CHECK(even_line(loads, 0) == Approx(3 + m1 / 6).epsilon(1e-8));
        CHECK(even_line(loads, 1) == Approx(3.125 - m1 / 6 + r).epsilon(1e-8));
        CHECK(even_line(loads, 2) == Approx(3 - m2 / 5.75 - r).epsilon(1e-8));
        CHECK(even_line(loads, 3) == Approx(2.875 + m2 / 5.75).epsilon(1e-8));
        check_kept(loads);
    }
    // A load on the first span alone lifts the pair's far beam by many times what it presses on its own end.
    HandFramed f = floor_on({0, 6, 6.25, 12}, 0, 12, Share::continuous);
    f.add_area_load("live", 1, Ring{{0, 0}, {6, 0}, {6, 4}, {0, 4}});
    CHECK(even_line(f.load(f.share()), 2) < -15);
    CHECK(floor_on({0, 6, 6.25, 12}, 0, 12, Share::lever).share().problems.empty());
    CHECK(floor_on({0, 4, 4.21}, 0, 4.21, Share::continuous).share().problems.empty());
}

TEST_CASE("continuous beside a skew girder: where a span dies out the strip is cut, and shared by lever") {
    // The girder on the left closes in on the joist at x = 2, from 2 m to nothing.
    for (const Motion& move : motions) {
        HandFramed f;
        f.add_member(move({0, 0}), move({2, 4}));
        for (const double x : {2.0, 4.0, 6.0}) {
            f.add_member(move({x, 0}), move({x, 4}));
        }
        f.add_deck(move(Ring{{0, 0}, {6, 0}, {6, 4}, {2, 4}}), move.degrees);
        f.level().decks[0].share = Share::continuous;
        f.add_area_load("live", 3);
        const Sharing sharing = f.share();
        REQUIRE(sharing.problems.size() == 1);
        CHECK(sharing.problems[0].code == ProblemCode::strip_by_lever);
        CHECK(sharing.problems[0].severity == Severity::warning);
        CHECK(sharing.problems[0].ids == std::vector<std::string>{"D0", "M0", "M1"});
        CHECK(sharing.problems[0].message.find("0.01 m2") != std::string::npos); // 0.1 x 0.2 / 2
        // The span is 2 - y / 2: a twentieth of 2 m at y = 3.8. Beyond, the rest runs on as one beam.
        struct Row {
            double from, to;
            std::size_t carriers;
            Share share;
        };
        std::vector<Row> rows;
        for (std::uint32_t s = 0; s < sharing.strips.size(); ++s) {
            const Strip& strip = sharing.strips[s];
            rows.push_back({strip.from, strip.to, sharing.strip_carriers[s].size(), strip.share});
        }
        std::sort(rows.begin(), rows.end(), [](const Row& l, const Row& r) {
            return std::pair(l.from, l.carriers) < std::pair(r.from, r.carriers);
        });
        REQUIRE(rows.size() == 3);
        CHECK(rows[0].carriers == 4);
        CHECK(rows[0].to - rows[0].from == Approx(3.8));
        CHECK(rows[0].share == Share::continuous);
        CHECK(rows[1].carriers == 2);
        CHECK(rows[1].to - rows[1].from == Approx(0.2));
        CHECK(rows[1].share == Share::lever);
        CHECK(rows[2].carriers == 3);
        CHECK(rows[2].share == Share::continuous);
        const LevelLoads loads = f.load(sharing);
        check_kept(loads);
        // At y = 3.9 the joist at 2 takes half of the wedge of 0.05 m and 3/8 of the span beside it.
        for (const CarrierLine& line : loads.lines[1]) {
            if (line.piece.from <= 3.9 && 3.9 < line.piece.to) {
                CHECK(line.piece.at(3.9) == Approx(3 * (0.025 + 0.75)).epsilon(1e-8));
            }
        }
    }
}

TEST_CASE("a wedge between pieces of beams, thin slices of it even to `snap`, is a wedge all the same") {
    HandFramed f;
    f.plan.settings.snap = 0.001;
    f.add_member({1.6, 0}, {1.984, 3.84});
    for (int i = 0; i < 40; ++i) { // over each of these the gap changes by 0.4 mm
        const double x = 1.984 + 0.0004 * i;
        f.add_member({x, 10 * (x - 1.6)}, {i < 39 ? x + 0.0004 : 2, i < 39 ? 10 * (x + 0.0004 - 1.6) : 4});
    }
    f.add_member({2, 0}, {2, 4});
    f.add_member({6, 0}, {6, 4});
    f.add_deck({{1.6, 0}, {6, 0}, {6, 4}, {2, 4}}, 0);
    f.level().decks[0].share = Share::continuous;
    f.add_area_load("live", 1);
    const Sharing sharing = f.share();
    REQUIRE(sharing.problems.size() == 1);
    CHECK(sharing.problems[0].code == ProblemCode::strip_by_lever);
    const LevelLoads loads = f.load(sharing);
    for (const CarrierLine& line : loads.lines.items()) {
        CHECK(std::abs(line.piece.at(line.piece.to)) < 15); // no couple of a dying span
    }
    check_kept(loads);
}

TEST_CASE("many joists that end on skew girders: strips and lines grow as the joists do") {
    std::vector<double> strips;
    std::vector<double> lines;
    for (const int joists : {100, 200}) {
        HandFramed f;
        const double end = 0.5 * (joists + 1);
        f.add_member({0, 0}, {end, 5}, Role::girder);
        f.add_member({0, 8}, {end, 13}, Role::girder);
        for (int i = 0; i <= joists + 1; ++i) {
            const double x = 0.5 * i;
            f.add_member({x, 5 * x / end}, {x, 8 + 5 * x / end});
        }
        f.add_deck({{0, 0}, {end, 5}, {end, 13}, {0, 8}}, 0);
        f.level().decks[0].share = Share::continuous;
        f.add_area_load("live", 2);
        const Sharing sharing = f.share();
        CHECK(!has_errors(sharing.problems));
        const LevelLoads loads = f.load(sharing);
        check_kept(loads);
        strips.push_back(static_cast<double>(sharing.strips.size()) / joists);
        lines.push_back(static_cast<double>(loads.lines.items().size()) / joists);
    }
    CHECK(strips[1] < 12);
    CHECK(strips[1] < 1.1 * strips[0]);
    CHECK(lines[1] < 1.5 * lines[0]); // the ends of the row feel less
    MESSAGE(strips[0] << " and " << strips[1] << " strips a joist, " << lines[0] << " and " << lines[1]
                      << " lines");
}

TEST_CASE("a point load on a continuous strip reaches the carriers that feel it, and keeps its place") {
    std::vector<double> joists;
    for (int i = 0; i < 300; ++i) {
        joists.push_back(0.6 * i);
    }
    HandFramed f = floor_on(joists, 0, joists.back(), Share::continuous);
    f.level().point_loads.push_back({"live", 1, {90.2, 1}, {}, {}});
    const LevelLoads loads = f.load(f.share());
    double force = 0;
    double moment = 0;
    double least = 1;
    for (std::uint32_t c = 0; c < joists.size(); ++c) {
        for (const CarrierPoint& point : loads.points[c]) {
            force += point.p;
            moment += point.p * (joists[c] - 90.2);
            least = std::min(least, std::abs(point.p));
        }
    }
    CHECK(loads.points.items().size() < 52);
    CHECK(loads.points.items().size() > 40);
    CHECK(least > 2e-15);
    MESSAGE(loads.points.items().size() << " points, the least " << least);
    CHECK(force == Approx(1).epsilon(1e-15));
    CHECK(std::abs(moment) < 1e-14);
}

TEST_CASE("curves that are fitted tell what they are off by, and bounds that add up on a carrier are added") {
    // Two skew carriers, line loads across the bay: the part of the high one is rational.
    for (const Share share : {Share::half, Share::lever}) {
        HandFramed f;
        f.add_member({0, 0}, {-1, 4});
        f.add_member({4, 0}, {7, 4});
        f.add_deck({{0, 0}, {4, 0}, {7, 4}, {-1, 4}}, 0);
        f.level().decks[0].share = share;
        f.level().line_loads.push_back({"live", 5, 5, {1, 0.5}, {3, 3.5}, {}, {}});
        const double one = f.load(f.share()).curve_error;
        CHECK(one > 0);
        f.level().line_loads.push_back({"live", 5, 5, {1, 0.5}, {3, 3.5}, {}, {}});
        CHECK(f.load(f.share()).curve_error == one); // another source, another line
        f.level().line_loads.clear();
    }
    HandFramed f;
    f.add_member({0, 0}, {-1, 4});
    f.add_member({4, 0}, {7, 4});
    f.add_deck({{0, 0}, {4, 0}, {7, 4}, {-1, 4}}, 0);
    f.level().decks[0].share = Share::lever;
    f.add_area_load("live", 3, Ring{{1, 0}, {2, 0}, {2, 4}, {1, 4}});
    const double one = f.load(f.share()).curve_error;
    CHECK(one > 0);
    f.level().area_loads.clear();
    f.add_area_load("live", 4, Ring{{2.5, 0}, {3, 0}, {3, 4}, {2.5, 4}});
    const double other = f.load(f.share()).curve_error;
    CHECK(other > 0);
    f.add_area_load("live", 3, Ring{{1, 0}, {2, 0}, {2, 4}, {1, 4}}); // of one deck and case: they add up
    CHECK(f.load(f.share()).curve_error > 1.05 * std::max(one, other));
    CHECK(f.load(f.share()).curve_error <= (1 + 1e-12) * (one + other));
}

TEST_CASE("a fit's bound holds at every place, for each function on pieces of its own") {
    const std::uint64_t seed = support::seed_of_run(909);
    MESSAGE("seed " << seed);
    support::Random random(seed);
    double tightest = 1e9;
    for (int i = 0; i < 300; ++i) {
        CAPTURE(i);
        const double a = random.between(0.02, 3);
        const double b = random.between(-4, 4);
        const double c = random.between(-4, 4);
        const auto large = [&](double x) { return (1 + b * x + c * x * x) / (a + x); };
        const auto small = [&](double x) { return 1e-6 / (a + x) + 1e-7 * x; };
        const QuarticFit fit = fit_quartics(2, [&](double x, std::span<double> values) {
            values[0] = large(x);
            values[1] = small(x);
        });
        std::array<std::size_t, 2> pieces{};
        std::array<double, 2> reached{};
        for (const QuarticFit::Piece& piece : fit.pieces) {
            CHECK(piece.from == reached[piece.function]);
            reached[piece.function] = piece.to;
            ++pieces[piece.function];
            double off = 0;
            for (int k = 0; k <= 400; ++k) {
                const double y = k / 400.0;
                const double x = (1 - y) * piece.from + y * piece.to;
                double value = 0;
                for (std::size_t n = piece.c.size(); n-- > 0;) {
                    value = value * y + piece.c[n];
                }
                off = std::max(off, std::abs(value - (piece.function == 0 ? large(x) : small(x))));
            }
            CHECK(off <= piece.error + 1e-14 * (1 + 9 / a));
            if (off > 1e-11) {
                tightest = std::min(tightest, piece.error / off);
            }
        }
        CHECK(reached[0] == 1);
        CHECK(reached[1] == 1);
        CHECK(pieces[1] <= pieces[0]);
    }
    CHECK(tightest < 2); // a bound, and no wild guess
}

TEST_CASE("an overhang in front of two back spans is cut at their level") {
    HandFramed f;
    f.add_member({6, 0}, {6, 4});
    f.add_member({0, 0}, {0, 4});
    f.add_member({3, 0}, {3, 1.5});
    f.add_deck({{0, 0}, {7, 0}, {7, 4}, {0, 4}}, 0);
    f.level().decks[0].share = Share::lever;
    f.add_area_load("live", 2, Ring{{6, 0}, {7, 0}, {7, 4}, {6, 4}});
    const Sharing sharing = f.share();
    CHECK(sharing.problems.empty());
    const LevelLoads loads = f.load(sharing);
    // w / 2 over the back span, per metre: 1 / 3 up to 1.5 m, 1 / 6 beyond.
    CHECK(support::total(loads.lines[2], live) == Approx(-1.5 / 3).epsilon(1e-12));
    CHECK(support::total(loads.lines[1], live) == Approx(-2.5 / 6).epsilon(1e-12));
    CHECK(support::total(loads.lines[0], live) == Approx(8 + 1.5 / 3 + 2.5 / 6).epsilon(1e-12));
    check_kept(loads);
}

TEST_CASE("a line load between skew carriers is fitted under halves too, and says within what") {
    HandFramed f;
    f.add_member({0, 0}, {-1, 4});
    f.add_member({4, 0}, {6, 4});
    f.add_deck({{0, 0}, {4, 0}, {6, 4}, {-1, 4}}, 0);
    f.level().line_loads.push_back({"live", 3, 3, {1, 0.5}, {3, 3.5}, {}, {}});
    const LevelLoads loads = f.load(f.share());
    CHECK(loads.curve_error > 0);
    CHECK(loads.curve_error < 1e-8);
    // At half height the span runs from -0.5 to 5, the load stands at 2; w is per metre of the load.
    const double station = std::hypot(1, 4) / 2;
    const double rate = std::hypot(2, 3) / 3 / (std::hypot(1, 4) / 4);
    double w = 0;
    for (const CarrierLine& line : loads.lines[0]) {
        w += line.piece.from <= station && station < line.piece.to ? line.piece.at(station) : 0;
    }
    CHECK(std::abs(w - 3 * rate * 3 / 5.5) <= loads.curve_error);
}

TEST_CASE("lever on skew carriers: an even load on whole bays stays linear, one on a part is fitted") {
    HandFramed f;
    f.add_member({0, 0}, {-1, 4});
    f.add_member({4, 0}, {6, 4});
    f.add_deck({{0, 0}, {4, 0}, {6, 4}, {-1, 4}}, 0);
    f.level().decks[0].share = Share::lever;
    f.add_area_load("live", 1);
    const Sharing sharing = f.share();
    LevelLoads loads = f.load(sharing);
    CHECK(loads.curve_error == 0);
    REQUIRE(loads.lines[0].size() == 1);
    const LinePiece line = loads.lines[0][0].piece;
    const double slope = std::hypot(1, 4) / 4; // metres of carrier a metre across
    CHECK(line.c[0] == Approx(2 / slope).epsilon(1e-12));
    CHECK(line.at(line.to) == Approx(3.5 / slope).epsilon(1e-12));
    CHECK(line.c[2] == 0);
    check_kept(loads);

    f.add_area_load("live", 3, Ring{{1, 0}, {2, 0}, {2, 4}, {1, 4}});
    loads = f.load(sharing);
    CHECK(loads.curve_error > 0);
    CHECK(loads.curve_error < 1e-8);
    check_kept(loads);
    // At half height the span runs from -0.5 to 5: the zone's middle lies at 2 of 5.5.
    double half = 0;
    for (const CarrierLine& one : loads.lines[1]) {
        const double s = std::hypot(2, 4) / 2;
        if (one.piece.from <= s && s < one.piece.to) {
            half += one.piece.at(s);
        }
    }
    const double along = std::hypot(2, 4) / 4;
    CHECK(half * along == Approx(5.5 / 2 + 3 * 2 / 5.5).epsilon(1e-9));
}

TEST_CASE("loads that stand on strips follow the strips") {
    SUBCASE("a point on a lever's overhang lifts the far carrier") {
        HandFramed f = floor_on({0, 6}, 0, 8, Share::lever);
        f.level().point_loads.push_back({"live", 9, {8, 1}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        REQUIRE(loads.points[0].size() == 1);
        CHECK(loads.points[0][0].p == Approx(-3));
        CHECK(loads.points[0][0].station == Approx(1));
        CHECK(loads.points[1][0].p == Approx(12));
    }
    SUBCASE("a point in the middle of the first of two equal spans: 13/32, 11/16, -3/32") {
        // Common beam tables.
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
        f.level().point_loads.push_back({"live", 32, {2, 3}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        CHECK(loads.points[0][0].p == Approx(13));
        CHECK(loads.points[1][0].p == Approx(22));
        CHECK(loads.points[2][0].p == Approx(-3));
        CHECK(loads.points[2][0].station == Approx(3));
    }
    SUBCASE("a line across the strips puts lines on the carriers") {
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
        f.level().line_loads.push_back({"live", 32, 32, {2, 1}, {2, 3}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        REQUIRE(loads.lines[0].size() == 1);
        CHECK(loads.lines[0][0].piece.from == Approx(1));
        CHECK(loads.lines[0][0].piece.to == Approx(3));
        CHECK(loads.lines[0][0].piece.c[0] == Approx(13));
        CHECK(loads.lines[2][0].piece.c[0] == Approx(-3));
        CHECK(loads.points[0].empty());
        check_kept(loads);
    }
    SUBCASE("a line along the strips puts points on the carriers") {
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
        f.level().line_loads.push_back({"live", 1, 1, {0, 2.5}, {8, 2.5}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        REQUIRE(loads.points[1].size() == 1);
        CHECK(loads.points[0][0].p == Approx(1.5));
        CHECK(loads.points[1][0].p == Approx(5));
        CHECK(loads.points[2][0].p == Approx(1.5));
        CHECK(loads.points[1][0].station == Approx(2.5));
        check_kept(loads);
    }
    SUBCASE("a line along the strips but for millimetres keeps its moment all the same") {
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
        f.level().line_loads.push_back({"live", 1, 1, {0.2, 2.5}, {3.6, 2.504}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        // Of the far carrier's part the centre lies within the line; it is lifted.
        REQUIRE(loads.points[2].size() == 1);
        CHECK(loads.points[2][0].p < 0);
        check_kept(loads);
    }
    SUBCASE("a part that pushes both ways is two points") {
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
        f.level().line_loads.push_back({"live", 1, 1, {4, 2.5}, {12, 2.504}, {}, {}});
        f.level().decks[0].outline = {{0, 0}, {12, 0}, {12, 4}, {0, 4}};
        const LevelLoads loads = f.load(f.share());
        check_kept(loads);
        // The far carrier: -1/16 x 4 from the span, 1/4 x 2 x 8 / 4 from the overhang.
        REQUIRE(loads.points[0].size() == 2);
        CHECK(loads.points[0][0].p + loads.points[0][1].p == Approx(-0.25 + 0.5));
    }
    SUBCASE("a line from corner to corner over lever spans is shared by quadratics") {
        HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::lever);
        f.level().line_loads.push_back({"live", 1, 3, {0.5, 0.5}, {7.5, 3.5}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        CHECK(loads.curve_error == 0);
        check_kept(loads);
    }
    SUBCASE("and over continuous spans by quartics") {
        HandFramed f = floor_on({0, 3, 8}, 0, 9, Share::continuous);
        f.level().line_loads.push_back({"live", 1, 3, {0.5, 0.5}, {8.5, 3.5}, {}, {}});
        const LevelLoads loads = f.load(f.share());
        CHECK(loads.curve_error == 0);
        check_kept(loads);
    }
}

TEST_CASE("continuous: a zone with a slanting border is an exact quartic") {
    HandFramed f = floor_on({0, 4, 8}, 0, 8, Share::continuous);
    f.add_area_load("live", 1, Ring{{0, 0}, {1, 0}, {3, 4}, {0, 4}});
    const LevelLoads loads = f.load(f.share());
    CHECK(loads.curve_error == 0);
    check_kept(loads);
    REQUIRE(loads.lines[2].size() == 1);
    // The far carrier takes -x (1 - x^2) / 4 of a load at fraction x of the first span; a band up to fraction
    // z brings 4 x the integral, z^4 / 4 - z^2 / 2, over four.
    for (const double s : {0.0, 1.0, 2.5, 4.0}) {
        const double z = (1 + s / 2) / 4;
        CHECK(loads.lines[2][0].piece.at(s) == Approx(z * z * z * z / 4 - z * z / 2).epsilon(1e-11));
    }
}

TEST_CASE("what the drawing is off by goes to a point of the nearest carrier, and its way is told") {
    for (const Share share : {Share::lever, Share::continuous}) {
        HandFramed f;
        f.add_member({0, 0}, {0, 5});
        f.add_member({2, 0}, {2, 5});
        f.add_member({4, 0}, {4, 5});
        // The edge rises by 3 mm, within `snap`, from joist to joist and past the ends of all.
        f.add_deck({{0, 0}, {4, 0}, {4, 5}, {2.9, 5.003}, {0, 5}}, 0);
        f.level().decks[0].share = share;
        f.add_area_load("live", 2);
        f.add_area_load("live", 1, Ring{{3, 4}, {5, 4}, {5, 6}, {3, 6}});
        const Sharing sharing = f.share();
        CHECK(sharing.problems.empty());
        const LevelLoads loads = f.load(sharing);
        const DeckBalance& row = balance_of(loads, 0, live);
        CHECK(row.shared.force == Approx(row.applied.force).epsilon(1e-14));
        CHECK(row.moved > 0);
        CHECK(row.moved < 0.2);               // kNm; of some 40 kN on spans of 2 m
        REQUIRE(loads.points[1].size() == 1); // of the middle joist, the nearest
        CHECK(loads.points[1][0].station == Approx(5).epsilon(1e-3));
        CHECK(loads.points[1][0].p > 0);
        CHECK(check_force(f.plan, f.framing, 0, sharing, loads).empty());
        CHECK(check_moment(f.plan, f.framing, 0, sharing, loads).empty());
    }
}

TEST_CASE("a wedge of deck on two joists that meet is held by both up to its tip") {
    HandFramed f;
    f.add_member({0, 0}, {2, 4});
    f.add_member({4, 0}, {2, 4});
    f.add_deck({{0, 0}, {4, 0}, {2, 4}}, 0);
    f.add_area_load("live", 3);
    f.level().point_loads.push_back({"live", 1, {2, 4 - 1e-12}, {}, {}});
    for (const Share share : {Share::lever, Share::continuous}) {
        f.level().decks[0].share = share;
        const Sharing sharing = f.share();
        CHECK(sharing.problems.empty());
        const LevelLoads loads = f.load(sharing);
        CHECK(support::total(loads.lines[0], live) == Approx(12).epsilon(1e-12));
        CHECK(loads.lines[0][0].piece.at(std::hypot(2, 4)) == Approx(0).epsilon(1e-12));
        check_kept(loads);
    }
}

TEST_CASE("a bay that begins beside another cuts its chain there and joins it") {
    std::vector<Bay> bays(3);
    bays[0].to = 3;
    bays[1].from = 1;
    bays[1].to = 2;
    bays[2].to = 3;
    const std::vector<BayMarks> marks{{Gap::edge, 7}, {7, Gap::edge}, {Gap::edge, 4}};
    struct Found {
        std::vector<std::uint32_t> bays;
        double from, to;
        bool operator==(const Found&) const = default;
    };
    std::vector<Found> found;
    for_chains(bays, marks, [&](const Chain& chain) {
        CHECK(chain.core == 0);
        CHECK(chain.core_size == chain.bays.size());
        found.push_back({{chain.bays.begin(), chain.bays.end()}, chain.from, chain.to});
    });
    const std::vector<Found> expected{{{0}, 0, 1}, {{0, 1}, 1, 2}, {{0}, 2, 3}, {{2}, 0, 3}};
    CHECK(std::is_permutation(found.begin(), found.end(), expected.begin(), expected.end()));
}
