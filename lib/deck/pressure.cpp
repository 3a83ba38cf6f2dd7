#include "deck/pressure.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>
#include <iterator>
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

std::vector<Convex> convex_zone(Ring ring, double noise) {
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

namespace {

void add_uniform(std::vector<DeckPressure::Uniform>& uniform, std::uint32_t load_case, double q) {
    if (q == 0 || load_case == none) { // no case: an error already, which read_plan and check_plan have told
        return;
    }
    for (DeckPressure::Uniform& u : uniform) {
        if (u.load_case == load_case) {
            u.q += q;
            return;
        }
    }
    uniform.push_back({load_case, q});
}

} // namespace

DeckPressure::DeckPressure(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                           std::span<const std::uint32_t> acting, const StripAxes& axes, double noise)
    : noise_(noise) {
    const FramedDeck& deck = level.decks[deck_index];
    add_uniform(uniform_, own_weight_case(plan), deck.own_weight);

    std::vector<Zone> zones;
    for (const std::uint32_t index : acting) {
        const AreaLoad& load = level.area_loads[index];
        Zone zone;
        zone.load_case = case_index(plan, load.case_id);
        if (zone.load_case == none) {
            continue;
        }
        zone.q = load.q;
        zone.everywhere = load.outline.empty();
        if (load.replaces) {
            const auto self = static_cast<std::uint32_t>(zones.size());
            for (Zone& earlier : zones) {
                if (earlier.load_case == zone.load_case) {
                    earlier.replaced_by.push_back(self);
                }
            }
        }
        if (!zone.everywhere) {
            zone.pieces = convex_zone(to_strip(axes, load.outline), noise);
            std::vector<Box> boxes;
            for (const Convex& piece : zone.pieces) {
                boxes.push_back(box_of(piece));
            }
            zone.finder = BoxFinder(std::move(boxes));
        }
        zones.push_back(std::move(zone));
    }

    // What covers the whole deck and nothing replaces needs no cutting; a zone without load matters only as a
    // replacer.
    bool any_left = false;
    for (Zone& zone : zones) {
        if (zone.everywhere && zone.replaced_by.empty()) {
            add_uniform(uniform_, zone.load_case, zone.q);
            zone.q = 0;
        }
        any_left = any_left || zone.q != 0;
    }
    if (any_left) {
        zones_ = std::move(zones);
    }
}

void DeckPressure::carve_out(const Zone& by, std::vector<Convex>& parts) const {
    if (by.everywhere) {
        parts.clear();
        return;
    }
    std::vector<std::uint32_t> found;
    std::vector<Convex> kept;
    for (Convex& part : parts) {
        by.finder.find(box_of(part), found);
        std::vector<Convex> rest;
        rest.push_back(std::move(part));
        for (const std::uint32_t i : found) {
            std::vector<Convex> outside;
            for (Convex& piece : rest) {
                carve(std::move(piece), by.pieces[i], noise_, outside);
            }
            rest.swap(outside);
        }
        std::move(rest.begin(), rest.end(), std::back_inserter(kept));
    }
    parts.swap(kept);
}

void DeckPressure::zones_over(const Convex& area, std::vector<Piece>& pieces) const {
    pieces.clear();
    const Box box = box_of(area);
    std::vector<std::uint32_t> found;
    for (const Zone& zone : zones_) {
        if (zone.q == 0) {
            continue;
        }
        std::vector<Convex> parts;
        if (zone.everywhere) {
            parts.push_back(area);
        } else {
            zone.finder.find(box, found);
            for (const std::uint32_t i : found) {
                Convex inside = clipped(area, zone.pieces[i], noise_);
                if (!inside.empty()) {
                    parts.push_back(std::move(inside));
                }
            }
        }
        for (const std::uint32_t by : zone.replaced_by) {
            carve_out(zones_[by], parts);
        }
        for (Convex& part : parts) {
            pieces.push_back({zone.load_case, zone.q, std::move(part)});
        }
    }
}

RUNNEL_NAMESPACE_END
