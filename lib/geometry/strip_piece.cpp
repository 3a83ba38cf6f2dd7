#include "geometry/strip_piece.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

Border stretch_of(const Border& border, double x_from, double x_to) noexcept {
    const double part = x_to - x_from;
    return {border.at(x_from), border.at(x_to), border.bulge * part * part};
}

StripPiece between_levels(const StripPiece& piece, double from, double to) noexcept {
    const double x_from = piece.fraction(from);
    const double x_to = to == piece.to ? 1 : piece.fraction(to);
    return {from, to, stretch_of(piece.low, x_from, x_to), stretch_of(piece.high, x_from, x_to)};
}

double area_of(const StripPiece& piece) noexcept {
    const double start = piece.high.start - piece.low.start;
    const double end = piece.high.end - piece.low.end;
    const double bulge = piece.high.bulge - piece.low.bulge;
    constexpr double sixth = 1.0 / 6; // integral of x (1 - x)
    return (piece.to - piece.from) * ((start + end) / 2 - bulge * sixth);
}

namespace {

/// Gauss's rule of four points on 0..1: exact up to the seventh power, and a parabola's square against a
/// plane has six.
struct GaussPoint {
    double x, weight;
};

const std::array<GaussPoint, 4>& gauss_rule() {
    static const std::array<GaussPoint, 4> rule = [] {
        const double root = 2 * std::sqrt(6.0 / 5);
        const double inner = std::sqrt((3 - root) / 7) / 2;
        const double outer = std::sqrt((3 + root) / 7) / 2;
        const double heavy = (18 + std::sqrt(30.0)) / 72;
        const double light = (18 - std::sqrt(30.0)) / 72;
        return std::array<GaussPoint, 4>{
            {{0.5 - outer, light}, {0.5 - inner, heavy}, {0.5 + inner, heavy}, {0.5 + outer, light}}};
    }();
    return rule;
}

} // namespace

AreaMoments moments_of(const StripPiece& piece) noexcept {
    return moments_of(piece, Intensity{1, 0, 0});
}

AreaMoments moments_of(const StripPiece& piece, const Intensity& intensity) noexcept {
    AreaMoments sum;
    for (const GaussPoint& point : gauss_rule()) {
        const double v = (1 - point.x) * piece.from + point.x * piece.to;
        const double low = piece.low.at(point.x);
        const double breadth = piece.high.at(point.x) - low;
        // Along the strip: q at its middle, and the slope's own first moment about the middle.
        const double middle = low + breadth / 2;
        const double force = breadth * intensity.at({middle, v});
        const double about_middle = intensity.by_along * breadth * breadth * breadth / 12;
        const double weight = point.weight * (piece.to - piece.from);
        sum.area += weight * force;
        sum.moment.x += weight * (force * middle + about_middle);
        sum.moment.y += weight * force * v;
    }
    return sum;
}

std::vector<double> crossings_of(const Border& border, double start, double end) {
    // The difference is (1 - x) d0 + x d1 - bulge x (1 - x) = d0 + (d1 - d0 - bulge) x + bulge x^2.
    const double d0 = border.start - start;
    const double d1 = border.end - end;
    const double a = border.bulge;
    const double b = d1 - d0 - a;
    std::vector<double> roots;
    const auto keep = [&roots](double x) {
        if (x > 0 && x < 1) {
            roots.push_back(x);
        }
    };
    if (a == 0) {
        if ((d0 < 0) != (d1 < 0) && d0 != d1) {
            keep(d0 / (d0 - d1));
        }
        return roots;
    }
    const double discriminant = b * b - 4 * a * d0;
    if (discriminant < 0) {
        return roots;
    }
    // Without cancellation: the larger root first, the other from their product.
    const double q = -(b + std::copysign(std::sqrt(discriminant), b)) / 2;
    keep(q / a);
    if (q != 0) {
        keep(d0 / q);
    }
    std::sort(roots.begin(), roots.end());
    return roots;
}

Box box_of(const StripPiece& piece) noexcept {
    Box box = box_of(Point{piece.low.start, piece.from}, Point{piece.high.end, piece.to});
    box.add({piece.high.start, piece.from});
    box.add({piece.low.end, piece.to});
    for (const Border* border : {&piece.low, &piece.high}) {
        if (border->bulge != 0) {
            const double x = (1 - (border->end - border->start) / border->bulge) / 2; // where it turns
            if (x > 0 && x < 1) {
                box.add({border->at(x), (piece.from + piece.to) / 2});
            }
        }
    }
    return box;
}

namespace {

/// A side of a convex window that limits the strips from below or above; runs with rising across.
struct WindowSide {
    Point a, b;

    [[nodiscard]] double at(double across) const {
        // A level may lie beside the side's ends by noise; a side that is all but level must not run far
        // there.
        return across <= a.y ? a.x : across >= b.y ? b.x : between(a, b, (across - a.y) / (b.y - a.y)).x;
    }
};

/// The window's sides that bound strips from below and from above along them, and its extent across.
struct Window {
    std::vector<WindowSide> lows, highs;
    double bottom = 0, top = 0;

    explicit Window(const Convex& polygon) {
        bottom = polygon.front().y;
        top = bottom;
        for (std::size_t i = 0; i < polygon.size(); ++i) {
            const Point a = polygon[i];
            const Point b = polygon[(i + 1) % polygon.size()];
            bottom = std::min(bottom, a.y);
            top = std::max(top, a.y);
            // Counter-clockwise with across upwards: what rises lies on the high side along the strips.
            if (b.y > a.y) {
                highs.push_back({a, b});
            } else if (b.y < a.y) {
                lows.push_back({b, a});
            }
        }
    }

    static const WindowSide* side_at(const std::vector<WindowSide>& sides, double across) {
        for (const WindowSide& side : sides) {
            if (across >= side.a.y && across <= side.b.y) {
                return &side;
            }
        }
        return nullptr;
    }
};

bool wholly_inside(const StripPiece& piece, const Convex& window) {
    const Box box = box_of(piece);
    const std::array<Point, 4> corners{box.low, {box.high.x, box.low.y}, box.high, {box.low.x, box.high.y}};
    for (std::size_t i = 0; i < window.size(); ++i) {
        const Point a = window[i];
        const Point d = window[(i + 1) % window.size()] - a;
        for (const Point& p : corners) {
            if (cross(d, p - a) < 0) {
                return false;
            }
        }
    }
    return true;
}

/// Levels at which a piece has to be cut so that between two of them no side of the window ends and none
/// crosses a border.
std::vector<double> levels_for(const StripPiece& piece, const Window& window, double noise) {
    std::vector<double> levels{piece.from, piece.to};
    const auto add = [&](double level) {
        if (level > piece.from && level < piece.to) {
            levels.push_back(level);
        }
    };
    for (const auto* sides : {&window.lows, &window.highs}) {
        for (const WindowSide& side : *sides) {
            add(side.a.y);
            add(side.b.y);
            const double from = std::max(piece.from, side.a.y);
            const double to = std::min(piece.to, side.b.y);
            if (!(to > from)) {
                continue;
            }
            for (const Border* border : {&piece.low, &piece.high}) {
                const Border part = stretch_of(*border, piece.fraction(from), piece.fraction(to));
                for (const double x : crossings_of(part, side.at(from), side.at(to))) {
                    add((1 - x) * from + x * to);
                }
            }
        }
    }
    std::sort(levels.begin(), levels.end());
    // The ends of the piece stay; levels within noise of one that is kept are that level.
    std::vector<double> kept{piece.from};
    for (const double level : levels) {
        if (level - kept.back() > noise && piece.to - level > noise) {
            kept.push_back(level);
        }
    }
    kept.push_back(piece.to);
    return kept;
}

void push(std::vector<StripPiece>* pieces, const StripPiece& piece) {
    if (pieces != nullptr && (piece.high.start != piece.low.start || piece.high.end != piece.low.end ||
                              piece.high.bulge != piece.low.bulge)) {
        pieces->push_back(piece);
    }
}

} // namespace

void divide(const StripPiece& piece, const Convex& window, double noise, std::vector<StripPiece>* inside,
            std::vector<StripPiece>* outside) {
    if (!(piece.to > piece.from)) {
        return;
    }
    if (window.size() < 3) {
        push(outside, piece);
        return;
    }
    if (wholly_inside(piece, window)) {
        push(inside, piece);
        return;
    }
    const Window sides(window);
    const std::vector<double> levels = levels_for(piece, sides, noise);
    for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
        const StripPiece part = between_levels(piece, levels[i], levels[i + 1]);
        const double middle = (part.from + part.to) / 2;
        const WindowSide* low = Window::side_at(sides.lows, middle);
        const WindowSide* high = Window::side_at(sides.highs, middle);
        if (low == nullptr || high == nullptr) {
            push(outside, part);
            continue;
        }
        const double piece_low = part.low.at(0.5);
        const double piece_high = part.high.at(0.5);
        // Which of two borders counts is decided at the middle and holds from level to level.
        const double window_low = low->at(middle);
        const double window_high = high->at(middle);
        if (window_low >= piece_high || window_high <= piece_low) {
            push(outside, part);
            continue;
        }
        const bool cut_below = window_low > piece_low;
        const bool cut_above = window_high < piece_high;
        const Border floor = cut_below ? Border{low->at(part.from), low->at(part.to), 0} : part.low;
        const Border ceiling = cut_above ? Border{high->at(part.from), high->at(part.to), 0} : part.high;
        push(inside, {part.from, part.to, floor, ceiling});
        if (cut_below) {
            push(outside, {part.from, part.to, part.low, floor});
        }
        if (cut_above) {
            push(outside, {part.from, part.to, ceiling, part.high});
        }
    }
}

std::vector<StripPiece> pieces_of(const Convex& polygon, double noise) {
    std::vector<StripPiece> pieces;
    if (polygon.size() < 3) {
        return pieces;
    }
    const Box box = box_of(std::span<const Point>(polygon));
    divide({box.low.y, box.high.y, {box.low.x, box.low.x, 0}, {box.high.x, box.high.x, 0}}, polygon, noise,
           &pieces, nullptr);
    return pieces;
}

RUNNEL_NAMESPACE_END
