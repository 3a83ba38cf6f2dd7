#include "deck/nearest.hpp"
#include "plan/problems.hpp"

#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

std::string name_of_carrier(std::uint32_t number, const Plan& plan, const FramedLevel& level,
                            const Sharing& sharing) {
    const Carrier carrier = sharing.carrier(number);
    switch (carrier.kind) {
    case CarrierKind::member:
        return level.members[carrier.index].id;
    case CarrierKind::wall:
        return plan.walls[carrier.index].id;
    case CarrierKind::column:
        return plan.columns[carrier.index].id;
    }
    return {};
}

} // namespace

void report_near_misses(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                        std::span<const NearMissed> missed, Sharing& sharing) {
    const FramedDeck& deck = level.decks[deck_index];
    for (const NearMissed& miss : missed) {
        const std::string id = name_of_carrier(miss.carrier, plan, level, sharing);
        const bool column = sharing.carrier(miss.carrier).kind == CarrierKind::column;
        Problem problem = problem_at(ProblemCode::near_miss, deck.origin, "decks",
                                     "Level " + level.id + ", deck " + deck.id + ": " + id +
                                         (column ? " stands " : " runs along its edge ") +
                                         length_text(miss.gap, plan.units) +
                                         " beside it and carries nothing of it (snap is " +
                                         length_text(plan.settings.snap, plan.units) + ").",
                                     column ? "Draw the deck's edge past the column, or set a larger snap."
                                            : "Draw the deck's edge on its axis, or set a larger snap.",
                                     {deck.id, id});
        problem.point = miss.place;
        sharing.problems.push_back(std::move(problem));
    }
}

RUNNEL_NAMESPACE_END
