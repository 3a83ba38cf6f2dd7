#include "deck/pressure.hpp"

#include "geometry/basic.hpp"
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

std::vector<StripPiece> pieces_of_deck(const FramedDeck& deck, const StripAxes& axes, double noise) {
    std::vector<Ring> openings;
    openings.reserve(deck.openings.size());
    for (const Ring& opening : deck.openings) {
        openings.push_back(to_strip(axes, opening));
    }
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
        for (const Convex& zone : convex_zone(to_strip(axes, load.outline), noise)) {
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

Plane::Plane(const AreaLoad& load) : q(load.q) {
    if (!load.plane) {
        return;
    }
    const auto& [points, values] = *load.plane;
    at = points[0];
    q = values[0];
    const Point a = points[1] - points[0];
    const Point b = points[2] - points[0];
    const double rise_a = values[1] - values[0];
    const double rise_b = values[2] - values[0];
    const double twice_area = cross(a, b);
    if (twice_area != 0) { // else check_plan has refused it
        slope = {(rise_a * b.y - rise_b * a.y) / twice_area, (rise_b * a.x - rise_a * b.x) / twice_area};
    }
}

Intensity Plane::in(const StripAxes& axes) const {
    return {q + dot(slope, axes.origin - at), slope.x * axes.cosine + slope.y * axes.sine,
            slope.y * axes.cosine - slope.x * axes.sine};
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

/// From one pair of axes to another, by way of no far origin: differences of coordinates only.
class Turning {
public:
    Turning(const StripAxes& from, const StripAxes& to)
        : shift_(to.to_strip(from.origin)), cosine_(from.cosine * to.cosine + from.sine * to.sine),
          sine_(from.sine * to.cosine - from.cosine * to.sine),
          none_(from.origin == to.origin && from.cosine == to.cosine && from.sine == to.sine) {}

    [[nodiscard]] bool is_none() const { return none_; }
    Point operator()(Point p) const {
        return {shift_.x + p.x * cosine_ - p.y * sine_, shift_.y + p.x * sine_ + p.y * cosine_};
    }
    [[nodiscard]] Box box_around(const Box& box) const {
        Box turned = box_of((*this)(box.low), (*this)(box.high));
        turned.add((*this)({box.low.x, box.high.y}));
        turned.add((*this)({box.high.x, box.low.y}));
        return turned;
    }

private:
    Point shift_;
    double cosine_, sine_;
    bool none_;
};

} // namespace

DeckPressure::DeckPressure(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                           std::span<const std::uint32_t> acting, const StripAxes& axes, double noise)
    : home_(axes), noise_(noise) {
    add_uniform(uniform_, own_weight_case(plan), level.decks[deck_index].own_weight);
    add_zones(plan, level, acting);

    // What covers the whole deck evenly and nothing replaces needs no cutting; what has no load matters only
    // as a replacer.
    std::vector<std::size_t> replaced_before(plan.cases.size(), 0); // by case: zones up to here are replaced
    for (std::size_t z = 0; z < zones_.size(); ++z) {
        if (zones_[z].replaces) {
            replaced_before[zones_[z].load_case] = z;
        }
    }
    bool any_left = false;
    for (std::size_t z = 0; z < zones_.size(); ++z) {
        Zone& zone = zones_[z];
        if (zone.everywhere && zone.plane.is_uniform() && z >= replaced_before[zone.load_case]) {
            add_uniform(uniform_, zone.load_case, zone.plane.q);
            zone.plane.q = 0;
        }
        any_left = any_left || !zone.plane.is_nothing();
    }
    if (!any_left) {
        zones_.clear();
        return;
    }

    std::vector<Box> boxes;
    for (std::uint32_t z = 0; z < zones_.size(); ++z) {
        if (zones_[z].everywhere && !zones_[z].plane.is_nothing()) {
            everywhere_.push_back(z);
        }
        for (std::uint32_t i = zones_[z].first; i < zones_[z].last; ++i) {
            boxes.push_back(box_of(outlines_[i]));
            zone_of_.push_back(z);
        }
    }
    finder_ = BoxFinder(std::move(boxes));
}

void DeckPressure::add_zones(const Plan& plan, const FramedLevel& level,
                             std::span<const std::uint32_t> acting) {
    // A load that replaces everywhere leaves nothing of the earlier ones of its case.
    std::vector<std::uint32_t> first_left(plan.cases.size(), 0);
    for (const std::uint32_t index : acting) {
        const AreaLoad& load = level.area_loads[index];
        const std::uint32_t load_case = case_index(plan, load.case_id);
        if (load_case != none && load.replaces && load.outline.empty()) {
            first_left[load_case] = index;
        }
    }
    for (const std::uint32_t index : acting) {
        const AreaLoad& load = level.area_loads[index];
        const std::uint32_t load_case = case_index(plan, load.case_id);
        if (load_case == none || index < first_left[load_case]) {
            continue;
        }
        Zone zone{load_case, Plane(load), load.outline.empty(), load.replaces && !load.outline.empty(), 0, 0};
        if (!zone.everywhere) {
            zone.first = static_cast<std::uint32_t>(outlines_.size());
            for (Convex& piece : convex_zone(to_strip(home_, load.outline), noise_)) {
                outlines_.push_back(std::move(piece));
            }
            zone.last = static_cast<std::uint32_t>(outlines_.size());
        }
        zones_.push_back(zone);
    }
}

DeckPressure::Surroundings DeckPressure::zones_near(const StripPiece& area, const StripAxes& axes) const {
    const Turning here(home_, axes);
    std::vector<std::uint32_t> found;
    const Box box = box_of(area);
    finder_.find(here.is_none() ? box : Turning(axes, home_).box_around(box).grown(noise_), found);

    Surroundings near;
    near.turned.reserve(here.is_none() ? 0 : found.size());
    auto everywhere = everywhere_.begin(); // both rise
    auto window = found.begin();
    while (everywhere != everywhere_.end() || window != found.end()) {
        const bool is_outline =
            window != found.end() && (everywhere == everywhere_.end() || zone_of_[*window] < *everywhere);
        Near zone{is_outline ? zone_of_[*window] : *everywhere++, near.windows.size(), 0};
        for (; is_outline && window != found.end() && zone_of_[*window] == zone.index; ++window) {
            const Convex* outline = &outlines_[*window];
            if (!here.is_none()) {
                Convex turned(outline->size());
                std::transform(outline->begin(), outline->end(), turned.begin(), here);
                near.turned.push_back(std::move(turned));
                outline = &near.turned.back();
            }
            near.windows.push_back(outline);
        }
        zone.last = near.windows.size();
        near.zones.push_back(zone);
    }
    return near;
}

void DeckPressure::zones_over(const StripPiece& area, const StripAxes& axes,
                              std::vector<Piece>& pieces) const {
    pieces.clear();
    if (!zones_.empty()) {
        add_zones_over(area, axes, {}, pieces);
    }
}

namespace {

/// A piece in two halves, across its longer side; both use the same cut.
std::pair<StripPiece, StripPiece> halves_of(const StripPiece& piece) {
    const Box box = box_of(piece);
    if (box.high.y - box.low.y >= box.high.x - box.low.x) {
        const double middle = (piece.from + piece.to) / 2;
        return {between_levels(piece, piece.from, middle), between_levels(piece, middle, piece.to)};
    }
    const Border middle{(piece.low.start + piece.high.start) / 2, (piece.low.end + piece.high.end) / 2,
                        (piece.low.bulge + piece.high.bulge) / 2};
    return {{piece.from, piece.to, piece.low, middle}, {piece.from, piece.to, middle, piece.high}};
}

/// Leaves of the parts what lies outside a window.
void carve_out(const Convex& window, double noise, std::vector<StripPiece>& parts,
               std::vector<StripPiece>& outside) {
    const Box box = box_of(window);
    outside.clear();
    for (const StripPiece& part : parts) {
        if (box.meets(box_of(part))) {
            divide(part, window, noise, nullptr, &outside);
        } else { // else it would only be cut at the window's levels
            outside.push_back(part);
        }
    }
    parts.swap(outside);
}

} // namespace

void DeckPressure::add_zones_over(const StripPiece& area, const StripAxes& axes, const Halving& halving,
                                  std::vector<Piece>& pieces) const {
    const Surroundings near = zones_near(area, axes);
    // What replaces is tried on all that lies near, so a large area with many zones is halved first, as long
    // as that parts them.
    constexpr std::size_t few = 24;
    constexpr int tries = 2;
    const bool parts_them = 4 * near.windows.size() < 3 * halving.windows;
    const int in_vain = parts_them ? 0 : halving.in_vain + 1;
    if (near.windows.size() > few && in_vain <= tries) {
        const auto [first, second] = halves_of(area);
        add_zones_over(first, axes, {near.windows.size(), in_vain}, pieces);
        add_zones_over(second, axes, {near.windows.size(), in_vain}, pieces);
        return;
    }
    std::vector<StripPiece> parts;
    std::vector<StripPiece> outside;
    for (std::size_t i = 0; i < near.zones.size(); ++i) {
        const Zone& zone = zones_[near.zones[i].index];
        if (zone.plane.is_nothing()) {
            continue;
        }
        parts.clear();
        if (zone.everywhere) {
            parts.push_back(area);
        }
        for (std::size_t w = near.zones[i].first; w < near.zones[i].last; ++w) {
            divide(area, *near.windows[w], noise_, &parts, nullptr);
        }
        for (std::size_t k = i + 1; k < near.zones.size() && !parts.empty(); ++k) {
            const Zone& later = zones_[near.zones[k].index];
            if (!later.replaces || later.load_case != zone.load_case) {
                continue;
            }
            for (std::size_t w = near.zones[k].first; w < near.zones[k].last; ++w) {
                carve_out(*near.windows[w], noise_, parts, outside);
            }
        }
        for (const StripPiece& part : parts) {
            pieces.push_back({zone.load_case, zone.plane.in(axes), part});
        }
    }
}

RUNNEL_NAMESPACE_END
