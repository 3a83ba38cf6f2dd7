#include "support/random_support.hpp"

#include "geometry/basic.hpp"
#include "geometry/box_buckets.hpp"
#include "geometry/grid_noding.hpp"
#include "geometry/ring_area.hpp"
#include "geometry/segment_voronoi.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <map>
#include <set>

using namespace runnel;
using support::Random;

namespace {

AxisLine line(Point a, Point b) {
    AxisLine result;
    result.origin = result.a = a;
    result.b = b;
    result.to = distance(a, b);
    result.direction = (1 / result.to) * (b - a);
    return result;
}

/// Sign of the turn a -> b -> c, exactly.
int turn(GridPoint a, GridPoint b, GridPoint c) {
    const std::int64_t value = (std::int64_t{b.x} - a.x) * (std::int64_t{c.y} - a.y) -
                               (std::int64_t{b.y} - a.y) * (std::int64_t{c.x} - a.x);
    return value > 0 ? 1 : value < 0 ? -1 : 0;
}
bool is_between(GridPoint a, GridPoint b, GridPoint p) {
    return std::min(a.x, b.x) <= p.x && p.x <= std::max(a.x, b.x) && std::min(a.y, b.y) <= p.y &&
           p.y <= std::max(a.y, b.y);
}
/// Whether two grid segments share a point that is no end of both.
bool meet_inside(GridPoint a, GridPoint b, GridPoint c, GridPoint d) {
    const int t0 = turn(a, b, c);
    const int t1 = turn(a, b, d);
    const int t2 = turn(c, d, a);
    const int t3 = turn(c, d, b);
    if (t0 * t1 < 0 && t2 * t3 < 0) {
        return true;
    }
    const auto on = [](GridPoint p, GridPoint q, GridPoint r, int t) {
        return t == 0 && is_between(p, q, r) && !(r == p) && !(r == q);
    };
    return on(a, b, c, t0) || on(a, b, d, t1) || on(c, d, a, t2) || on(c, d, b, t3);
}

} // namespace

TEST_CASE("noded lines share nothing but nodes, and cover the lines they came from") {
    const std::uint64_t seed = support::seed_of_run(41);
    MESSAGE("seed " << seed);
    Random random(seed);
    for (int round = 0; round < 200; ++round) {
        CAPTURE(round);
        std::vector<AxisLine> lines;
        const int count = random.whole(2, 30);
        for (int i = 0; i < count; ++i) {
            const Point a{random.between(-9, 9), random.between(-9, 9)};
            const Point b{random.between(-9, 9), random.between(-9, 9)};
            switch (lines.empty() ? 0 : random.whole(0, 4)) {
            case 1: // from the inside of another, to one's end, all but along one
                lines.push_back(line(between(lines.back().a, lines.back().b, random.fraction()), b));
                break;
            case 2:
                lines.push_back(line(a, lines.front().b));
                break;
            case 3:
                lines.push_back(line(lines.back().a, lines.back().b + Point{1e-9, 2e-9}));
                break;
            default:
                lines.push_back(line(a, b));
                break;
            }
        }
        const std::vector<Point> points{lines[0].a, between(lines[1].a, lines[1].b, 0.5), {12, 12}};
        const Grid grid(Box{{-13, -13}, {13, 13}}, random.between(0, 3));
        const NodedLines noded = node_on_grid(lines, points, grid);
        REQUIRE(noded.settled);
        const auto at = [&](std::uint32_t node) { return noded.nodes[node].grid; };
        for (std::size_t i = 0; i < noded.pieces.size(); ++i) {
            const NodedLines::Piece& p = noded.pieces[i];
            CHECK(p.node_a != p.node_b);
            for (std::size_t j = i + 1; j < noded.pieces.size(); ++j) {
                const NodedLines::Piece& q = noded.pieces[j];
                CHECK_FALSE(meet_inside(at(p.node_a), at(p.node_b), at(q.node_a), at(q.node_b)));
            }
            // Nodes stand on their lines.
            const AxisLine& axis = lines[p.line];
            CHECK(distance(noded.nodes[p.node_a].place, axis.at(p.from)) <= 8 * grid.step());
            CHECK(distance(noded.nodes[p.node_b].place, axis.at(p.to)) <= 8 * grid.step());
        }
        // Every line from end to end, but for what runs in an earlier one's pieces.
        std::map<std::uint32_t, double> covered;
        for (const NodedLines::Piece& p : noded.pieces) {
            covered[p.line] += p.to - p.from;
        }
        for (std::uint32_t i = 0; i < lines.size(); ++i) {
            CHECK(covered[i] <= lines[i].to + 8 * grid.step());
        }
        CHECK(covered[0] >= lines[0].to - 8 * grid.step());
    }
}

TEST_CASE("lines that cross in one point make one node of it") {
    const std::vector<AxisLine> lines{line({-1, 0}, {1, 0}), line({0, -1}, {0, 1}), line({-1, -1}, {1, 1})};
    const NodedLines noded = node_on_grid(lines, {}, Grid(Box{{-2, -2}, {2, 2}}, 0));
    CHECK(noded.pieces.size() == 6);
    std::set<std::uint32_t> nodes;
    for (const NodedLines::Piece& piece : noded.pieces) {
        nodes.insert(piece.node_a);
        nodes.insert(piece.node_b);
    }
    CHECK(nodes.size() == 7);
}

TEST_CASE("of two lines that are the same the first stays") {
    const std::vector<AxisLine> lines{line({0, 0}, {4, 0}), line({4, 0}, {0, 0}), line({1, 0}, {3, 0})};
    const NodedLines noded = node_on_grid(lines, {}, Grid(Box{{-5, -5}, {5, 5}}, 0));
    CHECK(noded.pieces.size() == 3);
    for (const NodedLines::Piece& piece : noded.pieces) {
        CHECK(piece.line == 0);
    }
}

TEST_CASE("vertices of the diagram are as far from all sites around them, to rounding") {
    const std::uint64_t seed = support::seed_of_run(42);
    MESSAGE("seed " << seed);
    Random random(seed);
    double worst = 0;
    for (int round = 0; round < 100; ++round) {
        std::vector<AxisLine> lines;
        for (int i = random.whole(1, 20); i > 0; --i) {
            const Point a{random.between(-9, 9), random.between(-9, 9)};
            const double angle = random.between(0, 6.3);
            lines.push_back(line(a, a + random.between(0.5, 2) * Point{std::cos(angle), std::sin(angle)}));
        }
        const std::vector<Point> points{{90, 0}, {0, 90}, {-90, 0}, {0, -90}};
        const Grid grid(Box{{-90, -90}, {90, 90}}, 0);
        const NodedLines noded = node_on_grid(lines, points, grid);
        const VoronoiDiagram diagram = segment_voronoi(lines, noded, grid, noded.node_of_point, 1e-13);
        CHECK(diagram.trusted);
        const auto away = [&](std::uint32_t site, Point p) {
            if (site >= noded.pieces.size()) {
                return distance(p, noded.nodes[site - noded.pieces.size()].place);
            }
            const AxisLine& axis = lines[noded.pieces[site].line];
            return std::abs(axis.right_of(p));
        };
        for (const VoronoiDiagram::Arc& arc : diagram.arcs) {
            for (const std::uint32_t v : {arc.from, arc.to}) {
                const Point p = diagram.vertices[v];
                if (norm(p) < 12) {
                    worst = std::max(worst, std::abs(away(arc.left, p) - away(arc.right, p)));
                }
            }
        }
    }
    MESSAGE("largest difference of distances " << worst << " m");
    CHECK(worst <= 1e-11);
}

TEST_CASE("a parabolic border is cut where an edge meets it") {
    // Under d = (s^2 + 4) / 4 over s = 0..4, cut off at d = 2: all below 2 up to s = 2, then the line.
    RingArea area({Ring{{0, 0}, {4, 0}, {4, 2}, {0, 2}}}, 1e-13, 0);
    const StripAxes axes{{0, 0}, 0, 1}; // along = y, across = -x
    const StripPiece piece{-4, 0, {0, 0, 0}, {5, 1, 4}};
    std::vector<RingArea::Part> parts;
    area.clip(piece, axes, Box{{0, 0}, {4, 5}}, parts);
    double found = 0;
    for (const RingArea::Part& part : parts) {
        found += area_of(part.piece);
    }
    // Integral of (s^2 + 4) / 4 from 0 to 2, and 2 x 2.
    CHECK(found == doctest::Approx(2.0 / 3 + 2 + 4).epsilon(1e-14));
}

TEST_CASE("an edge within noise of a piece's border ends the piece on whichever side it lies") {
    for (const double off : {-4e-10, 0.0, 4e-10}) {
        RingArea area({Ring{{0, off}, {4, off}, {4, 3}, {0, 3}}}, 1e-9, 0);
        const StripAxes axes{{0, 0}, 0, 1};
        const StripPiece above{-4, 0, {0, 0, 0}, {2, 2, 0}};
        const StripPiece below{-4, 0, {-2, -2, 0}, {0, 0, 0}};
        std::vector<RingArea::Part> parts;
        area.clip(above, axes, Box{{0, 0}, {4, 2}}, parts);
        REQUIRE(parts.size() == 1);
        CHECK(area_of(parts[0].piece) == doctest::Approx(4 * (2 - off)).epsilon(1e-14));
        CHECK(parts[0].out_below == 0);
        area.clip(below, axes, Box{{0, -2}, {4, 0}}, parts);
        CHECK(parts.empty());
    }
}

TEST_CASE("a way across an opening is measured, along its edge it stays inside") {
    RingArea area({Ring{{0, 0}, {9, 0}, {9, 5}, {0, 5}}, Ring{{2, 2}, {2, 3}, {4, 3}, {4, 2}}}, 1e-13, 0);
    CHECK(area.length_outside({3, 1}, {3, 4}) == doctest::Approx(1));
    CHECK(area.length_outside({1, 1}, {1, 4}) == 0);
    CHECK(area.length_outside({1, 2}, {6, 2}) == 0);
    CHECK(area.length_outside({-1, 1}, {1, 1}) == doctest::Approx(1));
    CHECK(area.shared_with({1, 2.5}, {6, 2.5}, 1e-3).inside == doctest::Approx(3));
    CHECK(area.shared_with({0, 5.0005}, {9, 5.0005}, 1e-3).along_edge == doctest::Approx(9));
    CHECK(area.shared_with({0, 5.01}, {9, 5.01}, 1e-3).along_edge == 0);
    CHECK(area.shared_with({3, 5}, {3, 9}, 1e-3).inside == doctest::Approx(0));
}

// Seen all but level, edges that lie on each other come in either order; what is inside must not turn on it.
TEST_CASE("openings that touch along an edge are clipped from any side") {
    for (const double degrees : {0.0, 89.75, -89.75, 89.9982, -89.9982, 90.0, 17.0}) {
        CAPTURE(degrees);
        const double a = degrees * std::numbers::pi / 180;
        const auto turned = [&](Ring ring) {
            for (Point& p : ring) {
                p = {p.x * std::cos(a) - p.y * std::sin(a), p.x * std::sin(a) + p.y * std::cos(a)};
            }
            return ring;
        };
        RingArea area({turned({{-4, -3}, {4, -3}, {4, 3}, {-4, 3}}),
                       turned({{-1, -1}, {-1, 1}, {0.5, 1}, {0.5, -1}}),
                       turned({{0.5, -0.5}, {0.5, 0.5}, {1.5, 0.5}, {1.5, -0.5}})},
                      1e-13, 0);
        std::vector<RingArea::Part> parts;
        for (const double middle : {-2.0, 0.0, 0.1, 3.0}) {
            double found = 0;
            for (const StripPiece& piece : {StripPiece{-9, middle, {-9, -9, 0}, {9, 9, 0}},
                                            StripPiece{middle, 9, {-9, -9, 0}, {9, 9, 0}}}) {
                area.clip(piece, StripAxes{}, Box{{-9, piece.from}, {9, piece.to}}, parts);
                for (const RingArea::Part& part : parts) {
                    found += area_of(part.piece);
                }
            }
            CHECK(found == doctest::Approx(44).epsilon(1e-13));
        }
    }
}

TEST_CASE("boxes are found in buckets as one by one, however they lie") {
    const std::uint64_t seed = support::seed_of_run(45);
    MESSAGE("seed " << seed);
    Random random(seed);
    for (int round = 0; round < 60; ++round) {
        CAPTURE(round);
        std::vector<Box> boxes;
        const double largest = round % 3 == 0 ? 60 : 1; // long ones, so that a tree takes over
        for (int i = random.whole(1, 300); i > 0; --i) {
            const Point p = round % 4 == 0 ? Point{3, random.between(-30, 30)}
                                           : Point{random.between(-30, 30), random.between(-30, 30)};
            boxes.push_back({p, p + Point{random.between(0, largest), random.between(0, largest)}});
        }
        const BoxBuckets buckets(boxes);
        std::vector<std::uint32_t> found;
        for (int k = 0; k < 40; ++k) {
            const Point p{random.between(-40, 40), random.between(-40, 40)};
            const Box asked{p, p + Point{random.between(0, 20), random.between(0, 20)}};
            buckets.find(asked, found);
            std::sort(found.begin(), found.end());
            std::vector<std::uint32_t> expected;
            for (std::uint32_t i = 0; i < boxes.size(); ++i) {
                if (boxes[i].meets(asked)) {
                    expected.push_back(i);
                }
            }
            CHECK(found == expected);
        }
    }
}

// An opening whose edge is as far from a beam's end as from the deck's edge: the parabola between them
// touches it, and a strip that is even about that point has to see both sides.
TEST_CASE("a parabola that touches an edge is clipped on both sides of the point") {
    RingArea area({Ring{{-3, 2}, {3, 2}, {3, 9}, {-3, 9}}}, 1e-13, 0);
    const StripAxes axes{{0, 0}, 0, 1}; // along = y, across = -x
    // d = (s^2 + 16) / 8, about s = 0 where it is 2.
    const StripPiece piece{-2, 2, {0, 0, 0}, {2.5, 2.5, 2}};
    std::vector<RingArea::Part> parts;
    area.clip(piece, axes, Box{{-2, 0}, {2, 2.5}}, parts);
    double found = 0;
    for (const RingArea::Part& part : parts) {
        found += area_of(part.piece);
    }
    CHECK(found == doctest::Approx(2.0 / 3).epsilon(1e-13)); // twice the integral of s^2 / 8 from 0 to 2
}
