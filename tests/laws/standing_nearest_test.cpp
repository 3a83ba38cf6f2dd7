#include "support/deck_support.hpp"
#include "support/nearest_support.hpp"
#include "support/random_support.hpp"

#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using support::BeamAndColumn;
using support::between_all;
using support::far_away;
using support::HandFramed;
using support::Motion;
using support::Random;
using support::random_nearest;
using support::Stretch;
using support::totals;
using support::worst_force;

namespace {

/// Distance of every carrier of a nearest deck from a point: beams on two-way decks, else columns that stand
/// in the deck.
std::vector<double> distances(const HandFramed& f, Point p) {
    const FramedLevel& level = f.framing.levels[0];
    const bool on_columns = level.decks[0].span == SpanKind::columns;
    std::vector<double> all;
    for (const FramedMember& member : level.members) {
        all.push_back(on_columns ? 1e9 : distance_to_segment(p, member.from, member.to));
    }
    const FramedDeck& deck = level.decks[0];
    for (const Column& column : f.plan.columns) {
        const bool stands =
            column.at == deck.outline[0] ||
            (support::lies_in(deck.outline, column.at) &&
             std::none_of(deck.openings.begin(), deck.openings.end(),
                          [&](const Ring& opening) { return support::lies_in(opening, column.at); }));
        all.push_back(on_columns && stands ? distance(p, column.at) : 1e9);
    }
    return all;
}

} // namespace

TEST_CASE("line and point loads on decks that load what is nearest: all of each arrives, and where nothing "
          "is nearer") {
    const std::uint64_t seed = support::seed_of_run(20261207);
    MESSAGE("seed " << seed);
    constexpr int samples = 2000;
    constexpr double tie = 1e-9; // of distances: shared ends, points on a border
    int whole = 0;
    double lost = 0;
    for (std::uint64_t i = 0; i < 500; ++i) {
        CAPTURE(i);
        std::vector<AreaLoad> loads;
        Random random(seed + i);
        HandFramed f = random_nearest(random, {}, loads);
        const Sharing sharing = f.share();
        f.level().area_loads.clear();
        const Point a{random.between(-3, 3), random.between(-3, 3)};
        const Point b{random.between(-3, 3), random.between(-3, 3)};
        const double w_a = random.between(0, 4);
        const double w_b = random.between(0, 4);
        f.level().line_loads = {{"live", w_a, w_b, a, b, {}, {}}};
        f.level().point_loads = {{"dead", 5, between(a, b, 0.3), {}, {}}};
        const LevelLoads put = f.load(sharing);
        if (has_errors(put.problems)) {
            continue; // over an opening or past the edge
        }
        ++whole;
        lost = std::max(lost, worst_force(put, distance(a, b)));
        CHECK(worst_force(put, distance(a, b)) <= 1e-12);

        // What surely goes to each carrier, and what may.
        std::vector<double> surely(put.lines.size(), 0.0);
        std::vector<double> maybe(put.lines.size(), 0.0);
        for (int k = 0; k < samples; ++k) {
            const double t = (k + 0.5) / samples;
            const double w = ((1 - t) * w_a + t * w_b) * distance(a, b) / samples;
            const std::vector<double> all = distances(f, between(a, b, t));
            const double least = *std::min_element(all.begin(), all.end());
            const auto near =
                std::count_if(all.begin(), all.end(), [&](double d) { return d <= least + tie; });
            for (std::size_t c = 0; c < all.size(); ++c) {
                maybe[c] += all[c] <= least + tie ? w : 0;
                surely[c] += all[c] <= least + tie && near == 1 ? w : 0;
            }
        }
        const double step = 8 * 4 * distance(a, b) / samples; // eight borders crossed between samples
        const std::vector<double> found = totals(put, 1);
        const std::vector<double> point = totals(put, 0);
        const std::vector<double> all = distances(f, between(a, b, 0.3));
        for (std::size_t c = 0; c < found.size(); ++c) {
            CHECK(found[c] >= surely[c] - step);
            CHECK(found[c] <= maybe[c] + step);
            if (point[c] != 0) {
                CHECK(point[c] == doctest::Approx(5));
                CHECK(all[c] <= *std::min_element(all.begin(), all.end()) + tie);
            }
        }
    }
    CHECK(whole > 150);
    MESSAGE(whole << " of 500 lines wholly on their deck; lost of one at most " << lost);
}

namespace {

/// Fractions of a drawn line at which beam and column change places as the nearest, by halving.
std::vector<double> changes_of_nearest(const BeamAndColumn& d, Point a, Point b) {
    constexpr int samples = 4000;
    std::vector<double> changes;
    for (int k = 0; k < samples; ++k) {
        double from = static_cast<double>(k) / samples;
        double to = static_cast<double>(k + 1) / samples;
        const bool first = d.beam_is_nearer(between(a, b, from));
        if (d.beam_is_nearer(between(a, b, to)) == first) {
            continue;
        }
        for (int halving = 0; halving < 60; ++halving) {
            const double middle = (from + to) / 2;
            (d.beam_is_nearer(between(a, b, middle)) == first ? from : to) = middle;
        }
        changes.push_back(from);
    }
    return changes;
}

} // namespace

TEST_CASE("line and point loads on a deck go to the nearer of beam and column, the line by its stretches") {
    const std::uint64_t seed = support::seed_of_run(20261205);
    MESSAGE("seed " << seed);
    double worst = 0;
    double worst_place = 0;
    for (std::uint64_t i = 0; i < 2000; ++i) {
        CAPTURE(i);
        Random random(seed + i);
        BeamAndColumn d = BeamAndColumn::random(random);
        d.opening_from = d.opening_to = 0; // what stands over an opening is refused
        const auto inside = [&] { return Point{random.between(0, d.length), random.between(0, d.depth)}; };
        const Point a = inside();
        Point b = inside();
        if (random.chance(0.3)) { // along the beam, or square to it
            random.chance(0.5) ? b.y = a.y : b.x = a.x;
        }
        if (distance(a, b) < 0.1) {
            continue;
        }
        const double w_a = random.between(-1, 4);
        const double w_b = random.between(-1, 4);
        const Point stands = inside();
        const auto load_at = [&](const Motion& move) {
            HandFramed f = d.framed(move, {});
            f.level().line_loads.push_back({"live", w_a, w_b, move(a), move(b), {}, {}});
            f.level().point_loads.push_back({"dead", 7, move(stands), {}, {}});
            return f.load(d.sharing(move));
        };
        const LevelLoads loads = load_at({random.between(-180, 180), {}});
        CHECK(loads.problems.empty());

        double to_beam = 0;
        double moment = 0; // about the beam's start, of what goes to the beam
        for (const Stretch& t : between_all(changes_of_nearest(d, a, b), 0, 1)) {
            if (!d.beam_is_nearer(between(a, b, t.middle()))) {
                continue;
            }
            const double l = distance(a, b) * (t.to - t.from);
            const double from = (1 - t.from) * w_a + t.from * w_b;
            const double to = (1 - t.to) * w_a + t.to * w_b;
            to_beam += l * (from + to) / 2;
            moment += l / 6 *
                      (from * (2 * between(a, b, t.from).x + between(a, b, t.to).x) +
                       to * (between(a, b, t.from).x + 2 * between(a, b, t.to).x));
        }
        double found = 0;
        double found_moment = 0;
        for (const CarrierLine& line : loads.lines[0]) {
            found += line.piece.total();
            found_moment += line.piece.first_moment() + line.piece.total() * line.piece.from;
        }
        for (const CarrierPoint& point : loads.points[0]) {
            if (point.load_case == 1) {
                found += point.p;
                found_moment += point.p * point.station;
            }
        }
        const double size = 4 * distance(a, b);
        CHECK(std::abs(found - to_beam) <= 1e-9 * size);
        CHECK(std::abs(found_moment - moment) <= 1e-9 * size * d.length);
        CHECK(std::abs(support::total(loads.points[1], 1) + to_beam - distance(a, b) * (w_a + w_b) / 2) <=
              1e-9 * size);
        worst = std::max(worst, std::abs(found - to_beam) / size);
        worst_place = std::max(worst_place, std::abs(found_moment - moment) / size / d.length);

        const std::uint32_t nearer = d.beam_is_nearer(stands) ? 0 : 1;
        CHECK(support::total(loads.points[nearer], 0) == 7);
        CHECK(support::total(loads.points[1 - nearer], 0) == 0);

        const LevelLoads away = load_at(far_away(random));
        CHECK(away.problems.empty());
        CHECK(worst_force(away, size) <= 1e-9);
        for (std::size_t c = 0; c < 2; ++c) {
            CHECK(std::abs(support::total(away.points[c], 1) + support::total(away.lines[c], 1) -
                           support::total(loads.points[c], 1) - support::total(loads.lines[c], 1)) <= 1e-6);
        }
    }
    MESSAGE("the beam's part off by " << worst << ", its place by " << worst_place
                                      << " of the whole at most");
}
