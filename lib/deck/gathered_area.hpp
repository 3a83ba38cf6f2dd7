#pragma once

#include <runnel/deck.hpp>

#include <cstdint>
#include <string>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A part of a deck that asks for a problem: how much, where its largest part lies, and whom it concerns.
struct GatheredArea {
    double area = 0; ///< m2
    double largest = 0;
    Point place; ///< in the plan
    std::vector<std::uint32_t> carriers;

    /// What is no area counts for nothing. `carrier`: `none` where it concerns nobody.
    void add(double part, Point where, std::uint32_t carrier) {
        if (!(part > 0)) {
            return;
        }
        area += part;
        if (part > largest) {
            largest = part;
            place = where;
        }
        if (carrier != none && (carriers.empty() || carriers.back() != carrier)) {
            carriers.push_back(carrier);
        }
    }
    void add(const GatheredArea& other) {
        area += other.area;
        if (other.largest > largest) {
            largest = other.largest;
            place = other.place;
        }
        carriers.insert(carriers.end(), other.carriers.begin(), other.carriers.end());
    }
};

/// The id of a carrier as the plan gives it.
[[nodiscard]] inline const std::string& carrier_id(const Plan& plan, const FramedLevel& level,
                                                   Carrier carrier) {
    switch (carrier.kind) {
    case CarrierKind::member:
        return level.members[carrier.index].id;
    case CarrierKind::wall:
        return plan.walls[carrier.index].id;
    case CarrierKind::column:
        break;
    }
    return plan.columns[carrier.index].id;
}

RUNNEL_NAMESPACE_END
