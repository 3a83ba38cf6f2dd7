#include "deck/nearest.hpp"
#include "deck/node_owners.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// An arc in strip axes, between two levels.
struct LevelArc {
    Point low, high; ///< its ends, by rising across
    double bulge = 0;

    [[nodiscard]] Border border() const { return {low.x, high.x, bulge}; }
    [[nodiscard]] LevelArc turned() const { return {high, low, bulge}; }
};

Border ordered_low(const Border& a, const Border& b) {
    return a.at(0.5) <= b.at(0.5) ? a : b;
}
Border ordered_high(const Border& a, const Border& b) {
    return a.at(0.5) <= b.at(0.5) ? b : a;
}

double along_at(Point a, Point b, double across) {
    return across == a.y ? a.x : across == b.y ? b.x : between(a, b, (across - a.y) / (b.y - a.y)).x;
}

/// What lies between a point and an arc, in pieces between levels.
struct FanPieces {
    std::array<StripPiece, 2> pieces;
    std::size_t count = 0;

    FanPieces(Point focus, const LevelArc& arc) {
        const Border whole = arc.border();
        if (focus.y <= arc.low.y) {
            const double far = along_at(focus, arc.high, arc.low.y);
            add(focus.y, arc.low.y, {focus.x, arc.low.x, 0}, {focus.x, far, 0});
            add(arc.low.y, arc.high.y, whole, {far, arc.high.x, 0});
        } else if (focus.y >= arc.high.y) {
            const double far = along_at(arc.low, focus, arc.high.y);
            add(arc.low.y, arc.high.y, whole, {arc.low.x, far, 0});
            add(arc.high.y, focus.y, {arc.high.x, focus.x, 0}, {far, focus.x, 0});
        } else {
            const double x = (focus.y - arc.low.y) / (arc.high.y - arc.low.y);
            add(arc.low.y, focus.y, stretch_of(whole, 0, x), {arc.low.x, focus.x, 0});
            add(focus.y, arc.high.y, stretch_of(whole, x, 1), {focus.x, arc.high.x, 0});
        }
    }

private:
    void add(double from, double to, const Border& a, const Border& b) {
        if (to > from) {
            pieces[count++] = {from, to, ordered_low(a, b), ordered_high(a, b)};
        }
    }
};

class CellMaker {
public:
    CellMaker(const NearestCarriers& carriers, const NodedLines& noded, std::uint32_t deck, double snap,
              RingArea& area)
        : carriers_(carriers), noded_(noded), owners_(carriers, noded), snap_(snap), area_(area),
          axes_of_line_(carriers.lines.size(), none) {
        model_.deck = deck;
    }

    /// The cells along the edges of a convex face.
    void add_face(std::span<const std::uint32_t> half_edges, double noise) {
        ConvexBay bay;
        for (const std::uint32_t h : half_edges) {
            bay.corner[bay.count++] = noded_.nodes[start_of(noded_, h)].place;
        }
        if (bay.close(noise)) {
            for (std::size_t i = 0; i < bay.count; ++i) {
                add_region(half_edges[i] / 2, region_of(bay, i));
            }
        }
    }

    /// The cells beside the arcs of a diagram of some of the pieces, but for what is done by faces.
    void add_diagram(const VoronoiDiagram& diagram, std::span<const std::uint32_t> pieces,
                     const std::vector<bool>& is_done) {
        const auto is_node = [&](std::uint32_t site) { return site >= pieces.size(); };
        const auto node_of = [&](std::uint32_t site) {
            return site - static_cast<std::uint32_t>(pieces.size());
        };
        is_done_ = &is_done;
        const auto add = [&](std::uint32_t site, Point from, Point to, std::uint32_t other) {
            if (is_node(site)) {
                add_fan(node_of(site), from, to, is_node(other) ? none : pieces[other]);
            } else {
                add_side(pieces[site], from, to, is_node(other) ? node_of(other) : none);
            }
        };
        result_.cells.reserve(result_.cells.size() + 2 * diagram.arcs.size());
        result_.transfers.reserve(result_.transfers.size() + 2 * diagram.arcs.size());
        for (const VoronoiDiagram::Arc& arc : diagram.arcs) {
            const Point from = diagram.vertices[arc.from];
            const Point to = diagram.vertices[arc.to];
            add(arc.left, from, to, arc.right);
            add(arc.right, to, from, arc.left);
        }
    }

    [[nodiscard]] double area() const { return result_.area(); }
    NearestCells take() { return std::move(result_); }

private:
    // ---- axes: of the lines, and plain ones for columns --------------------------------------------------

    [[nodiscard]] StripAxes local_axes(std::uint32_t line) const {
        const AxisLine& axis = carriers_.lines[line];
        return {axis.origin, axis.direction.y, -axis.direction.x};
    }
    [[nodiscard]] std::uint32_t axes_index(std::uint32_t line) {
        std::uint32_t& index = line == none ? plain_axes_ : axes_of_line_[line];
        if (index == none) {
            index = static_cast<std::uint32_t>(result_.axes.size());
            StripAxes axes = line == none ? StripAxes{} : local_axes(line);
            axes.origin = line == none ? carriers_.origin : carriers_.carriers[line].from;
            result_.axes.push_back(axes);
        }
        return index;
    }

    /// The arc between two points in a line's axes, or straight in plain ones.
    [[nodiscard]] static LevelArc arc_in(const StripAxes& axes, Point a, Point b, const Point* focus) {
        LevelArc arc{axes.to_strip(a), axes.to_strip(b), 0};
        if (arc.high.y < arc.low.y) {
            arc = arc.turned();
        }
        if (focus != nullptr) {
            const double stretch = arc.high.y - arc.low.y;
            const double away = axes.to_strip(*focus).x;
            arc.bulge = away != 0 ? stretch * stretch / (2 * away) : 0;
        }
        return arc;
    }

    // ---- sides of pieces ---------------------------------------------------------------------------------

    /// The chain of a region's corners runs back from its edge's end.
    void add_region(std::uint32_t piece, const Corners& region) {
        for (std::size_t i = 1; i < region.count; ++i) {
            add_arc(piece, region.at[i], i + 1 < region.count ? region.at[i + 1] : region.at[0], none);
        }
    }

    void add_side(std::uint32_t piece, Point from, Point to, std::uint32_t focus) {
        const AxisLine& axis = carriers_.lines[noded_.pieces[piece].line];
        const bool right = axis.right_of(from) + axis.right_of(to) > 0;
        if (!(*is_done_)[2 * piece + (right ? 1 : 0)]) {
            add_arc(piece, from, to, focus);
        }
    }

    /// What lies between a piece and an arc beside it.
    void add_arc(std::uint32_t piece, Point from, Point to, std::uint32_t focus) {
        const std::uint32_t line = noded_.pieces[piece].line;
        const StripAxes axes = local_axes(line);
        const LevelArc arc = arc_in(axes, from, to, focus == none ? nullptr : &noded_.nodes[focus].place);
        const bool right = arc.low.x + arc.high.x > 0;
        const StripPiece whole = right ? StripPiece{arc.low.y, arc.high.y, Border{}, arc.border()}
                                       : StripPiece{arc.low.y, arc.high.y, arc.border(), Border{}};
        Box box = box_of(from, to);
        box.add(axes.to_plan({0, arc.low.y}));
        box.add(axes.to_plan({0, arc.high.y}));
        area_.clip(whole, axes, box, parts_);
        if (parts_.empty()) {
            return;
        }
        const std::uint32_t number = carriers_.carriers[line].number;
        const double length = distance(carriers_.carriers[line].from, carriers_.carriers[line].to);
        model_.axes = axes_index(line);
        model_.carrier_side = right ? Cell::CarrierSide::low : Cell::CarrierSide::high;
        for (const RingArea::Part& part : parts_) {
            push(part.piece, {number, std::clamp(part.piece.from, 0.0, length),
                              std::clamp(part.piece.to, 0.0, length), 1});
            if ((right ? part.out_below : part.out_above) > snap_) {
                result_.way_leaves.add(area_of(part.piece), middle_of(part.piece, axes), number);
            }
        }
    }

    // ---- what is nearest to a node -----------------------------------------------------------------------

    void add_fan(std::uint32_t node, Point from, Point to, std::uint32_t directrix) {
        if (owners_.column(node) != none) {
            add_fan_of({owners_.column(node), 0, 0, 1}, none, node, from, to, directrix);
            return;
        }
        if (owners_.pieces(node).empty()) {
            return; // a point that only closes the diagram
        }
        const Point focus = noded_.nodes[node].place;
        if (from == focus || to == focus) {
            return; // an arc that ends at the node itself leaves no fan
        }
        const Point toward_from = (1 / distance(focus, from)) * (from - focus);
        const Point toward_to = (1 / distance(focus, to)) * (to - focus);
        const Point turn = toward_to - toward_from;
        const Point middle =
            dot(toward_from, toward_to) > 0 ? toward_from + toward_to : Point{turn.y, -turn.x};
        const NodeOwners::Beside beside = owners_.beside(node, middle);
        const std::uint32_t c = beside.clockwise;
        if ((*is_done_)[2 * c + (noded_.pieces[c].node_a == node ? 0 : 1)]) {
            return;
        }
        const auto give = [&](std::uint32_t piece, Point a, Point b) {
            const NodedLines::Piece& owner = noded_.pieces[piece];
            const double station = owner.node_a == node ? owner.from : owner.to;
            add_fan_of({carriers_.carriers[owner.line].number, station, station, 1}, owner.line, node, a, b,
                       directrix);
        };
        if (noded_.pieces[beside.clockwise].line == noded_.pieces[beside.counter].line) {
            give(beside.clockwise, from, to);
        } else if (cross(toward_from, beside.border) <= 0) {
            give(beside.counter, from, to);
        } else if (cross(beside.border, toward_to) <= 0) {
            give(beside.clockwise, from, to);
        } else {
            const Point at = meet(focus, beside.border, from, to, directrix);
            give(beside.clockwise, from, at);
            give(beside.counter, at, to);
        }
    }

    /// Where a ray from a node meets the arc around it.
    [[nodiscard]] Point meet(Point focus, Point ray, Point from, Point to, std::uint32_t directrix) const {
        if (directrix == none) {
            const Point d = to - from;
            return between(from, to, std::clamp(cross(from - focus, ray) / cross(ray, d), 0.0, 1.0));
        }
        // As far from the directrix as from the node.
        const AxisLine& line = carriers_.lines[noded_.pieces[directrix].line];
        const double off = line.right_of(focus);
        const double side = off > 0 ? 1 : -1;
        const double away = side * off / (1 - side * dot(ray, line.right()));
        return focus + away * ray;
    }

    void add_fan_of(const Transfer& transfer, std::uint32_t owner, std::uint32_t node, Point from, Point to,
                    std::uint32_t directrix) {
        const Point focus = noded_.nodes[node].place;
        const std::uint32_t line = directrix != none ? noded_.pieces[directrix].line : owner;
        const StripAxes axes = line != none ? local_axes(line) : StripAxes{};
        const LevelArc arc = arc_in(axes, from, to, directrix != none ? &focus : nullptr);
        Box box = box_of(from, to);
        box.add(focus);
        if (directrix != none) { // the arc bulges towards it
            box.add(axes.to_plan({0, arc.low.y}));
            box.add(axes.to_plan({0, arc.high.y}));
        }
        const FanPieces fan(axes.to_strip(focus), arc);
        for (std::size_t i = 0; i < fan.count; ++i) {
            area_.clip(fan.pieces[i], axes, box, parts_);
            if (parts_.empty()) {
                continue;
            }
            const bool whole = parts_.size() == 1 && area_.place_of(box) == RingArea::Place::inside;
            model_.axes = axes_index(line);
            model_.carrier_side = Cell::CarrierSide::neither;
            for (const RingArea::Part& part : parts_) {
                push(part.piece, transfer);
                if (!whole) {
                    check_way(part.piece, axes, focus, transfer.carrier);
                }
            }
        }
    }

    /// Judged at the middle of a piece, since ways to a point fan out.
    void check_way(const StripPiece& piece, const StripAxes& axes, Point focus, std::uint32_t carrier) {
        const Point middle = axes.to_plan(middle_in(piece));
        if (area_.length_outside(middle, focus) > snap_) {
            result_.way_leaves.add(area_of(piece), middle + carriers_.origin, carrier);
        }
    }

    static Point middle_in(const StripPiece& piece) {
        return {(piece.low.at(0.5) + piece.high.at(0.5)) / 2, (piece.from + piece.to) / 2};
    }
    [[nodiscard]] Point middle_of(const StripPiece& piece, const StripAxes& axes) const {
        return axes.to_plan(middle_in(piece)) + carriers_.origin;
    }

    void push(const StripPiece& piece, const Transfer& transfer) {
        model_.from = piece.from;
        model_.to = piece.to;
        model_.low = piece.low;
        model_.high = piece.high;
        result_.cells.push_back(model_);
        result_.transfers.push_back(transfer);
    }

    const NearestCarriers& carriers_;
    const NodedLines& noded_;
    NodeOwners owners_;
    double snap_;
    RingArea& area_;
    NearestCells result_;
    Cell model_; ///< what cells of one piece have in common
    std::vector<std::uint32_t> axes_of_line_;
    std::uint32_t plain_axes_ = none;
    std::vector<RingArea::Part> parts_;
    const std::vector<bool>* is_done_ = nullptr; ///< by half-edge
};

/// The pieces of lines with a side that no face has dealt with, and their nodes, as lines to be seen alone.
struct Rest {
    NodedLines noded;
    std::vector<std::uint32_t> pieces; ///< in the whole

    Rest(const NodedLines& whole, const std::vector<bool>& is_done) {
        noded.nodes = whole.nodes;
        noded.node_of_point = whole.node_of_point;
        for (std::uint32_t p = 0; p < whole.pieces.size(); ++p) {
            if (!is_done[2 * p] || !is_done[2 * p + 1]) {
                noded.pieces.push_back(whole.pieces[p]);
                pieces.push_back(p);
            }
        }
    }
};

} // namespace

NearestCells nearest_cells(const NearestCarriers& carriers, const Grid& grid, const NearestSplit& split,
                           RingArea& area) {
    const NodedLines noded = node_on_grid(carriers.lines, split.points, grid);
    ConvexFaces convex;
    convex.is_done.assign(2 * noded.pieces.size(), false);
    CellMaker maker(carriers, noded, split.deck, split.snap, area);
    if (split.by_faces) {
        const Faces faces = faces_of(noded);
        convex = convex_faces(carriers, noded, faces, split.noise);
        for (const std::uint32_t face : convex.faces) {
            maker.add_face(faces.half_edges[face], split.noise);
        }
        // Of the area: what the sums of many bays lose by rounding. Below it no part of the deck lies outside
        // the bays, and no diagram is needed.
        constexpr double nothing_left = 1e-13;
        if (std::abs(maker.area() - split.whole) <= nothing_left * split.whole) {
            return maker.take();
        }
    }
    const Rest rest(noded, convex.is_done);
    const std::span<const std::uint32_t> open(noded.node_of_point.data() + carriers.points.size(),
                                              noded.node_of_point.size() - carriers.points.size());
    const VoronoiDiagram diagram = segment_voronoi(carriers.lines, rest.noded, grid, open, split.noise);
    maker.add_diagram(diagram, rest.pieces, convex.is_done);
    NearestCells cells = maker.take();
    cells.sound = noded.settled && diagram.trusted;
    return cells;
}

RUNNEL_NAMESPACE_END
