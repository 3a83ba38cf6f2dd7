#pragma once

#include "geometry/grid_noding.hpp"

#include <runnel/grouped.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The faces that noded lines divide the plane into. Half-edge 2 p runs along piece p from node_a to node_b
/// and 2 p + 1 back; each has one face on its left.
struct Faces {
    Grouped<std::uint32_t> half_edges;  ///< by face, in the order in which its border runs
    std::vector<std::uint32_t> face_of; ///< by half-edge
    std::vector<std::uint32_t> part_of; ///< by node: the connected part it belongs to, as one of its nodes
    std::vector<std::uint32_t> parts;   ///< one node of each connected part with lines
};

[[nodiscard]] Faces faces_of(const NodedLines& noded);

[[nodiscard]] inline std::uint32_t start_of(const NodedLines& noded, std::uint32_t half_edge) {
    const NodedLines::Piece& piece = noded.pieces[half_edge / 2];
    return half_edge % 2 == 0 ? piece.node_a : piece.node_b;
}
[[nodiscard]] inline std::uint32_t end_of(const NodedLines& noded, std::uint32_t half_edge) {
    return start_of(noded, half_edge ^ 1U);
}

RUNNEL_NAMESPACE_END
