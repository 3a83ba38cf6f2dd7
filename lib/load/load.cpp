#include "load/phases.hpp"

#include "deck/pressure.hpp"

RUNNEL_NAMESPACE_BEGIN

LevelLoads load_carriers(const Plan& plan, const Framing& framing, std::uint32_t level,
                         const Sharing& sharing) {
    Collector collector(plan, framing.levels[level], sharing, noise_of(framing.largest_coordinate));
    LevelZones zones(framing.levels[level], collector.noise());
    load_areas(plan, framing, level, sharing, zones, collector);
    note_zones_off_decks(plan, framing, level, zones, collector);
    load_lines_and_points(plan, framing, level, sharing, collector);
    load_own_weight(plan, framing, level, collector);
    return collector.finish();
}

void load_own_weight(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                     Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const std::uint32_t load_case = own_weight_case(plan);
    if (load_case == none) {
        return;
    }
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        const FramedMember& member = level.members[m];
        if (member.section == none) {
            continue;
        }
        const double weight = plan.sections[member.section].weight_per_length().value_or(0);
        if (weight == 0) {
            continue;
        }
        const double force = weight * member.length;
        collector.applied(none, load_case, force, force * between(member.from, member.to, 0.5),
                          std::abs(force));
        collector.put_line(
            m, none, {load_case, {SourceKind::own_weight, m}, {0, member.length, {weight, 0, 0, 0, 0}}});
    }
}

RUNNEL_NAMESPACE_END
