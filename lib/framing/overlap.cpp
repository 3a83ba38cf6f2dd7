#include "framing/overlap.hpp"

#include "framing/place.hpp"
#include "geometry/convex.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Length of the part of an edge inside a convex ring.
double length_inside(Point a, Point b, const Ring& convex) {
    double from = 0;
    double to = 1;
    for (std::size_t i = 0; i < convex.size(); ++i) {
        const Point p = convex[i];
        const Point q = convex[(i + 1) % convex.size()];
        if (p == q) {
            continue;
        }
        const double side_a = cross(q - p, a - p);
        const double side_b = cross(q - p, b - p);
        if (side_a < 0 && side_b < 0) {
            return 0;
        }
        if (side_a < 0) {
            from = std::max(from, side_a / (side_a - side_b));
        } else if (side_b < 0) {
            to = std::min(to, side_a / (side_a - side_b));
        }
    }
    return to > from ? (to - from) * distance(a, b) : 0;
}

/// Outline and openings about a local origin, so that a far plan loses nothing.
struct LocalDeck {
    LocalDeck(const FramedDeck& deck, Point origin, double noise) {
        rings.push_back(deck.outline);
        rings.insert(rings.end(), deck.openings.begin(), deck.openings.end());
        for (Ring& ring : rings) {
            for (Point& p : ring) {
                p = p - origin;
            }
        }
        pieces = convex_pieces(rings.front(), std::span(rings).subspan(1), noise);
    }
    std::vector<Ring> rings;
    std::vector<Convex> pieces;
};

double border_inside(const std::vector<Ring>& rings, const std::vector<Convex>& pieces) {
    Sum length;
    for (const Ring& ring : rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            for (const Ring& piece : pieces) {
                length.add(length_inside(ring[i], ring[(i + 1) % ring.size()], piece));
            }
        }
    }
    return length.value();
}

SharedArea shared_area(const FramedDeck& a, const FramedDeck& b, double noise) {
    const Point origin = a.outline.front();
    const LocalDeck local_a(a, origin, noise);
    const LocalDeck local_b(b, origin, noise);
    std::vector<Box> boxes;
    for (const Convex& piece : local_b.pieces) {
        boxes.push_back(box_of(piece));
    }
    const BoxFinder finder(std::move(boxes));
    SharedArea shared;
    Sum area;
    double largest = 0;
    std::vector<std::uint32_t> found;
    for (const Convex& piece_a : local_a.pieces) {
        finder.find(box_of(piece_a), found);
        for (const std::uint32_t k : found) {
            const Convex common = clipped(piece_a, local_b.pieces[k], noise);
            const AreaMoments moments = moments_of(common, {0, 0});
            area.add(moments.area);
            if (moments.area > largest) {
                largest = moments.area;
                shared.at = origin + (1 / moments.area) * moments.moment;
            }
        }
    }
    shared.area = area.value();
    if (shared.area > 0) {
        shared.around =
            border_inside(local_a.rings, local_b.pieces) + border_inside(local_b.rings, local_a.pieces);
    }
    return shared;
}

void refuse(LevelDraft& draft, const FramedDeck& a, const FramedDeck& b, const SharedArea& shared) {
    draft.problems.add(ProblemCode::decks_overlap, [&] {
        Problem problem = problem_at(
            ProblemCode::decks_overlap, b.origin, "decks",
            "Decks " + a.id + " and " + b.id + " of level " + draft.level.id + " overlap by " +
                area_text(shared.area, draft.plan.units) + " at " + place_text(draft.plan, shared.at) + '.',
            "Let them meet along an edge, or cut an opening into one.", {a.id, b.id});
        problem.point = shared.at;
        return problem;
    });
}

} // namespace

void refuse_overlaps(LevelDraft& draft) {
    const std::vector<FramedDeck>& decks = draft.level.decks;
    std::vector<Box> boxes;
    for (const FramedDeck& deck : decks) {
        Ring turned;
        for (const Point p : deck.outline) {
            turned.push_back(draft.surroundings.box_around(p, p, 0).low);
        }
        boxes.push_back(turned.empty() ? Box{} : box_of(turned));
    }
    const BoxTree index(boxes);
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < decks.size(); ++i) {
        found.clear();
        index.find(boxes[i], found);
        for (const std::uint32_t k : found) {
            const bool boxes_share =
                std::min(boxes[i].high.x, boxes[k].high.x) - std::max(boxes[i].low.x, boxes[k].low.x) >
                    draft.tolerance.snap &&
                std::min(boxes[i].high.y, boxes[k].high.y) - std::max(boxes[i].low.y, boxes[k].low.y) >
                    draft.tolerance.snap;
            if (k <= i || !boxes_share || decks[i].outline.size() < 3 || decks[k].outline.size() < 3) {
                continue;
            }
            const SharedArea shared = shared_area(decks[i], decks[k], draft.tolerance.noise);
            // A strip of length l and width w has 2 l around it: its width is twice its area by that.
            if (shared.area > draft.tolerance.snap * shared.around / 2) {
                refuse(draft, decks[i], decks[k], shared);
            }
        }
    }
}

RUNNEL_NAMESPACE_END
