#include "deck/carrier_finder.hpp"
#include "deck/deck_area.hpp"
#include "deck/doubtful.hpp"
#include "deck/fixity.hpp"
#include "deck/nearest.hpp"
#include "deck/one_way.hpp"
#include "framing/draft.hpp"
#include "geometry/basic.hpp"

#include <runnel/deck.hpp>

#include <optional>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Members and walls of a level that decks may bear on.
std::vector<LineCarrier> line_carriers(const Plan& plan, const FramedLevel& level, const Sharing& sharing) {
    std::vector<LineCarrier> carriers;
    carriers.reserve(level.members.size() + level.walls.size());
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        if (level.members[m].carries_deck) {
            carriers.push_back({m, level.members[m].from, level.members[m].to});
        }
    }
    for (const std::uint32_t w : level.walls) {
        carriers.push_back({sharing.number_of({CarrierKind::wall, w}), plan.walls[w].from, plan.walls[w].to});
    }
    return carriers;
}

} // namespace

Sharing share_decks(const Plan& plan, const Framing& framing, std::uint32_t level_index) {
    const FramedLevel& level = framing.levels[level_index];
    Sharing sharing;
    sharing.members = static_cast<std::uint32_t>(level.members.size());
    sharing.walls = static_cast<std::uint32_t>(plan.walls.size());
    sharing.columns = static_cast<std::uint32_t>(plan.columns.size());

    const std::vector<LineCarrier> carriers = line_carriers(plan, level, sharing);
    // A carrier of strips bounds two bays and takes two cells: room for them at once saves moving them often.
    const std::size_t likely = carriers.size() + level.decks.size();
    sharing.bays.reserve(likely);
    sharing.cells.reserve(2 * likely);
    sharing.transfers.reserve(2 * likely, 2 * likely);
    CarrierFinder finder(carriers, level.decks.size());
    std::optional<DecksBeside> decks_beside;
    const double noise = noise_of(framing.largest_coordinate);
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        sharing.deck_area.push_back(area_of_deck(deck, noise));
        // Two-way decks also look at what they miss by little.
        const double reach =
            deck.span == SpanKind::one_way ? plan.settings.snap : snaps_of_a_near_miss * plan.settings.snap;
        const std::vector<LineCarrier>& beside = finder.find(deck, reach);
        if (deck.span == SpanKind::two_way && deck.corner_angles == CornerAngles::by_fixity) {
            if (!decks_beside) {
                decks_beside.emplace(level, plan.settings.snap);
            }
            if (share_by_fixity(plan, framing, level_index, d, beside, *decks_beside, sharing)) {
                continue;
            }
        }
        if (deck.span != SpanKind::one_way) {
            share_nearest(plan, framing, level_index, d, beside, sharing);
            continue;
        }
        const std::size_t first_bay = sharing.bays.size();
        share_one_way(deck, d, beside, framing, plan.settings.snap, sharing);
        find_weak_strips(plan, framing, level_index, d, first_bay, sharing);
    }
    find_doubtful_members(plan, level, sharing);
    return sharing;
}

RUNNEL_NAMESPACE_END
