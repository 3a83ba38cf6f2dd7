#include "deck/region_chords.hpp"

#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <tuple>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Both sides of a border have the same bulge up to rounding, which must not give them other numbers of
/// chords.
std::size_t chords_for(const Border& border, double noise, double chord_error) {
    const double bulge = std::abs(border.bulge) - noise;
    if (!(bulge > 0)) {
        return 1;
    }
    // Of two chords the middle point is off by bulge / 12; of more, their middles by less than bulge / 4 n^2.
    if (bulge <= 12 * chord_error) {
        return 2;
    }
    constexpr double most = 1e4; // whatever is asked for
    return static_cast<std::size_t>(std::clamp(std::ceil(std::sqrt(bulge / (4 * chord_error))), 3.0, most));
}

StripPiece piece_of(const Cell& cell) {
    return {cell.from, cell.to, cell.low, cell.high};
}

} // namespace

BorderChords::BorderChords(const Sharing& sharing, std::span<const std::uint32_t> cells, double noise,
                           double chord_error)
    : noise_(noise), chord_error_(chord_error) {
    for (const std::uint32_t c : cells) {
        const Cell& cell = sharing.cells[c];
        for (const Border* border : {&cell.low, &cell.high}) {
            if (!is_straight(*border)) {
                ends_.push_back({cell.axes, {border->start, cell.from}});
                ends_.push_back({cell.axes, {border->end, cell.to}});
            }
        }
    }
    std::sort(ends_.begin(), ends_.end(), before);
}

void BorderChords::append(const Cell& cell, const Border& border, std::vector<Point>& points) const {
    double from = cell.from;
    double x_from = 0;
    const auto go_on_to = [&](double to, double x_to) {
        append_stretch(from, to, stretch_of(border, x_from, x_to), points);
        from = to;
        x_from = x_to;
    };
    for (const double level : levels_on(cell, border)) {
        go_on_to(level, piece_of(cell).fraction(level));
    }
    go_on_to(cell.to, 1);
    points.push_back({border.end, cell.to});
}

/// Without its last point. Chords between points on a parabola would leave out 1 / n^2 of the area of its
/// bulge: the inner points are moved outward until the area is kept.
void BorderChords::append_stretch(double from, double to, const Border& border,
                                  std::vector<Point>& points) const {
    points.push_back({border.start, from});
    const std::size_t chords = chords_for(border, noise_, chord_error_);
    const auto n = static_cast<double>(chords);
    const double moved = chords > 1 ? border.bulge / (6 * n * (n - 1)) : 0;
    for (std::size_t i = 1; i < chords; ++i) {
        const double x = static_cast<double>(i) / n;
        points.push_back({border.at(x) - moved, (1 - x) * from + x * to});
    }
}

bool BorderChords::before(const End& l, const End& r) {
    return std::tuple(l.axes, l.at.y, l.at.x) < std::tuple(r.axes, r.at.y, r.at.x);
}

bool BorderChords::is_straight(const Border& border) const {
    return !(std::abs(border.bulge) > noise_);
}

bool BorderChords::lies_on(const Cell& cell, const Border& border, Point p) const {
    const double x = piece_of(cell).fraction(p.y);
    const double slope = (border.end - border.start - border.bulge * (1 - 2 * x)) / (cell.to - cell.from);
    return std::abs(border.at(x) - p.x) <= 2 * noise_ * (1 + std::abs(slope));
}

/// The levels inside a parabola at which another one ends on it, rising.
std::vector<double> BorderChords::levels_on(const Cell& cell, const Border& border) const {
    std::vector<double> levels;
    if (is_straight(border)) {
        return levels;
    }
    double last = cell.from;
    const End first{cell.axes, {-std::numeric_limits<double>::infinity(), cell.from}};
    for (auto it = std::lower_bound(ends_.begin(), ends_.end(), first, before);
         it != ends_.end() && it->axes == cell.axes && it->at.y < cell.to - noise_; ++it) {
        if (it->at.y > last + noise_ && lies_on(cell, border, it->at)) {
            last = it->at.y;
            levels.push_back(last);
        }
    }
    return levels;
}

RUNNEL_NAMESPACE_END
