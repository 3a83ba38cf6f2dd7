#include "deck/nearest.hpp"

#include "framing/draft.hpp"
#include "geometry/basic.hpp"
#include "geometry/ring_area.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <optional>
#include <string>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct NearMiss {
    std::uint32_t carrier = none; ///< as in Sharing
    double gap = 0;               ///< m
    Point place;                  ///< in the plan
};

/// The least distance for which `holds`, between one for which it does not and one for which it does.
template <class Holds>
double least_for(double from, double to, Holds holds) {
    constexpr double told_to = 1e-6; // of the lower bound: messages give six figures
    const double enough = told_to * from;
    while (to - from > enough) {
        const double middle = (from + to) / 2;
        (holds(middle) ? to : from) = middle;
    }
    return to;
}

class MissFinder {
public:
    MissFinder(const NearestCarriers& carriers, RingArea& area, double snap)
        : carriers_(carriers), area_(area), snap_(snap), reach_(snaps_of_a_near_miss * snap) {}

    /// A line that is none of the deck's carriers but runs along its edge.
    [[nodiscard]] std::optional<NearMiss> along(const LineCarrier& line) {
        const Point from = line.from - carriers_.origin;
        const Point to = line.to - carriers_.origin;
        const auto runs_within = [&](double distance) {
            return area_.shared_with(from, to, distance).along_edge > 2 * reach_;
        };
        if (!runs_within(reach_) || has_own_carrier(line)) {
            return std::nullopt;
        }
        return NearMiss{line.number, least_for(snap_, reach_, runs_within), between(line.from, line.to, 0.5)};
    }

    [[nodiscard]] std::optional<NearMiss> at(Point column, std::uint32_t number) {
        const Point p = column - carriers_.origin;
        const auto stands_within = [&](double distance) { return area_.is_beside_edge(p, distance); };
        if (area_.contains(p) || !stands_within(reach_)) {
            return std::nullopt;
        }
        return NearMiss{number, least_for(snap_, reach_, stands_within), column};
    }

private:
    /// What runs beside an edge that has a carrier of its own was not meant to carry it.
    [[nodiscard]] bool has_own_carrier(const LineCarrier& line) const {
        constexpr double alike = 0.1; // sine of the angle
        const Point d = line.to - line.from;
        const Point middle = between(line.from, line.to, 0.5);
        return std::any_of(carriers_.carriers.begin(), carriers_.carriers.end(), [&](const LineCarrier& own) {
            const Point e = own.to - own.from;
            return std::abs(cross(d, e)) <= alike * norm(d) * norm(e) &&
                   distance_to_segment(middle, own.from, own.to) <= 2 * reach_;
        });
    }

    const NearestCarriers& carriers_;
    RingArea& area_;
    double snap_;
    double reach_;
};

/// Carriers and columns come rising by number, as all lists of a level do.
std::vector<NearMiss> find_misses(const Plan& plan, const FramedLevel& level, const FramedDeck& deck,
                                  std::span<const LineCarrier> near, const NearestCarriers& carriers,
                                  RingArea& area, const Sharing& sharing) {
    MissFinder finder(carriers, area, plan.settings.snap);
    std::vector<NearMiss> missed;
    const auto note = [&missed](const std::optional<NearMiss>& miss) {
        if (miss) {
            missed.push_back(*miss);
        }
    };
    for (const LineCarrier& line : near) {
        const auto own = std::lower_bound(
            carriers.carriers.begin(), carriers.carriers.end(), line.number,
            [](const LineCarrier& carrier, std::uint32_t number) { return carrier.number < number; });
        const bool carries = own != carriers.carriers.end() && own->number == line.number;
        const bool could = deck.span == SpanKind::two_way || line.number >= sharing.members;
        if (could && !carries) {
            note(finder.along(line));
        }
    }
    if (deck.span == SpanKind::columns) {
        const Box beside = box_of(deck.outline).grown(snaps_of_a_near_miss * plan.settings.snap);
        for (const std::uint32_t c : level.columns) {
            const Point at = plan.columns[c].at;
            const std::uint32_t number = sharing.number_of({CarrierKind::column, c});
            const bool carries =
                std::binary_search(carriers.point_number.begin(), carriers.point_number.end(), number);
            if (!carries && box_of(at, at).meets(beside)) {
                note(finder.at(at, number));
            }
        }
    }
    return missed;
}

} // namespace

void report_near_misses(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                        std::span<const LineCarrier> near, const NearestCarriers& carriers, RingArea& area,
                        Sharing& sharing) {
    const FramedDeck& deck = level.decks[deck_index];
    for (const NearMiss& miss : find_misses(plan, level, deck, near, carriers, area, sharing)) {
        const Carrier carrier = sharing.carrier(miss.carrier);
        const std::string& id = carrier_id(plan, level, carrier);
        const bool column = carrier.kind == CarrierKind::column;
        Problem problem = problem_at(
            ProblemCode::near_miss, deck.origin, "decks",
            "Level " + level.id + ", deck " + deck.id + ": " + id + (column ? " stands " : " runs ") +
                length_text(miss.gap, plan.units) + " beside its edge and carries nothing of it (snap is " +
                length_text(plan.settings.snap, plan.units) + ").",
            column ? "Draw the deck's edge past the column, or set a larger snap."
                   : "Draw the deck's edge on its axis, or set a larger snap.",
            {deck.id, id});
        problem.point = miss.place;
        sharing.problems.push_back(std::move(problem));
    }
}

RUNNEL_NAMESPACE_END
