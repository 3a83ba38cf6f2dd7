#include "geometry/grid_noding.hpp"

#include "geometry/box_buckets.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

Grid::Grid(const Box& window, double radians)
    : origin_(between(window.low, window.high, 0.5)), cosine_(std::cos(radians)), sine_(std::sin(radians)) {
    constexpr double most = 536'870'912; // 2^29
    // Turned, a corner may be as far out as half the diagonal.
    const double reach = distance(window.low, window.high) / 2;
    step_ = reach > 0 ? reach / most : 1;
}

GridPoint Grid::at(Point p) const {
    const Point d = p - origin_;
    return {static_cast<std::int32_t>(std::lround((d.x * cosine_ + d.y * sine_) / step_)),
            static_cast<std::int32_t>(std::lround((d.y * cosine_ - d.x * sine_) / step_))};
}

Point Grid::place(double x, double y) const {
    return {origin_.x + (x * cosine_ - y * sine_) * step_, origin_.y + (x * sine_ + y * cosine_) * step_};
}

namespace {

/// What rounding two lines to the grid can part, in steps, with room: such points are taken as touching.
constexpr std::int64_t reach = 2;

struct Vector {
    std::int64_t x, y;
};
Vector operator-(GridPoint a, GridPoint b) {
    return {std::int64_t{a.x} - b.x, std::int64_t{a.y} - b.y};
}
std::int64_t cross(Vector a, Vector b) {
    return a.x * b.y - a.y * b.x;
}
std::int64_t dot(Vector a, Vector b) {
    return a.x * b.x + a.y * b.y;
}
bool is_near(GridPoint a, GridPoint b) {
    const Vector d = a - b;
    return std::abs(d.x) <= reach && std::abs(d.y) <= reach;
}

class Noding {
public:
    Noding(std::span<const AxisLine> lines, std::span<const Point> points, const Grid& grid)
        : lines_(lines), grid_(grid) {
        index_.reserve(2 * lines.size() + points.size());
        for (const Point& p : points) {
            result_.node_of_point.push_back(node_at(grid.at(p), p));
        }
        for (std::uint32_t i = 0; i < lines.size(); ++i) {
            const AxisLine& line = lines[i];
            const std::uint32_t a = node_at(grid.at(line.a), line.a);
            const std::uint32_t b = node_at(grid.at(line.b), line.b);
            if (a != b) {
                result_.pieces.push_back({i, a, b, line.from, line.to});
            }
        }
        changed_.assign(result_.pieces.size(), true);
    }

    NodedLines run() {
        constexpr int most_rounds = 16;
        result_.settled = false;
        for (int round = 0; round < most_rounds && !result_.settled; ++round) {
            find_contacts(round == 0);
            result_.settled = cuts_.empty() && !any_merged_;
            apply();
        }
        drop_doubles();
        return std::move(result_);
    }

private:
    struct Cut {
        std::uint32_t piece;
        std::uint32_t node;
        double station;
    };

    std::uint32_t node_at(GridPoint at, Point place) {
        const std::uint64_t key =
            (std::uint64_t{static_cast<std::uint32_t>(at.x)} << 32) | static_cast<std::uint32_t>(at.y);
        const auto [it, is_new] = index_.emplace(key, static_cast<std::uint32_t>(result_.nodes.size()));
        if (is_new) {
            result_.nodes.push_back({at, place});
            merged_into_.push_back(it->second);
        }
        return root(it->second);
    }
    std::uint32_t root(std::uint32_t node) {
        while (merged_into_[node] != node) {
            node = merged_into_[node] = merged_into_[merged_into_[node]];
        }
        return node;
    }
    void merge(std::uint32_t a, std::uint32_t b) {
        a = root(a);
        b = root(b);
        if (a != b) {
            merged_into_[std::max(a, b)] = std::min(a, b);
            any_merged_ = true;
        }
    }
    [[nodiscard]] GridPoint grid_of(std::uint32_t node) const { return result_.nodes[node].grid; }

    void find_contacts(bool first) {
        const std::vector<NodedLines::Piece>& pieces = result_.pieces;
        std::vector<Box> boxes;
        boxes.reserve(pieces.size());
        for (const NodedLines::Piece& piece : pieces) {
            const GridPoint a = grid_of(piece.node_a);
            const GridPoint b = grid_of(piece.node_b);
            boxes.push_back(box_of(Point{double(a.x), double(a.y)}, Point{double(b.x), double(b.y)}));
        }
        const BoxBuckets tree(boxes);
        cuts_.clear();
        any_merged_ = false;
        std::vector<std::uint32_t> near;
        for (std::uint32_t i = 0; i < pieces.size(); ++i) {
            if (!changed_[i]) {
                continue;
            }
            tree.find(boxes[i].grown(reach), near);
            for (const std::uint32_t j : near) {
                if (!changed_[j] || j > i) {
                    meet(i, j);
                }
            }
        }
        if (first) {
            for (const std::uint32_t node : result_.node_of_point) {
                const GridPoint at = grid_of(node);
                const Point p{double(at.x), double(at.y)};
                tree.find(box_of(p, p).grown(reach), near);
                for (const std::uint32_t j : near) {
                    touch(node, j);
                }
            }
        }
    }

    /// Cuts piece j at a node that lies on its inside; joins the node to an end it is at. True if it touches.
    bool touch(std::uint32_t node, std::uint32_t j) {
        const NodedLines::Piece& piece = result_.pieces[j];
        if (node == piece.node_a || node == piece.node_b) {
            return true;
        }
        const GridPoint p = grid_of(node);
        const GridPoint a = grid_of(piece.node_a);
        const GridPoint b = grid_of(piece.node_b);
        if (is_near(p, a)) {
            merge(node, piece.node_a);
            return true;
        }
        if (is_near(p, b)) {
            merge(node, piece.node_b);
            return true;
        }
        const Vector d = b - a;
        const std::int64_t along = dot(p - a, d);
        const std::int64_t square = dot(d, d);
        if (along <= 0 || along >= square) {
            return false;
        }
        const double off = std::abs(static_cast<double>(cross(d, p - a)));
        if (off > static_cast<double>(reach) * std::sqrt(static_cast<double>(square))) {
            return false;
        }
        const double station = lines_[piece.line].station_of(result_.nodes[node].place);
        cuts_.push_back({j, node, std::clamp(station, piece.from, piece.to)});
        return true;
    }

    void meet(std::uint32_t i, std::uint32_t j) {
        const NodedLines::Piece& p = result_.pieces[i];
        const NodedLines::Piece& q = result_.pieces[j];
        bool touching = touch(p.node_a, j);
        touching = touch(p.node_b, j) || touching;
        touching = touch(q.node_a, i) || touching;
        touching = touch(q.node_b, i) || touching;
        if (touching) {
            return; // and if they cross besides, the next round sees the pieces
        }
        const GridPoint a = grid_of(p.node_a);
        const GridPoint c = grid_of(q.node_a);
        const Vector d = grid_of(p.node_b) - a;
        const Vector e = grid_of(q.node_b) - c;
        const auto opposite = [](std::int64_t l, std::int64_t r) {
            return (l < 0 && r > 0) || (l > 0 && r < 0);
        };
        if (!opposite(cross(d, c - a), cross(d, grid_of(q.node_b) - a)) ||
            !opposite(cross(e, a - c), cross(e, grid_of(p.node_b) - c))) {
            return;
        }
        // The crossing of the axes themselves, unless they are all but parallel and cross by rounding alone.
        const AxisLine& l = lines_[p.line];
        const AxisLine& m = lines_[q.line];
        const double from = m.right_of(l.at(p.from));
        const double to = m.right_of(l.at(p.to));
        const double t = from != to ? std::clamp(from / (from - to), 0.0, 1.0) : 0.5;
        const double station = (1 - t) * p.from + t * p.to;
        const Point place = l.at(station);
        const std::uint32_t node = node_at(grid_.at(place), place);
        cuts_.push_back({i, node, station});
        cuts_.push_back({j, node, std::clamp(m.station_of(place), q.from, q.to)});
    }

    void apply() {
        std::sort(cuts_.begin(), cuts_.end(), [](const Cut& l, const Cut& r) {
            return l.piece != r.piece ? l.piece < r.piece : l.station < r.station;
        });
        std::vector<NodedLines::Piece> pieces;
        std::vector<bool> changed;
        pieces.reserve(result_.pieces.size() + cuts_.size());
        auto cut = cuts_.begin();
        for (std::uint32_t i = 0; i < result_.pieces.size(); ++i) {
            NodedLines::Piece rest = result_.pieces[i];
            const std::uint32_t end = root(rest.node_b);
            const bool moved = root(rest.node_a) != rest.node_a || end != rest.node_b;
            rest.node_a = root(rest.node_a);
            rest.node_b = end;
            const bool is_cut = cut != cuts_.end() && cut->piece == i;
            for (; cut != cuts_.end() && cut->piece == i; ++cut) {
                const std::uint32_t node = root(cut->node);
                if (node == rest.node_a || node == end) {
                    continue;
                }
                NodedLines::Piece part = rest;
                part.node_b = node;
                part.to = cut->station;
                pieces.push_back(part);
                changed.push_back(true);
                rest.node_a = node;
                rest.from = cut->station;
            }
            if (rest.node_a != rest.node_b) {
                pieces.push_back(rest);
                changed.push_back(is_cut || moved);
            }
        }
        for (std::uint32_t& node : result_.node_of_point) {
            node = root(node);
        }
        result_.pieces = std::move(pieces);
        changed_ = std::move(changed);
    }

    void drop_doubles() {
        std::vector<std::pair<std::uint64_t, std::uint32_t>> keys;
        keys.reserve(result_.pieces.size());
        for (std::uint32_t i = 0; i < result_.pieces.size(); ++i) {
            const std::uint64_t a = result_.pieces[i].node_a;
            const std::uint64_t b = result_.pieces[i].node_b;
            keys.emplace_back((std::min(a, b) << 32) | std::max(a, b), i);
        }
        std::sort(keys.begin(), keys.end());
        std::vector<bool> doubled(keys.size(), false);
        bool any = false;
        for (std::size_t k = 1; k < keys.size(); ++k) {
            if (keys[k].first == keys[k - 1].first) {
                doubled[keys[k].second] = true;
                any = true;
            }
        }
        if (any) {
            std::size_t kept = 0;
            for (std::size_t i = 0; i < result_.pieces.size(); ++i) {
                if (!doubled[i]) {
                    result_.pieces[kept++] = result_.pieces[i];
                }
            }
            result_.pieces.resize(kept);
        }
    }

    std::span<const AxisLine> lines_;
    const Grid& grid_;
    NodedLines result_;
    std::unordered_map<std::uint64_t, std::uint32_t> index_;
    std::vector<std::uint32_t> merged_into_;
    std::vector<bool> changed_;
    std::vector<Cut> cuts_;
    bool any_merged_ = false;
};

} // namespace

NodedLines node_on_grid(std::span<const AxisLine> lines, std::span<const Point> points, const Grid& grid) {
    return Noding(lines, points, grid).run();
}

RUNNEL_NAMESPACE_END
