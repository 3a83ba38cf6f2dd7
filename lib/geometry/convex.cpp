#include "geometry/convex.hpp"

#include "geometry/basic.hpp"
#include "geometry/strip_sweep.hpp"

#include <utility>

RUNNEL_NAMESPACE_BEGIN

AreaMoments moments_of(std::span<const Point> polygon, Point about) {
    if (polygon.size() < 3) {
        return {};
    }
    const Point base = polygon.front();
    Sum area;
    Sum mx;
    Sum my;
    for (std::size_t i = 1; i + 1 < polygon.size(); ++i) {
        const Point p = polygon[i] - base;
        const Point q = polygon[i + 1] - base;
        const double triangle = cross(p, q) / 2;
        area.add(triangle);
        mx.add(triangle * (p.x + q.x) / 3);
        my.add(triangle * (p.y + q.y) / 3);
    }
    const Point shift = base - about;
    return {area.value(), {mx.value() + area.value() * shift.x, my.value() + area.value() * shift.y}};
}

void cut(const Convex& polygon, Point a, Point b, double noise, Convex& left, Convex& right) {
    left.clear();
    right.clear();
    const Point direction = b - a;
    const double length = norm(direction);
    const auto side = [&](Point p) {
        const double d = cross(direction, p - a) / length;
        return std::abs(d) <= noise ? 0.0 : d;
    };
    if (polygon.empty() || !(length > 0)) {
        left = polygon;
        return;
    }
    bool any_left = false;
    bool any_right = false;
    double here = side(polygon.front());
    for (std::size_t i = 0; i < polygon.size(); ++i) {
        const Point p = polygon[i];
        const Point q = polygon[(i + 1) % polygon.size()];
        const double there = side(q);
        any_left = any_left || here > 0;
        any_right = any_right || here < 0;
        if (here >= 0) {
            left.push_back(p);
        }
        if (here <= 0) {
            right.push_back(p);
        }
        if ((here > 0 && there < 0) || (here < 0 && there > 0)) {
            const Point on_line = between(p, q, here / (here - there));
            left.push_back(on_line);
            right.push_back(on_line);
        }
        here = there;
    }
    if (!any_left) {
        left.clear();
        right = polygon;
    } else if (!any_right) {
        right.clear();
        left = polygon;
    }
}

Convex clipped(Convex polygon, const Convex& window, double noise) {
    Convex left;
    Convex right;
    for (std::size_t i = 0; i < window.size() && !polygon.empty(); ++i) {
        cut(polygon, window[i], window[(i + 1) % window.size()], noise, left, right);
        polygon.swap(left);
    }
    return polygon;
}

std::vector<Convex> convex_pieces(std::span<const Point> outline, std::span<const Ring> openings,
                                  double noise) {
    std::vector<Convex> pieces;
    for (const Gap& gap : sweep_strips(outline, openings, {}, noise).gaps) {
        Convex piece{{gap.low_start, gap.from},
                     {gap.high_start, gap.from},
                     {gap.high_end, gap.to},
                     {gap.low_end, gap.to}};
        // A triangle's repeated corner would make an edge without direction.
        Convex clean;
        for (const Point& p : piece) {
            if (clean.empty() || distance(p, clean.back()) > noise) {
                clean.push_back(p);
            }
        }
        while (clean.size() > 1 && distance(clean.front(), clean.back()) <= noise) {
            clean.pop_back();
        }
        if (clean.size() >= 3) {
            pieces.push_back(std::move(clean));
        }
    }
    return pieces;
}

RUNNEL_NAMESPACE_END
