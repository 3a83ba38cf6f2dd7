#include "load/carrier_axes.hpp"

#include "geometry/basic.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

CarrierAxes::CarrierAxes(const Plan& plan, const FramedLevel& level, const Sharing& sharing) {
    axes_.reserve(level.members.size() + level.walls.size());
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        const FramedMember& member = level.members[m];
        axes_.push_back({m, member.from, member.to, member.length, member.role, false, member.id});
    }
    for (const std::uint32_t w : level.walls) {
        const Wall& wall = plan.walls[w];
        axes_.push_back({sharing.number_of({CarrierKind::wall, w}), wall.from, wall.to,
                         distance(wall.from, wall.to), Role::girder, true, wall.id});
    }
    std::vector<Box> boxes;
    boxes.reserve(axes_.size());
    for (std::uint32_t i = 0; i < axes_.size(); ++i) {
        boxes.push_back(box_of(axes_[i].from, axes_[i].to));
        by_id_.emplace(axes_[i].id, i);
    }
    tree_ = BoxTree(boxes);
}

const CarrierAxis* CarrierAxes::named(const std::string& id) const {
    const std::size_t slash = id.find('/');
    const auto it = by_id_.find(slash == std::string::npos ? std::string_view(id)
                                                           : std::string_view(id).substr(slash + 1));
    return it == by_id_.end() ? nullptr : &axes_[it->second];
}

std::optional<Interval> stretch_along(const CarrierAxis& axis, Point a, Point b, double snap) {
    const double sa = station_of(a, axis.from, axis.to);
    const double sb = station_of(b, axis.from, axis.to);
    const double low = std::max(0.0, std::min(sa, sb));
    const double high = std::min(axis.length, std::max(sa, sb));
    if (!(high - low > snap)) {
        return std::nullopt;
    }
    const double t0 = std::clamp((low - sa) / (sb - sa), 0.0, 1.0);
    const double t1 = std::clamp((high - sa) / (sb - sa), 0.0, 1.0);
    const Interval interval{std::min(t0, t1), std::max(t0, t1)};
    for (const double t : {interval.from, interval.to}) {
        if (distance_to_segment(between(a, b, t), axis.from, axis.to) > snap) {
            return std::nullopt;
        }
    }
    return interval;
}

RUNNEL_NAMESPACE_END
