#include "frame/beam.hpp"

#include <doctest/doctest.h>

#include <vector>

using namespace runnel;

namespace {

struct Load {
    double from = 0, to = 0, start = 0, end = 0;
};
struct Point1 {
    double station = 0, p = 0;
};
struct Answer {
    bool stands = false;
    std::vector<double> reactions, moments;
};

Answer answer(const Beam& beam, const std::vector<Load>& lines, const std::vector<Point1>& points) {
    Answer result;
    const auto influence = BeamInfluence::of(beam);
    result.stands = influence.has_value();
    if (influence) {
        result.reactions.assign(beam.supports.size(), 0);
        result.moments.assign(beam.supports.size(), 0);
        for (const Load& load : lines) {
            const double slope = (load.end - load.start) / (load.to - load.from);
            influence->add_line({load.from, load.to, {load.start, slope, 0, 0, 0}}, result.reactions,
                                result.moments);
        }
        for (const Point1& point : points) {
            influence->add_point(point.station, point.p, result.reactions, result.moments);
        }
    }
    return result;
}

void check_values(const std::vector<double>& found, const std::vector<double>& expected) {
    REQUIRE(found.size() == expected.size());
    for (std::size_t i = 0; i < found.size(); ++i) {
        INFO("value ", i);
        CHECK(found[i] == doctest::Approx(expected[i]).epsilon(1e-13).scale(10));
    }
}

} // namespace

TEST_CASE("a simple span shares a point load by the lever") {
    check_values(answer({8, {{0}, {8}}, {}, {}}, {}, {{2, 12}}).reactions, {9, 3});
}

TEST_CASE("a load on the overhang alone lifts the far bearing") {
    // L = 6, a = 2, w = 10 on the overhang: R1 = -10 * 2 * 1 / 6, R2 = 20 + 3.333.
    check_values(answer({8, {{0}, {6}}, {}, {}}, {{6, 8, 10, 10}}, {}).reactions, {-20.0 / 6, 20 + 20.0 / 6});
}

TEST_CASE("overhangs at both ends of two bearings follow statics") {
    // Bearings at 1 and 5, beam of 8, w = 2: R2 = 16 * (4 - 1) / 4 = 12.
    check_values(answer({8, {{1}, {5}}, {}, {}}, {{0, 8, 2, 2}}, {}).reactions, {4, 12});
}

TEST_CASE("two equal spans under uniform load: 3/8, 10/8, 3/8") {
    check_values(answer({10, {{0}, {5}, {10}}, {}, {}}, {{0, 10, 8, 8}}, {}).reactions, {15, 50, 15});
}

TEST_CASE("a propped cantilever under uniform load: 5/8 and 1/8 w l2 at the built-in end, 3/8 at the prop") {
    const Answer found = answer({4, {{0, true}, {4}}, {}, {}}, {{0, 4, 8, 8}}, {});
    check_values(found.reactions, {20, 12});
    check_values(found.moments, {16, 0});
}

TEST_CASE("a cantilever on one built-in bearing carries all by it") {
    const Answer rising = answer({3, {{0, true}}, {}, {}}, {{0, 3, 2, 2}}, {{3, 5}});
    check_values(rising.reactions, {11});
    check_values(rising.moments, {9 + 15});
    const Answer falling = answer({3, {{3, true}}, {}, {}}, {{0, 3, 2, 2}}, {{0, 5}});
    check_values(falling.reactions, {11});
    check_values(falling.moments, {-24});
}

TEST_CASE("a beam built in at both ends under a point load: P a b2 / l2") {
    // P = 20 at 2 of 5: 14.4 and 9.6, R1 = P b2 (3 a + b) / l3 = 12.96.
    const Answer found = answer({5, {{0, true}, {5, true}}, {}, {}}, {}, {{2, 20}});
    check_values(found.moments, {14.4, -9.6});
    check_values(found.reactions, {12.96, 7.04});
}

TEST_CASE("a hinged beam with a drop-in piece follows statics") {
    // Bearings 0, 6, 12; a hinge 2 beyond the middle bearing. The piece from 8 to 12 is a simple span of 4
    // with w = 3: 6 at each end. The hinge's 6 and 3 x 2 on the cantilever: R2 = (6 x 8 + 3 x 8 x 4) / 6
    // = 24.
    check_values(answer({12, {{0}, {6}, {12}}, {8}, {}}, {{0, 12, 3, 3}}, {}).reactions, {6, 24, 6});
}

TEST_CASE("a hinge over every inner bearing parts the beam into simple spans") {
    check_values(answer({12, {{0}, {4}, {12}}, {4}, {}}, {{0, 4, 3, 3}, {4, 12, 1, 1}}, {}).reactions,
                 {6, 10, 4});
}

TEST_CASE("hinges at the beam's own ends change nothing") {
    check_values(answer({10, {{0}, {5}, {10}}, {0, 10}, {}}, {{0, 10, 8, 8}}, {}).reactions, {15, 50, 15});
    check_values(answer({10, {{2}, {8}}, {0, 10}, {}}, {}, {{0, 6}}).reactions, {8, -2});
}

TEST_CASE("a hinge at a built-in end frees it") {
    const Answer found = answer({8, {{0, true}, {8}}, {0}, {}}, {{0, 8, 1, 1}}, {});
    check_values(found.reactions, {4, 4});
    check_values(found.moments, {0, 0});
}

TEST_CASE("a built-in overhang is held by its bearing, not by the back span") {
    // Built in at 2, pinned at 8; P = 9 at the free end 0 bends nothing beyond the bearing.
    const Answer found = answer({8, {{2, true}, {8}}, {}, {}}, {}, {{0, 9}});
    check_values(found.reactions, {9, 0});
    check_values(found.moments, {-18, 0});
}

TEST_CASE("a stiffer span draws more of the load") {
    // Two spans of 15 and 20 with I = 300 and 600: reactions by the three-moment equation,
    // (15/300 + 20/600) 2 M = w1 15^3 / (4 x 300) + w2 20^3 / (4 x 600) with both ends pinned.
    const double m = (240 * 3375.0 / 1200 + 250 * 8000.0 / 2400) / (2 * (15.0 / 300 + 20.0 / 600));
    check_values(answer({35, {{0}, {15}, {35}}, {}, {300, 600}}, {{0, 15, 240, 240}, {15, 35, 250, 250}}, {})
                     .reactions,
                 {1800 - m / 15, 1800 + m / 15 + 2500 + m / 20, 2500 - m / 20});
}

TEST_CASE("mechanisms are refused") {
    CHECK_FALSE(answer({8, {}, {}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({8, {{4}}, {}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({8, {{0}, {8}}, {4}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({8, {{0}, {6}}, {6}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({8, {{0}, {6}}, {7}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({8, {{2, true}, {8}}, {2}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({12, {{0}, {4}, {12}}, {5, 7, 10}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({12, {{0}, {4}, {12}}, {5, 7}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({12, {{0}, {12}, {12}}, {}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({3, {{0, true}}, {0}, {}}, {}, {}).stands);
    CHECK_FALSE(answer({3, {{0, true}}, {1}, {}}, {}, {}).stands);
    CHECK(answer({12, {{0, true}, {12}}, {5}, {}}, {}, {}).stands);
    CHECK(answer({12, {{0, true}, {12, true}}, {5, 7}, {}}, {}, {}).stands);
    CHECK(answer({12, {{0}, {4}, {8}, {12}}, {5, 7}, {}}, {}, {}).stands);
}
