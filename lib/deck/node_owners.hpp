#pragma once

#include "deck/nearest.hpp"
#include "geometry/basic.hpp"

#include <cmath>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Who takes what is nearest to a node: pieces that end there, in the order of the noding.
class NodeOwners {
public:
    NodeOwners(const NearestCarriers& carriers, const NodedLines& noded)
        : carriers_(carriers), noded_(noded), column_(noded.nodes.size(), none),
          first_(noded.nodes.size() + 1, 0) {
        for (const NodedLines::Piece& piece : noded.pieces) {
            ++first_[piece.node_a + 1];
            ++first_[piece.node_b + 1];
        }
        for (std::size_t n = 0; n < noded.nodes.size(); ++n) {
            first_[n + 1] += first_[n];
        }
        pieces_.resize(first_.back());
        std::vector<std::uint32_t> next(first_.begin(), first_.end() - 1);
        for (std::uint32_t p = 0; p < noded.pieces.size(); ++p) {
            pieces_[next[noded.pieces[p].node_a]++] = p;
            pieces_[next[noded.pieces[p].node_b]++] = p;
        }
        for (std::size_t c = carriers.points.size(); c-- > 0;) {
            column_[noded.node_of_point[c]] = carriers.point_number[c];
        }
    }

    [[nodiscard]] std::uint32_t column(std::uint32_t node) const { return column_[node]; }
    [[nodiscard]] std::span<const std::uint32_t> pieces(std::uint32_t node) const {
        return {pieces_.data() + first_[node], first_[node + 1] - first_[node]};
    }
    /// Unit vector from the node along a piece.
    [[nodiscard]] Point away(std::uint32_t node, std::uint32_t piece) const {
        const Point d = carriers_.lines[noded_.pieces[piece].line].direction;
        return noded_.pieces[piece].node_a == node ? d : Point{-d.x, -d.y};
    }

    /// The two pieces beside a direction from the node: the next one clockwise and the next one
    /// counter-clockwise.
    struct Beside {
        std::uint32_t clockwise = none, counter = none;
        Point border; ///< unit vector along which they divide what lies beyond both; if they are two
    };
    [[nodiscard]] Beside beside(std::uint32_t node, Point direction) const {
        Beside result;
        double least = 0;
        double most = 0;
        for (const std::uint32_t piece : pieces(node)) {
            const Point d = away(node, piece);
            double turn = std::atan2(cross(direction, d), dot(direction, d));
            turn = turn < 0 ? turn + 8 : turn; // any order that puts clockwise after counter-clockwise
            if (result.counter == none || turn < least) {
                least = turn;
                result.counter = piece;
            }
            if (result.clockwise == none || turn > most) {
                most = turn;
                result.clockwise = piece;
            }
        }
        if (result.counter != result.clockwise) {
            const Point u = away(node, result.clockwise);
            const Point w = away(node, result.counter);
            const Point difference = u - w;
            Point border = dot(u, w) > 0 ? u + w : Point{difference.y, -difference.x};
            border = (dot(border, direction) < 0 ? -1 : 1) / norm(border) * border;
            result.border = border;
        }
        return result;
    }

private:
    const NearestCarriers& carriers_;
    const NodedLines& noded_;
    std::vector<std::uint32_t> column_;
    std::vector<std::uint32_t> first_;
    std::vector<std::uint32_t> pieces_;
};

RUNNEL_NAMESPACE_END
