#pragma once

#include <runnel/takedown.hpp>

#include <cstdint>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Level and index of the one-way decks whose share is another than the plan's setting.
inline std::vector<std::pair<std::uint32_t, std::uint32_t>> decks_shared_otherwise(const Takedown& takedown) {
    std::vector<std::pair<std::uint32_t, std::uint32_t>> decks;
    for (std::uint32_t l = 0; l < takedown.framing.levels.size(); ++l) {
        const std::vector<FramedDeck>& all = takedown.framing.levels[l].decks;
        for (std::uint32_t d = 0; d < all.size(); ++d) {
            if (all[d].span == SpanKind::one_way && all[d].share != takedown.plan.settings.share) {
                decks.emplace_back(l, d);
            }
        }
    }
    return decks;
}

RUNNEL_NAMESPACE_END
