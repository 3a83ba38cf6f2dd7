#include "geometry/ring_area.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

RingArea::RingArea(const std::vector<Ring>& rings, double noise, std::size_t questions) : noise_(noise) {
    std::vector<Box> boxes;
    for (const Ring& ring : rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Edge edge{ring[i], ring[(i + 1) % ring.size()]};
            if (edge.a == edge.b) {
                continue;
            }
            boxes.push_back(box_of(edge.a, edge.b));
            if (edges_.empty()) {
                extent_ = boxes.back();
            }
            edges_.push_back(edge);
            extent_.add(edge.b);
            extent_.add(edge.a);
        }
    }
    rounding_ = noise_of(std::max({std::abs(extent_.low.x), std::abs(extent_.low.y), std::abs(extent_.high.x),
                                   std::abs(extent_.high.y)}));
    noise_ = std::max(noise, rounding_);
    finder_ = BoxFinder(std::move(boxes));
    lay_grid(questions);
}

// ---- where boxes and points lie -------------------------------------------------------------------------

void RingArea::lay_grid(std::size_t questions) {
    constexpr std::size_t worth_a_grid = 16; // edges
    constexpr double most_squares = 4e6;
    const double breadth = extent_.high.x - extent_.low.x;
    const double height = extent_.high.y - extent_.low.y;
    if (edges_.size() <= worth_a_grid || !(breadth > 0) || !(height > 0)) {
        return;
    }
    const double squares = std::min(most_squares, static_cast<double>(edges_.size() + 2 * questions));
    const double side = std::sqrt(breadth * height / squares);
    columns_ = static_cast<std::size_t>(std::clamp(breadth / side, 1.0, squares));
    rows_ = static_cast<std::size_t>(std::clamp(height / side, 1.0, squares));
    width_ = breadth / static_cast<double>(columns_);
    height_ = height / static_cast<double>(rows_);
    mark_edge_cells();
    mark_inside_cells();
}

std::size_t RingArea::column_of(double x) const {
    const double c = std::floor((x - extent_.low.x) / width_);
    return static_cast<std::size_t>(std::clamp(c, 0.0, static_cast<double>(columns_ - 1)));
}
std::size_t RingArea::row_of(double y) const {
    const double r = std::floor((y - extent_.low.y) / height_);
    return static_cast<std::size_t>(std::clamp(r, 0.0, static_cast<double>(rows_ - 1)));
}

void RingArea::mark_edge_cells() {
    edges_of_row_.resize(rows_);
    std::vector<bool> has_edge(columns_ * rows_, false);
    for (std::uint32_t e = 0; e < edges_.size(); ++e) {
        const Point low = edges_[e].a.y <= edges_[e].b.y ? edges_[e].a : edges_[e].b;
        const Point high = edges_[e].a.y <= edges_[e].b.y ? edges_[e].b : edges_[e].a;
        const LevelEdge edge{low, high, 0};
        const std::size_t last = row_of(high.y + noise_);
        for (std::size_t r = row_of(low.y - noise_); r <= last; ++r) {
            edges_of_row_[r].push_back(e);
            // A level edge lies in its rows with its whole length.
            const double bottom = extent_.low.y + height_ * static_cast<double>(r) - noise_;
            const double top = extent_.low.y + height_ * static_cast<double>(r + 1) + noise_;
            const bool level = high.y - low.y <= noise_;
            const double x0 = level ? low.x : edge.at(bottom);
            const double x1 = level ? high.x : edge.at(top);
            const std::size_t right = column_of(std::max(x0, x1) + noise_);
            for (std::size_t c = column_of(std::min(x0, x1) - noise_); c <= right; ++c) {
                has_edge[r * columns_ + c] = true;
            }
        }
    }
    edges_before_.assign((columns_ + 1) * (rows_ + 1), 0);
    for (std::size_t r = 0; r < rows_; ++r) {
        std::uint32_t in_row = 0;
        for (std::size_t c = 0; c < columns_; ++c) {
            in_row += has_edge[r * columns_ + c] ? 1 : 0;
            edges_before_[(r + 1) * (columns_ + 1) + c + 1] =
                edges_before_[r * (columns_ + 1) + c + 1] + in_row;
        }
    }
}

void RingArea::mark_inside_cells() {
    is_inside_.assign(columns_ * rows_, false);
    std::vector<std::pair<double, int>> steps;
    for (std::size_t r = 0; r < rows_; ++r) {
        const double y = extent_.low.y + height_ * (static_cast<double>(r) + 0.5);
        steps.clear();
        for (const std::uint32_t e : edges_of_row_[r]) {
            const Edge& edge = edges_[e];
            if ((edge.a.y > y) != (edge.b.y > y)) {
                const double x = edge.a.x + (edge.b.x - edge.a.x) * ((y - edge.a.y) / (edge.b.y - edge.a.y));
                steps.emplace_back(x, edge.b.y > edge.a.y ? -1 : 1);
            }
        }
        std::sort(steps.begin(), steps.end());
        int depth = 0;
        std::size_t next = 0;
        for (std::size_t c = 0; c < columns_; ++c) {
            const double x = extent_.low.x + width_ * (static_cast<double>(c) + 0.5);
            for (; next < steps.size() && steps[next].first < x; ++next) {
                depth += steps[next].second;
            }
            is_inside_[r * columns_ + c] = depth > 0;
        }
    }
}

RingArea::Place RingArea::place_of(const Box& given) const {
    const Box box = given.grown(noise_);
    if (!box.meets(extent_)) {
        return Place::outside;
    }
    if (columns_ == 0) {
        for (const Edge& edge : edges_) {
            if (box_of(edge.a, edge.b).meets(box)) {
                return Place::edge;
            }
        }
        return contains(between(box.low, box.high, 0.5)) ? Place::inside : Place::outside;
    }
    const std::size_t c0 = column_of(box.low.x);
    const std::size_t c1 = column_of(box.high.x) + 1;
    const std::size_t r0 = row_of(box.low.y);
    const std::size_t r1 = row_of(box.high.y) + 1;
    const auto before = [&](std::size_t r, std::size_t c) { return edges_before_[r * (columns_ + 1) + c]; };
    if (before(r1, c1) + before(r0, c0) != before(r1, c0) + before(r0, c1)) {
        return Place::edge;
    }
    return is_inside_[r0 * columns_ + c0] ? Place::inside : Place::outside;
}

bool RingArea::contains(Point p) const {
    int depth = 0;
    const auto add = [&](const Edge& edge) {
        if ((edge.a.y > p.y) != (edge.b.y > p.y) &&
            p.x < edge.a.x + (edge.b.x - edge.a.x) * ((p.y - edge.a.y) / (edge.b.y - edge.a.y))) {
            depth += edge.b.y > edge.a.y ? 1 : -1;
        }
    };
    if (columns_ == 0) {
        for (const Edge& edge : edges_) {
            add(edge);
        }
    } else if (p.y >= extent_.low.y && p.y <= extent_.high.y) {
        for (const std::uint32_t e : edges_of_row_[row_of(p.y)]) {
            add(edges_[e]);
        }
    }
    return depth > 0;
}

// ---- clipping -------------------------------------------------------------------------------------------

void RingArea::clip(const StripPiece& piece, const StripAxes& axes, const Box& box,
                    std::vector<Part>& parts) {
    parts.clear();
    if (!(piece.to > piece.from)) {
        return;
    }
    switch (place_of(box)) {
    case Place::inside:
        parts.push_back({piece, 0, 0});
        return;
    case Place::outside:
        return;
    case Place::edge:
        break;
    }
    find_edges(piece, axes, box);
    find_levels(piece);
    std::sort(level_edges_.begin(), level_edges_.end(),
              [](const LevelEdge& l, const LevelEdge& r) { return l.a.y < r.a.y; });
    active_.clear();
    auto next = level_edges_.cbegin();
    for (std::size_t i = 0; i + 1 < levels_.size(); ++i) {
        const StripPiece strip = between_levels(piece, levels_[i], levels_[i + 1]);
        for (; next != level_edges_.cend() && next->a.y <= strip.from + rounding_; ++next) {
            active_.push_back(&*next);
        }
        active_.erase(std::remove_if(active_.begin(), active_.end(),
                                     [&](const LevelEdge* edge) { return edge->b.y < strip.to - rounding_; }),
                      active_.end());
        clip_strip(strip, axes, parts);
    }
}

void RingArea::find_edges(const StripPiece& piece, const StripAxes& axes, const Box& box) {
    finder_.find(box.grown(noise_), near_);
    level_edges_.clear();
    levels_.clear();
    for (const std::uint32_t e : near_) {
        const Point a = axes.to_strip(edges_[e].a);
        const Point b = axes.to_strip(edges_[e].b);
        const LevelEdge edge = b.y > a.y ? LevelEdge{a, b, -1} : LevelEdge{b, a, 1};
        if (edge.b.y - edge.a.y <= rounding_) {
            levels_.push_back(edge.a.y); // the strips end there
        } else if (edge.b.y > piece.from && edge.a.y < piece.to) {
            level_edges_.push_back(edge);
        }
    }
}

/// Levels at which an edge begins, ends or crosses a border, so that between two of them nothing does.
void RingArea::find_levels(const StripPiece& piece) {
    const auto add = [&](double level) {
        if (level > piece.from && level < piece.to) {
            levels_.push_back(level);
        }
    };
    for (const LevelEdge& edge : level_edges_) {
        add(edge.a.y);
        add(edge.b.y);
        const double from = std::max(piece.from, edge.a.y);
        const double to = std::min(piece.to, edge.b.y);
        for (const Border* border : {&piece.low, &piece.high}) {
            const Border part = stretch_of(*border, piece.fraction(from), piece.fraction(to));
            for (const double x : crossings_of(part, edge.at(from), edge.at(to))) {
                add((1 - x) * from + x * to);
            }
            // A parabola that only touches the edge does so at a level, never at a strip's middle.
            const double d0 = part.start - edge.at(from);
            const double b = part.end - edge.at(to) - d0 - part.bulge;
            const double touching = part.bulge != 0 ? -b / (2 * part.bulge) : 0;
            if (touching > 0 && touching < 1 && std::abs(d0 + touching * b / 2) <= noise_) {
                add((1 - touching) * from + touching * to);
            }
        }
    }
    std::sort(levels_.begin(), levels_.end());
    std::size_t kept = 0;
    double last = piece.from;
    for (const double level : levels_) {
        if (level > piece.from && level - last > rounding_ && piece.to - level > rounding_) {
            levels_[kept++] = last = level;
        }
    }
    levels_.resize(kept);
    levels_.insert(levels_.begin(), piece.from);
    levels_.push_back(piece.to);
}

/// What crosses a strip, rising; edges that lie on each other as one, and not at all where they undo each
/// other: an opening along the outline.
void RingArea::find_crossings(const StripPiece& strip) {
    const double middle = (strip.from + strip.to) / 2;
    const double low = strip.low.at(0.5) - noise_;
    const double high = strip.high.at(0.5) + noise_;
    crossings_.clear();
    for (const LevelEdge* edge : active_) {
        const double along = edge->at(middle);
        if (along >= low && along <= high) {
            crossings_.push_back({along, edge});
        }
    }
    std::sort(crossings_.begin(), crossings_.end(), [](const Crossing& l, const Crossing& r) {
        return l.along != r.along ? l.along < r.along : l.edge->step < r.edge->step;
    });
    std::size_t kept = 0;
    for (std::size_t i = 0; i < crossings_.size();) {
        int step = 0;
        std::size_t j = i;
        for (; j < crossings_.size() && crossings_[j].along - crossings_[i].along <= noise_; ++j) {
            step += crossings_[j].edge->step;
        }
        for (std::size_t k = i; step != 0 && k < j; ++k) {
            if ((crossings_[k].edge->step > 0) == (step > 0)) {
                crossings_[kept++] = crossings_[k];
                break;
            }
        }
        i = j;
    }
    crossings_.resize(kept);
}

/// How many rings deep a strip is at its low border. Asked in the widest gap between crossings, where nothing
/// is near: what lies on each other but for rounding may come in either order.
int RingArea::depth_at_low(const StripPiece& strip, const StripAxes& axes) const {
    if (crossings_.size() == 1) {
        return crossings_.front().edge->step < 0 ? 1 : 0;
    }
    double before = strip.low.at(0.5);
    double widest = -1;
    double middle = before;
    int steps = 0; // up to the widest gap
    int so_far = 0;
    const auto offer = [&](double along) {
        if (along - before > widest) {
            widest = along - before;
            middle = before + widest / 2;
            steps = so_far;
        }
        before = along;
    };
    for (const Crossing& crossing : crossings_) {
        offer(crossing.along);
        so_far += crossing.edge->step;
    }
    offer(strip.high.at(0.5));
    return (contains(axes.to_plan({middle, (strip.from + strip.to) / 2})) ? 1 : 0) - steps;
}

void RingArea::clip_strip(const StripPiece& strip, const StripAxes& axes, std::vector<Part>& parts) {
    find_crossings(strip);
    const double low = strip.low.at(0.5);
    const double high = strip.high.at(0.5);
    if (!(high > low)) {
        return;
    }
    int depth = depth_at_low(strip, axes);
    const std::size_t first = parts.size();
    Border start = strip.low;
    double start_along = low;
    double out = 0;       // so far
    double left_at = low; // where the inside was left
    const auto close = [&](const Border& end, double end_along) {
        if (end_along - start_along > 0) {
            parts.push_back({{strip.from, strip.to, start, end}, out, 0});
        }
        left_at = end_along;
    };
    for (const Crossing& crossing : crossings_) {
        const Border border{crossing.edge->at(strip.from), crossing.edge->at(strip.to), 0};
        const bool on_low = std::abs(crossing.along - low) <= noise_;
        const bool on_high = std::abs(crossing.along - high) <= noise_;
        const bool was_inside = depth > 0;
        depth += crossing.edge->step;
        const bool is_inside = depth > 0;
        if (!was_inside && is_inside) {
            const bool exact = std::abs(crossing.along - low) <= rounding_;
            start = exact ? strip.low : border;
            start_along = on_high ? high : crossing.along;
            out += on_low ? 0 : crossing.along - left_at;
        } else if (was_inside && !is_inside && !on_low) {
            const bool exact = std::abs(crossing.along - high) <= rounding_;
            close(exact ? strip.high : border, crossing.along);
        }
    }
    if (depth > 0) {
        close(strip.high, high);
    } else {
        out += high - left_at;
    }
    // What lies outside above a part is all but what lies below and within its own breadth.
    for (std::size_t i = first; i < parts.size(); ++i) {
        parts[i].out_above = out - parts[i].out_below;
    }
}

RUNNEL_NAMESPACE_END
