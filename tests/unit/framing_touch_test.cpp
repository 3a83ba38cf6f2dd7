#include "support/framing_support.hpp"

#include <framing/members.hpp>
#include <framing/overlap.hpp>
#include <framing/touch.hpp>

#include <doctest/doctest.h>

using namespace runnel;
using namespace framing_support;

namespace {
constexpr double reach = 0.005;
}

TEST_CASE("axes touch with their ends before their insides, and either way round") {
    const Axis girder({0, 0}, {9, 0});
    struct Row {
        std::string name;
        Axis other;
        bool touches;
        double station, other_station;
    };
    for (const Row& row : {
             Row{"crossing square", {{3, -2}, {3, 2}}, true, 3, 2},
             Row{"crossing askew", {{2, -1}, {4, 1}}, true, 3, std::sqrt(2.0)},
             Row{"ending on it", {{3, 0}, {3, 2}}, true, 3, 0},
             Row{"ending within reach short of it", {{3, 0.004}, {3, 2}}, true, 3, 0},
             Row{"ending too short", {{3, 0.006}, {3, 2}}, false, 0, 0},
             Row{"end to end on one line", {{9, 0}, {12, 0}}, true, 9, 0},
             Row{"end to end with a gap", {{9.1, 0}, {12, 0}}, false, 0, 0},
             Row{"corner", {{9, 3}, {9, 0.003}}, true, 9, 2.997},
             Row{"parallel beside it", {{0, 1}, {9, 1}}, false, 0, 0},
             Row{"lines cross beyond its end", {{10, -1}, {10, 1}}, false, 0, 0},
         }) {
        CAPTURE(row.name);
        const auto touch = touch_of(girder, row.other, reach);
        const auto back = touch_of(row.other, girder, reach);
        REQUIRE(touch.has_value() == row.touches);
        REQUIRE(back.has_value() == row.touches);
        if (touch) {
            CHECK(touch->station == doctest::Approx(row.station));
            CHECK(touch->other_station == doctest::Approx(row.other_station));
            CHECK(back->station == doctest::Approx(row.other_station));
            CHECK(back->other_station == doctest::Approx(row.station));
        }
    }
}

TEST_CASE("lying along means side by side within reach over more than reach") {
    const Axis girder({0, 0}, {9, 0});
    struct Row {
        std::string name;
        Axis other;
        double from, to; ///< 0, 0: not along
    };
    for (const Row& row : {
             Row{"the same axis", {{0, 0}, {9, 0}}, 0, 9},
             Row{"a part of it, the other way", {{7, 0.004}, {2, -0.004}}, 2, 7},
             Row{"over its end", {{8, 0}, {12, 0}}, 8, 9},
             Row{"end to end", {{9, 0}, {12, 0}}, 0, 0},
             Row{"overlapping by less than reach", {{8.996, 0}, {12, 0}}, 0, 0},
             Row{"crossing square", {{3, -2}, {3, 2}}, 0, 0},
             Row{"leaving at a flat angle", {{0, 0}, {9, 0.1}}, 0, 0},
             Row{"beside it", {{0, 0.006}, {9, 0.006}}, 0, 0},
             Row{"short and slanting across it", {{3, -0.004}, {3.012, 0.004}}, 3, 3.012},
         }) {
        CAPTURE(row.name);
        const auto stretch = stretch_along(girder, row.other, reach);
        const auto back = stretch_along(row.other, girder, reach);
        CHECK(stretch.has_value() == (row.to > 0));
        CHECK(back.has_value() == (row.to > 0));
        if (stretch && back) {
            CHECK(stretch->from == doctest::Approx(row.from));
            CHECK(stretch->to == doctest::Approx(row.to));
            CHECK(back->length() == doctest::Approx(row.to - row.from).epsilon(0.2));
        }
    }
}

TEST_CASE("a piece of joist is inside an opening only where all of it is") {
    // An opening in the shape of an L, so that a piece with its middle inside may still leave it.
    const Ring l{{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}};
    CHECK(lies_inside({{1, 0}, {1, 6}}, l, reach));
    CHECK(lies_inside({{5, 0}, {5, 3}}, l, reach));
    CHECK_FALSE(lies_inside({{5, 0}, {5, 6}}, l, reach));
    CHECK_FALSE(lies_inside({{0, 0}, {0, 6}}, l, reach));    // along its edge: a trimmer
    CHECK_FALSE(lies_inside({{1, -0.5}, {1, 5}}, l, reach)); // sticks out
    CHECK_FALSE(lies_inside({{7, 0}, {7, 6}}, l, reach));
}
