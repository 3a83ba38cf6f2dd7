#include "deck/nearest.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

class FaceJudge {
public:
    FaceJudge(const NearestCarriers& carriers, const NodedLines& noded, const Faces& faces, double noise)
        : carriers_(carriers), noded_(noded), faces_(faces), noise_(noise) {
        if (faces.parts.size() > 1) {
            std::vector<Box> boxes;
            boxes.reserve(faces.parts.size());
            for (const std::uint32_t node : faces.parts) {
                boxes.push_back(box_of(noded.nodes[node].place, noded.nodes[node].place));
            }
            finder_ = BoxFinder(std::move(boxes));
        }
    }

    [[nodiscard]] bool is_convex_bay(std::uint32_t face) {
        const std::span<const std::uint32_t> half_edges = faces_.half_edges[face];
        if (half_edges.size() < 3 || half_edges.size() > ConvexBay::most_edges) {
            return false;
        }
        ConvexBay bay;
        for (const std::uint32_t h : half_edges) {
            bay.corner[bay.count++] = noded_.nodes[start_of(noded_, h)].place;
            if (!is_on_line(h)) {
                return false;
            }
        }
        return bay.close(noise_) && is_empty(bay, half_edges.front());
    }

private:
    /// The grid joins what is a few of its steps apart; bays want it joined to rounding.
    [[nodiscard]] bool is_on_line(std::uint32_t half_edge) const {
        const NodedLines::Piece& piece = noded_.pieces[half_edge / 2];
        const AxisLine& axis = carriers_.lines[piece.line];
        return std::abs(axis.right_of(noded_.nodes[piece.node_a].place)) <= noise_ &&
               std::abs(axis.right_of(noded_.nodes[piece.node_b].place)) <= noise_;
    }

    /// Whether no other part of the lines, which would lie wholly inside, begins in the bay.
    [[nodiscard]] bool is_empty(const ConvexBay& bay, std::uint32_t half_edge) {
        if (faces_.parts.size() <= 1) {
            return true;
        }
        const std::uint32_t own = faces_.part_of[start_of(noded_, half_edge)];
        finder_.find(box_of(std::span<const Point>(bay.corner.data(), bay.count)), near_);
        return std::all_of(near_.begin(), near_.end(),
                           [&](std::uint32_t i) { return faces_.parts[i] == own; });
    }

    const NearestCarriers& carriers_;
    const NodedLines& noded_;
    const Faces& faces_;
    double noise_;
    BoxFinder finder_;
    std::vector<std::uint32_t> near_;
};

} // namespace

ConvexFaces convex_faces(const NearestCarriers& carriers, const NodedLines& noded, const Faces& faces,
                         double noise) {
    FaceJudge judge(carriers, noded, faces, noise);
    ConvexFaces result;
    result.is_done.assign(faces.face_of.size(), false);
    for (std::uint32_t face = 0; face < faces.half_edges.size(); ++face) {
        if (judge.is_convex_bay(face)) {
            result.faces.push_back(face);
            for (const std::uint32_t h : faces.half_edges[face]) {
                result.is_done[h] = true;
            }
        }
    }
    return result;
}

RUNNEL_NAMESPACE_END
