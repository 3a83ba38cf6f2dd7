#include "deck/level_zones.hpp"

#include "deck/acting.hpp"
#include "geometry/basic.hpp"

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A box of the plan, seen in turned axes: the upright box around it there.
Box box_in(const StripAxes& axes, const Box& box) {
    Box turned = box_of(axes.to_strip(box.low), axes.to_strip(box.high));
    turned.add(axes.to_strip({box.low.x, box.high.y}));
    turned.add(axes.to_strip({box.high.x, box.low.y}));
    return turned;
}

} // namespace

LevelZones::LevelZones(const FramedLevel& level, double noise) : level_(level), noise_(noise) {
    directions_.push_back({1, 0, std::vector<Zone>(level.area_loads.size())});
}

LevelZones::Direction& LevelZones::direction_of(const StripAxes& axes) {
    constexpr std::size_t most = 16;
    for (Direction& direction : directions_) {
        if (direction.cosine == axes.cosine && direction.sine == axes.sine) {
            return direction;
        }
    }
    if (directions_.size() == most) {
        return directions_.front();
    }
    directions_.push_back({axes.cosine, axes.sine, std::vector<Zone>(level_.area_loads.size())});
    return directions_.back();
}

void LevelZones::cut(std::uint32_t area_load, Direction& direction) const {
    const AreaLoad& load = level_.area_loads[area_load];
    const Ring& outline = load.outline;
    Zone& zone = direction.zones[area_load];
    zone.is_cut = true;
    zone.origin = outline.front(); // so that cutting a zone far out loses nothing
    zone.pieces = convex_zone(load, direction.axes_at(zone.origin), noise_);
    zone.as_drawn =
        load.openings.empty() && zone.pieces.size() == 1 && zone.pieces.front().size() == outline.size();
    if (zone.as_drawn) { // corners are rounded once less on their way to a deck's axes
        zone.pieces.front() = outline;
        if (signed_area(outline) < 0) {
            std::reverse(zone.pieces.front().begin(), zone.pieces.front().end());
        }
    }
    std::vector<Box> boxes;
    boxes.reserve(zone.pieces.size());
    for (const Convex& piece : zone.pieces) {
        boxes.push_back(box_of(piece));
    }
    zone.finder = BoxFinder(std::move(boxes));
}

void LevelZones::find(std::uint32_t area_load, const Box& box, const StripAxes& axes,
                      std::vector<Convex>& pieces) {
    if (level_.area_loads[area_load].outline.empty()) {
        return;
    }
    Direction& direction = direction_of(axes);
    Zone& zone = direction.zones[area_load];
    if (!zone.is_cut) {
        cut(area_load, direction);
    }
    const StripAxes home = zone.as_drawn ? StripAxes{} : direction.axes_at(zone.origin);
    std::vector<std::uint32_t> near;
    zone.finder.find(box_in(home, box).grown(noise_), near);
    // By differences only; where nothing is turned, what is level stays so exactly.
    const Point shift = axes.to_strip(zone.origin);
    const bool only_moved = home.cosine == axes.cosine && home.sine == axes.sine;
    const StripAxes unturn{{0, 0}, home.cosine, home.sine};
    const StripAxes turn{{0, 0}, axes.cosine, axes.sine};
    const auto place = [&](Point p) {
        return zone.as_drawn ? axes.to_strip(p) : shift + (only_moved ? p : turn.to_strip(unturn.to_plan(p)));
    };
    for (const std::uint32_t i : near) {
        Convex& placed = pieces.emplace_back(zone.pieces[i].size());
        std::transform(zone.pieces[i].begin(), zone.pieces[i].end(), placed.begin(), place);
    }
}

Box reach_of(const FramedDeck& deck, double snap) {
    return box_of(deck.outline).grown(snap);
}

RUNNEL_NAMESPACE_END
