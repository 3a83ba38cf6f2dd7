#include "geometry/planar_map.hpp"

#include "geometry/box_tree.hpp"

#include <algorithm>
#include <numeric>
#include <tuple>

// Design. Nodes first (ends, then crossings), each within `snap` of another taken as that one; then every
// line becomes the chain of nodes that lie on it, and chains that share a stretch share its pieces. Faces
// follow from the order of pieces around each node alone. Since a piece is walked once on either side, areas
// of faces telescope: nothing is lost or counted twice even where rounding bends a line. Rejected: uniting
// the gaps of a sweep, which hides which edge a border belongs to and needs a direction that no line runs
// along.

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::uint32_t nowhere = 0xffffffff;

Box box_of(const MapLine& line) {
    return box_of(line.a, line.b);
}

std::vector<Box> boxes_of(std::span<const MapLine> lines) {
    std::vector<Box> boxes;
    boxes.reserve(lines.size());
    for (const MapLine& line : lines) {
        boxes.push_back(box_of(line));
    }
    return boxes;
}

/// Finds the nodes of a map and which of them lie on each line.
class Noder {
public:
    Noder(std::span<const MapLine> lines, Tolerance tolerance)
        : lines_(lines), noise_(2 * tolerance.noise), snap_(std::max(tolerance.snap, noise_)),
          line_finder_(boxes_of(lines)) {
        gather_ends();
        gather_crossings();
        merge();
    }

    std::vector<Point> nodes;
    std::vector<std::pair<std::uint32_t, std::uint32_t>> line_ends;

    /// The nodes along a line from its a to its b.
    void chain_of(std::uint32_t index, const BoxFinder& node_finder, std::vector<std::uint32_t>& chain) {
        const MapLine& line = lines_[index];
        const auto [first, last] = line_ends[index];
        const double reach = line.firm ? noise_ : snap_;
        const double length = distance(line.a, line.b);
        node_finder.find(box_of(line).grown(reach), near_);
        inner_.clear();
        for (const std::uint32_t n : near_) {
            if (n == first || n == last || distance_to_segment(nodes[n], line.a, line.b) > reach) {
                continue;
            }
            const double station = station_of(nodes[n], line.a, line.b);
            if (station > 0 && station < length) {
                inner_.emplace_back(station, n);
            }
        }
        std::sort(inner_.begin(), inner_.end());
        chain.assign(1, first);
        for (const auto& [station, n] : inner_) {
            chain.push_back(n);
        }
        if (last != chain.back()) {
            chain.push_back(last);
        }
    }

private:
    struct Candidate {
        Point at;
        int rank = 0; ///< 0: end of a firm line, 1: on a firm line, 2: elsewhere
        bool exact =
            false; ///< comes together with others only where they are one point: firm lines keep course
        std::uint32_t end = nowhere; ///< 2 line + (0 for its a, 1 for its b); a crossing has none
    };

    void gather_ends() {
        for (std::uint32_t i = 0; i < lines_.size(); ++i) {
            for (std::uint32_t e = 0; e < 2; ++e) {
                const Point p = e == 0 ? lines_[i].a : lines_[i].b;
                candidates_.push_back(lines_[i].firm ? Candidate{p, 0, true, 2 * i + e}
                                                     : settled(p, 2 * i + e));
            }
        }
    }

    /// A point moved on to the nearest firm line within `snap`; one that is on it but for rounding stays.
    Candidate settled(Point p, std::uint32_t end) {
        line_finder_.find(box_of(p, p).grown(snap_), near_);
        Candidate best{p, 2, false, end};
        double nearest = snap_;
        for (const std::uint32_t i : near_) {
            if (!lines_[i].firm) {
                continue;
            }
            const Point a = lines_[i].a;
            const Point b = lines_[i].b;
            const double off = distance_to_segment(p, a, b);
            if (off < nearest) {
                const double length = distance(a, b);
                const double t = length > 0 ? std::clamp(station_of(p, a, b) / length, 0.0, 1.0) : 0.0;
                nearest = off;
                best = {off <= tiny() ? p : between(a, b, t), 1, false, end};
            }
        }
        return best;
    }
    [[nodiscard]] double tiny() const { return noise_ / 2; }

    void gather_crossings() {
        for (std::uint32_t i = 0; i < lines_.size(); ++i) {
            line_finder_.find(box_of(lines_[i]), near_lines_);
            for (const std::uint32_t j : near_lines_) {
                if (j > i) {
                    cross_lines(lines_[i], lines_[j]);
                }
            }
        }
    }

    /// Lines that cross inside both by more than `snap`; where an end lies on the other line it is the node.
    void cross_lines(const MapLine& l, const MapLine& r) {
        const double reach = l.firm && r.firm ? noise_ : snap_;
        const auto off = [](const MapLine& line, Point p) {
            return cross(line.b - line.a, p - line.a) / distance(line.a, line.b);
        };
        const auto parts = [reach](double a, double b) {
            return (a > reach && b < -reach) || (a < -reach && b > reach);
        };
        const double ra = off(l, r.a);
        const double rb = off(l, r.b);
        if (!parts(ra, rb) || !parts(off(r, l.a), off(r, l.b))) {
            return;
        }
        // On the firm one of the two exactly, since that keeps its course.
        if (l.firm) {
            const double la = off(r, l.a);
            const double lb = off(r, l.b);
            candidates_.push_back({between(l.a, l.b, la / (la - lb)), 1, r.firm, nowhere});
        } else if (r.firm) {
            candidates_.push_back({between(r.a, r.b, ra / (ra - rb)), 1, false, nowhere});
        } else {
            candidates_.push_back(settled(between(r.a, r.b, ra / (ra - rb)), nowhere));
        }
    }

    void merge() {
        std::stable_sort(candidates_.begin(), candidates_.end(),
                         [](const Candidate& l, const Candidate& r) { return l.rank < r.rank; });
        std::vector<Box> boxes;
        boxes.reserve(candidates_.size());
        for (const Candidate& candidate : candidates_) {
            boxes.push_back(box_of(candidate.at, candidate.at));
        }
        const BoxFinder finder(std::move(boxes));
        std::vector<std::uint32_t> node_of(candidates_.size(), nowhere);
        line_ends.resize(lines_.size());
        for (std::uint32_t c = 0; c < candidates_.size(); ++c) {
            const Candidate& candidate = candidates_[c];
            finder.find(box_of(candidate.at, candidate.at).grown(snap_), near_);
            double nearest = snap_;
            std::uint32_t node = nowhere;
            for (const std::uint32_t other : near_) {
                if (other >= c) {
                    break;
                }
                const std::uint32_t n = node_of[other];
                const double off = distance(nodes[n], candidate.at);
                if (off <= nearest && (!candidate.exact || off <= noise_)) {
                    nearest = off;
                    node = n;
                }
            }
            if (node == nowhere) {
                node = static_cast<std::uint32_t>(nodes.size());
                nodes.push_back(candidate.at);
            }
            node_of[c] = node;
            if (candidate.end != nowhere) {
                auto& ends = line_ends[candidate.end / 2];
                (candidate.end % 2 == 0 ? ends.first : ends.second) = node;
            }
        }
    }

    std::span<const MapLine> lines_;
    double noise_;
    double snap_;
    BoxFinder line_finder_;
    std::vector<Candidate> candidates_;
    std::vector<std::uint32_t> near_, near_lines_;
    std::vector<std::pair<double, std::uint32_t>> inner_;
};

void lay_pieces(Noder& noder, std::size_t line_count, PlanarMap& map) {
    struct Laid {
        std::uint32_t a, b, line;
        bool backwards;
        [[nodiscard]] auto key() const { return std::tuple(a, b, line, backwards); }
    };
    std::vector<Box> boxes;
    boxes.reserve(map.nodes.size());
    for (const Point& p : map.nodes) {
        boxes.push_back(box_of(p, p));
    }
    const BoxFinder node_finder(std::move(boxes));
    std::vector<Laid> laid;
    std::vector<std::uint32_t> chain;
    for (std::uint32_t i = 0; i < line_count; ++i) {
        noder.chain_of(i, node_finder, chain);
        for (std::size_t k = 0; k + 1 < chain.size(); ++k) {
            const bool backwards = chain[k] > chain[k + 1];
            laid.push_back(
                {std::min(chain[k], chain[k + 1]), std::max(chain[k], chain[k + 1]), i, backwards});
        }
    }
    std::sort(laid.begin(), laid.end(), [](const Laid& l, const Laid& r) { return l.key() < r.key(); });
    for (std::size_t i = 0; i < laid.size();) {
        map.pieces.push_back({laid[i].a, laid[i].b});
        const std::size_t first = i;
        for (; i < laid.size() && laid[i].a == laid[first].a && laid[i].b == laid[first].b; ++i) {
            map.lines.push({laid[i].line, laid[i].backwards});
        }
        map.lines.end_group();
    }
}

/// Whether the direction u comes before v, counter-clockwise from +x.
bool turns_before(Point u, Point v) {
    const auto upper = [](Point p) { return p.y > 0 || (p.y == 0 && p.x > 0); };
    if (upper(u) != upper(v)) {
        return upper(u);
    }
    return cross(u, v) > 0;
}

/// By half piece: the one that goes on along the face on its left.
std::vector<std::uint32_t> next_along_face(const PlanarMap& map) {
    std::vector<std::pair<std::uint32_t, std::uint32_t>> starts;
    const auto halves = static_cast<std::uint32_t>(2 * map.pieces.size());
    for (std::uint32_t h = 0; h < halves; ++h) {
        starts.emplace_back(map.start(h), h);
    }
    auto around = Grouped<std::uint32_t>::from_pairs(map.nodes.size(), std::move(starts));
    std::vector<std::uint32_t> next(halves, nowhere);
    for (std::size_t n = 0; n < map.nodes.size(); ++n) {
        const std::span<std::uint32_t> out = around[n];
        const auto direction = [&](std::uint32_t h) { return map.nodes[map.end(h)] - map.nodes[n]; };
        std::stable_sort(out.begin(), out.end(), [&](std::uint32_t l, std::uint32_t r) {
            return turns_before(direction(l), direction(r));
        });
        // Whoever comes in along the reverse of out[k] turns as far left as can be: to the one before it.
        for (std::size_t k = 0; k < out.size(); ++k) {
            next[out[k] ^ 1U] = out[(k + out.size() - 1) % out.size()];
        }
    }
    return next;
}

double area_of(const PlanarMap& map, std::span<const std::uint32_t> chain) {
    const Point base = map.nodes[map.start(chain.front())];
    Sum twice;
    for (const std::uint32_t h : chain) {
        twice.add(cross(map.nodes[map.start(h)] - base, map.nodes[map.end(h)] - base));
    }
    return twice.value() / 2;
}

/// Even-odd along a ray to rising x. A line walked there and back counts twice, that is not at all.
bool encloses(const PlanarMap& map, std::span<const std::uint32_t> chain, Point p) {
    bool inside = false;
    for (const std::uint32_t h : chain) {
        Point a = map.nodes[map.start(h)];
        Point b = map.nodes[map.end(h)];
        if ((a.y > p.y) == (b.y > p.y)) {
            continue;
        }
        if (a.y > b.y) {
            std::swap(a, b);
        }
        inside = inside != (cross(b - a, p - a) > 0);
    }
    return inside;
}

/// Which nodes hang together.
class Components {
public:
    explicit Components(const PlanarMap& map) : parent_(map.nodes.size()) {
        std::iota(parent_.begin(), parent_.end(), 0U);
        for (const PlanarMap::Piece& piece : map.pieces) {
            const std::uint32_t a = of(piece.a);
            const std::uint32_t b = of(piece.b);
            parent_[std::max(a, b)] = std::min(a, b);
        }
    }
    [[nodiscard]] std::uint32_t of(std::uint32_t node) {
        while (parent_[node] != node) {
            parent_[node] = parent_[parent_[node]];
            node = parent_[node];
        }
        return node;
    }

private:
    std::vector<std::uint32_t> parent_;
};

using Chain = std::vector<std::uint32_t>;

/// Walks all borders. Those that turn counter-clockwise are the outer borders of bounded faces; each
/// connected part of the map has one other, which goes around it.
std::vector<Chain> walk_borders(PlanarMap& map, double least_area) {
    const std::vector<std::uint32_t> next = next_along_face(map);
    std::vector<Chain> around;
    std::vector<bool> walked(next.size(), false);
    map.faces.emplace_back();
    for (std::uint32_t first = 0; first < next.size(); ++first) {
        if (walked[first]) {
            continue;
        }
        Chain chain;
        for (std::uint32_t h = first; !walked[h]; h = next[h]) {
            walked[h] = true;
            chain.push_back(h);
        }
        const double area = area_of(map, chain);
        if (area > least_area) {
            map.faces.push_back({std::move(chain), {}, area});
        } else {
            around.push_back(std::move(chain));
        }
    }
    return around;
}

/// Gives each floating part of the map to the smallest face of another part that it lies in.
void place_holes(PlanarMap& map, std::vector<Chain> around) {
    if (around.size() == 1) {
        map.faces.front().holes.push_back(std::move(around.front()));
        return;
    }
    Components components(map);
    std::vector<Box> boxes(1, Box{map.nodes.front(), map.nodes.front()});
    for (std::size_t f = 1; f < map.faces.size(); ++f) {
        Box box{map.nodes[map.start(map.faces[f].outer.front())],
                map.nodes[map.start(map.faces[f].outer.front())]};
        for (const std::uint32_t h : map.faces[f].outer) {
            box.add(map.nodes[map.start(h)]);
        }
        boxes.push_back(box);
    }
    const BoxFinder finder(std::move(boxes));
    std::vector<double> outer_area;
    for (const PlanarMap::Face& face : map.faces) {
        outer_area.push_back(face.area);
    }
    std::vector<std::uint32_t> near;
    for (Chain& chain : around) {
        const std::uint32_t node = map.start(chain.front());
        finder.find(box_of(map.nodes[node], map.nodes[node]), near);
        std::uint32_t best = PlanarMap::unbounded;
        for (const std::uint32_t f : near) {
            if (f == PlanarMap::unbounded) {
                continue;
            }
            const Chain& outer = map.faces[f].outer;
            if ((best == PlanarMap::unbounded || outer_area[f] < outer_area[best]) &&
                components.of(map.start(outer.front())) != components.of(node) &&
                encloses(map, outer, map.nodes[node])) {
                best = f;
            }
        }
        map.faces[best].area += best == PlanarMap::unbounded ? 0 : area_of(map, chain);
        map.faces[best].holes.push_back(std::move(chain));
    }
}

} // namespace

PlanarMap map_of(std::span<const MapLine> lines, Tolerance tolerance) {
    PlanarMap map;
    Noder noder(lines, tolerance);
    map.nodes = noder.nodes;
    map.line_ends = noder.line_ends;
    lay_pieces(noder, lines.size(), map);
    if (map.pieces.empty()) {
        map.faces.emplace_back();
        return map;
    }
    // A line walked there and back encloses nothing but for rounding.
    place_holes(map, walk_borders(map, tolerance.noise * std::max(tolerance.snap, tolerance.noise)));
    map.face_left.assign(2 * map.pieces.size(), PlanarMap::unbounded);
    for (std::uint32_t f = 0; f < map.faces.size(); ++f) {
        for (const std::uint32_t h : map.faces[f].outer) {
            map.face_left[h] = f;
        }
        for (const Chain& hole : map.faces[f].holes) {
            for (const std::uint32_t h : hole) {
                map.face_left[h] = f;
            }
        }
    }
    return map;
}

RUNNEL_NAMESPACE_END
