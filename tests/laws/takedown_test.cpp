#include "geometry/strip_piece.hpp"
#include "support/building_support.hpp"
#include "support/problem_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <cmath>
#include <map>

using namespace runnel;
using support::Placing;

namespace {

/// Foundation reactions by id and case.
std::map<std::string, std::vector<double>> foundations_of(const Takedown& takedown) {
    std::map<std::string, std::vector<double>> result;
    for (const Foundation& foundation : takedown.foundations) {
        const Plan& plan = takedown.plan;
        const std::string& id = foundation.under.kind == CarrierKind::column
                                    ? plan.columns[foundation.under.index].id
                                    : plan.walls[foundation.under.index].id;
        result[id] = foundation.reactions;
    }
    return result;
}

struct Closing {
    double cover = 0;
    double force = 0;
    double moment = 0;
};

/// Largest relative disagreement of the building's balance.
Closing closing_of(const Takedown& takedown) {
    Closing worst;
    const double size = std::max(takedown.framing.largest_coordinate, 1.0);
    for (const Balance& row : takedown.balance) {
        const double magnitude = row.applied.magnitude;
        if (magnitude > 0) {
            worst.force = std::max(worst.force, row.difference / magnitude);
            worst.moment = std::max({worst.moment, std::abs(row.moment_difference.x) / (magnitude * size),
                                     std::abs(row.moment_difference.y) / (magnitude * size)});
        }
    }
    return worst;
}

/// Largest relative error of cover over all decks; owners are checked at sampled points on the way, which
/// also shows that no two cells share area.
double check_split(const Takedown& takedown, std::uint32_t samples, std::uint64_t seed) {
    double worst = 0;
    for (std::uint32_t l = 0; l < takedown.levels.size(); ++l) {
        const Sharing& sharing = takedown.levels[l].sharing;
        CHECK(check_cover(takedown.framing, l, sharing).empty());
        CHECK(check_owners(takedown.plan, takedown.framing, l, sharing, samples, seed).empty());
        std::vector<double> area(sharing.deck_area.size(), 0.0);
        for (const Cell& cell : sharing.cells) {
            area[cell.deck] += area_of(StripPiece{cell.from, cell.to, cell.low, cell.high});
        }
        for (std::size_t d = 0; d < area.size(); ++d) {
            worst = std::max(worst, std::abs(area[d] - sharing.deck_area[d]) / sharing.deck_area[d]);
        }
    }
    return worst;
}

double largest_difference(const Takedown& a, const Takedown& b) {
    const auto here = foundations_of(a);
    const auto there = foundations_of(b);
    REQUIRE(here.size() == there.size());
    double worst = 0;
    for (const auto& [id, reactions] : here) {
        for (std::size_t c = 0; c < reactions.size(); ++c) {
            worst = std::max(worst, std::abs(reactions[c] - there.at(id)[c]));
        }
    }
    return worst;
}

} // namespace

namespace {

using Draw = Plan (*)(std::uint64_t, const Placing&);

void hold_laws(std::uint64_t seed, int plans, Draw draw) {
    MESSAGE("seed " << seed);
    Closing near;
    Closing far;
    double motion = 0;
    double order = 0;
    double scale = 0;
    for (int i = 0; i < plans; ++i) {
        const std::uint64_t own = seed + static_cast<std::uint64_t>(i);
        CAPTURE(own);
        const Takedown plain = take_down(draw(own, {}));
        REQUIRE_MESSAGE(plain.complete, support::texts_of_errors(plain.problems));
        CHECK(check_balance(plain).empty());
        near.cover = std::max(near.cover, check_split(plain, 20, own));
        const Closing closing = closing_of(plain);
        near.force = std::max(near.force, closing.force);
        near.moment = std::max(near.moment, closing.moment);

        support::Random random(own);
        Placing away;
        away.degrees =
            random.between(-89, 89); // past a quarter turn joist fields count from their other side
        away.shift = {random.between(-1, 1) * 1e5, random.between(-1, 1) * 1e5};
        const Takedown moved = take_down(draw(own, away));
        REQUIRE_MESSAGE(moved.complete, support::texts_of_errors(moved.problems));
        CHECK(check_balance(moved).empty());
        far.cover = std::max(far.cover, check_split(moved, 20, own));
        const Closing moved_closing = closing_of(moved);
        far.force = std::max(far.force, moved_closing.force);
        far.moment = std::max(far.moment, moved_closing.moment);
        motion = std::max(motion, largest_difference(plain, moved));

        Placing reversed;
        reversed.reversed = true;
        const Takedown back = take_down(draw(own, reversed));
        REQUIRE_MESSAGE(back.complete, support::texts_of_errors(back.problems));
        order = std::max(order, largest_difference(plain, back));
        for (const Balance& row : plain.balance) {
            scale = std::max(scale, row.applied.magnitude);
        }
    }
    MESSAGE("closing error over " << plans << " plans: area " << near.cover << ", force " << near.force
                                  << ", moment " << near.moment << "; turned and 100 km away: area "
                                  << far.cover << ", force " << far.force << ", moment " << far.moment
                                  << "; foundation loads differ by " << motion << " kN turned and moved, "
                                  << order << " kN renumbered, of up to " << scale << " kN");
    CHECK(near.cover <= 1e-12);
    CHECK(far.cover <= 1e-12);
    CHECK(near.force <= 1e-12);
    CHECK(near.moment <= 1e-12);
    CHECK(far.force <= 1e-11);
    CHECK(far.moment <= 1e-11);
    CHECK(motion <= 1e-6);
    CHECK(order <= 1e-9);
}

Plan mixed_building(std::uint64_t seed, const Placing& placing) {
    Plan plan = support::random_building(seed, placing);
    support::mix_rules(plan, seed, placing);
    return plan;
}

} // namespace

TEST_CASE("random buildings: decks are covered, balance closes, and turning, moving or renumbering changes "
          "no foundation load") {
    hold_laws(support::seed_of_run(41), 520, support::random_building);
}

TEST_CASE("the same of buildings whose decks span two ways, stand on columns, lever or run on") {
    hold_laws(support::seed_of_run(77), 400, mixed_building);
}
