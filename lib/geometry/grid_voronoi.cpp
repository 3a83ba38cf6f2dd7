#include "geometry/segment_voronoi.hpp"

#include <boost/polygon/voronoi_builder.hpp>
#include <boost/polygon/voronoi_diagram.hpp>

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

namespace {

namespace bp = boost::polygon;
using Diagram = bp::voronoi_diagram<double>;

/// Which site a cell belongs to. Points are given to the builder before the pieces.
class SiteNames {
public:
    SiteNames(const NodedLines& noded, const std::vector<std::uint32_t>& points)
        : noded_(noded), points_(points) {}

    [[nodiscard]] std::uint32_t of(const Diagram::cell_type& cell) const {
        const std::size_t source = cell.source_index();
        const auto pieces = static_cast<std::uint32_t>(noded_.pieces.size());
        if (source < points_.size()) {
            return pieces + points_[source];
        }
        const auto piece = static_cast<std::uint32_t>(source - points_.size());
        switch (cell.source_category()) {
        case bp::SOURCE_CATEGORY_SEGMENT_START_POINT:
            return pieces + noded_.pieces[piece].node_a;
        case bp::SOURCE_CATEGORY_SEGMENT_END_POINT:
            return pieces + noded_.pieces[piece].node_b;
        default:
            return piece;
        }
    }

private:
    const NodedLines& noded_;
    const std::vector<std::uint32_t>& points_;
};

void add_site(GridVoronoi::Vertex& vertex, std::uint32_t site) {
    for (std::uint32_t& place : vertex.sites) {
        if (place == site) {
            return;
        }
        if (place == GridVoronoi::nobody) {
            place = site;
            return;
        }
    }
}

/// Points that are no piece's end.
std::vector<std::uint32_t> free_points(const NodedLines& noded) {
    std::vector<bool> is_end(noded.nodes.size(), false);
    for (const NodedLines::Piece& piece : noded.pieces) {
        is_end[piece.node_a] = true;
        is_end[piece.node_b] = true;
    }
    std::vector<std::uint32_t> points;
    for (const std::uint32_t node : noded.node_of_point) {
        if (!is_end[node]) {
            is_end[node] = true;
            points.push_back(node);
        }
    }
    return points;
}

} // namespace

GridVoronoi grid_voronoi(const NodedLines& noded) {
    const std::vector<std::uint32_t> points = free_points(noded);
    Diagram diagram;
    {
        bp::default_voronoi_builder builder;
        for (const std::uint32_t node : points) {
            builder.insert_point(noded.nodes[node].grid.x, noded.nodes[node].grid.y);
        }
        for (const NodedLines::Piece& piece : noded.pieces) {
            const GridPoint a = noded.nodes[piece.node_a].grid;
            const GridPoint b = noded.nodes[piece.node_b].grid;
            builder.insert_segment(a.x, a.y, b.x, b.y);
        }
        builder.construct(&diagram);
    }
    const SiteNames names(noded, points);
    GridVoronoi result;
    const auto& vertices = diagram.vertices();
    result.vertices.resize(vertices.size());
    for (std::size_t v = 0; v < vertices.size(); ++v) {
        result.vertices[v].x = vertices[v].x();
        result.vertices[v].y = vertices[v].y();
    }
    const auto number = [&](const Diagram::vertex_type* vertex) {
        return static_cast<std::uint32_t>(vertex - vertices.data());
    };
    // An edge and its twin stand side by side in the builder's list.
    const auto& edges = diagram.edges();
    result.arcs.reserve(edges.size() / 2);
    for (std::size_t e = 0; e + 1 < edges.size(); e += 2) {
        const Diagram::edge_type& edge = edges[e];
        const std::uint32_t left = names.of(*edge.cell());
        const std::uint32_t right = names.of(*edge.twin()->cell());
        for (const Diagram::vertex_type* vertex : {edge.vertex0(), edge.vertex1()}) {
            if (vertex != nullptr) {
                add_site(result.vertices[number(vertex)], left);
                add_site(result.vertices[number(vertex)], right);
            }
        }
        if (edge.is_secondary()) {
            continue;
        }
        if (edge.is_infinite()) {
            result.infinite.push_back(left);
            result.infinite.push_back(right);
            continue;
        }
        result.arcs.push_back({left, right, number(edge.vertex0()), number(edge.vertex1())});
    }
    return result;
}

RUNNEL_NAMESPACE_END
