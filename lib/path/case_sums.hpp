#pragma once

#include "load/collector.hpp"
#include "path/places.hpp"

#include <runnel/takedown.hpp>

#include <cmath>
#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Forces and first moments by case.
class CaseSums {
public:
    explicit CaseSums(std::size_t cases) : sums_(cases) {}

    void add_point(std::uint32_t load_case, Point at, double p) {
        sums_[load_case].add(p, p * at, std::abs(p));
    }
    void add_line(std::uint32_t load_case, const Axis& axis, const LinePiece& piece) {
        const double force = piece.total();
        sums_[load_case].add(force, force * axis.at(piece.from) + piece.first_moment() * axis.direction,
                             magnitude_of(piece));
    }
    void add_moment(std::uint32_t load_case, Point moment) { sums_[load_case].add(0, moment, 0); }
    void add_sum(std::uint32_t load_case, const ForceSum& sum) {
        sums_[load_case].add(sum.force, sum.moment, sum.magnitude);
    }
    void add_loads(const Axis& axis, std::span<const CarrierLine> lines,
                   std::span<const CarrierPoint> points) {
        for (const CarrierLine& line : lines) {
            add_line(line.load_case, axis, line.piece);
        }
        for (const CarrierPoint& point : points) {
            add_point(point.load_case, axis.at(point.station), point.p);
        }
    }
    [[nodiscard]] ForceSum sum(std::uint32_t load_case) const { return sums_[load_case].sum(); }
    [[nodiscard]] std::size_t cases() const { return sums_.size(); }

private:
    std::vector<ForceGatherer> sums_;
};

/// Own weight of all lifts of columns and walls, where they stand.
inline void add_own_weight(const Takedown& takedown, CaseSums& sums) {
    if (takedown.self_weight_case == none) {
        return;
    }
    const Plan& plan = takedown.plan;
    for (std::size_t c = 0; c < takedown.columns.size(); ++c) {
        for (const Lift& lift : takedown.columns[c].lifts) {
            sums.add_point(takedown.self_weight_case, plan.columns[c].at, lift.self_weight);
        }
    }
    for (std::size_t w = 0; w < takedown.walls.size(); ++w) {
        for (const WallLift& lift : takedown.walls[w].lifts) {
            sums.add_point(takedown.self_weight_case, 0.5 * (plan.walls[w].from + plan.walls[w].to),
                           lift.self_weight);
        }
    }
}

/// What stands on the ground, where it stands.
inline void add_foundations(const Takedown& takedown, CaseSums& sums) {
    for (const Foundation& foundation : takedown.foundations) {
        const std::uint32_t i = foundation.under.index;
        if (foundation.under.kind == CarrierKind::column) {
            for (std::uint32_t c = 0; c < foundation.reactions.size(); ++c) {
                sums.add_point(c, takedown.plan.columns[i].at, foundation.reactions[c]);
            }
        } else {
            const WallLift& lift = takedown.walls[i].lifts.back();
            sums.add_loads(axis_between(takedown.plan.walls[i].from, takedown.plan.walls[i].to), lift.line,
                           lift.point);
        }
    }
}

RUNNEL_NAMESPACE_END
