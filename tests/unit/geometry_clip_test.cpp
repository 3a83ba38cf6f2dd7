#include "support/random_support.hpp"

#include "geometry/basic.hpp"
#include "geometry/ring_area.hpp"

#include <doctest/doctest.h>

#include <boost/geometry.hpp>
#include <boost/geometry/geometries/point_xy.hpp>
#include <boost/geometry/geometries/polygon.hpp>

using namespace runnel;

namespace {

namespace bg = boost::geometry;
using BoostPoint = bg::model::d2::point_xy<double>;
using Polygon = bg::model::polygon<BoostPoint, false, false>; // counter-clockwise, open

void append(const Ring& ring, Polygon::ring_type& to) {
    for (const Point& p : ring) {
        to.push_back({p.x, p.y});
    }
}

double area_of_overlap(const std::vector<Ring>& rings, const Ring& window) {
    Polygon deck;
    append(rings[0], deck.outer());
    for (std::size_t i = 1; i < rings.size(); ++i) {
        append(rings[i], deck.inners().emplace_back());
    }
    Polygon piece;
    append(window, piece.outer());
    bg::correct(piece);
    std::vector<Polygon> overlap;
    bg::intersection(deck, piece, overlap);
    double area = 0;
    for (const Polygon& part : overlap) {
        area += bg::area(part);
    }
    return area;
}

} // namespace

// Outside check: Boost.Geometry's overlay, on drawings without near coincidences, where it can be relied on.
TEST_CASE("pieces clipped by re-entrant decks with openings have the areas that Boost.Geometry finds") {
    const std::uint64_t seed = support::seed_of_run(44);
    MESSAGE("seed " << seed);
    support::Random random(seed);
    double worst = 0;
    for (int round = 0; round < 500; ++round) {
        CAPTURE(round);
        std::vector<Ring> rings{random.star({0, 0}, 2.5, 9, random.whole(5, 40))};
        if (random.chance(0.6)) {
            rings.push_back(random.star({0, 0}, 0.3, 1.7, random.whole(3, 9)));
            std::reverse(rings.back().begin(), rings.back().end());
        }
        RingArea area(rings, 1e-13, random.chance(0.5) ? 3000 : 0);
        const double angle = random.between(0, 6.3);
        const StripAxes axes{
            {random.between(-1, 1), random.between(-1, 1)}, std::cos(angle), std::sin(angle)};
        const StripPiece piece{random.between(-9, 0),
                               random.between(0.5, 9),
                               {random.between(-6, 0), random.between(-6, 0), 0},
                               {random.between(1, 6), random.between(1, 6), 0}};
        const Ring window{axes.to_plan({piece.low.start, piece.from}),
                          axes.to_plan({piece.high.start, piece.from}),
                          axes.to_plan({piece.high.end, piece.to}), axes.to_plan({piece.low.end, piece.to})};
        std::vector<RingArea::Part> parts;
        area.clip(piece, axes, box_of(window), parts);
        Sum found;
        for (const RingArea::Part& part : parts) {
            found.add(area_of(part.piece));
            CHECK(area_of(part.piece) >= -1e-12);
        }
        const double expected = area_of_overlap(rings, window);
        worst = std::max(worst, std::abs(found.value() - expected));
        CHECK(std::abs(found.value() - expected) <= 1e-11);
    }
    MESSAGE("largest difference " << worst << " m2");
}
