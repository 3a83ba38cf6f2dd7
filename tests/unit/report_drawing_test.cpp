#include "report/drawing_marks.hpp"
#include "report/drawing_places.hpp"
#include "report/region_tints.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
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

TEST_CASE("regions that touch along part of an edge have different tints, those of one carrier the same") {
    const auto square = [](double x, double y, double side) {
        return std::vector<Ring>{{{x, y}, {x + side, y}, {x + side, y + side}, {x, y + side}}};
    };
    std::vector<Region> regions;
    for (std::uint32_t r = 0; r < 8; ++r) {
        regions.push_back({0, r, 1, {}, square(10.0 * r, 50, 1)});
    }
    // The eighth would get the tint of the first: it stands on its edge, no corner in common.
    regions[0].rings = square(0, 0, 4);
    regions[7].rings = square(1, 4 + 1e-15, 2);
    const std::vector<std::uint8_t> tints = choose_tints(regions);
    CHECK(tints[0] != tints[7]);
    for (std::size_t r = 1; r < 7; ++r) {
        CHECK(tints[r] == r);
    }
    regions[7].carrier = 0;
    regions[7].deck = 1;
    CHECK(choose_tints(regions)[7] == choose_tints(regions)[0]);
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

TEST_CASE("decks show by their marks how they span, and by their labels how they share") {
    Takedown takedown = takedown_of(support::footbridge);
    FramedDeck& deck = takedown.framing.levels[0].decks[0];
    Sharing sharing = takedown.levels[0].sharing;
    const auto drawn = [&] {
        return written(
            [&](const TextSink& sink) { draw_level(takedown.plan, takedown.framing, 0, sharing, {}, sink); });
    };
    const auto mark_in = [](const std::string& svg) {
        const std::size_t at = svg.find("<path class=\"span\" data-deck=\"boards\" d=\"");
        return at == std::string::npos ? std::string() : svg.substr(at, svg.find("/>", at) - at);
    };
    const auto lines_in = [](const std::string& path) { return std::count(path.begin(), path.end(), 'L'); };
    CHECK(drawn().find(">boards</text>") != std::string::npos);
    CHECK(lines_in(mark_in(drawn())) == 5);
    deck.share = Share::lever;
    CHECK(drawn().find(">boards (lever)</text>") != std::string::npos);
    CHECK(drawn().find("class=\"end-zone\"") == std::string::npos);
    deck.span = SpanKind::two_way;
    CHECK(drawn().find(">boards</text>") != std::string::npos);
    CHECK(lines_in(mark_in(drawn())) == 10);
    deck.span = SpanKind::columns;
    CHECK(lines_in(mark_in(drawn())) == 2 + 4 * 3);
    CHECK(mark_in(drawn()).find('Z') != std::string::npos);
    // What goes to a point of a beam is set off; what goes to a column does so always.
    for (Transfer& transfer : sharing.transfers.items()) {
        transfer.station_to = transfer.station_from;
    }
    CHECK(drawn().find("class=\"end-zone\"") != std::string::npos);
    CHECK(drawn().find("to the end of the beam or wall</text>") != std::string::npos);
    for (Transfer& transfer : sharing.transfers.items()) {
        transfer.carrier = sharing.number_of({CarrierKind::column, 1});
    }
    CHECK(drawn().find("class=\"end-zone\"") == std::string::npos);
    CHECK(drawn().find("to the end of") == std::string::npos);
}

TEST_CASE("a deck's label stands in the deck, clear of openings and lines") {
    const Ring deck{{0, 0}, {100, 0}, {100, 100}, {0, 100}};
    const Box box{{-10, -10}, {10, 10}};
    const auto none_at_all = [](const Ring& ring) {
        std::vector<std::pair<Point, Point>> lines;
        for (std::size_t i = 0; i < ring.size(); ++i) {
            lines.emplace_back(ring[i], ring[(i + 1) % ring.size()]);
        }
        return lines;
    };
    CHECK(ClearPlaces(none_at_all(deck)).find(deck, {}, {40, 60}, box) == Point{40, 60});
    const Ring opening{{20, 30}, {20, 90}, {60, 90}, {60, 30}};
    auto lines = none_at_all(deck);
    const auto more = none_at_all(opening);
    lines.insert(lines.end(), more.begin(), more.end());
    const Point aside = ClearPlaces(lines).find(deck, std::vector<Ring>{opening}, {40, 60}, box);
    CHECK(aside.x >= 60 + 16); // beside the opening alone is there room
    CHECK(aside.x <= 100 - 16);
    // Of an L the middle of the bounding box lies outside.
    const Ring ell{{0, 0}, {100, 0}, {100, 30}, {30, 30}, {30, 100}, {0, 100}};
    const Point inside = ClearPlaces(none_at_all(ell)).find(ell, {}, {60, 60}, {{-8, -8}, {8, 8}});
    CHECK(std::min(inside.x, inside.y) <= 30 - 8);
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
