#include "geometry/faces.hpp"

#include <algorithm>
#include <numeric>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Half-edges by the node they leave, counter-clockwise. Exact, on the grid.
class Fans {
public:
    explicit Fans(const NodedLines& noded) : noded_(noded), first_(noded.nodes.size() + 1, 0) {
        for (const NodedLines::Piece& piece : noded.pieces) {
            ++first_[piece.node_a + 1];
            ++first_[piece.node_b + 1];
        }
        std::partial_sum(first_.begin(), first_.end(), first_.begin());
        leaving_.resize(first_.back());
        place_.resize(first_.back());
        std::vector<std::uint32_t> next(first_.begin(), first_.end() - 1);
        for (std::uint32_t h = 0; h < leaving_.size(); ++h) {
            leaving_[next[start_of(noded, h)]++] = h;
        }
        for (std::size_t n = 0; n < noded.nodes.size(); ++n) {
            std::sort(leaving_.begin() + first_[n], leaving_.begin() + first_[n + 1],
                      [&](std::uint32_t l, std::uint32_t r) { return is_before(l, r); });
        }
        for (std::uint32_t i = 0; i < leaving_.size(); ++i) {
            place_[leaving_[i]] = i;
        }
    }

    /// The half-edge that goes on along the face on the left.
    [[nodiscard]] std::uint32_t next(std::uint32_t half_edge) const {
        const std::uint32_t back = half_edge ^ 1U;
        const std::uint32_t node = start_of(noded_, back);
        const std::uint32_t at = place_[back];
        return leaving_[at > first_[node] ? at - 1 : first_[node + 1] - 1];
    }

private:
    struct Vector {
        std::int64_t x, y;
        [[nodiscard]] bool is_lower() const { return y < 0 || (y == 0 && x < 0); }
    };
    [[nodiscard]] Vector along(std::uint32_t half_edge) const {
        const GridPoint a = noded_.nodes[start_of(noded_, half_edge)].grid;
        const GridPoint b = noded_.nodes[end_of(noded_, half_edge)].grid;
        return {std::int64_t{b.x} - a.x, std::int64_t{b.y} - a.y};
    }
    [[nodiscard]] bool is_before(std::uint32_t l, std::uint32_t r) const {
        const Vector a = along(l);
        const Vector b = along(r);
        if (a.is_lower() != b.is_lower()) {
            return b.is_lower();
        }
        const std::int64_t turn = a.x * b.y - a.y * b.x;
        return turn != 0 ? turn > 0 : l < r;
    }

    const NodedLines& noded_;
    std::vector<std::uint32_t> first_;
    std::vector<std::uint32_t> leaving_;
    std::vector<std::uint32_t> place_; ///< of a half-edge in leaving_
};

void find_parts(const NodedLines& noded, Faces& faces) {
    std::vector<std::uint32_t>& into = faces.part_of;
    into.resize(noded.nodes.size());
    std::iota(into.begin(), into.end(), 0U);
    const auto root = [&](std::uint32_t n) {
        while (into[n] != n) {
            n = into[n] = into[into[n]];
        }
        return n;
    };
    std::vector<bool> has_line(noded.nodes.size(), false);
    for (const NodedLines::Piece& piece : noded.pieces) {
        const std::uint32_t a = root(piece.node_a);
        const std::uint32_t b = root(piece.node_b);
        into[std::max(a, b)] = std::min(a, b);
        has_line[piece.node_a] = true;
        has_line[piece.node_b] = true;
    }
    for (std::uint32_t n = 0; n < into.size(); ++n) {
        into[n] = root(n);
        if (into[n] == n && has_line[n]) {
            faces.parts.push_back(n);
        }
    }
}

} // namespace

Faces faces_of(const NodedLines& noded) {
    constexpr std::uint32_t none_yet = 0xffffffff;
    Faces faces;
    const Fans fans(noded);
    faces.face_of.assign(2 * noded.pieces.size(), none_yet);
    faces.half_edges.reserve(noded.pieces.size(), 2 * noded.pieces.size());
    std::uint32_t face = 0;
    for (std::uint32_t first = 0; first < faces.face_of.size(); ++first) {
        if (faces.face_of[first] != none_yet) {
            continue;
        }
        for (std::uint32_t h = first; faces.face_of[h] == none_yet; h = fans.next(h)) {
            faces.face_of[h] = face;
            faces.half_edges.push(h);
        }
        faces.half_edges.end_group();
        ++face;
    }
    find_parts(noded, faces);
    return faces;
}

RUNNEL_NAMESPACE_END
