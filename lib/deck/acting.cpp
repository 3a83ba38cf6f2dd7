#include "deck/acting.hpp"

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/strip_sweep.hpp"

#include <algorithm>
#include <cmath>
#include <map>

RUNNEL_NAMESPACE_BEGIN

std::uint32_t case_index(const Plan& plan, std::string_view id) {
    for (std::uint32_t i = 0; i < plan.cases.size(); ++i) {
        if (plan.cases[i].id == id) {
            return i;
        }
    }
    return none;
}

std::uint32_t own_weight_case(const Plan& plan) {
    if (!plan.settings.self_weight_case.empty()) {
        return case_index(plan, plan.settings.self_weight_case);
    }
    for (std::uint32_t i = 0; i < plan.cases.size(); ++i) {
        if (plan.cases[i].kind == CaseKind::dead) {
            return i;
        }
    }
    return none;
}

Grouped<std::uint32_t> area_loads_by_deck(const FramedLevel& level, double noise) {
    std::vector<Box> boxes;
    std::map<std::string_view, std::uint32_t> by_id;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        boxes.push_back(box_of(level.decks[d].outline));
        by_id.emplace(level.decks[d].id, d);
    }
    const BoxTree tree(boxes);
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < level.area_loads.size(); ++i) {
        const AreaLoad& load = level.area_loads[i];
        if (!load.decks.empty()) {
            for (const std::string& id : load.decks) {
                // "LEVEL/ID" means the deck here, also where another level repeats the load.
                const std::size_t slash = id.rfind('/');
                const auto it =
                    by_id.find(std::string_view(id).substr(slash == std::string::npos ? 0 : slash + 1));
                if (it != by_id.end()) {
                    pairs.emplace_back(it->second, i);
                }
            }
        } else if (load.outline.empty()) {
            for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
                pairs.emplace_back(d, i);
            }
        } else {
            tree.find(box_of(load.outline).grown(noise), found);
            for (const std::uint32_t d : found) {
                pairs.emplace_back(d, i);
            }
        }
    }
    std::sort(pairs.begin(), pairs.end());
    pairs.erase(std::unique(pairs.begin(), pairs.end()), pairs.end());
    return Grouped<std::uint32_t>::from_pairs(level.decks.size(), std::move(pairs));
}

Grouped<std::uint32_t> outlines_over_decks(const FramedLevel& level, double noise) {
    std::vector<Box> boxes;
    for (const FramedDeck& deck : level.decks) {
        boxes.push_back(box_of(deck.outline));
    }
    const BoxFinder finder(std::move(boxes));
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < level.area_loads.size(); ++i) {
        if (!level.area_loads[i].outline.empty()) {
            finder.find(box_of(level.area_loads[i].outline).grown(noise), found);
            for (const std::uint32_t d : found) {
                pairs.emplace_back(d, i);
            }
        }
    }
    return Grouped<std::uint32_t>::from_pairs(level.decks.size(), std::move(pairs));
}

Ring to_strip(const StripAxes& axes, const Ring& ring) {
    Ring turned;
    turned.reserve(ring.size());
    for (const Point& p : ring) {
        turned.push_back(axes.to_strip(p));
    }
    return turned;
}

namespace {

/// The ring itself where it is convex (turned counter-clockwise), else its convex pieces.
std::vector<Convex> convex_pieces_of(Ring ring, double noise) {
    if (signed_area(ring) < 0) {
        std::reverse(ring.begin(), ring.end());
    }
    bool convex = true;
    double turning = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point d = ring[(i + 1) % ring.size()] - ring[i];
        const Point e = ring[(i + 2) % ring.size()] - ring[(i + 1) % ring.size()];
        convex = convex && norm(d) > noise && cross(d, e) >= 0;
        turning += std::atan2(cross(d, e), dot(d, e));
    }
    constexpr double more_than_one_turn = 7; // radians; a convex ring turns by 2 pi
    if (convex && turning < more_than_one_turn) {
        return {std::move(ring)};
    }
    return convex_pieces(ring, {}, noise);
}

std::vector<Ring> to_strip(const StripAxes& axes, const std::vector<Ring>& rings) {
    std::vector<Ring> turned;
    turned.reserve(rings.size());
    for (const Ring& ring : rings) {
        turned.push_back(to_strip(axes, ring));
    }
    return turned;
}

} // namespace

std::vector<Convex> convex_zone(const AreaLoad& load, const StripAxes& axes, double noise) {
    Ring outline = to_strip(axes, load.outline);
    return load.openings.empty() ? convex_pieces_of(std::move(outline), noise)
                                 : convex_pieces(outline, to_strip(axes, load.openings), noise);
}

std::vector<StripPiece> pieces_of_deck(const FramedDeck& deck, const StripAxes& axes, double noise) {
    const std::vector<Ring> openings = to_strip(axes, deck.openings);
    std::vector<StripPiece> pieces;
    for (const Gap& gap : sweep_strips(to_strip(axes, deck.outline), openings, {}, noise).gaps) {
        pieces.push_back(
            {gap.from, gap.to, {gap.low_start, gap.low_end, 0}, {gap.high_start, gap.high_end, 0}});
    }
    return pieces;
}

std::vector<std::uint32_t> really_acting(const FramedLevel& level, std::span<const std::uint32_t> acting,
                                         const std::vector<StripPiece>& pieces, const StripAxes& axes,
                                         double noise) {
    std::vector<Box> boxes;
    for (const StripPiece& piece : pieces) {
        boxes.push_back(box_of(piece));
    }
    const BoxFinder finder(std::move(boxes));
    std::vector<std::uint32_t> near;
    std::vector<StripPiece> inside;
    const auto lies_on_deck = [&](const AreaLoad& load) {
        for (const Convex& zone : convex_zone(load, axes, noise)) {
            finder.find(box_of(zone), near);
            for (const std::uint32_t i : near) {
                inside.clear();
                divide(pieces[i], zone, noise, &inside, nullptr);
                for (const StripPiece& part : inside) {
                    if (std::max(part.high.start - part.low.start, part.high.end - part.low.end) > noise) {
                        return true;
                    }
                }
            }
        }
        return false;
    };
    std::vector<std::uint32_t> really;
    for (const std::uint32_t index : acting) {
        if (level.area_loads[index].outline.empty() || lies_on_deck(level.area_loads[index])) {
            really.push_back(index);
        }
    }
    return really;
}

RUNNEL_NAMESPACE_END
