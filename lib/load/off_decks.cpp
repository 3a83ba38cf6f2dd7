#include "load/phases.hpp"

#include "deck/pressure.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <limits>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// What a pressure brings on a polygon; both in axes that are not turned.
double force_on(const Convex& polygon, const Intensity& intensity) {
    const AreaMoments on = moments_of(polygon, {0, 0});
    return intensity.q * on.area + intensity.by_along * on.moment.x + intensity.by_across * on.moment.y;
}

/// How much of an area load with an outline lies on decks, and between which values its pressure lies there.
struct OnDecks {
    Sum area;
    Sum force;
    double least = std::numeric_limits<double>::infinity();
    double most = -std::numeric_limits<double>::infinity();
    Point place; ///< of the least

    /// A plane has its extremes at corners.
    void see(const Ring& corners, const Intensity& intensity, const StripAxes& axes) {
        for (const Point& p : corners) {
            const double q = intensity.at(p);
            most = std::max(most, q);
            if (q < least) {
                least = q;
                place = axes.to_plan(p);
            }
        }
    }
};

void lay_on_deck(const FramedLevel& level, std::uint32_t d, std::span<const std::uint32_t> outlines,
                 std::span<const std::uint32_t> acting, double noise, std::vector<OnDecks>& on_decks) {
    const FramedDeck& deck = level.decks[d];
    const StripAxes plain{deck.outline.front(), 1, 0};
    for (const std::uint32_t i : acting) {
        if (level.area_loads[i].outline.empty() && level.area_loads[i].plane) {
            on_decks[i].see(to_strip(plain, deck.outline), Plane(level.area_loads[i]).in(plain), plain);
        }
    }
    if (outlines.empty()) {
        return;
    }
    std::vector<Ring> openings;
    for (const Ring& opening : deck.openings) {
        openings.push_back(to_strip(plain, opening));
    }
    const std::vector<Convex> pieces = convex_pieces(to_strip(plain, deck.outline), openings, noise);
    for (const std::uint32_t i : outlines) {
        const Intensity intensity = Plane(level.area_loads[i]).in(plain);
        const bool acts = std::binary_search(acting.begin(), acting.end(), i);
        for (const Convex& zone : convex_zone(level.area_loads[i], plain, noise)) {
            const Box box = box_of(zone);
            for (const Convex& piece : pieces) {
                if (!box.meets(box_of(piece))) {
                    continue;
                }
                const Convex both = clipped(piece, zone, noise);
                on_decks[i].area.add(moments_of(both, {0, 0}).area);
                on_decks[i].force.add(force_on(both, intensity));
                if (acts) {
                    on_decks[i].see(both, intensity, plain);
                }
            }
        }
    }
}

std::string name_of(const FramedLevel& level, std::size_t i) {
    return "Level " + level.id + ", area_loads[" + std::to_string(i) + "] (" + level.area_loads[i].case_id +
           ")";
}

double length_around(const Ring& ring) {
    double length = 0;
    for (std::size_t k = 0; k < ring.size(); ++k) {
        length += distance(ring[k], ring[(k + 1) % ring.size()]);
    }
    return length;
}

void note_off_decks(const Plan& plan, const FramedLevel& level, std::size_t i, const OnDecks& on,
                    double noise, std::vector<Problem>& problems) {
    const AreaLoad& load = level.area_loads[i];
    double around = length_around(load.outline);
    for (const Ring& opening : load.openings) {
        around += length_around(opening);
    }
    const StripAxes plain{load.outline.front(), 1, 0};
    const Intensity intensity = Plane(load).in(plain);
    Sum area;
    Sum whole_force;
    for (const Convex& piece : convex_zone(load, plain, noise)) {
        area.add(moments_of(piece, {0, 0}).area);
        whole_force.add(force_on(piece, intensity));
    }
    const double off = area.value() - on.area.value();
    if (off <= plan.settings.snap * around) {
        return;
    }
    const double force = whole_force.value() - on.force.value();
    Problem problem = problem_at(ProblemCode::zone_off_decks, load.origin, "area_loads",
                                 name_of(level, i) + ": " + area_text(off, plan.units) +
                                     " of its outline lie off every deck; " + force_text(force, plan.units) +
                                     " there are not carried.",
                                 {}, {});
    problem.point = load.outline.front();
    problems.push_back(std::move(problem));
}

/// A plane that is below zero all over may be meant as uplift; one that changes sign was seldom drawn on
/// purpose.
void warn_below_zero(const Plan& plan, const FramedLevel& level, std::size_t i, const OnDecks& on,
                     std::vector<Problem>& problems) {
    const AreaLoad& load = level.area_loads[i];
    const double drawn = norm(Plane(load).slope) * plan.settings.snap; // what the zone's edge may be off by
    if (on.least >= -drawn || on.most <= drawn) {
        return;
    }
    Problem problem = problem_at(
        ProblemCode::pressure_below_zero, load.origin, "area_loads",
        name_of(level, i) + ": its plane of pressure falls to " +
            quantity_text(on.least, plan.units, dimension::area_load) + " at " +
            point_text(on.place, plan.units) + "; there it lifts.",
        "Check the points and values of the plane, or end the outline where the plane reaches zero.", {});
    problem.point = on.place;
    problems.push_back(std::move(problem));
}

} // namespace

void note_zones_off_decks(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                          Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const Grouped<std::uint32_t> outlines = outlines_over_decks(level, collector.noise());
    const Grouped<std::uint32_t> acting = area_loads_by_deck(level, collector.noise());
    std::vector<OnDecks> on_decks(level.area_loads.size());
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        lay_on_deck(level, d, outlines[d], acting[d], collector.noise(), on_decks);
    }
    for (std::size_t i = 0; i < level.area_loads.size(); ++i) {
        if (!level.area_loads[i].outline.empty()) {
            note_off_decks(plan, level, i, on_decks[i], collector.noise(), collector.problems);
        }
        if (level.area_loads[i].plane) {
            warn_below_zero(plan, level, i, on_decks[i], collector.problems);
        }
    }
}

RUNNEL_NAMESPACE_END
