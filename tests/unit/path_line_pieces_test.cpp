#include "geometry/line_pieces.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <random>

using namespace runnel;

namespace {

LinePiece linear(double from, double to, double start, double end) {
    return {from, to, {start, (end - start) / (to - from), 0, 0, 0}};
}
constexpr double noise = 1e-13;

double intensity_at(const std::vector<LinePiece>& pieces, double station) {
    double sum = 0;
    for (const LinePiece& piece : pieces) {
        if (piece.from <= station && station < piece.to) {
            sum += piece.at(station);
        }
    }
    return sum;
}

} // namespace

TEST_CASE("pieces of one uniform load laid end to end are one piece") {
    const auto result = merged({linear(4, 6, 5, 5), linear(0, 1, 5, 5), linear(1, 4, 5, 5)}, noise);
    REQUIRE(result.size() == 1);
    CHECK(result[0].from == 0);
    CHECK(result[0].to == 6);
    CHECK(result[0].c == std::array<double, 5>{5, 0, 0, 0, 0});
}

TEST_CASE("two halves of a triangle joined by a short first piece keep the slope of the long one") {
    const auto result = merged({linear(0, 0.001, 0, 0.002), linear(0.001, 9, 0.002, 18)}, noise);
    REQUIRE(result.size() == 1);
    CHECK(result[0].at(4.5) == doctest::Approx(9).epsilon(1e-14));
    CHECK(result[0].total() == doctest::Approx(81).epsilon(1e-14));
}

TEST_CASE("overlapping loads add up between common breakpoints") {
    const auto result = merged({linear(0, 4, 2, 2), linear(3, 6, 1, 4)}, noise);
    REQUIRE(result.size() == 3);
    CHECK(result[0].to == 3);
    CHECK(result[1].at(3) == doctest::Approx(3));
    CHECK(result[1].at(4) == doctest::Approx(4)); // 2 and 2
    CHECK(result[2].from == 4);
    CHECK(result[2].at(6) == doctest::Approx(4));
}

TEST_CASE("a gap stays a gap and a kink stays a kink") {
    const auto result = merged({linear(0, 1, 0, 1), linear(1, 2, 1, 0), linear(3, 4, 1, 1)}, noise);
    REQUIRE(result.size() == 3);
    CHECK(result[0].to == 1);
    CHECK(result[2].from == 3);
}

TEST_CASE("breakpoints that differ by rounding are one") {
    const double a = 3.0000000000000004;
    const auto result =
        merged({linear(0, 3, 1, 1), linear(a, 6, 1, 1), linear(3, 3 + 5e-14, 1e3, 1e3)}, noise);
    REQUIRE(result.size() == 1);
    CHECK(result[0].from == 0);
    CHECK(result[0].to == 6);
}

TEST_CASE("far from the origin, where coordinates are coarse, force and moment stay as given") {
    constexpr double far_noise = 7e-9; // at 1000 km
    constexpr unsigned seed = 5;
    INFO("seed ", seed);
    std::mt19937 random(seed);
    std::uniform_real_distribution<double> unit(0, 1);
    for (int round = 0; round < 500; ++round) {
        std::vector<LinePiece> pieces;
        double force = 0;
        double moment = 0;
        double station = 0;
        for (int i = 0; i < 20; ++i) {
            const double from = station + (unit(random) - 0.5) * 1e-9;
            station += i % 7 == 3 ? 3e-9 : 0.3 + unit(random);
            const double to = station + (unit(random) - 0.5) * 1e-9;
            const double w = i % 5 == 0 ? 2.5 : 1;
            pieces.push_back({std::min(from, to), std::max(from, to), {w, 0.01 * (i % 3), 0, 0, 0}});
            force += pieces.back().total();
            moment += pieces.back().total() * pieces.back().from + pieces.back().first_moment();
        }
        const auto result = merged(pieces, far_noise);
        REQUIRE(result.size() < pieces.size());
        for (const LinePiece& piece : result) {
            force -= piece.total();
            moment -= piece.total() * piece.from + piece.first_moment();
        }
        REQUIRE(std::abs(force) < 1e-12);
        REQUIRE(std::abs(moment) < 1e-11);
    }
}

TEST_CASE("joined pieces stay within 1e-9 of their ordinates however coarse coordinates are, as is told") {
    constexpr double far_noise = 7e-9; // at 1000 km
    constexpr unsigned seed = 6;
    INFO("seed ", seed);
    std::mt19937 random(seed);
    std::uniform_real_distribution<double> unit(-1, 1);
    std::size_t joined = 0;
    std::size_t kept = 0;
    for (int round = 0; round < 200; ++round) {
        const double bend = std::pow(10, -6 - 5 * std::abs(unit(random))); // from piece to piece
        std::vector<LinePiece> pieces;
        for (int i = 0; i < 40; ++i) {
            pieces.push_back(
                {0.02 * i, 0.02 * (i + 1), {1 + bend * unit(random), bend * unit(random), 0, 0, 0}});
        }
        double changed = 0;
        const auto result = merged(pieces, far_noise, &changed);
        REQUIRE(changed <= 1.0000001e-9);
        for (double station = 0.001; station < 0.8; station += 0.002) {
            REQUIRE(std::abs(intensity_at(result, station) - intensity_at(pieces, station)) <=
                    changed + 1e-15);
        }
        joined += result.size() == 1 ? 1 : 0;
        kept += result.size() > 30 ? 1 : 0;
    }
    CHECK(joined > 20);
    CHECK(kept > 20);
}

TEST_CASE("an end that noise moved changes short pieces by no more than is told") {
    double changed = 0;
    const auto result = merged({linear(0, 1, 1, 1), linear(1 + 1e-9, 1.01, 7, 7)}, 7e-9, &changed);
    REQUIRE(result.size() == 2);
    const double off = std::abs(result[1].at(1.005) - 7);
    CHECK(off > 1e-7); // 1e-9 m of 0.01 m
    CHECK(off <= changed);
    CHECK(changed < 1e-4);
}

TEST_CASE("loads that cancel leave nothing") {
    const auto result = merged({linear(0, 4, 2, 2), linear(1, 2, -2, -2)}, noise);
    REQUIRE(result.size() == 2);
    CHECK(result[0].to == 1);
    CHECK(result[1].from == 2);
}

TEST_CASE("the sum of many overlapping loads is their sum everywhere, in whatever order they come") {
    constexpr unsigned seed = 20261201;
    INFO("seed ", seed);
    std::mt19937 random(seed);
    std::uniform_real_distribution<double> unit(0, 1);
    for (int round = 0; round < 200; ++round) {
        std::vector<LinePiece> pieces;
        for (int i = 0; i < 12; ++i) {
            // Stations on a grid of tenths, so that many breakpoints coincide.
            const double from = std::floor(unit(random) * 50) / 10;
            const double to = from + (1 + std::floor(unit(random) * 40)) / 10;
            pieces.push_back(
                {from,
                 to,
                 {unit(random), unit(random) - 0.5, unit(random) - 0.5, unit(random) / 9, unit(random) / 9}});
        }
        const auto result = merged(pieces, noise);
        for (std::size_t i = 0; i + 1 < result.size(); ++i) {
            REQUIRE(result[i].to <= result[i + 1].from);
        }
        for (double station = 0.05; station < 10; station += 0.1) {
            REQUIRE(intensity_at(result, station) ==
                    doctest::Approx(intensity_at(pieces, station)).epsilon(1e-12));
        }
        std::shuffle(pieces.begin(), pieces.end(), random);
        const auto shuffled = merged(pieces, noise);
        REQUIRE(shuffled.size() == result.size());
        for (std::size_t i = 0; i < result.size(); ++i) {
            REQUIRE(shuffled[i].from == result[i].from);
            REQUIRE(shuffled[i].c == result[i].c);
        }
    }
}
