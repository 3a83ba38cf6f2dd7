#include "framing/snap.hpp"

#include "plan/ring_checks.hpp"

#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Vertices of decks settled so far, in the order of the plan: a later one joins an earlier one.
class SettledVertices {
public:
    SettledVertices(const std::vector<Point>& drawn, double reach) : reach_(reach), settled_(drawn.size()) {
        std::vector<Box> boxes;
        boxes.reserve(drawn.size());
        for (const Point p : drawn) {
            boxes.push_back(box_of(p, p).grown(reach));
        }
        index_ = BoxTree(boxes);
    }

    void settle(Point p) { settled_[count_++] = p; }

    [[nodiscard]] std::optional<Point> first_near(Point p) {
        found_.clear();
        // A settled vertex lies within reach of where it was drawn, which its box allows for.
        index_.find(box_of(p, p).grown(reach_), found_);
        for (const std::uint32_t i : found_) {
            if (i < count_ && distance(settled_[i], p) <= reach_) {
                return settled_[i];
            }
        }
        return std::nullopt;
    }

private:
    double reach_;
    BoxTree index_;
    std::vector<Point> settled_;
    std::size_t count_ = 0;
    std::vector<std::uint32_t> found_;
};

class DeckSnapper {
public:
    explicit DeckSnapper(LevelDraft& draft) : draft_(draft), settled_(all_vertices(draft), draft.reach()) {}

    void snap(FramedDeck& deck) {
        for (Point& vertex : deck.outline) {
            vertex = place_of(vertex, nullptr);
        }
        if (deck.openings.empty()) {
            return;
        }
        const RingEdges edges(deck.outline, draft_.reach());
        for (Ring& opening : deck.openings) {
            for (Point& vertex : opening) {
                vertex = place_of(vertex, &edges);
            }
        }
    }

private:
    /// A deck's own edges by place.
    struct RingEdges {
        RingEdges(const Ring& ring_, double reach) : ring(ring_) {
            std::vector<Box> boxes;
            for (std::size_t i = 0; i < ring.size(); ++i) {
                boxes.push_back(box_of(ring[i], ring[(i + 1) % ring.size()]).grown(reach));
            }
            index = BoxTree(boxes);
        }
        [[nodiscard]] Axis edge(std::uint32_t i) const { return {ring[i], ring[(i + 1) % ring.size()]}; }

        const Ring& ring;
        BoxTree index;
    };

    static std::vector<Point> all_vertices(const LevelDraft& draft) {
        std::vector<Point> all;
        for (const FramedDeck& deck : draft.level.decks) {
            all.insert(all.end(), deck.outline.begin(), deck.outline.end());
            for (const Ring& opening : deck.openings) {
                all.insert(all.end(), opening.begin(), opening.end());
            }
        }
        return all;
    }

    Point place_of(Point drawn, const RingEdges* own_edges) {
        found_.clear();
        draft_.surroundings.find(drawn, 2 * draft_.reach(), found_);
        std::optional<Point> target = nearest_end(drawn);
        if (!target) {
            target = settled_.first_near(drawn);
        }
        if (!target) {
            target = on_axes(drawn);
        }
        if (!target && own_edges) {
            target = on_edges(drawn, *own_edges);
        }
        const Point place = target ? move_towards(*target, drawn, draft_.tolerance.snap) : drawn;
        draft_.count_move(drawn, place);
        settled_.settle(place);
        return place;
    }

    /// Columns before ends of walls before ends of members, higher roles first; then the nearest.
    std::optional<Point> nearest_end(Point drawn) const {
        constexpr int wall_class = 10;
        constexpr int column_class = 11;
        int best_class = -1;
        double best_far = 0;
        std::optional<Point> best;
        const auto offer = [&](int point_class, Point p) {
            const double far = distance(drawn, p);
            if (far <= draft_.reach() &&
                (point_class > best_class || (point_class == best_class && far < best_far))) {
                best_class = point_class;
                best_far = far;
                best = p;
            }
        };
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e)) {
                offer(column_class, draft_.plan.columns[draft_.column_of(e)].at);
            } else if (draft_.elements.is_wall(e)) {
                offer(wall_class, draft_.plan.walls[draft_.wall_of(e)].from);
                offer(wall_class, draft_.plan.walls[draft_.wall_of(e)].to);
            } else if (draft_.lines[e].usable) {
                offer(static_cast<int>(draft_.lines[e].role), draft_.lines[e].axis.from);
                offer(static_cast<int>(draft_.lines[e].role), draft_.lines[e].axis.to);
            }
        }
        return best;
    }

    struct OnAxis {
        Axis axis;
        NearPoint near;
        int rank;
    };

    [[nodiscard]] std::vector<OnAxis> axes_near(Point drawn) const {
        constexpr int wall_rank = 10;
        std::vector<OnAxis> axes;
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e) || (draft_.elements.is_line(e) && !draft_.lines[e].usable)) {
                continue;
            }
            const bool wall = draft_.elements.is_wall(e);
            const Axis axis = wall ? draft_.wall_axis(draft_.wall_of(e)) : draft_.lines[e].axis;
            const NearPoint near = nearest_on(axis, drawn);
            if (near.distance <= draft_.reach()) {
                axes.push_back({axis, near, wall ? wall_rank : static_cast<int>(draft_.lines[e].role)});
            }
        }
        return axes;
    }

    /// Onto the axis of the highest rank; onto the crossing of two where that is within snap.
    [[nodiscard]] std::optional<Point> on_axes(Point drawn) const {
        const std::vector<OnAxis> axes = axes_near(drawn);
        if (axes.empty()) {
            return std::nullopt;
        }
        const auto better = [](const OnAxis& a, const OnAxis& b) {
            return a.rank != b.rank ? a.rank > b.rank : a.near.distance < b.near.distance;
        };
        const OnAxis& best = *std::min_element(axes.begin(), axes.end(), better);
        for (const OnAxis& other : axes) {
            const Gap gap = gap_between(best.axis, other.axis);
            if (&other != &best && gap.distance == 0 && distance(gap.at, drawn) <= draft_.reach()) {
                return distance(gap.at, drawn) <= draft_.tolerance.noise ? drawn : gap.at;
            }
        }
        return best.near.distance <= draft_.tolerance.noise ? drawn : best.near.at;
    }

    [[nodiscard]] std::optional<Point> on_edges(Point drawn, const RingEdges& edges) {
        std::vector<std::uint32_t> found;
        edges.index.find(box_of(drawn, drawn), found);
        std::optional<NearPoint> best;
        for (const std::uint32_t i : found) {
            const NearPoint near = nearest_on(edges.edge(i), drawn);
            if (near.distance <= draft_.reach() && (!best || near.distance < best->distance)) {
                best = near;
            }
        }
        if (!best || best->distance <= draft_.tolerance.noise) {
            return std::nullopt;
        }
        return best->at;
    }

    LevelDraft& draft_;
    SettledVertices settled_;
    std::vector<std::uint32_t> found_;
};

double weight_of(const Deck& deck, const std::unordered_map<std::string_view, double>& build_weights) {
    const auto build = build_weights.find(deck.build);
    return deck.q.value_or(0) + (build == build_weights.end() ? 0 : build->second);
}

void copy_decks(LevelDraft& draft) {
    std::unordered_map<std::string_view, double> build_weights;
    for (const Build& build : draft.plan.builds) {
        build_weights.emplace(build.id, build.weight_per_area());
    }
    for (const Listed<Deck>& listed : draft.lists.decks) {
        const Deck& deck = *listed.what;
        FramedDeck framed;
        framed.id = deck.id;
        framed.outline = deck.outline;
        framed.openings = deck.openings;
        framed.span = deck.span;
        if (deck.span == SpanKind::one_way) {
            framed.share = deck.share.value_or(draft.plan.settings.share);
        }
        framed.corner_angles = deck.corner_angles;
        framed.direction = deck.direction.value_or(0);
        framed.own_weight = weight_of(deck, build_weights);
        framed.origin = listed.origin;
        draft.level.decks.push_back(std::move(framed));
    }
}

/// Drops vertices that snapping made equal, and turns the ring the way it shall run.
void tidy(Ring& ring, bool counter_clockwise) {
    ring.erase(std::unique(ring.begin(), ring.end()), ring.end());
    while (ring.size() > 1 && ring.front() == ring.back()) {
        ring.pop_back();
    }
    if ((signed_area(ring) > 0) != counter_clockwise) {
        // The first vertex stays the first: rings read as they were drawn.
        std::reverse(ring.begin() + (ring.empty() ? 0 : 1), ring.end());
    }
}

/// On average no wider than snap: snapping left as good as nothing of it.
bool has_collapsed(const Ring& ring, double snap) {
    return ring.size() < 3 || mean_width(ring) <= snap;
}

void refuse_ring(LevelDraft& draft, const FramedDeck& deck, const std::string& which, Point at) {
    draft.problems.add(ProblemCode::ring_too_small, [&] {
        Problem problem = problem_at(ProblemCode::ring_too_small, deck.origin, "decks",
                                     which + " of deck " + deck.id + " is on average no wider than snap (" +
                                         length_text(draft.tolerance.snap, draft.plan.units) +
                                         ") once points within snap are one.",
                                     "Check its points, or set a smaller snap.", {deck.id});
        problem.point = at;
        return problem;
    });
}

void tidy_rings(LevelDraft& draft, FramedDeck& deck) {
    tidy(deck.outline, true);
    if (has_collapsed(deck.outline, draft.tolerance.snap)) {
        refuse_ring(draft, deck, "The outline", deck.outline.empty() ? Point{} : deck.outline.front());
    }
    for (std::size_t i = 0; i < deck.openings.size(); ++i) {
        tidy(deck.openings[i], false);
        if (has_collapsed(deck.openings[i], draft.tolerance.snap)) {
            refuse_ring(draft, deck, "Opening " + std::to_string(i),
                        deck.openings[i].empty() ? Point{} : deck.openings[i].front());
        }
    }
}

} // namespace

void snap_decks(LevelDraft& draft) {
    copy_decks(draft);
    DeckSnapper snapper(draft);
    for (FramedDeck& deck : draft.level.decks) {
        snapper.snap(deck);
    }
    for (FramedDeck& deck : draft.level.decks) {
        tidy_rings(draft, deck);
    }
}

void note_moves(LevelDraft& draft) {
    if (draft.points_moved + draft.edges_bent == 0) {
        return;
    }
    std::string what = draft.points_moved > 0
                           ? counted(draft.points_moved, "point was", "points were") + " moved"
                           : std::string();
    if (draft.edges_bent > 0) {
        what += (what.empty() ? "" : " and ") +
                counted(draft.edges_bent, "place of a deck's edge was", "places of decks' edges were") +
                " drawn to a point beside it";
    }
    draft.problems.add(ProblemCode::points_merged, [&] {
        return level_problem(draft, ProblemCode::points_merged,
                             "On level " + draft.level.id + ' ' + what + ", by " +
                                 length_text(draft.largest_move, draft.plan.units) + " at most (snap is " +
                                 length_text(draft.tolerance.snap, draft.plan.units) + ").",
                             {}, {draft.level.id});
    });
}

RUNNEL_NAMESPACE_END
