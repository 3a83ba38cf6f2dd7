#include "geometry/basic.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"
#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

using namespace runnel;
using doctest::Approx;
using support::Motion;
using support::Random;

namespace {

const std::vector<Motion> motions{{0, {}}, {17, {}}, {33, {1e5, -7e4}}, {90, {3, 4}}, {-128.5, {-2e5, 1e5}}};

/// A sharing of one deck put together cell by cell.
struct HandShared {
    Sharing sharing;
    Motion move;

    explicit HandShared(std::uint32_t members, std::uint32_t columns = 0) {
        sharing.members = members;
        sharing.columns = columns;
    }

    /// Axes of a carrier: stations across, distance to its right along.
    std::uint32_t axes_of(Point from, Point to) {
        const Point a = move(from);
        const Point d = move(to) - a;
        sharing.axes.push_back({a, d.y / norm(d), -d.x / norm(d)});
        return static_cast<std::uint32_t>(sharing.axes.size() - 1);
    }
    std::uint32_t any_axes(Random& random) {
        const double angle = random.between(-3, 3);
        sharing.axes.push_back(
            {move({random.between(-20, 20), random.between(-20, 20)}), std::cos(angle), std::sin(angle)});
        return static_cast<std::uint32_t>(sharing.axes.size() - 1);
    }
    /// Goes to its stretch of a carrier, whose side `side` is.
    void add_side(std::uint32_t carrier, std::uint32_t axes, const StripPiece& piece,
                  Cell::CarrierSide side = Cell::CarrierSide::high) {
        sharing.cells.push_back({0, axes, piece.from, piece.to, piece.low, piece.high, false, side});
        sharing.transfers.push({carrier, piece.from, piece.to, 1});
        sharing.transfers.end_group();
    }
    /// Goes to one point of a carrier.
    void add_zone(std::uint32_t carrier, double station, std::uint32_t axes, const StripPiece& piece) {
        sharing.cells.push_back({0, axes, piece.from, piece.to, piece.low, piece.high, false, {}});
        sharing.transfers.push({carrier, station, station, 1});
        sharing.transfers.end_group();
    }
    /// A convex zone as it lies in the plan before moving, cut to pieces in any axes.
    void add_zone(std::uint32_t carrier, std::uint32_t axes, const Convex& polygon) {
        Convex there;
        for (const Point& p : polygon) {
            there.push_back(sharing.axes[axes].to_strip(move(p)));
        }
        const double noise = noise_of(norm(sharing.axes[axes].origin) + 100);
        for (const StripPiece& piece : pieces_of(there, noise)) {
            add_zone(carrier, 0, axes, piece);
        }
    }
};

double ring_area(const Region& region) {
    double sum = 0;
    for (const Ring& ring : region.rings) {
        sum += signed_area(ring);
    }
    return sum;
}

/// Whether two edges of a region's rings cross inside both.
bool crosses_itself(const Region& region, double noise) {
    std::vector<std::pair<Point, Point>> edges;
    for (const Ring& ring : region.rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            edges.emplace_back(ring[i], ring[(i + 1) % ring.size()]);
        }
    }
    const auto apart = [noise](Point a, Point b, Point p, Point q) {
        const double l = cross(b - a, p - a) / distance(a, b);
        const double r = cross(b - a, q - a) / distance(a, b);
        return std::min(l, r) < -noise && std::max(l, r) > noise;
    };
    for (std::size_t i = 0; i < edges.size(); ++i) {
        for (std::size_t j = 0; j < i; ++j) {
            const auto [a, b] = edges[i];
            const auto [c, d] = edges[j];
            if (apart(a, b, c, d) && apart(c, d, a, b)) {
                return true;
            }
        }
    }
    return false;
}

bool holds(const Region& region, Point p) {
    bool inside = false;
    for (const Ring& ring : region.rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point a = ring[i];
            const Point b = ring[(i + 1) % ring.size()];
            if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (b.x - a.x) * ((p.y - a.y) / (b.y - a.y))) {
                inside = !inside;
            }
        }
    }
    return inside;
}

bool has_corner(const Region& region, Point p) {
    return std::any_of(region.rings.begin(), region.rings.end(), [p](const Ring& ring) {
        return std::find(ring.begin(), ring.end(), p) != ring.end();
    });
}

/// 6 m by 6 m less 3 m by 3 m at the upper right, with a beam on each edge, counter-clockwise from the lower
/// left: 0 long, 1 short, 2 and 3 at the re-entrant corner (3, 3), 4 short, 5 long. Each point to the nearest
/// line.
const std::vector<Point> ell{{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}};
const double ell_meet = 6 - std::sqrt(18.0); // where both parabolas meet the diagonal
/// Distance from the long edge of points as near to the corner (3, 3) as to the edge.
double ell_parabola(double x) {
    return ((x - 3) * (x - 3) + 9) / 6;
}

HandShared shared_ell(const Motion& move) {
    HandShared s(6);
    s.move = move;
    std::vector<std::uint32_t> axes;
    for (std::size_t i = 0; i < ell.size(); ++i) {
        axes.push_back(s.axes_of(ell[i], ell[(i + 1) % ell.size()]));
    }
    const double m = ell_meet;
    const double bulge = -(3 - m) * (3 - m) / 6;
    s.add_side(0, axes[0], {0, m, {0, -m, 0}, {}});
    s.add_side(0, axes[0], {m, 3, {-m, -1.5, bulge}, {}});
    s.add_side(0, axes[0], {3, 4.5, {-1.5, -1.5, 0}, {}});
    s.add_side(0, axes[0], {4.5, 6, {-1.5, 0, 0}, {}});
    for (const std::uint32_t edge : {1U, 4U}) {
        s.add_side(edge, axes[edge], {0, 1.5, {0, -1.5, 0}, {}});
        s.add_side(edge, axes[edge], {1.5, 3, {-1.5, 0, 0}, {}});
    }
    s.add_side(2, axes[2], {0, 1.5, {0, -1.5, 0}, {}});
    s.add_side(2, axes[2], {1.5, 3, {-1.5, -1.5, 0}, {}});
    s.add_zone(2, 3, axes[0], {m, 3, {-m, -3, 0}, {-m, -1.5, bulge}});
    s.add_side(3, axes[3], {0, 1.5, {-1.5, -1.5, 0}, {}});
    s.add_side(3, axes[3], {1.5, 3, {-1.5, 0, 0}, {}});
    s.add_zone(3, 0, axes[5], {3, 6 - m, {-3, -m, 0}, {-1.5, -m, bulge}});
    s.add_side(5, axes[5], {0, 1.5, {0, -1.5, 0}, {}});
    s.add_side(5, axes[5], {1.5, 3, {-1.5, -1.5, 0}, {}});
    s.add_side(5, axes[5], {3, 6 - m, {-1.5, -m, bulge}, {}});
    s.add_side(5, axes[5], {6 - m, 6, {-m, 0, 0}, {}});
    return s;
}

/// Cuts convex pieces at random, one after the other.
std::vector<Convex> random_partition(Random& random, const Convex& whole, int cuts) {
    std::vector<Convex> parts{whole};
    for (int i = 0; i < cuts; ++i) {
        const auto k = static_cast<std::size_t>(random.whole(0, static_cast<int>(parts.size()) - 1));
        const Point a = between(parts[k][0], parts[k][1], random.between(0.2, 0.8));
        const std::size_t far = parts[k].size() / 2;
        const Point b =
            between(parts[k][far], parts[k][(far + 1) % parts[k].size()], random.between(0.2, 0.8));
        Convex left;
        Convex right;
        cut(parts[k], a, b, noise_of(20), left, right);
        if (left.size() >= 3 && right.size() >= 3) {
            parts[k] = left;
            parts.push_back(right);
        }
    }
    return parts;
}

Convex random_convex(Random& random) {
    Convex ring;
    const int corners = random.whole(3, 9);
    for (int i = 0; i < corners; ++i) {
        const double a = 2 * std::numbers::pi * (i + random.between(0.1, 0.9)) / corners;
        ring.push_back({9 * std::cos(a), 7 * std::sin(a)});
    }
    return ring;
}

} // namespace

TEST_CASE("the long edge of an L takes 6.8897 m2 up to a parabola, its re-entrant edge 4.3603 m2") {
    // By integration: a triangle, the stretch under the parabola, a rectangle, a triangle.
    const double d = 3 - ell_meet;
    const double long_edge =
        ell_meet * ell_meet / 2 + (d * d * d / 3 + 9 * d) / 6 + 1.5 * 1.5 + 1.5 * 1.5 / 2;
    CHECK(long_edge == Approx(6.8897).epsilon(1e-5));
    const double reentrant_edge = (27 - 2 * 2.25 - 2 * long_edge) / 2;
    CHECK(reentrant_edge == Approx(4.3603).epsilon(1e-5));
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        const HandShared s = shared_ell(move);
        const std::vector<Region> regions = regions_of(s.sharing);
        REQUIRE(regions.size() == 6);
        const std::vector<double> expected{long_edge, 2.25, reentrant_edge, reentrant_edge, 2.25, long_edge};
        for (std::size_t r = 0; r < 6; ++r) {
            CAPTURE(r);
            CHECK(regions[r].carrier == r);
            CHECK(regions[r].area == Approx(expected[r]).epsilon(1e-9));
            CHECK(ring_area(regions[r]) == Approx(regions[r].area).epsilon(1e-9));
            CHECK(regions[r].rings.size() == 1); // sides and end zone in one
            CHECK_FALSE(crosses_itself(regions[r], 1e-9));
        }
        CHECK(regions[1].rings[0].size() == 3);
    }
}

TEST_CASE("chords stay near the parabola, and both sides of it draw the same points") {
    for (const double chord_error : {1e-2, 5e-4, 1e-5}) {
        for (const Motion& move : motions) {
            const HandShared s = shared_ell(move);
            const std::vector<Region> regions = regions_of(s.sharing, chord_error);
            const Ring& ring = regions[0].rings[0];
            std::size_t inner = 0;
            for (std::size_t i = 0; i < ring.size(); ++i) {
                const StripAxes& axes =
                    s.sharing.axes[0]; // the long edge's: y is the station, -x the distance
                const Point a = axes.to_strip(ring[i]);
                const Point b = axes.to_strip(ring[(i + 1) % ring.size()]);
                const bool on_arc = a.y > ell_meet - 1e-9 && a.y < 3 + 1e-9 && a.x < -1;
                const bool next_on_arc = b.y > ell_meet - 1e-9 && b.y < 3 + 1e-9 && b.x < -1;
                if (on_arc) {
                    CHECK(std::abs(-a.x - ell_parabola(a.y)) <= chord_error + 1e-9);
                    CHECK(has_corner(regions[2], ring[i]));
                    ++inner;
                }
                if (on_arc && next_on_arc) {
                    const Point middle = between(a, b, 0.5);
                    CHECK(std::abs(-middle.x - ell_parabola(middle.y)) <= chord_error + 1e-9);
                }
            }
            CHECK(inner >= 3);
            CHECK(inner <= 2 + std::sqrt(0.26 / chord_error / 4) + 1); // no more than the error asks for
            CHECK(ring_area(regions[0]) == Approx(regions[0].area).epsilon(1e-10));
        }
    }
}

TEST_CASE("rounding in a parabola's bulge gives no other chords") {
    // 0.2 m in ten chords of 0.5 mm: an ulp more would be eleven.
    HandShared s(2);
    const std::uint32_t axes = s.axes_of({0, 0}, {2, 0});
    const double more = std::nextafter(std::nextafter(0.2, 1), 1);
    s.add_side(0, axes, {0, 2, {-1, -1, -0.2}, {}});
    s.add_zone(1, 0, axes, {0, 2, {-3, -3, 0}, {-1, -1, -more}});
    const std::vector<Region> regions = regions_of(s.sharing);
    REQUIRE(regions.size() == 2);
    CHECK(regions[0].rings[0].size() == 13);
    CHECK(regions[1].rings[0].size() == 13);
}

TEST_CASE("areas along a carrier follow the parabola, and an end zone is an area at its end") {
    const HandShared s = shared_ell({});
    const CarrierAreas areas = areas_of(s.sharing);
    const std::vector<Region> regions = regions_of(s.sharing);
    for (std::size_t r = 0; r < 6; ++r) {
        CHECK(areas.area[r] == Approx(regions[r].area).epsilon(1e-12));
    }
    REQUIRE(areas.pieces[0].size() == 4);
    const CarrierAreas::Piece& arc = areas.pieces[0][1];
    for (const double x : {0.0, 0.3, 0.5, 1.0}) {
        const double breadth = (1 - x) * arc.start + x * arc.end - arc.bulge * x * (1 - x);
        CHECK(breadth == Approx(ell_parabola(arc.from + x * (arc.to - arc.from))).epsilon(1e-12));
    }
    REQUIRE(areas.pieces[2].size() == 3);
    const CarrierAreas::Piece& end = areas.pieces[2][2];
    CHECK(end.from == 3);
    CHECK(end.to == 3);
    CHECK(end.start == Approx(regions[2].area - 1.5 * 1.5 * 1.5).epsilon(1e-12));
    // Stations that fall while the level rises turn the breadth round.
    Sharing turned = s.sharing;
    for (Transfer& transfer : turned.transfers.items()) {
        transfer.station_from = 6 - transfer.station_from;
        transfer.station_to = 6 - transfer.station_to;
    }
    const CarrierAreas back = areas_of(turned);
    const CarrierAreas::Piece& arc_back = back.pieces[0][1];
    CHECK(arc_back.from == Approx(6 - arc.to));
    CHECK(arc_back.start == Approx(arc.end));
    CHECK(arc_back.bulge == Approx(arc.bulge));
    CHECK(back.area[0] == Approx(areas.area[0]));
}

TEST_CASE("a beam that ends inside a deck has one region round its end") {
    Random random(support::seed_of_run(5));
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        HandShared s(1);
        s.move = move;
        const std::uint32_t axes = s.axes_of({0, 0}, {4, 0});
        // Cut at other stations on either side, and in two along the way: corners lie on others' edges.
        s.add_side(0, axes, {0, 1.5, {-1, -1, 0}, {}});
        s.add_side(0, axes, {1.5, 4, {-1, -1, 0}, {}});
        s.add_side(0, axes, {0, 2.75, {}, {1, 1, 0}}, Cell::CarrierSide::low);
        s.add_side(0, axes, {2.75, 4, {}, {0.25, 0.5, 0}}, Cell::CarrierSide::low);
        s.add_side(0, axes, {2.75, 4, {0.25, 0.5, 0}, {1, 1, 0}}, Cell::CarrierSide::neither);
        s.add_zone(0, s.any_axes(random), {{4, -1}, {5, -1}, {5, 0.5}});
        s.add_zone(0, s.any_axes(random), {{4, -1}, {5, 0.5}, {5, 1}, {4, 1}});
        const std::vector<Region> regions = regions_of(s.sharing);
        REQUIRE(regions.size() == 1);
        REQUIRE(regions[0].rings.size() == 1);
        CHECK(regions[0].rings[0].size() == 4);
        CHECK(regions[0].area == Approx(10).epsilon(1e-9));
        CHECK(signed_area(regions[0].rings[0]) == Approx(10).epsilon(1e-9));
        CHECK(distance(regions[0].centroid, move({2.5, 0})) < 1e-8);
    }
}

TEST_CASE("an opening in a region is a hole, and parts that meet in a corner are rings of their own") {
    HandShared s(2);
    const std::uint32_t axes = s.axes_of({0, 0}, {0, 6});
    Random random(support::seed_of_run(6));
    s.add_zone(0, axes, {{0, 0}, {6, 0}, {6, 2}, {0, 2}});
    s.add_zone(0, s.any_axes(random), {{0, 2}, {2, 2}, {2, 6}, {0, 6}});
    s.add_zone(0, s.any_axes(random), {{4, 2}, {6, 2}, {6, 6}, {4, 6}});
    s.add_zone(0, s.any_axes(random), {{2, 4}, {4, 4}, {4, 6}, {2, 6}});
    s.add_zone(1, s.any_axes(random), {{10, 0}, {11, 0}, {11, 1}, {10, 1}});
    s.add_zone(1, s.any_axes(random), {{11, 1}, {12, 1}, {12, 2}, {11, 2}});
    const std::vector<Region> regions = regions_of(s.sharing);
    REQUIRE(regions.size() == 2);
    REQUIRE(regions[0].rings.size() == 2);
    CHECK(signed_area(regions[0].rings[0]) == Approx(36));
    CHECK(signed_area(regions[0].rings[1]) == Approx(-4));
    CHECK(regions[0].rings[1].size() == 4);
    REQUIRE(regions[1].rings.size() == 2);
    CHECK(regions[1].rings[0].size() == 4);
    CHECK(signed_area(regions[1].rings[0]) == Approx(1));
    CHECK(signed_area(regions[1].rings[1]) == Approx(1));
}

TEST_CASE("columns take the cells of points nearest to them, whatever axes they are cut in") {
    const std::uint64_t seed = support::seed_of_run(20261203);
    MESSAGE("seed " << seed);
    Random random(seed);
    for (int i = 0; i < 200; ++i) {
        CAPTURE(i);
        HandShared s(0, 9);
        s.move = motions[static_cast<std::size_t>(i) % motions.size()];
        std::vector<Point> columns;
        for (int c = 0; c < 9; ++c) {
            columns.push_back(
                {4.0 * (c % 3) + random.between(-1.5, 1.5), 4.0 * (c / 3) + random.between(-1.5, 1.5)});
        }
        std::vector<Convex> cells;
        for (std::uint32_t c = 0; c < 9; ++c) {
            Convex cell{{-2, -2}, {10, -2}, {10, 10}, {-2, 10}};
            for (std::uint32_t o = 0; o < 9; ++o) {
                if (o != c) { // left of the bisector lies what is nearer to c
                    const Point middle = between(columns[c], columns[o], 0.5);
                    const Point d = columns[o] - columns[c];
                    Convex right;
                    Convex left;
                    cut(cell, middle, middle + Point{-d.y, d.x}, noise_of(10), left, right);
                    cell = left;
                }
            }
            cells.push_back(cell);
            s.add_zone(c, s.any_axes(random), cell);
        }
        const std::vector<Region> regions = regions_of(s.sharing);
        REQUIRE(regions.size() == 9);
        double sum = 0;
        for (std::size_t c = 0; c < 9; ++c) {
            REQUIRE(regions[c].rings.size() == 1);
            CHECK(regions[c].rings[0].size() == cells[c].size());
            CHECK(regions[c].area == Approx(signed_area(cells[c])).epsilon(1e-8));
            CHECK(ring_area(regions[c]) == Approx(regions[c].area).epsilon(1e-9));
            sum += regions[c].area;
        }
        CHECK(sum == Approx(144).epsilon(1e-9));
    }
}

TEST_CASE("rings enclose the area of their cells for random cells in random axes") {
    const std::uint64_t seed = support::seed_of_run(20261202);
    MESSAGE("seed " << seed);
    Random random(seed);
    double worst = 0;
    for (int i = 0; i < 400; ++i) {
        CAPTURE(i);
        const Convex whole = random_convex(random);
        const std::vector<Convex> parts = random_partition(random, whole, random.whole(0, 30));
        const auto carriers = static_cast<std::uint32_t>(random.whole(1, 4));
        HandShared s(carriers);
        const bool far = i % 2 == 1;
        s.move = {random.between(-180, 180), far ? Point{random.between(-1e5, 1e5), 1e5} : Point{}};
        std::vector<std::uint32_t> owner;
        for (const Convex& part : parts) {
            owner.push_back(static_cast<std::uint32_t>(random.whole(0, static_cast<int>(carriers) - 1)));
            s.add_zone(owner.back(), s.any_axes(random), part);
        }
        const double noise = far ? 1e-8 : 1e-12;
        const std::vector<Region> regions = regions_of(s.sharing);
        double sum = 0;
        for (const Region& region : regions) {
            CHECK(ring_area(region) == Approx(region.area).epsilon(far ? 1e-9 : 1e-12));
            worst = std::max(worst, far ? 0 : std::abs(ring_area(region) / region.area - 1));
            CHECK_FALSE(crosses_itself(region, noise));
            sum += region.area;
        }
        CHECK(sum == Approx(signed_area(whole)).epsilon(far ? 1e-8 : 1e-11));
        if (carriers == 1) {
            REQUIRE(regions.size() == 1);
            CHECK(regions[0].rings.size() == 1);
            CHECK(regions[0].rings[0].size() == whole.size()); // nothing of the cuts is left
        }
        for (int k = 0; k < 30; ++k) {
            const auto part = static_cast<std::size_t>(random.whole(0, static_cast<int>(parts.size()) - 1));
            const AreaMoments moments = moments_of(parts[part], parts[part][0]);
            const Point inside = s.move(parts[part][0] + (1 / moments.area) * moments.moment);
            for (const Region& region : regions) {
                CHECK(holds(region, inside) == (region.carrier == owner[part]));
            }
        }
    }
    MESSAGE("largest relative error of a region's rings " << worst);
}

TEST_CASE("a column before a wall: both sides of a parabola cut at stations of their own") {
    const std::uint64_t seed = support::seed_of_run(20261204);
    MESSAGE("seed " << seed);
    Random random(seed);
    for (int i = 0; i < 200; ++i) {
        CAPTURE(i);
        // Directrix: the wall from (0, 0) to (10, 0); focus: the column at (c, 2 h); strips between stations.
        const double c = random.between(-2, 12);
        const double h = random.between(0.3, 3);
        const auto parabola = [&](double x) { return h + (x - c) * (x - c) / (4 * h); };
        HandShared s(2, 1); // members 0 and 1; the column is carrier 2
        s.move = motions[static_cast<std::size_t>(i) % motions.size()];
        const std::uint32_t axes = s.axes_of({0, 0}, {10, 0});
        std::vector<double> stations{0, 10};
        for (int k = random.whole(0, 6); k > 0; --k) {
            stations.push_back(random.between(0.1, 9.9));
        }
        std::sort(stations.begin(), stations.end());
        const double top = std::max(parabola(0), parabola(10)) + 1;
        const auto arc = [&](double from, double to) {
            return Border{-parabola(from), -parabola(to), -(to - from) * (to - from) / (4 * h)};
        };
        for (std::size_t k = 0; k + 1 < stations.size(); ++k) {
            const double from = stations[k];
            const double to = stations[k + 1];
            s.add_side(0, axes, {from, to, arc(from, to), {}});
        }
        const double split = random.between(1, 9);
        s.add_zone(2, 0, axes, {0, split, {-top, -top, 0}, arc(0, split)});
        s.add_zone(2, 0, axes, {split, 10, {-top, -top, 0}, arc(split, 10)});
        const std::vector<Region> regions = regions_of(s.sharing);
        REQUIRE(regions.size() == 2);
        const double below = 10 * h + (std::pow(10 - c, 3) + std::pow(c, 3)) / (12 * h);
        CHECK(regions[0].area == Approx(below).epsilon(1e-8));
        CHECK(regions[1].area == Approx(10 * top - below).epsilon(1e-8));
        for (const Region& region : regions) {
            CHECK(region.rings.size() == 1);
            CHECK(ring_area(region) == Approx(region.area).epsilon(1e-9));
            CHECK_FALSE(crosses_itself(region, 1e-8));
        }
        // No corner of the one lies off the border of the other, but for the deck's own corners.
        std::size_t shared = 0;
        for (const Point& p : regions[0].rings[0]) {
            shared += has_corner(regions[1], p) ? 1 : 0;
        }
        CHECK(shared == regions[0].rings[0].size() - 2);
    }
}

TEST_CASE("a one-way deck has the same regions when its cells are joined as cells in any axes") {
    for (const Motion& move : motions) {
        CAPTURE(move.degrees);
        support::HandFramed f;
        for (const double x : {0.0, 3.0, 5.0, 9.0}) {
            f.add_member(move({x, 0}), move({x + 0.1 * x, 6}));
        }
        f.add_deck(move(Ring{{0, 0}, {9, 0}, {9.9, 6}, {0, 6}}), move.degrees,
                   {move(Ring{{3.4, 2}, {3.4, 4}, {5.2, 4}, {5.2, 2}}), move(Ring{{7, 1}, {7, 2}, {8, 2}})});
        Sharing sharing = f.share();
        const std::vector<Region> as_strips = regions_of(sharing);
        sharing.bays.clear();
        const std::vector<Region> as_pieces = regions_of(sharing);
        REQUIRE(as_strips.size() == as_pieces.size());
        for (std::size_t r = 0; r < as_strips.size(); ++r) {
            CHECK(as_pieces[r].carrier == as_strips[r].carrier);
            CHECK(as_pieces[r].area == Approx(as_strips[r].area).epsilon(1e-10));
            CHECK(distance(as_pieces[r].centroid, as_strips[r].centroid) < 1e-8);
            REQUIRE(as_pieces[r].rings.size() == as_strips[r].rings.size());
            for (std::size_t k = 0; k < as_strips[r].rings.size(); ++k) {
                CHECK(as_pieces[r].rings[k].size() == as_strips[r].rings[k].size());
                CHECK(signed_area(as_pieces[r].rings[k]) ==
                      Approx(signed_area(as_strips[r].rings[k])).epsilon(1e-8));
            }
        }
    }
}
