#include "framing/snap.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A point that belongs into an edge, by its station there.
struct Node {
    double station;
    Point at;
    double off; ///< m, beside the edge
};

class RingNoder {
public:
    explicit RingNoder(LevelDraft& draft) : draft_(draft) {}

    /// All rings of a deck: at members' ends, columns and walls beside them, and at each other's corners, so
    /// that openings that overlap by less than `snap` touch.
    void node(FramedDeck& deck) {
        deck_ = &deck;
        node(deck.outline);
        for (Ring& opening : deck.openings) {
            node(opening);
        }
    }

private:
    void node(Ring& ring) {
        Ring noded;
        noded.reserve(ring.size());
        for (std::size_t i = 0; i < ring.size(); ++i) {
            noded.push_back(ring[i]);
            collect({ring[i], ring[(i + 1) % ring.size()]});
            for (const Node& node : nodes_) {
                if (!(node.at == noded.back())) {
                    noded.push_back(node.at);
                    draft_.count_bend(node.off);
                }
            }
        }
        ring = std::move(noded);
    }

    void collect(const Axis& edge) {
        nodes_.clear();
        found_.clear();
        draft_.surroundings.find(edge.from, edge.to, 2 * draft_.reach(), found_);
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e)) {
                offer(edge, draft_.plan.columns[draft_.column_of(e)].at);
            } else if (draft_.elements.is_wall(e)) {
                offer(edge, draft_.plan.walls[draft_.wall_of(e)].from);
                offer(edge, draft_.plan.walls[draft_.wall_of(e)].to);
            } else {
                const auto [first, last] = draft_.members_near(e, edge.from, edge.to, draft_.reach());
                for (std::uint32_t m = first; m < last; ++m) {
                    offer(edge, draft_.level.members[m].from);
                    offer(edge, draft_.level.members[m].to);
                }
            }
        }
        if (!deck_->openings.empty()) {
            offer_corners(edge);
        }
        std::sort(nodes_.begin(), nodes_.end(), [](const Node& a, const Node& b) {
            return a.station != b.station ? a.station < b.station
                   : a.at.x != b.at.x     ? a.at.x < b.at.x
                                          : a.at.y < b.at.y;
        });
    }

    /// Corners of the deck's rings; those of the edge's own are its ends or lie elsewhere.
    void offer_corners(const Axis& edge) {
        const Box beside = box_of(edge.from, edge.to).grown(2 * draft_.reach());
        const auto offer_those_of = [&](const Ring& ring) {
            for (const Point& p : ring) {
                if (box_of(p, p).meets(beside)) {
                    offer(edge, p);
                }
            }
        };
        offer_those_of(deck_->outline);
        for (const Ring& opening : deck_->openings) {
            offer_those_of(opening);
        }
    }

    void offer(const Axis& edge, Point p) {
        const NearPoint near = nearest_on(edge, p);
        if (near.distance > draft_.tolerance.noise && near.distance <= draft_.reach() &&
            !edge.is_end(near.station, draft_.reach())) {
            nodes_.push_back({near.station, p, near.distance});
        }
    }

    LevelDraft& draft_;
    const FramedDeck* deck_ = nullptr;
    std::vector<Node> nodes_;
    std::vector<std::uint32_t> found_;
};

/// A point that a ring passes twice: noding drew two of its edges there, which are less than twice `snap`
/// apart.
const Point* pinch_of(const Ring& ring, std::vector<Point>& sorted) {
    sorted = ring;
    std::sort(sorted.begin(), sorted.end(),
              [](Point l, Point r) { return l.x != r.x ? l.x < r.x : l.y < r.y; });
    const auto twice = std::adjacent_find(sorted.begin(), sorted.end());
    return twice == sorted.end() ? nullptr : &*twice;
}

void refuse_pinched(LevelDraft& draft, const FramedDeck& deck, const std::string& which, Point at) {
    draft.problems.add(ProblemCode::ring_too_small, [&] {
        Problem problem = problem_at(
            ProblemCode::ring_too_small, deck.origin, "decks",
            which + " of deck " + deck.id + " of level " + draft.level.id + " is hardly wider than snap (" +
                length_text(draft.tolerance.snap, draft.plan.units) + ") at " +
                point_text(at, draft.plan.units) + ", where a point beside it draws both its sides together.",
            "Draw it wider there, or set a smaller snap.", {deck.id});
        problem.point = at;
        return problem;
    });
}

/// Area that two rings of a deck take away twice.
double overlap_of_rings(const FramedDeck& deck, double noise) {
    const Point origin = deck.outline.front();
    const auto local = [&](Ring ring) {
        for (Point& p : ring) {
            p = p - origin;
        }
        return ring;
    };
    std::vector<Ring> openings;
    double by_rings = signed_area(local(deck.outline));
    double around = 0;
    for (const Ring& opening : deck.openings) {
        openings.push_back(local(opening));
        by_rings += signed_area(openings.back()); // clockwise
        for (std::size_t i = 0; i < opening.size(); ++i) {
            around += distance(opening[i], opening[(i + 1) % opening.size()]);
        }
    }
    Sum swept;
    for (const Convex& piece : convex_pieces(local(deck.outline), openings, noise)) {
        swept.add(moments_of(piece, piece.front()).area);
    }
    const double overlap = swept.value() - by_rings;
    return overlap > noise * around ? overlap : 0;
}

void refuse_overlapping(LevelDraft& draft, const FramedDeck& deck, double overlap) {
    draft.problems.add(ProblemCode::openings_overlap, [&] {
        Problem problem =
            problem_at(ProblemCode::openings_overlap, deck.origin, "decks",
                       "Openings of deck " + deck.id + " of level " + draft.level.id +
                           " overlap each other or its edge by " + area_text(overlap, draft.plan.units) +
                           ", which no point within snap (" +
                           length_text(draft.tolerance.snap, draft.plan.units) + ") draws straight.",
                       "Let them meet along an edge, or draw them as one.", {deck.id});
        problem.point = deck.openings.front().front();
        return problem;
    });
}

void refuse_bad_rings(LevelDraft& draft, const FramedDeck& deck) {
    std::vector<Point> sorted;
    bool sound = deck.outline.size() >= 3;
    if (const Point* at = pinch_of(deck.outline, sorted)) {
        refuse_pinched(draft, deck, "The outline", *at);
        sound = false;
    }
    for (std::size_t i = 0; i < deck.openings.size(); ++i) {
        if (const Point* at = pinch_of(deck.openings[i], sorted)) {
            refuse_pinched(draft, deck, "Opening " + std::to_string(i), *at);
            sound = false;
        }
        sound = sound && deck.openings[i].size() >= 3;
    }
    if (sound && !deck.openings.empty()) {
        if (const double overlap = overlap_of_rings(deck, draft.tolerance.noise); overlap > 0) {
            refuse_overlapping(draft, deck, overlap);
        }
    }
}

} // namespace

void node_decks(LevelDraft& draft) {
    RingNoder noder(draft);
    for (FramedDeck& deck : draft.level.decks) {
        noder.node(deck);
        refuse_bad_rings(draft, deck);
    }
}

RUNNEL_NAMESPACE_END
