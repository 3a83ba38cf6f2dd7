#include "deck/region_chords.hpp"
#include "deck/region_edges.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"

#include <algorithm>
#include <cstdlib>
#include <numeric>

RUNNEL_NAMESPACE_BEGIN

namespace {

using Edge = DirectedEdges::Edge;

/// Groups values that follow each other within `noise`: by value the number of its group, rising.
std::vector<std::uint32_t> grouped_within(std::span<const double> values, double noise) {
    std::vector<std::uint32_t> order(values.size());
    std::iota(order.begin(), order.end(), 0U);
    std::sort(order.begin(), order.end(),
              [&](std::uint32_t l, std::uint32_t r) { return values[l] < values[r]; });
    std::vector<std::uint32_t> group(values.size());
    std::uint32_t last = 0;
    for (std::size_t i = 0; i < order.size(); ++i) {
        if (i > 0 && values[order[i]] - values[order[i - 1]] > noise) {
            ++last;
        }
        group[order[i]] = last;
    }
    return group;
}

/// Leaves out edges that run to and fro, and those of no length.
void cancel(std::vector<Edge>& edges) {
    const auto key = [](const Edge& e) {
        return std::pair(std::min(e.tail, e.head), std::max(e.tail, e.head));
    };
    std::sort(edges.begin(), edges.end(), [&](const Edge& l, const Edge& r) { return key(l) < key(r); });
    std::vector<Edge> kept;
    for (std::size_t i = 0; i < edges.size();) {
        std::ptrdiff_t rising = 0;
        std::size_t end = i;
        for (; end < edges.size() && key(edges[end]) == key(edges[i]); ++end) {
            rising += edges[end].tail < edges[end].head ? 1 : -1;
        }
        const auto [low, high] = key(edges[i]);
        if (low != high) {
            kept.insert(kept.end(), static_cast<std::size_t>(std::abs(rising)),
                        rising > 0 ? Edge{low, high} : Edge{high, low});
        }
        i = end;
    }
    edges = std::move(kept);
}

/// Cuts edges at the corners that lie on them within `noise`.
void cut_at_corners(std::vector<Edge>& edges, std::span<const Point> corners, double noise) {
    std::vector<std::uint32_t> used;
    for (const Edge& edge : edges) {
        used.push_back(edge.tail); // every corner of the border is the tail of an edge
    }
    std::sort(used.begin(), used.end());
    used.erase(std::unique(used.begin(), used.end()), used.end());
    std::vector<Box> boxes;
    for (const std::uint32_t corner : used) {
        boxes.push_back(box_of(corners[corner], corners[corner]));
    }
    const BoxFinder finder(std::move(boxes));
    std::vector<Edge> parts;
    std::vector<std::uint32_t> near;
    std::vector<std::pair<double, std::uint32_t>> on;
    for (const Edge& edge : edges) {
        const Point a = corners[edge.tail];
        const Point b = corners[edge.head];
        finder.find(box_of(a, b).grown(noise), near);
        on.clear();
        for (const std::uint32_t i : near) {
            const Point p = corners[used[i]];
            if (used[i] != edge.tail && used[i] != edge.head && distance_to_segment(p, a, b) <= noise) {
                on.emplace_back(dot(p - a, b - a), used[i]);
            }
        }
        std::sort(on.begin(), on.end());
        std::uint32_t tail = edge.tail;
        for (const auto& [along, corner] : on) {
            parts.push_back({tail, corner});
            tail = corner;
        }
        parts.push_back({tail, edge.head});
    }
    edges = std::move(parts);
}

} // namespace

CellLoops::CellLoops(const Sharing& sharing, std::span<const std::uint32_t> cells, Point about, double noise,
                     double chord_error)
    : noise_(noise) {
    const BorderChords chords(sharing, cells, noise, chord_error);
    std::vector<Point> low;
    for (const std::uint32_t c : cells) {
        const Cell& cell = sharing.cells[c];
        if (!is_noise({cell.from, cell.to, cell.low, cell.high})) {
            const std::size_t first = points_.size();
            chords.append(cell, cell.high, points_);
            low.clear();
            chords.append(cell, cell.low, low);
            points_.insert(points_.end(), low.rbegin(), low.rend());
            StripAxes axes = sharing.axes[cell.axes];
            axes.origin = axes.origin - about;
            std::transform(points_.begin() + static_cast<std::ptrdiff_t>(first), points_.end(),
                           points_.begin() + static_cast<std::ptrdiff_t>(first),
                           [&axes](Point p) { return axes.to_plan(p); });
        }
        begin_.push_back(points_.size());
    }
    number_corners();
}

/// What rounding leaves between a carrier and the deck's edge under it.
bool CellLoops::is_noise(const StripPiece& piece) const {
    constexpr double middle = 0.5;
    return piece.high.start - piece.low.start <= noise_ && piece.high.end - piece.low.end <= noise_ &&
           piece.high.at(middle) - piece.low.at(middle) <= noise_;
}

/// By x, and within one x by y: corners that agree in both are one.
void CellLoops::number_corners() {
    std::vector<double> x;
    std::vector<double> y;
    for (const Point& p : points_) {
        x.push_back(p.x);
        y.push_back(p.y);
    }
    const std::vector<std::uint32_t> column = grouped_within(x, noise_);
    const std::vector<std::uint32_t> row = grouped_within(y, noise_);
    std::vector<std::uint32_t> order(points_.size());
    std::iota(order.begin(), order.end(), 0U);
    const auto key = [&](std::uint32_t i) { return std::pair(column[i], row[i]); };
    std::stable_sort(order.begin(), order.end(),
                     [&](std::uint32_t l, std::uint32_t r) { return key(l) < key(r); });
    corner_.resize(points_.size());
    for (std::size_t i = 0; i < order.size(); ++i) {
        if (i == 0 || key(order[i]) != key(order[i - 1])) {
            corners_.push_back(points_[order[i]]);
        }
        corner_[order[i]] = static_cast<std::uint32_t>(corners_.size() - 1);
    }
}

DirectedEdges CellLoops::border_of(std::size_t first, std::size_t last) const {
    std::vector<Edge> edges;
    for (std::size_t loop = first; loop < last; ++loop) {
        for (std::size_t i = begin_[loop]; i < begin_[loop + 1]; ++i) {
            const std::size_t next = i + 1 < begin_[loop + 1] ? i + 1 : begin_[loop];
            edges.push_back({corner_[i], corner_[next]});
        }
    }
    cancel(edges);
    cut_at_corners(edges, corners_, noise_);
    cancel(edges);
    return numbered_anew(edges);
}

/// A region's own corners, so that its rings cost what it is made of and not the deck.
DirectedEdges CellLoops::numbered_anew(std::span<const Edge> edges) const {
    DirectedEdges result;
    std::vector<std::uint32_t> used;
    for (const Edge& edge : edges) {
        used.push_back(edge.tail); // every corner of a border is the tail of an edge
    }
    std::sort(used.begin(), used.end());
    used.erase(std::unique(used.begin(), used.end()), used.end());
    for (const std::uint32_t corner : used) {
        result.corners.push_back(corners_[corner]);
    }
    const auto number = [&](std::uint32_t corner) {
        return static_cast<std::uint32_t>(std::lower_bound(used.begin(), used.end(), corner) - used.begin());
    };
    for (const Edge& edge : edges) {
        result.edges.push_back({number(edge.tail), number(edge.head)});
    }
    return result;
}

RUNNEL_NAMESPACE_END
