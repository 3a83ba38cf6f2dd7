#include "deck/pressure.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

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
            for (Convex& piece : convex_zone(load, home_, noise_)) {
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
