#include "framing/near_miss.hpp"
#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

bool is_in_closed_ring(Point p, const Ring& ring, double reach) {
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if (nearest_on({a, b}, p).distance <= reach) {
            return true;
        }
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) / (b.y - a.y) * (b.x - a.x)) {
            inside = !inside;
        }
    }
    return inside;
}

/// Inside one of a deck's openings, and not on its edge.
bool is_in_opening(Point p, const FramedDeck& deck, double reach) {
    return std::any_of(deck.openings.begin(), deck.openings.end(), [&](const Ring& opening) {
        for (std::size_t i = 0; i < opening.size(); ++i) {
            if (nearest_on({opening[i], opening[(i + 1) % opening.size()]}, p).distance <= reach) {
                return false;
            }
        }
        return is_in_closed_ring(p, opening, 0);
    });
}

class SupportWatcher {
public:
    SupportWatcher(LevelDraft& draft, const NearMisses& reported)
        : draft_(draft), reported_(reported), limit_(snaps_of_a_near_miss * draft.tolerance.snap),
          column_carries_(draft.plan.columns.size()), wall_carries_(draft.plan.walls.size()) {}

    void run() {
        mark_carriers();
        index_decks();
        for (const std::uint32_t column : draft_.level.columns) {
            const Point at = draft_.plan.columns[column].at;
            if (!column_carries_[column] && !deck_bears_on({at, at}, true)) {
                warn({CarrierKind::column, column}, {at, at});
            }
        }
        for (const std::uint32_t wall : draft_.level.walls) {
            if (!wall_carries_[wall] && !deck_bears_on(draft_.wall_axis(wall), false)) {
                warn({CarrierKind::wall, wall}, draft_.wall_axis(wall));
            }
        }
    }

private:
    void mark(Carrier carrier) {
        if (carrier.kind == CarrierKind::column) {
            column_carries_[carrier.index] = true;
        } else if (carrier.kind == CarrierKind::wall) {
            wall_carries_[carrier.index] = true;
        }
    }

    void mark_carriers() {
        mark_columns_under_point_loads();
        for (const Bearing& bearing : draft_.level.bearings.items()) {
            mark(bearing.on);
        }
        for (const Foot& foot : draft_.level.feet) {
            mark(foot.lower);
        }
    }

    void mark_columns_under_point_loads() {
        std::vector<Box> boxes;
        for (const PointLoad& load : draft_.level.point_loads) {
            boxes.push_back(box_of(load.at, load.at).grown(draft_.reach()));
        }
        const BoxFinder finder(std::move(boxes));
        std::vector<std::uint32_t> found;
        for (const std::uint32_t column : draft_.level.columns) {
            const Point at = draft_.plan.columns[column].at;
            finder.find(box_of(at, at), found);
            column_carries_[column] =
                column_carries_[column] || std::any_of(found.begin(), found.end(), [&](std::uint32_t i) {
                    return distance(draft_.level.point_loads[i].at, at) <= draft_.reach();
                });
        }
    }

    void index_decks() {
        std::vector<Box> boxes;
        for (const FramedDeck& deck : draft_.level.decks) {
            boxes.push_back(deck.outline.empty() ? Box{} : box_of(deck.outline).grown(draft_.reach()));
        }
        decks_ = BoxTree(boxes);
    }

    /// Columns carry decks only where the deck is shared to columns; walls carry any deck.
    bool deck_bears_on(const Axis& axis, bool column) {
        std::vector<std::uint32_t> found;
        decks_.find(box_of(axis.from, axis.to).grown(draft_.reach()), found);
        return std::any_of(found.begin(), found.end(), [&](std::uint32_t i) {
            const FramedDeck& deck = draft_.level.decks[i];
            if (column &&
                (deck.span != SpanKind::columns || is_in_opening(axis.from, deck, draft_.reach()))) {
                return false;
            }
            return is_in_closed_ring(axis.from, deck.outline, draft_.reach()) ||
                   is_in_closed_ring(axis.to, deck.outline, draft_.reach()) || crosses(axis, deck.outline);
        });
    }

    static bool crosses(const Axis& axis, const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            if (axis.length > 0 && gap_between(axis, {ring[i], ring[(i + 1) % ring.size()]}).distance <= 0) {
                return true;
            }
        }
        return false;
    }

    /// The nearest member that passes by.
    std::optional<std::pair<std::uint32_t, Gap>> nearest_member(const Axis& axis) {
        std::vector<std::uint32_t> found;
        draft_.surroundings.find(axis.from, axis.to, limit_ + draft_.reach(), found);
        std::optional<std::pair<std::uint32_t, Gap>> best;
        for (const std::uint32_t e : found) {
            if (!draft_.elements.is_line(e) || !draft_.lines[e].usable) {
                continue;
            }
            const auto [first, last] = draft_.members_near(e, axis.from, axis.to, limit_);
            for (std::uint32_t m = first; m < last; ++m) {
                const Gap gap = gap_between(axis, draft_.axis_of(m));
                if (gap.distance <= limit_ && gap.distance > draft_.reach() &&
                    (!best || gap.distance < best->second.distance)) {
                    best.emplace(m, gap);
                }
            }
        }
        return best;
    }

    void warn(Carrier carrier, const Axis& axis) {
        const auto miss = nearest_member(axis);
        const bool column = carrier.kind == CarrierKind::column;
        const std::string id = label_of(draft_, carrier);
        const Origin& origin =
            column ? draft_.plan.columns[carrier.index].origin : draft_.plan.walls[carrier.index].origin;
        const std::string name = (column ? "Column " : "Wall ") + id;
        std::string hint;
        if (miss) {
            const std::string member = label_of(draft_, miss->first);
            const std::string text =
                " misses " + member + " by " + length_text(miss->second.distance, draft_.plan.units);
            hint = "It" + text + '.';
            const std::set<std::uint32_t>& told = column ? reported_.columns : reported_.walls;
            if (told.count(carrier.index) == 0) {
                add(ProblemCode::near_miss, carrier, origin,
                    name + text + " at " + place_text(draft_.plan, miss->second.at) + " on level " +
                        draft_.level.id + "; points are one within snap (" +
                        length_text(draft_.tolerance.snap, draft_.plan.units) + ") only.",
                    "For " + member + " to bear on it, draw it through " +
                        place_text(draft_.plan, miss->second.at) + ", or set a larger snap.",
                    {id, member}, miss->second.at);
            }
        }
        add(ProblemCode::carries_nothing, carrier, origin,
            name + " is a bearing at level " + draft_.level.id + " but nothing bears on it there.", hint,
            {id}, axis.from);
    }

    void add(ProblemCode code, Carrier carrier, const Origin& given, std::string message, std::string hint,
             std::vector<std::string> ids, Point point) {
        draft_.problems.add(code, [&] {
            Origin origin = given;
            if (origin.index == Origin::nowhere) {
                origin.index = carrier.index;
            }
            Problem problem =
                problem_at(code, origin, carrier.kind == CarrierKind::column ? "columns" : "walls",
                           std::move(message), std::move(hint), std::move(ids));
            problem.point = point;
            return problem;
        });
    }

    LevelDraft& draft_;
    const NearMisses& reported_;
    double limit_;
    std::vector<bool> column_carries_, wall_carries_;
    BoxTree decks_;
};

} // namespace

void find_idle_supports(LevelDraft& draft, const NearMisses& reported) {
    SupportWatcher(draft, reported).run();
}

RUNNEL_NAMESPACE_END
