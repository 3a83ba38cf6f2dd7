#include "report/drawing_marks.hpp"
#include "report/region_tints.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <cmath>

using namespace runnel;
using support::takedown_of;
using support::written;

TEST_CASE("regions that lie side by side have different tints") {
    const Takedown takedown = takedown_of(support::footbridge);
    const std::vector<Region> regions = regions_of(takedown.levels[0].sharing);
    const std::vector<std::uint8_t> tints = choose_tints(regions);
    REQUIRE(tints.size() == 3);
    CHECK(tints[0] != tints[1]);
    CHECK(tints[1] != tints[2]);
}

TEST_CASE("a drawing is to scale, with y upward") {
    const Takedown takedown = takedown_of(support::footbridge);
    const std::string svg = written([&](const TextSink& sink) {
        draw_level(takedown.plan, takedown.framing, 0, takedown.levels[0].sharing, {}, sink);
    });
    // 8 m are 1000 px: 125 px a metre; the north girder stands 250 px above the south one.
    CHECK(svg.find("<line class=\"member girder\" data-id=\"north\" x1=\"60\" y1=\"106\" x2=\"1060\" "
                   "y2=\"106\"/>") != std::string::npos);
    CHECK(svg.find("<line class=\"member girder\" data-id=\"south\" x1=\"60\" y1=\"356\" x2=\"1060\" "
                   "y2=\"356\"/>") != std::string::npos);
    CHECK(svg.find("<path class=\"region\" data-deck=\"boards\" data-carrier=\"b\"") != std::string::npos);
}

TEST_CASE("a level with nothing on it is drawn as an empty sheet") {
    Takedown takedown = takedown_of(support::footbridge);
    takedown.framing.levels[0] = {};
    const std::string svg = written(
        [&](const TextSink& sink) { draw_level(takedown.plan, takedown.framing, 0, Sharing{}, {}, sink); });
    CHECK(svg.find("nan") == std::string::npos);
    CHECK(svg.find("inf") == std::string::npos);
}

TEST_CASE("grid lines are drawn as far as they are near, with their ids, and spans as arrows") {
    Takedown takedown = takedown_of(support::footbridge);
    takedown.plan.grid = {{"A", {0, -500}, {0, 500}, {}}, {"far", {90, 0}, {90, 5}, {}}};
    const std::string svg = written([&](const TextSink& sink) {
        draw_level(takedown.plan, takedown.framing, 0, takedown.levels[0].sharing, {}, sink);
    });
    CHECK(svg.find("<line class=\"grid\" data-id=\"A\"") != std::string::npos);
    CHECK(svg.find(">A</text>") != std::string::npos);
    CHECK(svg.find("data-id=\"far\"") == std::string::npos);
    CHECK(svg.find("<path class=\"span\" data-deck=\"boards\"") != std::string::npos);
    // Grown by six hundredths of 8 m at both sides only: still 125 px a metre.
    CHECK(svg.find("data-id=\"north\" x1=\"60\"") != std::string::npos);
}

TEST_CASE("labels stay on the sheet") {
    CHECK(kept_on_sheet({100, 100}, 50, 10, 0, {200, 200}) == Point{100, 100});
    CHECK(kept_on_sheet({195, 3}, 50, 10, 0, {200, 200}).x <= 175);
    CHECK(kept_on_sheet({195, 3}, 50, 10, 0, {200, 200}).y >= 5);
    CHECK(kept_on_sheet({100, 190}, 50, 10, std::acos(0.0), {200, 200}).y <= 175);
    CHECK(kept_on_sheet({10, 10}, 900, 10, 0, {200, 200}).x == 100);
}

TEST_CASE("a drawing carries the program's mark near its top") {
    const Takedown takedown = takedown_of(support::footbridge);
    const std::string svg = written([&](const TextSink& sink) {
        draw_level(takedown.plan, takedown.framing, 0, takedown.levels[0].sharing, {}, sink);
    });
    CHECK(svg.find("<!-- runnel ") < 512);
}
