#include "load/phases.hpp"

#include "deck/pressure.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>

RUNNEL_NAMESPACE_BEGIN

void note_zones_off_decks(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                          Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const double noise = collector.noise();
    const Grouped<std::uint32_t> over = outlines_over_decks(level, noise);
    std::vector<Sum> on_decks(level.area_loads.size());
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        const StripAxes plain{deck.outline.front(), 1, 0};
        std::vector<Convex> pieces; // of the deck, made when a zone needs them
        std::vector<Ring> openings;
        for (const std::uint32_t i : over[d]) {
            const AreaLoad& load = level.area_loads[i];
            if (pieces.empty()) {
                for (const Ring& opening : deck.openings) {
                    openings.push_back(to_strip(plain, opening));
                }
                pieces = convex_pieces(to_strip(plain, deck.outline), openings, noise);
            }
            for (const Convex& zone : convex_zone(to_strip(plain, load.outline), noise)) {
                const Box box = box_of(zone);
                for (const Convex& piece : pieces) {
                    if (box.meets(box_of(piece))) {
                        on_decks[i].add(moments_of(clipped(piece, zone, noise), {0, 0}).area);
                    }
                }
            }
        }
    }
    for (std::size_t i = 0; i < level.area_loads.size(); ++i) {
        const AreaLoad& load = level.area_loads[i];
        if (load.outline.empty()) {
            continue;
        }
        double around = 0;
        for (std::size_t k = 0; k < load.outline.size(); ++k) {
            around += distance(load.outline[k], load.outline[(k + 1) % load.outline.size()]);
        }
        const double off = std::abs(signed_area(load.outline)) - on_decks[i].value();
        if (off > plan.settings.snap * around) {
            Problem problem =
                problem_at(ProblemCode::zone_off_decks, load.origin, "area_loads",
                           "Level " + level.id + ", area_loads[" + std::to_string(i) + "] (" + load.case_id +
                               "): " + area_text(off, plan.units) + " of its outline lie off every deck; " +
                               force_text(load.q * off, plan.units) + " there are not carried.",
                           {}, {});
            problem.point = load.outline.front();
            collector.problems.push_back(std::move(problem));
        }
    }
}

RUNNEL_NAMESPACE_END
