#include "geometry/segment_voronoi.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <optional>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Sites in double precision.
class Sites {
public:
    Sites(std::span<const AxisLine> lines, const NodedLines& noded) : lines_(lines), noded_(noded) {}

    static constexpr std::uint32_t nowhere = 0xffffffff;

    [[nodiscard]] bool is_node(std::uint32_t site) const { return site >= noded_.pieces.size(); }
    [[nodiscard]] std::uint32_t node(std::uint32_t site) const {
        return site - static_cast<std::uint32_t>(noded_.pieces.size());
    }
    [[nodiscard]] const AxisLine& line(std::uint32_t site) const { return lines_[noded_.pieces[site].line]; }
    [[nodiscard]] Point place(std::uint32_t site) const { return noded_.nodes[node(site)].place; }
    [[nodiscard]] const NodedLines::Node& node_at(std::uint32_t index) const { return noded_.nodes[index]; }

    [[nodiscard]] bool touches(std::uint32_t site, std::uint32_t node_index) const {
        if (is_node(site)) {
            return node(site) == node_index;
        }
        return noded_.pieces[site].node_a == node_index || noded_.pieces[site].node_b == node_index;
    }
    /// The node at which two sites touch.
    [[nodiscard]] std::uint32_t common(std::uint32_t a, std::uint32_t b) const {
        if (is_node(a)) {
            return touches(b, node(a)) ? node(a) : nowhere;
        }
        if (touches(b, noded_.pieces[a].node_a)) {
            return noded_.pieces[a].node_a;
        }
        return touches(b, noded_.pieces[a].node_b) ? noded_.pieces[a].node_b : nowhere;
    }
    /// Unit vector from a node along a piece that ends there.
    [[nodiscard]] Point away_from(std::uint32_t node_index, std::uint32_t piece) const {
        const Point d = line(piece).direction;
        return noded_.pieces[piece].node_a == node_index ? d : Point{-d.x, -d.y};
    }

    /// How far an arc turns on around its site, positive as it should: along the piece, or square to the ray
    /// from the node; in m.
    [[nodiscard]] double progress(std::uint32_t site, Point from, Point to) const {
        if (is_node(site)) {
            const Point a = from - place(site);
            const Point b = to - place(site);
            const double reach = std::sqrt(std::max(dot(a, a), dot(b, b)));
            // What lies beyond the end of a piece goes half around it: no more and no less than straight.
            return dot(a, b) < 0 ? reach : reach > 0 ? cross(a, b) / reach : 0;
        }
        const AxisLine& axis = line(site);
        const double stretch = dot(to - from, axis.direction);
        return axis.right_of(from) + axis.right_of(to) > 0 ? stretch : -stretch;
    }

private:
    std::span<const AxisLine> lines_;
    const NodedLines& noded_;
};

/// Places a vertex of the grid's diagram anew from the sites around it.
class VertexPlacer {
public:
    VertexPlacer(const Sites& sites, const Grid& grid) : sites_(sites), grid_(grid) {}

    [[nodiscard]] Point place(const GridVoronoi::Vertex& vertex) const {
        const Point start = grid_.place(vertex.x, vertex.y);
        std::size_t count = 0;
        while (count < vertex.sites.size() && vertex.sites[count] != GridVoronoi::nobody) {
            ++count;
        }
        // The node that two of the sites share says most: the vertex is there, or on a known ray from it.
        for (const bool own_end : {true, false}) {
            for (std::size_t i = 0; i < count; ++i) {
                for (std::size_t j = i + 1; j < count; ++j) {
                    const std::uint32_t a = vertex.sites[i];
                    const std::uint32_t b = vertex.sites[j];
                    if ((sites_.is_node(a) || sites_.is_node(b)) != own_end) {
                        continue;
                    }
                    const std::uint32_t node = sites_.common(a, b);
                    if (node == Sites::nowhere) {
                        continue;
                    }
                    if (const auto p = near_node(vertex, count, node, a, b, start)) {
                        return *p;
                    }
                }
            }
        }
        return count >= 3 ? settle(vertex, start) : start;
    }

private:
    std::optional<Point> near_node(const GridVoronoi::Vertex& vertex, std::size_t count, std::uint32_t node,
                                   std::uint32_t a, std::uint32_t b, Point start) const {
        const NodedLines::Node& shared = sites_.node_at(node);
        constexpr double same = 0.25; // of a grid step: the builder puts such a vertex on the node itself
        if (std::abs(vertex.x - shared.grid.x) <= same && std::abs(vertex.y - shared.grid.y) <= same) {
            return shared.place;
        }
        const std::uint32_t piece = sites_.is_node(a) ? b : a;
        const Point u = sites_.away_from(node, piece);
        Point ray{u.y, -u.x};
        if (!sites_.is_node(a) && !sites_.is_node(b)) {
            const Point w = sites_.away_from(node, b);
            const Point difference = u - w;
            ray = dot(u, w) > 0 ? u + w : Point{difference.y, -difference.x};
            const double length = norm(ray);
            if (!(length > 0)) {
                return std::nullopt;
            }
            ray = (1 / length) * ray;
        }
        if (dot(start - shared.place, ray) < 0) {
            ray = -1.0 * ray;
        }
        const double rate = std::abs(cross(u, ray)); // distance from the two per length of ray
        for (std::size_t k = 0; k < count; ++k) {
            const std::uint32_t other = vertex.sites[k];
            if (other == a || other == b || sites_.touches(other, node)) {
                continue;
            }
            const double guess = dot(start - shared.place, ray);
            const std::optional<double> t = sites_.is_node(other)
                                                ? to_point(shared.place, ray, rate, other, guess)
                                                : to_line(shared.place, ray, rate, other, start);
            if (t && is_settled(shared.place + *t * ray, *t * rate, *t * rate - guess * rate)) {
                return shared.place + *t * ray;
            }
        }
        return std::nullopt;
    }

    /// Where on the ray from `from` the distance to a point is `rate` times the way.
    [[nodiscard]] std::optional<double> to_point(Point from, Point ray, double rate, std::uint32_t other,
                                                 double guess) const {
        const Point d = sites_.place(other) - from;
        const double square = dot(d, d);
        const double ahead = dot(d, ray);
        const double rest = (1 - rate) * (1 + rate);
        const double root = ahead * ahead - rest * square;
        if (root < 0 || !(ahead > 0)) {
            return std::nullopt;
        }
        const double sum = ahead + std::sqrt(root);
        const double near = square / sum;
        if (rest <= 0 || std::abs(near - guess) <= std::abs(sum / rest - guess)) {
            return near;
        }
        return sum / rest;
    }
    [[nodiscard]] std::optional<double> to_line(Point from, Point ray, double rate, std::uint32_t other,
                                                Point start) const {
        const AxisLine& axis = sites_.line(other);
        const double side = axis.right_of(start) > 0 ? 1 : -1;
        const double closing = rate - side * dot(ray, axis.right());
        const double off = side * axis.right_of(from);
        if (!(closing > 0) || !(off >= 0)) {
            return std::nullopt;
        }
        return off / closing;
    }

    /// Whether a vertex may be that far from where the grid has it: its distance from the sites may change by
    /// what rounding them does, with room, and more the farther out it lies.
    [[nodiscard]] bool is_settled(Point placed, double away, double change) const {
        constexpr double steps = 64;
        constexpr double part = 1e-3;
        return std::isfinite(placed.x) && std::isfinite(placed.y) &&
               std::abs(change) <= steps * grid_.step() + part * std::abs(away);
    }

    struct Measure {
        double away = 0; ///< distance
        Point growing;   ///< unit vector
    };
    [[nodiscard]] Measure measure(std::uint32_t site, Point at, Point start) const {
        if (sites_.is_node(site)) {
            const Point d = at - sites_.place(site);
            const double away = norm(d);
            return {away, away > 0 ? (1 / away) * d : Point{}};
        }
        const AxisLine& axis = sites_.line(site);
        const double side = axis.right_of(start) > 0 ? 1 : -1;
        return {side * axis.right_of(at), side * axis.right()};
    }

    /// Newton's method on the differences of distances.
    [[nodiscard]] Point settle(const GridVoronoi::Vertex& vertex, Point start) const {
        constexpr int most = 12;
        Point at = start;
        double before = 0;
        double last = 0;
        for (int i = 0; i < most; ++i) {
            const Measure m0 = measure(vertex.sites[0], at, start);
            const Measure m1 = measure(vertex.sites[1], at, start);
            const Measure m2 = measure(vertex.sites[2], at, start);
            before = i == 0 ? m0.away : before;
            const Point g1 = m1.growing - m0.growing;
            const Point g2 = m2.growing - m0.growing;
            const double e1 = m1.away - m0.away;
            const double e2 = m2.away - m0.away;
            const double det = cross(g1, g2);
            const Point move{(e2 * g1.y - e1 * g2.y) / det, (e1 * g2.x - e2 * g1.x) / det};
            const double length = norm(move);
            if (!std::isfinite(length)) {
                return start;
            }
            at = at + move;
            const double tiny = 4 * std::numeric_limits<double>::epsilon() * (norm(at) + m0.away);
            if (length <= tiny || (i > 2 && length >= last)) {
                const double away = measure(vertex.sites[0], at, start).away;
                return is_settled(at, away, away - before) ? at : start;
            }
            last = length;
        }
        return start;
    }

    const Sites& sites_;
    const Grid& grid_;
};

/// Draws arcs together that come out backwards or without length. Long ones stay: what is backwards there is
/// a stretch of next to nothing.
class Contraction {
public:
    Contraction(const Sites& sites, VoronoiDiagram& diagram, double noise, double step)
        : sites_(sites), diagram_(diagram), noise_(noise), long_(4096 * step),
          into_(diagram.vertices.size()) {
        std::iota(into_.begin(), into_.end(), 0U);
    }

    void run() {
        constexpr int most_rounds = 12;
        bool again = true;
        for (int round = 0; round < most_rounds && again; ++round) {
            again = false;
            for (VoronoiDiagram::Arc& arc : diagram_.arcs) {
                again = draw_together(arc) || again;
            }
        }
        diagram_.trusted = diagram_.trusted && !again;
        auto& arcs = diagram_.arcs;
        arcs.erase(std::remove_if(arcs.begin(), arcs.end(),
                                  [](const VoronoiDiagram::Arc& arc) { return arc.from == arc.to; }),
                   arcs.end());
    }

private:
    std::uint32_t root(std::uint32_t v) {
        while (into_[v] != v) {
            v = into_[v] = into_[into_[v]];
        }
        return v;
    }

    bool draw_together(VoronoiDiagram::Arc& arc) {
        arc.from = root(arc.from);
        arc.to = root(arc.to);
        if (arc.from == arc.to) {
            return false;
        }
        const Point a = diagram_.vertices[arc.from];
        const Point b = diagram_.vertices[arc.to];
        const double length = distance(a, b);
        if (length > long_ ||
            (length > noise_ && is_forwards(arc.left, a, b) && is_forwards(arc.right, b, a))) {
            return false;
        }
        const std::uint32_t kept = std::min(arc.from, arc.to);
        into_[std::max(arc.from, arc.to)] = kept;
        arc.from = arc.to = kept;
        return true;
    }
    /// A fan thinner than noise is none; of a piece's stretch only one that runs backwards does harm.
    [[nodiscard]] bool is_forwards(std::uint32_t site, Point from, Point to) const {
        const double progress = sites_.progress(site, from, to);
        return sites_.is_node(site) ? progress > noise_ : progress >= -noise_;
    }

    const Sites& sites_;
    VoronoiDiagram& diagram_;
    double noise_;
    double long_; ///< m: beyond what rounding to the grid moves a vertex by
    std::vector<std::uint32_t> into_;
};

} // namespace

VoronoiDiagram segment_voronoi(std::span<const AxisLine> lines, const NodedLines& noded, const Grid& grid,
                               std::span<const std::uint32_t> open, double noise) {
    GridVoronoi built = grid_voronoi(noded);
    VoronoiDiagram diagram;
    const auto pieces = static_cast<std::uint32_t>(noded.pieces.size());
    for (const std::uint32_t site : built.infinite) {
        const bool is_open =
            site >= pieces && std::find(open.begin(), open.end(), site - pieces) != open.end();
        diagram.trusted = diagram.trusted && is_open;
    }
    const Sites sites(lines, noded);
    const VertexPlacer placer(sites, grid);
    diagram.vertices.reserve(built.vertices.size());
    for (const GridVoronoi::Vertex& vertex : built.vertices) {
        diagram.vertices.push_back(placer.place(vertex));
    }
    diagram.arcs = std::move(built.arcs);
    Contraction(sites, diagram, noise, grid.step()).run();
    return diagram;
}

RUNNEL_NAMESPACE_END
