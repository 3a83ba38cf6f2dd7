#include "framing/overlap.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Edge {
    Point low, high;

    [[nodiscard]] double x_at(double y) const {
        return y <= low.y    ? low.x
               : y >= high.y ? high.x
                             : low.x + (y - low.y) / (high.y - low.y) * (high.x - low.x);
    }
};

std::vector<Edge> rising_edges(const std::vector<Ring>& rings, double y_min, double y_max) {
    std::vector<Edge> edges;
    for (const Ring& ring : rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            Point a = ring[i];
            Point b = ring[(i + 1) % ring.size()];
            if (a.y > b.y) {
                std::swap(a, b);
            }
            if (a.y < b.y && b.y > y_min && a.y < y_max) {
                edges.push_back({a, b});
            }
        }
    }
    std::sort(edges.begin(), edges.end(), [](const Edge& a, const Edge& b) { return a.low.y < b.low.y; });
    return edges;
}

std::vector<double> levels_of(const std::vector<Edge>& edges, double y_min, double y_max) {
    std::vector<double> levels{y_min, y_max};
    for (const Edge& edge : edges) {
        for (const double y : {edge.low.y, edge.high.y}) {
            if (y > y_min && y < y_max) {
                levels.push_back(y);
            }
        }
    }
    std::sort(levels.begin(), levels.end());
    levels.erase(std::unique(levels.begin(), levels.end()), levels.end());
    return levels;
}

} // namespace

ConvexPieces::ConvexPieces(const std::vector<Ring>& rings, double y_min, double y_max) {
    const std::vector<Edge> edges = rising_edges(rings, y_min, y_max);
    const std::vector<double> levels = levels_of(edges, y_min, y_max);
    std::vector<const Edge*> active;
    std::size_t next = 0;
    for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
        const double low = levels[i];
        const double high = levels[i + 1];
        const double middle = low + (high - low) / 2;
        while (next < edges.size() && edges[next].low.y < high) {
            active.push_back(&edges[next++]);
        }
        std::erase_if(active, [&](const Edge* edge) { return edge->high.y <= low; });
        std::sort(active.begin(), active.end(),
                  [&](const Edge* a, const Edge* b) { return a->x_at(middle) < b->x_at(middle); });
        for (std::size_t k = 0; k + 1 < active.size(); k += 2) {
            const Edge& left = *active[k];
            const Edge& right = *active[k + 1];
            pieces_.push_back({{left.x_at(low), low},
                               {right.x_at(low), low},
                               {right.x_at(high), high},
                               {left.x_at(high), high}});
        }
    }
}

Ring clip_convex(const Ring& subject, const Ring& clip) {
    Ring result = subject;
    for (std::size_t i = 0; i < clip.size() && !result.empty(); ++i) {
        const Point a = clip[i];
        const Point b = clip[(i + 1) % clip.size()];
        if (a == b) {
            continue;
        }
        const auto left_of = [&](Point p) { return cross(b - a, p - a); };
        Ring kept;
        for (std::size_t k = 0; k < result.size(); ++k) {
            const Point p = result[k];
            const Point q = result[(k + 1) % result.size()];
            const double p_side = left_of(p);
            const double q_side = left_of(q);
            if (p_side >= 0) {
                kept.push_back(p);
            }
            if ((p_side > 0 && q_side < 0) || (p_side < 0 && q_side > 0)) {
                kept.push_back(between(p, q, p_side / (p_side - q_side)));
            }
        }
        result = std::move(kept);
    }
    return result;
}

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

std::vector<Ring> rings_of(const FramedDeck& deck, Point origin) {
    std::vector<Ring> rings{deck.outline};
    rings.insert(rings.end(), deck.openings.begin(), deck.openings.end());
    for (Ring& ring : rings) {
        for (Point& p : ring) {
            p = p - origin;
        }
    }
    return rings;
}

Box box_of(const Ring& ring) {
    Box box;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point p = ring[i];
        box = i == 0 ? Box{p.x, p.y, p.x, p.y}
                     : Box{std::min(box.x_min, p.x), std::min(box.y_min, p.y), std::max(box.x_max, p.x),
                           std::max(box.y_max, p.y)};
    }
    return box;
}

double border_inside(const std::vector<Ring>& rings, const std::vector<Ring>& pieces) {
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

/// Coordinates are taken about a corner of the first deck, so that a far plan loses nothing.
SharedArea shared_area(const FramedDeck& a, const FramedDeck& b) {
    const Point origin = a.outline.front();
    const std::vector<Ring> rings_a = rings_of(a, origin);
    const std::vector<Ring> rings_b = rings_of(b, origin);
    const Box box_a = box_of(rings_a.front());
    const Box box_b = box_of(rings_b.front());
    SharedArea shared;
    const double y_min = std::max(box_a.y_min, box_b.y_min);
    const double y_max = std::min(box_a.y_max, box_b.y_max);
    if (!(y_min < y_max)) {
        return shared;
    }
    const ConvexPieces pieces_a(rings_a, y_min, y_max);
    const ConvexPieces pieces_b(rings_b, y_min, y_max);
    Sum area;
    double largest = 0;
    std::size_t first = 0;
    for (const Ring& piece_a : pieces_a.pieces()) {
        // Pieces come by rising y on both sides: what ended below can be skipped for good.
        while (first < pieces_b.pieces().size() && pieces_b.pieces()[first][2].y <= piece_a[0].y) {
            ++first;
        }
        for (std::size_t k = first; k < pieces_b.pieces().size() && pieces_b.pieces()[k][0].y < piece_a[2].y;
             ++k) {
            const Ring common = clip_convex(piece_a, pieces_b.pieces()[k]);
            const double common_area = common.size() < 3 ? 0 : signed_area(common);
            area.add(common_area);
            if (common_area > largest) {
                largest = common_area;
                Point sum;
                for (const Point p : common) {
                    sum = sum + p;
                }
                shared.at = origin + (1.0 / static_cast<double>(common.size())) * sum;
            }
        }
    }
    shared.area = area.value();
    if (shared.area > 0) {
        shared.around = border_inside(rings_a, pieces_b.pieces()) + border_inside(rings_b, pieces_a.pieces());
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
            const Box at = draft.surroundings.box_around(p, p, 0);
            turned.push_back({at.x_min, at.y_min});
        }
        boxes.push_back(box_of(turned));
    }
    const BoxIndex index(boxes);
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < decks.size(); ++i) {
        found.clear();
        index.find(boxes[i], found);
        for (const std::uint32_t k : found) {
            const bool boxes_share =
                std::min(boxes[i].x_max, boxes[k].x_max) - std::max(boxes[i].x_min, boxes[k].x_min) >
                    draft.tolerance.snap &&
                std::min(boxes[i].y_max, boxes[k].y_max) - std::max(boxes[i].y_min, boxes[k].y_min) >
                    draft.tolerance.snap;
            if (k <= i || !boxes_share || decks[i].outline.size() < 3 || decks[k].outline.size() < 3) {
                continue;
            }
            const SharedArea shared = shared_area(decks[i], decks[k]);
            // A strip of length l and width w has 2 l around it: its width is twice its area by that.
            if (shared.area > draft.tolerance.snap * shared.around / 2) {
                refuse(draft, decks[i], decks[k], shared);
            }
        }
    }
}

RUNNEL_NAMESPACE_END
