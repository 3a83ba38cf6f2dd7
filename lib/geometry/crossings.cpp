#include "geometry/crossings.hpp"

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"

#include <algorithm>
#include <optional>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

double left_of(const SweepEdge& edge, Point p) {
    const Point d = edge.b - edge.a;
    return cross(d, p - edge.a) / norm(d);
}

namespace {

std::optional<Point> crossing_of(const SweepEdge& e, const SweepEdge& f, double noise) {
    const double fa = left_of(e, f.a);
    const double fb = left_of(e, f.b);
    if (std::min(fa, fb) >= -noise || std::max(fa, fb) <= noise) {
        return std::nullopt;
    }
    const double ea = left_of(f, e.a);
    const double eb = left_of(f, e.b);
    if (std::min(ea, eb) >= -noise || std::max(ea, eb) <= noise) {
        return std::nullopt;
    }
    return between(f.a, f.b, fa / (fa - fb));
}

std::vector<std::pair<std::uint32_t, Point>> find_crossings(const std::vector<SweepEdge>& edges,
                                                            double noise) {
    std::vector<Box> boxes;
    boxes.reserve(edges.size());
    for (const SweepEdge& e : edges) {
        boxes.push_back(box_of(e.a, e.b));
    }
    const BoxTree tree(boxes);
    std::vector<std::pair<std::uint32_t, Point>> cuts;
    std::vector<std::uint32_t> near;
    for (std::uint32_t i = 0; i < edges.size(); ++i) {
        tree.find(boxes[i], near);
        for (auto it = std::upper_bound(near.begin(), near.end(), i); it != near.end(); ++it) {
            if (const auto p = crossing_of(edges[i], edges[*it], noise)) {
                cuts.emplace_back(i, *p);
                cuts.emplace_back(*it, *p);
            }
        }
    }
    return cuts;
}

} // namespace

bool split_at_crossings(std::vector<SweepEdge>& edges, double noise) {
    std::vector<std::pair<std::uint32_t, Point>> cuts = find_crossings(edges, noise);
    if (cuts.empty()) {
        return false;
    }
    std::sort(cuts.begin(), cuts.end(), [](const auto& l, const auto& r) {
        return l.first != r.first ? l.first < r.first
                                  : std::pair(l.second.y, l.second.x) < std::pair(r.second.y, r.second.x);
    });
    for (auto it = cuts.begin(); it != cuts.end();) {
        const std::uint32_t index = it->first;
        const Point last = edges[index].b;
        SweepEdge rest = edges[index];
        bool first = true;
        for (; it != cuts.end() && it->first == index; ++it) {
            const Point p = it->second;
            if (!(p.y > rest.a.y && p.y < last.y)) {
                continue; // at the level of an end: nothing to order differently there
            }
            SweepEdge part = rest;
            part.b = p;
            if (first) {
                edges[index] = part;
                first = false;
            } else {
                edges.push_back(part);
            }
            rest.a = p;
        }
        if (!first) {
            rest.b = last;
            edges.push_back(rest);
        }
    }
    return true;
}

RUNNEL_NAMESPACE_END
