#pragma once

#include "geometry/box_tree.hpp"

#include <runnel/deck.hpp>

#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A member or wall of the level as a line that loads can be put on.
struct CarrierAxis {
    std::uint32_t number = none; ///< in Sharing
    Point from, to;
    double length = 0;
    Role role = Role::joist;
    bool wall = false;
    std::string_view id;
};

/// A stretch of a line, by fractions of it.
struct Interval {
    double from = 0, to = 0;
};

/// The axes of a level's members and walls, by place and by id.
class CarrierAxes {
public:
    CarrierAxes(const Plan& plan, const FramedLevel& level, const Sharing& sharing);

    [[nodiscard]] const CarrierAxis& operator[](std::uint32_t i) const { return axes_[i]; }
    /// Indices of those whose boxes meet `box`, rising.
    void find(const Box& box, std::vector<std::uint32_t>& found) const { tree_.find(box, found); }
    /// That of the member or wall with this id, or LEVEL/ID; null if there is none here.
    [[nodiscard]] const CarrierAxis* named(const std::string& id) const;

private:
    std::vector<CarrierAxis> axes_;
    BoxTree tree_;
    std::map<std::string_view, std::uint32_t> by_id_;
};

/// The stretch of the line from a to b that runs along an axis within `snap`, where it is longer than that.
[[nodiscard]] std::optional<Interval> stretch_along(const CarrierAxis& axis, Point a, Point b, double snap);

RUNNEL_NAMESPACE_END
