#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include "deck/panels.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <map>

using namespace runnel;
using doctest::Approx;
using support::HandFramed;
using support::Motion;
using support::Random;

namespace {

constexpr double snap = 1e-3;

std::vector<LineCarrier> carriers_of(HandFramed& f) {
    std::vector<LineCarrier> carriers;
    for (std::uint32_t m = 0; m < f.level().members.size(); ++m) {
        carriers.push_back({m, f.level().members[m].from, f.level().members[m].to});
    }
    return carriers;
}

Panels divided(HandFramed& f, double largest = 10, double tolerance = snap) {
    return divide_into_panels(f.level().decks[0], carriers_of(f), {noise_of(largest), tolerance});
}

double deck_area(const FramedDeck& deck) {
    double area = std::abs(signed_area(deck.outline));
    for (const Ring& opening : deck.openings) {
        area -= std::abs(signed_area(opening));
    }
    return area;
}

double total_area(const Panels& panels) {
    Sum area;
    for (const Panel& panel : panels.panels) {
        area.add(panel.area);
    }
    return area.value();
}

std::vector<double> areas(const Panels& panels) {
    std::vector<double> result;
    for (const Panel& panel : panels.panels) {
        result.push_back(panel.area);
    }
    std::sort(result.begin(), result.end());
    return result;
}

void add_edge_beams(HandFramed& f, const Ring& ring) {
    for (std::size_t i = 0; i < ring.size(); ++i) {
        f.add_member(ring[i], ring[(i + 1) % ring.size()]);
    }
}

/// Every edge that has a panel beyond it stands in that panel's borders run the other way, on the same
/// carrier at the same stations; returns how many edges have one.
int check_adjacency(const Panels& panels) {
    struct Seen {
        std::uint32_t panel;
        PanelEdge edge;
        Point to;
    };
    std::map<std::array<double, 4>, Seen> seen;
    const auto note = [&](std::uint32_t p, const std::vector<PanelEdge>& border) {
        for (std::size_t i = 0; i < border.size(); ++i) {
            const Point to = border[(i + 1) % border.size()].from;
            const bool fresh =
                seen.try_emplace({border[i].from.x, border[i].from.y, to.x, to.y}, Seen{p, border[i], to})
                    .second;
            CHECK(fresh); // no stretch has two panels on its left
        }
    };
    for (std::uint32_t p = 0; p < panels.panels.size(); ++p) {
        note(p, panels.panels[p].outer);
        for (const std::vector<PanelEdge>& hole : panels.panels[p].holes) {
            note(p, hole);
        }
    }
    int shared = 0;
    for (const auto& [key, here] : seen) {
        const auto there = seen.find({here.to.x, here.to.y, here.edge.from.x, here.edge.from.y});
        CHECK((there != seen.end()) == (here.edge.beyond != none));
        if (there == seen.end()) {
            continue;
        }
        ++shared;
        CHECK(there->second.panel == here.edge.beyond);
        CHECK(there->second.edge.carrier == here.edge.carrier);
        CHECK(there->second.edge.station_from == here.edge.station_to);
        CHECK(there->second.edge.station_to == here.edge.station_from);
    }
    return shared;
}

} // namespace

TEST_CASE("a beam across a deck makes two panels that know each other") {
    HandFramed f;
    const std::uint32_t beam = f.add_member({2, -1}, {2, 5});
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    const Panels panels = divided(f);
    REQUIRE(areas(panels) == std::vector<double>{8, 16});
    CHECK(check_adjacency(panels) == 2);
    for (const Panel& panel : panels.panels) {
        REQUIRE(panel.outer.size() == 4);
        int carried = 0;
        for (const PanelEdge& edge : panel.outer) {
            if (edge.carrier != none) {
                ++carried;
                CHECK(edge.carrier == beam);
                CHECK(std::min(edge.station_from, edge.station_to) == 1);
                CHECK(std::max(edge.station_from, edge.station_to) == 5);
                // It runs to rising y: to the panel on its left it runs along the border.
                CHECK((edge.station_from < edge.station_to) == (panel.area == 8));
            }
        }
        CHECK(carried == 1);
    }
}

TEST_CASE("a beam that ends inside divides nothing and stands in the border there and back") {
    HandFramed f;
    f.add_member({2, 0}, {2, 3});
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    const Panels panels = divided(f);
    REQUIRE(panels.panels.size() == 1);
    CHECK(panels.panels[0].area == Approx(24));
    CHECK(check_adjacency(panels) == 2);
    CHECK(std::count_if(panels.panels[0].outer.begin(), panels.panels[0].outer.end(),
                        [](const PanelEdge& edge) { return edge.beyond == 0; }) == 2);
}

TEST_CASE(
    "a wall that stands free in a deck is a hole without area; four around a shaft part a panel from it") {
    HandFramed f;
    f.add_member({1, 1}, {2, 1});
    const Ring shaft{{3, 1}, {5, 1}, {5, 3}, {3, 3}};
    add_edge_beams(f, shaft);
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
    const Panels panels = divided(f);
    REQUIRE(areas(panels) == std::vector<double>{4, 20});
    CHECK(check_adjacency(panels) == 2 + 8);
    const Panel& around = panels.panels[panels.panels[0].area == 20 ? 0 : 1];
    CHECK(around.holes.size() == 2);
}

TEST_CASE("openings are no panel, also where beams run across them and stand free in them") {
    HandFramed f;
    f.add_member({3, 0}, {3, 4});
    add_edge_beams(f, {{2.2, 1.2}, {2.8, 1.2}, {2.5, 1.8}});
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0, {{{2, 1}, {2, 3}, {5, 3}, {5, 1}}});
    const Panels panels = divided(f);
    // The beam leaves two parts: left of it 12 less 2, right of it 12 less 4.
    REQUIRE(areas(panels) == std::vector<double>{8, 10});
    CHECK(check_adjacency(panels) == 4);
}

TEST_CASE("openings that share edges and corners with each other and with the outline") {
    HandFramed f;
    f.add_member({0, 2}, {6, 2});
    f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0,
               {{{0, 1}, {0, 3}, {1, 3}, {1, 1}},
                {{1, 1}, {1, 2}, {2, 2}, {2, 1}},
                {{2, 2}, {2, 3}, {3, 3}, {3, 2}}});
    const Panels panels = divided(f);
    REQUIRE(areas(panels) == std::vector<double>{12 - 1 - 1, 12 - 1 - 1});
    CHECK(check_adjacency(panels) > 0);
}

TEST_CASE("beams beside an edge within snap lie along it, in one stretch or more") {
    for (const double off : {-0.9e-3, -1e-9, 0.0, 1e-9, 0.9e-3}) {
        CAPTURE(off);
        HandFramed f;
        f.add_member({0, off}, {4, off});
        f.add_member({4, off / 2}, {7, off / 2});
        f.add_member({off, 4 + off}, {off, off});
        f.add_member({4, 4 - off}, {4, off}); // from edge to edge, short or long by `off`
        f.add_deck({{0, 0}, {6, 0}, {6, 4}, {0, 4}}, 0);
        const Panels panels = divided(f);
        REQUIRE(panels.panels.size() == 2);
        CHECK(areas(panels)[0] == Approx(8).epsilon(1e-3));
        CHECK(total_area(panels) == Approx(24).epsilon(1e-14));
        int carried = 0;
        for (const Panel& panel : panels.panels) {
            for (const PanelEdge& edge : panel.outer) {
                carried += edge.carrier != none && edge.beyond == none ? 1 : 0;
            }
        }
        CHECK(carried == 3);
        CHECK(check_adjacency(panels) == 2);
    }
}

TEST_CASE("a grid of beams far from the origin and turned: every bay is a panel") {
    for (const Motion& move : {Motion{}, Motion{17, {1e6, -2e6}}, Motion{45, {}}, Motion{90, {3, 1}}}) {
        CAPTURE(move.degrees);
        HandFramed f;
        for (int i = 0; i <= 12; ++i) {
            f.add_member(move({i * 1.5, -0.5}), move({i * 1.5, 18.5}));
            f.add_member(move({-0.5, i * 1.5}), move({18.5, i * 1.5}));
        }
        f.add_deck(move(Ring{{0, 0}, {18, 0}, {18, 18}, {0, 18}}), 0);
        const Panels panels = divided(f, 3e6);
        CHECK(panels.panels.size() == 144);
        for (const double area : areas(panels)) {
            CHECK(area == Approx(2.25).epsilon(1e-8));
        }
        CHECK(total_area(panels) == Approx(deck_area(f.level().decks[0])).epsilon(1e-13));
        CHECK(check_adjacency(panels) == 2 * 2 * 11 * 12);
    }
}

TEST_CASE("panels of random decks: cover, adjacency, order, motion") {
    const std::uint64_t seed = support::seed_of_run(20261202);
    MESSAGE("seed " << seed);
    Random random(seed);
    double worst = 0;
    std::size_t most = 0;
    for (int i = 0; i < 600; ++i) {
        CAPTURE(i);
        Ring outline = random.star({0, 0}, 3, 11, random.whole(5, 14));
        std::vector<Ring> openings;
        if (random.chance(0.6)) {
            openings.push_back(random.star({0, 0}, 0.5, 2.0, random.whole(3, 7)));
        }
        std::vector<std::pair<Point, Point>> members;
        if (random.chance(0.5)) {
            for (std::size_t k = 0; k < outline.size(); ++k) {
                members.emplace_back(outline[k], outline[(k + 1) % outline.size()]);
            }
        }
        const int count = random.whole(1, 14);
        for (int k = 0; k < count; ++k) {
            const auto any = [&] { return Point{random.between(-9, 9), random.between(-9, 9)}; };
            members.emplace_back(any(), any());
        }
        const auto build = [&](const Motion& move, bool reversed) {
            HandFramed f;
            for (const auto& [from, to] : members) {
                reversed ? f.add_member(move(to), move(from)) : f.add_member(move(from), move(to));
            }
            if (reversed) {
                std::reverse(f.level().members.begin(), f.level().members.end());
            }
            std::vector<Ring> moved;
            for (const Ring& opening : openings) {
                moved.push_back(move(opening));
            }
            f.add_deck(move(outline), 0, moved);
            return f;
        };
        HandFramed plain = build({}, false);
        const Panels panels = divided(plain, 12, 1e-7);
        const double area = deck_area(plain.level().decks[0]);
        worst = std::max(worst, std::abs(total_area(panels) - area) / area);
        CHECK(total_area(panels) == Approx(area).epsilon(1e-13));
        const auto shared = check_adjacency(panels);
        CHECK((shared > 0 || panels.panels.size() == 1));
        most = std::max(most, panels.panels.size());
        for (HandFramed& other : std::vector<HandFramed>{build({}, true), build({37, {1e4, -3e3}}, false)}) {
            const std::vector<double> expected = areas(panels);
            const std::vector<double> found = areas(divided(other, 12e3, 1e-7));
            REQUIRE(found.size() == expected.size());
            for (std::size_t k = 0; k < found.size(); ++k) {
                CHECK(std::abs(found[k] - expected[k]) <= 1e-9 * area);
            }
        }
    }
    CHECK(most > 20);
    MESSAGE("area closes within " << worst << "; up to " << most << " panels");
}
