#include "load/standing_nearest.hpp"

#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

StripPiece piece_of(const Cell& cell) {
    return {cell.from, cell.to, cell.low, cell.high};
}

Box box_in_plan(const Cell& cell, const StripAxes& axes) {
    const Box box = box_of(piece_of(cell));
    Box turned = box_of(axes.to_plan(box.low), axes.to_plan(box.high));
    turned.add(axes.to_plan({box.low.x, box.high.y}));
    turned.add(axes.to_plan({box.high.x, box.low.y}));
    return turned;
}

std::vector<Box> outline_boxes(const FramedLevel& level) {
    std::vector<Box> boxes;
    for (const FramedDeck& deck : level.decks) {
        boxes.push_back(box_of(deck.outline));
    }
    return boxes;
}

/// Beside its levels a cell is taken as going on with its last breadth.
bool holds(const Cell& cell, Point p, double margin) {
    if (p.y < cell.from - margin || p.y > cell.to + margin) {
        return false;
    }
    const double x = std::clamp(piece_of(cell).fraction(p.y), 0.0, 1.0);
    return p.x >= cell.low.at(x) - margin && p.x <= cell.high.at(x) + margin;
}

/// A straight stretch in the axes of a cell.
struct Stretch {
    Point a, b;

    [[nodiscard]] Point at(double t) const { return between(a, b, t); }
    /// Appends where it reaches a level.
    void reach(double level, std::vector<double>& fractions) const {
        if (a.y != b.y) {
            fractions.push_back((level - a.y) / (b.y - a.y));
        }
    }
};

/// Appends where a stretch between two fractions of it, which lies between a cell's levels, meets one of its
/// borders moved by `by`.
void meet_border(const Cell& cell, const Border& border, double by, const Stretch& whole, double t_from,
                 double t_to, std::vector<double>& fractions) {
    const Point a = whole.at(t_from);
    const Point b = whole.at(t_to);
    const StripPiece piece = piece_of(cell);
    Border under = stretch_of(border, std::clamp(piece.fraction(a.y), 0.0, 1.0),
                              std::clamp(piece.fraction(b.y), 0.0, 1.0));
    under.start += by;
    under.end += by;
    for (const double x : crossings_of(under, a.x, b.x)) {
        fractions.push_back((1 - x) * t_from + x * t_to);
    }
}

/// Puts fractions in order, those off 0..1 left out, with both ends.
void settle(std::vector<double>& fractions) {
    fractions.erase(
        std::remove_if(fractions.begin(), fractions.end(), [](double t) { return !(t > 0 && t < 1); }),
        fractions.end());
    fractions.push_back(0);
    fractions.push_back(1);
    std::sort(fractions.begin(), fractions.end());
}

/// Appends the stretches of a line over one cell. Between two fractions where it reaches a level or a border
/// it is all in or all out, which its middle tells.
void hits_of(const Cell& cell, std::uint32_t index, const Stretch& line, double margin,
             std::vector<CellFinder::Hit>& hits) {
    std::vector<double> levels;
    for (const double level : {cell.from - margin, cell.from, cell.to, cell.to + margin}) {
        line.reach(level, levels);
    }
    settle(levels);
    std::vector<double> fractions = levels;
    for (std::size_t i = 0; i + 1 < levels.size(); ++i) {
        meet_border(cell, cell.low, -margin, line, levels[i], levels[i + 1], fractions);
        meet_border(cell, cell.high, margin, line, levels[i], levels[i + 1], fractions);
    }
    settle(fractions);
    bool open = false;
    for (std::size_t i = 0; i + 1 < fractions.size(); ++i) {
        const bool inside = holds(cell, line.at((fractions[i] + fractions[i + 1]) / 2), margin);
        if (inside && open) {
            hits.back().to = fractions[i + 1];
        } else if (inside) {
            hits.push_back({fractions[i], fractions[i + 1], index});
        }
        open = inside;
    }
}

} // namespace

CellFinder::CellFinder(const FramedLevel& level, const Sharing& sharing)
    : sharing_(&sharing), decks_(level.decks.size()), outlines_(outline_boxes(level)) {
    for (std::uint32_t i = 0; i < sharing.cells.size();) {
        const std::uint32_t deck = sharing.cells[i].deck;
        std::uint32_t end = i;
        while (end < sharing.cells.size() && sharing.cells[end].deck == deck) {
            ++end;
        }
        if (level.decks[deck].span != SpanKind::one_way) {
            decks_[deck].first = i;
            decks_[deck].last = end;
        }
        i = end;
    }
}

void CellFinder::find(const Box& box) {
    near_.clear();
    std::vector<std::uint32_t> found;
    std::vector<std::uint32_t> here;
    outlines_.find(box, found);
    for (const std::uint32_t d : found) {
        DeckCells& cells = decks_[d];
        if (cells.first == cells.last) {
            continue;
        }
        if (!cells.tree) {
            std::vector<Box> boxes;
            for (std::uint32_t i = cells.first; i < cells.last; ++i) {
                boxes.push_back(box_in_plan(sharing_->cells[i], sharing_->axes[sharing_->cells[i].axes]));
            }
            cells.tree.emplace(boxes);
        }
        cells.tree->find(box, here);
        for (const std::uint32_t k : here) {
            near_.push_back(cells.first + k);
        }
    }
}

std::vector<CellFinder::Hit> CellFinder::over(Point a, Point b, double margin) {
    std::vector<Hit> hits;
    find(box_of(a, b).grown(margin));
    for (const std::uint32_t i : near_) {
        const Cell& cell = sharing_->cells[i];
        const StripAxes& axes = sharing_->axes[cell.axes];
        hits_of(cell, i, {axes.to_strip(a), axes.to_strip(b)}, margin, hits);
    }
    std::sort(hits.begin(), hits.end(), [](const Hit& l, const Hit& r) {
        return l.from != r.from ? l.from < r.from : l.cell < r.cell;
    });
    return hits;
}

std::uint32_t CellFinder::under(Point p, double margin) {
    find(box_of(p, p).grown(margin));
    const auto it = std::find_if(near_.begin(), near_.end(), [&](std::uint32_t i) {
        const Cell& cell = sharing_->cells[i];
        return holds(cell, sharing_->axes[cell.axes].to_strip(p), margin);
    });
    return it == near_.end() ? none : *it;
}

namespace {

double station_at(const Cell& cell, const Transfer& transfer, double across) {
    const double x = std::clamp(piece_of(cell).fraction(across), 0.0, 1.0);
    return (1 - x) * transfer.station_from + x * transfer.station_to;
}

/// Where along a linear load its force acts, as a fraction; for a force that cancels itself, the middle.
double centre_of(double w_a, double w_b) {
    const double sum = w_a + w_b;
    return sum != 0 ? std::clamp((w_a + 2 * w_b) / (3 * sum), 0.0, 1.0) : 0.5;
}

} // namespace

void put_line_on_cell(const Sharing& sharing, std::uint32_t index, Point a, Point b, double w_a, double w_b,
                      double snap, std::uint32_t load_case, Source source, Collector& collector) {
    const Cell& cell = sharing.cells[index];
    const StripAxes& axes = sharing.axes[cell.axes];
    const Stretch line{axes.to_strip(a), axes.to_strip(b)};
    const double length = distance(a, b);
    for (const Transfer& transfer : sharing.transfers[index]) {
        double from = station_at(cell, transfer, line.a.y);
        double to = station_at(cell, transfer, line.b.y);
        const double stretch = std::abs(to - from);
        // Drawn square to the carrier, to within `snap`.
        const bool square = stretch <= snap && std::abs(line.b.x - line.a.x) > stretch;
        if (square || stretch <= collector.noise()) {
            const double t = centre_of(w_a, w_b);
            collector.put_point(
                transfer.carrier, none,
                {load_case, source, (1 - t) * from + t * to, transfer.weight * length * (w_a + w_b) / 2});
            continue;
        }
        double start = transfer.weight * w_a * length / stretch;
        double end = transfer.weight * w_b * length / stretch;
        if (to < from) {
            std::swap(from, to);
            std::swap(start, end);
        }
        collector.put_line(transfer.carrier, none,
                           {load_case, source, {from, to, {start, (end - start) / (to - from), 0, 0, 0}}});
    }
}

void put_point_on_cell(const Sharing& sharing, std::uint32_t index, Point at, double p,
                       std::uint32_t load_case, Source source, Collector& collector) {
    const Cell& cell = sharing.cells[index];
    const double across = sharing.axes[cell.axes].to_strip(at).y;
    for (const Transfer& transfer : sharing.transfers[index]) {
        collector.put_point(transfer.carrier, none,
                            {load_case, source, station_at(cell, transfer, across), transfer.weight * p});
    }
}

RUNNEL_NAMESPACE_END
