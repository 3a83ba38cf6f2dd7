#include "geometry/basic.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"
#include "geometry/strip_sweep.hpp"
#include "support/random_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using doctest::Approx;

namespace {

struct Pair {
    double wanted; ///< area of the intersection, m2, by convex clipping in long double
    Ring p, q;
};

/// Pairs of valid convex quadrilaterals on which a general boolean operation in floating point went wrong by
/// up to fifty times the area (measured by us). Direct clipping must get them all right.
const std::vector<Pair> pairs{
    {0,
     {{288.5, 10}, {288.75, 10}, {288.75, 20}, {288.5, 20}},
     {{282.50000000000085, -0.5},
      {288.50000000000017, -0.5},
      {288.49999999999994, 10.000000000000172},
      {282.49999999999915, 9.9999999999996714}}},
    {5.2680082518463678e-14,
     {{144, 20}, {144.25, 20}, {144.25, 30}, {144, 30}},
     {{138.24999999999991, 30.000000000000572},
      {144.25, 29.999999999999773},
      {144.24999999999943, 39.999999999999893},
      {138.25000000000088, 39.999999999999112}}},
    {2.4999999999949027,
     {{30.716150185068535, 124.41696274145384},
      {30.955226374059293, 124.49005566763454},
      {28.031509326831923, 134.05310322726487},
      {27.792433137841165, 133.98001030108421}},
     {{25.217397838281585, 122.73582543929882},
      {30.955226374059428, 124.4900556676341},
      {28.031509326831227, 134.05310322726382},
      {22.293680791054491, 132.29887299892769}}},
    {0,
     {{234.83241280383834, 197.27848437355669},
      {235.0714889928291, 197.35157729973739},
      {232.14777194560173, 206.91462485936773},
      {231.90869575661097, 206.84153193318704}},
     {{232.14777194560176, 206.91462485936765},
      {237.88560048137927, 208.66885508770309},
      {234.96188343415253, 218.23190264733452},
      {229.22405489837502, 216.47767241899882}}},
    {2.500000000075759,
     {{1000002.5750352995, 730011.24418486177},
      {1000002.8141114885, 730011.31727778795},
      {999999.89039444132, 730020.88032534765},
      {999999.65131825232, 730020.80723242147}},
     {{999996.5981305748, 730009.41686170723},
      {1000002.8141114885, 730011.31727778795},
      {999999.89039444132, 730020.88032534765},
      {999993.67441352759, 730018.97990926693}}},
    {2.5000000000758642,
     {{1000100.3571965968, 730041.13919166964},
      {1000100.5962727858, 730041.21228459582},
      {1000097.6725557386, 730050.77533215552},
      {1000097.4334795496, 730050.70223922934}},
     {{1000094.85844425, 730039.45805436757},
      {1000100.5962727858, 730041.21228459582},
      {1000097.6725557386, 730050.77533215552},
      {1000091.9347272028, 730049.02110192715}}},
    {0,
     {{1000016.9744094183, 730005.18959775881},
      {1000017.2134856073, 730005.26269068499},
      {1000014.2897685601, 730014.82573824469},
      {1000014.0506923711, 730014.75264531851}},
     {{1000008.5519400237, 730013.07150801597},
      {1000014.2897685601, 730014.82573824481},
      {1000011.3660515136, 730024.38878580509},
      {1000005.6282229761, 730022.6345555766}}},
    {2.5000000000431313,
     {{1000114.7565707156, 730035.08460456668},
      {1000114.9956469046, 730035.15769749286},
      {1000112.0719298574, 730044.72074505256},
      {1000111.8328536684, 730044.64765212638}},
     {{1000109.4040042207, 730032.9253148865},
      {1000115.1418327576, 730034.67954511521},
      {1000112.0719298575, 730044.72074505244},
      {1000106.3341013212, 730042.96651482466}}},
};

Ring counter_clockwise(Ring ring) {
    if (signed_area(ring) < 0) {
        std::reverse(ring.begin(), ring.end());
    }
    return ring;
}

double area_of(const std::vector<Convex>& pieces) {
    double sum = 0;
    for (const Convex& piece : pieces) {
        sum += signed_area(piece);
    }
    return sum;
}

double largest(const Ring& ring) {
    double size = 0;
    for (const Point& p : ring) {
        size = std::max({size, std::abs(p.x), std::abs(p.y)});
    }
    return size;
}

} // namespace

TEST_CASE("clipping two convex pieces finds the common area where aligned edges mislead general overlay") {
    for (const Pair& pair : pairs) {
        const Ring p = counter_clockwise(pair.p);
        const Ring q = counter_clockwise(pair.q);
        const double noise = noise_of(std::max(largest(p), largest(q)));
        const double area = signed_area(clipped(p, q, noise));
        CHECK(std::abs(area - pair.wanted) <= 20 * noise); // of a side of ten metres
        double inside = 0;
        double outside = 0;
        for (const StripPiece& piece : pieces_of(p, noise)) {
            std::vector<StripPiece> in;
            std::vector<StripPiece> out;
            divide(piece, q, noise, &in, &out);
            for (const StripPiece& part : in) {
                inside += area_of(part);
            }
            for (const StripPiece& part : out) {
                outside += area_of(part);
            }
        }
        CHECK(std::abs(inside - pair.wanted) <= 20 * noise);
        CHECK(inside + outside == Approx(signed_area(p)).epsilon(1e-9));
    }
}

TEST_CASE(
    "a ring in convex pieces keeps its area, with openings, touching openings and an opening on the edge") {
    const std::uint64_t seed = support::seed_of_run(99);
    MESSAGE("seed " << seed);
    support::Random random(seed);
    for (int i = 0; i < 500; ++i) {
        const Ring outline = random.star({0, 0}, 4, 10, random.whole(9, 20));
        const std::vector<Ring> openings{random.star({0, 0}, 0.5, 2, random.whole(3, 9))};
        const std::vector<Convex> pieces = convex_pieces(outline, openings, noise_of(10));
        CHECK(area_of(pieces) == Approx(signed_area(outline) - signed_area(openings[0])).epsilon(1e-12));
        for (const Convex& piece : pieces) {
            CHECK(piece.size() >= 3);
            CHECK(signed_area(piece) > -1e-12);
        }
    }
    const Ring square{{0, 0}, {4, 0}, {4, 4}, {0, 4}};
    const std::vector<Ring> side_by_side{{{1, 1}, {1, 2}, {2, 2}, {2, 1}}, {{2, 1}, {2, 3}, {3, 3}, {3, 1}}};
    CHECK(area_of(convex_pieces(square, side_by_side, noise_of(4))) == Approx(13.0).epsilon(1e-14));
    const std::vector<Ring> on_edge{{{0, 1}, {0, 2}, {2, 2}, {2, 1}}, {{3, 0}, {3, 1}, {4, 1}, {4, 0}}};
    CHECK(area_of(convex_pieces(square, on_edge, noise_of(4))) == Approx(13.0).epsilon(1e-14));
    const std::vector<Ring> corner_to_corner{{{1, 1}, {1, 2}, {2, 2}, {2, 1}},
                                             {{2, 2}, {2, 3}, {3, 3}, {3, 2}}};
    CHECK(area_of(convex_pieces(square, corner_to_corner, noise_of(4))) == Approx(14.0).epsilon(1e-14));
    // Beyond what a plan may hold: openings that overlap, or reach outside, are taken off once.
    const std::vector<Ring> overlapping{{{1, 1}, {1, 3}, {3, 3}, {3, 1}}, {{2, 2}, {2, 5}, {3, 5}, {3, 2}}};
    CHECK(area_of(convex_pieces(square, overlapping, noise_of(4))) == Approx(11.0).epsilon(1e-14));
}

TEST_CASE("marks that lean by a millionth of a millionth do not disturb the sweep") {
    const Ring square{{0, 0}, {10, 0}, {10, 10}, {0, 10}};
    for (const double lean : {0.0, 1e-16, 1e-15, 1e-14, 1e-13, 1e-12, 1e-9, 1e-6}) {
        std::vector<Mark> marks;
        for (int i = 0; i <= 10; ++i) {
            marks.push_back({{static_cast<double>(i), lean * i}, {i + lean * (i % 3), 10 - lean * i}});
        }
        const StripSweep sweep = sweep_strips(square, {}, marks, noise_of(10));
        double area = 0;
        for (const Gap& gap : sweep.gaps) {
            area += (gap.to - gap.from) * (gap.high_start - gap.low_start + gap.high_end - gap.low_end) / 2;
        }
        CHECK(area == Approx(100.0).epsilon(1e-13));
    }
}
