#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"
#include "support/random_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <numeric>
#include <optional>

using namespace runnel;
using doctest::Approx;

namespace {

/// A piece whose borders are straight or parabolas that do not cross.
StripPiece random_piece(support::Random& random, double shift) {
    StripPiece piece;
    piece.from = shift + random.between(-5, 5);
    piece.to = piece.from + random.between(0.01, 8);
    piece.low = {shift + random.between(-4, 0), shift + random.between(-4, 0),
                 random.chance(0.5) ? random.between(0, 8) : 0}; // bulges down: away from the high border
    piece.high = {shift + random.between(0, 4), shift + random.between(0, 4),
                  random.chance(0.5) ? random.between(-8, 0) : 0};
    if (random.chance(0.1)) {
        piece.high.start = piece.low.start; // a corner
    }
    return piece;
}

/// A convex window: corners on an ellipse, or an upright rectangle that may share levels with the piece.
Convex random_window(support::Random& random, const StripPiece& piece, double shift) {
    if (random.chance(0.3)) {
        const double bottom = random.chance(0.5) ? piece.from : shift + random.between(-6, 2);
        const double top =
            std::max(bottom + 0.5, random.chance(0.5) ? piece.to : bottom + random.between(1, 8));
        const double left = random.chance(0.3) ? piece.low.start : shift + random.between(-5, 1);
        const double right = left + random.between(0.5, 7);
        return {{left, bottom}, {right, bottom}, {right, top}, {left, top}};
    }
    const Point centre{shift + random.between(-4, 4), shift + random.between(-4, 8)};
    const double a = random.between(0.2, 7);
    const double b = random.between(0.2, 7);
    const int corners = random.whole(3, 8);
    Convex window;
    for (int i = 0; i < corners; ++i) {
        const double t = 2 * std::numbers::pi * (i + random.between(0.05, 0.95)) / corners;
        window.push_back({centre.x + a * std::cos(t), centre.y + b * std::sin(t)});
    }
    return window;
}

/// What of a level lies in the window.
std::optional<std::pair<double, double>> window_at(const Convex& window, double across) {
    double low = 1e300;
    double high = -1e300;
    for (std::size_t i = 0; i < window.size(); ++i) {
        const Point a = window[i];
        const Point b = window[(i + 1) % window.size()];
        if ((a.y > across) != (b.y > across)) {
            const double u = a.x + (b.x - a.x) * ((across - a.y) / (b.y - a.y));
            low = std::min(low, u);
            high = std::max(high, u);
        }
    }
    return low < high ? std::optional(std::pair(low, high)) : std::nullopt;
}

/// Area of the piece within the window by a sum over many levels.
double area_by_levels(const StripPiece& piece, const Convex& window) {
    constexpr int levels = 20'000;
    double sum = 0;
    for (int i = 0; i < levels; ++i) {
        const double x = (i + 0.5) / levels;
        if (const auto inside = window_at(window, (1 - x) * piece.from + x * piece.to)) {
            const double low = std::max(inside->first, piece.low.at(x));
            const double high = std::min(inside->second, piece.high.at(x));
            sum += std::max(0.0, high - low);
        }
    }
    return sum * (piece.to - piece.from) / levels;
}

double sum_of(const std::vector<StripPiece>& pieces) {
    return std::accumulate(pieces.begin(), pieces.end(), 0.0,
                           [](double sum, const StripPiece& piece) { return sum + area_of(piece); });
}

} // namespace

TEST_CASE("a piece divided by a window: both sides together are the piece, and what is inside lies inside") {
    const std::uint64_t seed = support::seed_of_run(311);
    MESSAGE("seed " << seed);
    support::Random random(seed);
    double worst = 0;
    for (int i = 0; i < 4000; ++i) {
        CAPTURE(i);
        const double shift = i % 3 == 2 ? 1e6 : 0;
        const double noise = noise_of(shift + 10);
        const StripPiece piece = random_piece(random, shift);
        const Convex window = random_window(random, piece, shift);
        std::vector<StripPiece> inside;
        std::vector<StripPiece> outside;
        divide(piece, window, noise, &inside, &outside);

        const double whole = area_of(piece);
        worst = std::max(worst, std::abs(sum_of(inside) + sum_of(outside) - whole) / std::max(whole, 1.0));
        CHECK(sum_of(inside) + sum_of(outside) == Approx(whole).epsilon(1e-12 + noise));
        for (const StripPiece& part : inside) {
            CHECK(part.high.at(0.5) >= part.low.at(0.5));
        }
        for (const StripPiece& part : outside) {
            CHECK(part.high.at(0.5) >= part.low.at(0.5));
        }
        if (i % 10 == 0) {
            CHECK(sum_of(inside) == Approx(area_by_levels(piece, window)).epsilon(2e-4).scale(1));
        }
        // Moments and a plane's force add up too.
        const Intensity plane{1.5 - 0.2 * shift, 0.3, -0.1};
        AreaMoments parts;
        for (const auto* list : {&inside, &outside}) {
            for (const StripPiece& part : *list) {
                const AreaMoments m = moments_of(part, plane);
                parts.area += m.area;
                parts.moment = parts.moment + m.moment;
            }
        }
        const AreaMoments all = moments_of(piece, plane);
        const double size = whole * (std::abs(plane.q) + shift + 10);
        CHECK(std::abs(parts.area - all.area) <= 1e-12 * size);
        CHECK(std::abs(parts.moment.x - all.moment.x) <= 1e-12 * size * (shift + 10));
        CHECK(std::abs(parts.moment.y - all.moment.y) <= 1e-12 * size * (shift + 10));
    }
    MESSAGE("largest relative gap in area " << worst);
}

TEST_CASE("area and moments of a piece under a parabola are those of the closed form") {
    // Under d = 4 x (1 - x) over 3 m: area 3 * 4 / 6, centroid at 2/5 of the height.
    const StripPiece piece{1, 4, {0, 0, 0}, {0, 0, -4}};
    const AreaMoments m = moments_of(piece);
    CHECK(area_of(piece) == Approx(2).epsilon(1e-15));
    CHECK(m.area == Approx(2).epsilon(1e-14));
    CHECK(m.moment.x / m.area == Approx(0.4).epsilon(1e-14));
    CHECK(m.moment.y / m.area == Approx(2.5).epsilon(1e-14));
    // A pressure that rises along by 1 a metre puts on the first moment of the area.
    CHECK(moments_of(piece, Intensity{0, 1, 0}).area == Approx(m.moment.x).epsilon(1e-14));
    CHECK(moments_of(piece, Intensity{0, 0, 1}).area == Approx(m.moment.y).epsilon(1e-14));
}

TEST_CASE("a parabola meets a line twice, once or never") {
    CHECK(crossings_of({0, 0, -4}, 0.75, 0.75) == std::vector<double>{0.25, 0.75});
    CHECK(crossings_of({0, 1, -4}, 0.5, 0.5).size() == 1);
    CHECK(crossings_of({0, 0, -4}, 1.5, 1.5).empty());
    CHECK(crossings_of({0, 2, 0}, 1, 1) == std::vector<double>{0.5});
    CHECK(crossings_of({0, 2, 0}, 3, 3).empty());
}
