#include "path/area_path.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

using Piece = CarrierAreas::Piece;

/// Area of a piece, or of its part up to a station within it.
double area_up_to(const Piece& piece, double station) {
    const double length = piece.to - piece.from;
    const double x = station - piece.from;
    const double slope = (piece.end - piece.start) / length;
    const double t = x / length;
    // The bulge: length times the integral of t (1 - t).
    return x * (piece.start + slope * x / 2) - piece.bulge * length * t * t * (3 - 2 * t) / 6;
}
double area_of(const Piece& piece) {
    const double length = piece.to - piece.from;
    return length > 0 ? length * (piece.start + piece.end) / 2 - piece.bulge * length / 6 : piece.start;
}

/// Deals out what stands on one member to its bearings.
class Dealer {
public:
    Dealer(std::span<const Bearing> bearings, std::span<AreaBrought> brought, double noise)
        : bearings_(bearings), brought_(brought), noise_(noise) {}

    void at_station(double station, const AreaBrought& area) {
        std::size_t b = 0;
        while (b + 1 < bearings_.size() && station > middle_after(b) + noise_) {
            ++b;
        }
        const bool at_middle = b + 1 < bearings_.size() && station >= middle_after(b) - noise_;
        brought_[b].add(area, at_middle ? 0.5 : 1);
        if (at_middle) {
            brought_[b + 1].add(area, 0.5);
        }
    }

    /// Spread over a stretch; `like` tells by its parts of one how the area divides into own and above.
    void over_stretch(const Piece& piece, const AreaBrought& like) {
        if (!(piece.to - piece.from > noise_)) {
            AreaBrought whole = like;
            whole.own *= area_of(piece);
            whole.above *= area_of(piece);
            at_station(piece.from, whole);
            return;
        }
        const double whole = area_of(piece);
        double before = 0;
        for (std::size_t b = 0; b < bearings_.size(); ++b) {
            const bool last = b + 1 == bearings_.size() || middle_after(b) >= piece.to - noise_;
            if (!last && middle_after(b) <= piece.from + noise_) {
                continue;
            }
            const double up_to = last ? whole : area_up_to(piece, middle_after(b));
            brought_[b].add({like.own, like.above, 0}, up_to - before);
            brought_[b].floors = std::max(brought_[b].floors, like.floors);
            before = up_to;
            if (last) {
                return;
            }
        }
    }

private:
    [[nodiscard]] double middle_after(std::size_t b) const {
        return (bearings_[b].station + bearings_[b + 1].station) / 2;
    }

    std::span<const Bearing> bearings_;
    std::span<AreaBrought> brought_;
    double noise_;
};

/// What a column or wall that ends here has gathered above.
AreaBrought above_of(const Takedown& takedown, Carrier upper) {
    const auto of_last = [](const auto& lifts) {
        return lifts.empty() ? AreaBrought{} : AreaBrought{0, lifts.back().area_total, lifts.back().floors};
    };
    return upper.kind == CarrierKind::column ? of_last(takedown.columns[upper.index].lifts)
                                             : of_last(takedown.walls[upper.index].lifts);
}

/// The part of what a foot's carrier brings that stands on this foot: a wall's area is spread evenly along
/// it.
double part_of(const Takedown& takedown, const Foot& foot) {
    if (foot.upper.kind == CarrierKind::column) {
        return 1;
    }
    const Wall& wall = takedown.plan.walls[foot.upper.index];
    return (foot.upper_to - foot.upper_from) / distance(wall.from, wall.to);
}

Grouped<std::uint32_t> feet_by_carrier(const FramedLevel& framed, const Sharing& sharing) {
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    for (std::uint32_t f = 0; f < framed.feet.size(); ++f) {
        pairs.emplace_back(sharing.number_of(framed.feet[f].lower), f);
    }
    return Grouped<std::uint32_t>::from_pairs(sharing.carrier_count(), std::move(pairs));
}

void deal_foot(const Takedown& takedown, const Foot& foot, Dealer& dealer) {
    AreaBrought area = above_of(takedown, foot.upper);
    area.above *= part_of(takedown, foot);
    if (foot.upper.kind == CarrierKind::column || foot.lower_from == foot.lower_to) {
        dealer.at_station(foot.lower_from, area);
        return;
    }
    const double from = std::min(foot.lower_from, foot.lower_to);
    const double to = std::max(foot.lower_from, foot.lower_to);
    const double breadth = area.above / (to - from);
    dealer.over_stretch({from, to, breadth, breadth}, {0, 1, area.floors});
}

} // namespace

std::vector<AreaBrought> pass_areas(Takedown& takedown, std::uint32_t level_index, const LevelPath& path,
                                    const CarrierAreas& areas) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    LevelTakedown& level = takedown.levels[level_index];
    const Sharing& sharing = level.sharing;
    const double noise = noise_of(takedown.framing.largest_coordinate);
    const std::span<const Bearing> bearings = framed.bearings.items();
    const Grouped<std::uint32_t> feet = feet_by_carrier(framed, sharing);
    std::vector<AreaBrought> at_bearing(bearings.size());

    level.region_area = areas.area;
    level.tributary_area = areas.area;
    for (const std::uint32_t m : framed.order.items()) {
        Dealer dealer(
            framed.bearings[m],
            std::span<AreaBrought>(at_bearing).subspan(framed.bearings.first(m), framed.bearings[m].size()),
            noise);
        for (const Piece& piece : areas.pieces[m]) {
            dealer.over_stretch(piece, {1, 0, 0});
        }
        for (const std::uint32_t b : path.landings[m]) {
            dealer.at_station(bearings[b].on_station, at_bearing[b]);
            level.tributary_area[m] += at_bearing[b].own;
        }
        for (const std::uint32_t f : std::as_const(feet)[m]) {
            deal_foot(takedown, framed.feet[f], dealer);
        }
    }

    std::vector<AreaBrought> arrived(sharing.carrier_count());
    for (std::uint32_t c = sharing.members; c < sharing.carrier_count(); ++c) {
        arrived[c].own = areas.area[c];
        for (const std::uint32_t b : path.landings[c]) {
            arrived[c].add(at_bearing[b]);
        }
        level.tributary_area[c] = arrived[c].own;
        for (const std::uint32_t f : std::as_const(feet)[c]) {
            AreaBrought area = above_of(takedown, framed.feet[f].upper);
            area.above *= part_of(takedown, framed.feet[f]);
            arrived[c].add(area);
        }
    }
    return arrived;
}

RUNNEL_NAMESPACE_END
