#include "deck/panel_regions.hpp"

#include "geometry/basic.hpp"

#include <cmath>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Distance from a side over its weight, inside positive.
class WeightedDistance {
public:
    explicit WeightedDistance(const PanelSide& side)
        : a_(side.a), along_((1 / (distance(side.a, side.b) * side.weight)) * (side.b - side.a)) {}
    [[nodiscard]] double at(Point p) const { return cross(along_, p - a_); }

private:
    Point a_, along_;
};

/// Each side's region by itself, cut free from all other sides.
std::vector<SideRegion> regions_one_by_one(const Convex& ring, std::span<const PanelSide> sides,
                                           double noise) {
    std::vector<SideRegion> regions;
    Convex below;
    Convex above;
    for (std::size_t i = 0; i < sides.size(); ++i) {
        if (!sides[i].carries) {
            continue;
        }
        const WeightedDistance own(sides[i]);
        Convex region = ring;
        for (std::size_t j = 0; j < sides.size() && !region.empty(); ++j) {
            if (j != i && sides[j].carries) {
                const WeightedDistance other(sides[j]);
                cut_by(
                    region, [&](Point p) { return own.at(p) - other.at(p); }, noise, below, above);
                region.swap(below);
            }
        }
        if (!region.empty()) {
            regions.push_back({i, std::move(region)});
        }
    }
    return regions;
}

/// The same in more pieces: each further side takes its part from those before it, so that the areas add up
/// whatever rounding does to the borders.
std::vector<SideRegion> regions_in_turn(const Convex& ring, std::span<const PanelSide> sides, double noise) {
    std::vector<SideRegion> regions;
    Convex below;
    Convex above;
    for (std::size_t j = 0; j < sides.size(); ++j) {
        if (!sides[j].carries) {
            continue;
        }
        if (regions.empty()) {
            regions.push_back({j, ring});
            continue;
        }
        const WeightedDistance taking(sides[j]);
        const std::size_t before = regions.size();
        for (std::size_t r = 0; r < before; ++r) {
            const WeightedDistance holding(sides[regions[r].side]);
            cut_by(
                regions[r].where, [&](Point p) { return holding.at(p) - taking.at(p); }, noise, below, above);
            regions[r].where.swap(below);
            if (!above.empty()) {
                regions.push_back({j, above});
            }
        }
        std::erase_if(regions, [](const SideRegion& region) { return region.where.empty(); });
    }
    return regions;
}

double area_of(std::span<const SideRegion> regions) {
    Sum area;
    for (const SideRegion& region : regions) {
        area.add(signed_area(region.where));
    }
    return area.value();
}

} // namespace

double perimeter_of(const Convex& ring) {
    double perimeter = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        perimeter += distance(ring[i], ring[(i + 1) % ring.size()]);
    }
    return perimeter;
}

std::vector<SideRegion> divide_among_sides(const Convex& ring, std::span<const PanelSide> sides,
                                           double noise) {
    std::vector<SideRegion> regions = regions_one_by_one(ring, sides, noise);
    // Between sides that are nearly in line the border is ill-defined, and two regions may see it apart.
    if (std::abs(area_of(regions) - signed_area(ring)) > noise * perimeter_of(ring)) {
        return regions_in_turn(ring, sides, noise);
    }
    return regions;
}

RUNNEL_NAMESPACE_END
