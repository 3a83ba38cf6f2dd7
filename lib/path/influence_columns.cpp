#include "path/influence_columns.hpp"

#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"
#include "geometry/ring_area.hpp"
#include "geometry/strip_piece.hpp"
#include "path/influence_sites.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Corners {
    std::vector<std::uint32_t> sites;
    bool far = false; ///< one of the far points is among them
};

class ColumnPanels {
public:
    ColumnPanels(const FramedDeck& deck, std::vector<Site> sites, Point origin, Tolerance tolerance)
        : sites_(std::move(sites)), origin_(origin), tolerance_(tolerance),
          floor_({local(deck.outline, origin)}, tolerance.noise, sites_.size()),
          box_(box_of(local(deck.outline, origin))), diagram_({}, places_of(sites_), box_, tolerance.snap) {
        site_of_.assign(diagram_.noded.nodes.size(), none);
        for (std::uint32_t s = 0; s < sites_.size(); ++s) {
            site_of_[diagram_.noded.node_of_point[s]] = s;
        }
        find_panels();
        find_rim();
    }

    void divide_cell(const Sharing& sharing, std::uint32_t c) {
        const Cell& cell = sharing.cells[c];
        const StripAxes& axes = sharing.axes[cell.axes];
        rest_.assign(1, {cell.from, cell.to, cell.low, cell.high});
        finder_.find(plan_box(rest_[0], axes), near_);
        const std::uint32_t owner = sharing.transfers[c].front().carrier;
        for (const std::uint32_t panel : near_) {
            take(panels_[panel], owner, axes);
        }
        deal_rest(owner, axes);
    }

    std::vector<FeltArea> finish() const {
        std::vector<FeltArea> areas;
        for (const auto& [carriers, area] : felt_) {
            areas.push_back({area.value(), carriers});
        }
        return areas;
    }

private:
    struct Panel {
        Convex polygon;
        std::vector<std::uint32_t> carriers;
    };

    static std::vector<Point> places_of(const std::vector<Site>& sites) {
        std::vector<Point> places;
        for (const Site& site : sites) {
            places.push_back(site.at);
        }
        return places;
    }

    static Ring local(const Ring& ring, Point origin) {
        Ring moved;
        for (const Point& p : ring) {
            moved.push_back(p - origin);
        }
        return moved;
    }

    [[nodiscard]] bool is_on_floor(Point p) {
        return floor_.contains(p) || floor_.is_beside_edge(p, tolerance_.snap);
    }

    void find_panels() {
        const VoronoiDiagram& diagram = diagram_.voronoi;
        std::vector<Corners> corners = corners_by_vertex();
        is_panel_.assign(corners.size(), false);
        for (std::size_t v = 0; v < corners.size(); ++v) {
            // What meets off the floor meets over no slab: three columns almost in line along its rim, or
            // around a corner that is not there.
            is_panel_[v] = !corners[v].far && !corners[v].sites.empty() && is_on_floor(diagram.vertices[v]);
        }
        join_triangles(corners);
        std::vector<Box> boxes;
        for (std::size_t v = 0; v < corners.size(); ++v) {
            if (is_panel_[v] && !corners[v].sites.empty()) {
                panels_.push_back(panel_of(corners[v].sites));
                boxes.push_back(box_of(panels_.back().polygon));
            }
        }
        finder_ = BoxFinder(std::move(boxes));
    }

    [[nodiscard]] std::vector<Corners> corners_by_vertex() const {
        std::vector<Corners> corners(diagram_.voronoi.vertices.size());
        for (const VoronoiDiagram::Arc& arc : diagram_.voronoi.arcs) {
            for (const std::uint32_t vertex : {arc.from, arc.to}) {
                for (const std::uint32_t node : {arc.left, arc.right}) {
                    corners[vertex].far = corners[vertex].far || site_of_[node] == none;
                    corners[vertex].sites.push_back(site_of_[node]);
                }
            }
        }
        for (Corners& at_vertex : corners) {
            make_set(at_vertex.sites);
        }
        return corners;
    }

    /// Two triangles that share the longest side of both are one bay, whose diagonal that side is: which of
    /// the two diagonals of a bay that is not quite a rectangle parts it says nothing of who feels a load.
    /// The bay stands in the place of the first, nothing in that of the other.
    void join_triangles(std::vector<Corners>& corners) const {
        for (const VoronoiDiagram::Arc& arc : diagram_.voronoi.arcs) {
            if (arc.from == arc.to || !is_panel_[arc.from] || !is_panel_[arc.to]) {
                continue;
            }
            std::vector<std::uint32_t>& first = corners[arc.from].sites;
            std::vector<std::uint32_t>& other = corners[arc.to].sites;
            const std::uint32_t a = site_of_[arc.left];
            const std::uint32_t b = site_of_[arc.right];
            if (is_longest_side(a, b, first) && is_longest_side(a, b, other)) {
                first.insert(first.end(), other.begin(), other.end());
                make_set(first);
                other.clear();
            }
        }
    }

    [[nodiscard]] bool is_longest_side(std::uint32_t a, std::uint32_t b,
                                       const std::vector<std::uint32_t>& triangle) const {
        constexpr std::size_t three = 3;
        const double side = distance(sites_[a].at, sites_[b].at) - tolerance_.snap;
        return triangle.size() == three &&
               std::all_of(triangle.begin(), triangle.end(), [&](std::uint32_t c) {
                   return c == a || c == b ||
                          (distance(sites_[a].at, sites_[c].at) < side &&
                           distance(sites_[b].at, sites_[c].at) < side);
               });
    }

    [[nodiscard]] Panel panel_of(std::vector<std::uint32_t> corners) const {
        Point middle;
        for (const std::uint32_t s : corners) {
            middle = middle + (1.0 / static_cast<double>(corners.size())) * sites_[s].at;
        }
        std::sort(corners.begin(), corners.end(), [&](std::uint32_t a, std::uint32_t b) {
            const Point u = sites_[a].at - middle;
            const Point v = sites_[b].at - middle;
            return std::atan2(u.y, u.x) < std::atan2(v.y, v.x);
        });
        Panel panel;
        for (const std::uint32_t s : corners) {
            panel.polygon.push_back(sites_[s].at);
            panel.carriers.push_back(sites_[s].carrier);
        }
        make_set(panel.carriers);
        return panel;
    }

    static void make_set(std::vector<std::uint32_t>& carriers) {
        std::sort(carriers.begin(), carriers.end());
        carriers.erase(std::unique(carriers.begin(), carriers.end()), carriers.end());
    }

    /// Pairs of neighbours that do not have panels on both sides and nobody between them.
    void find_rim() {
        const VoronoiDiagram& diagram = diagram_.voronoi;
        std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
        for (const VoronoiDiagram::Arc& arc : diagram.arcs) {
            const std::uint32_t a = site_of_[arc.left];
            const std::uint32_t b = site_of_[arc.right];
            if (a == none || b == none || (is_panel_[arc.from] && is_panel_[arc.to])) {
                continue;
            }
            const Point middle = between(sites_[a].at, sites_[b].at, 0.5);
            const Point d = sites_[b].at - sites_[a].at;
            const double from = cross(d, diagram.vertices[arc.from] - middle) / norm(d);
            const double to = cross(d, diagram.vertices[arc.to] - middle) / norm(d);
            if (std::min(from, to) < -tolerance_.snap && std::max(from, to) > tolerance_.snap &&
                is_on_floor(middle)) {
                pairs.emplace_back(a, b);
                pairs.emplace_back(b, a);
            }
        }
        rim_ = Grouped<std::uint32_t>::from_pairs(sites_.size(), std::move(pairs));
        for (std::uint32_t s = 0; s < sites_.size(); ++s) {
            column_site_.emplace(sites_[s].carrier, s);
        }
    }

    static Box plan_box_of(const Box& box, const StripAxes& axes, Point origin) {
        Box result = box_of(axes.to_plan(box.low) - origin, axes.to_plan(box.high) - origin);
        result.add(axes.to_plan({box.low.x, box.high.y}) - origin);
        result.add(axes.to_plan({box.high.x, box.low.y}) - origin);
        return result;
    }
    [[nodiscard]] Box plan_box(const StripPiece& piece, const StripAxes& axes) const {
        return plan_box_of(box_of(piece), axes, origin_);
    }

    [[nodiscard]] Convex in_strip(const Convex& polygon, const StripAxes& axes) const {
        Convex turned;
        for (const Point& p : polygon) {
            turned.push_back(axes.to_strip(p + origin_));
        }
        return turned;
    }

    /// In a flat triangle a column that is none of its corners may be the nearest: it feels the load too.
    void take(const Panel& panel, std::uint32_t owner, const StripAxes& axes) {
        const Convex window = in_strip(panel.polygon, axes);
        inside_.clear();
        outside_.clear();
        for (const StripPiece& piece : rest_) {
            divide(piece, window, tolerance_.noise, &inside_, &outside_);
        }
        rest_.swap(outside_);
        std::vector<std::uint32_t> carriers = panel.carriers;
        carriers.push_back(owner);
        make_set(carriers);
        give(inside_, carriers);
    }

    void give(const std::vector<StripPiece>& pieces, const std::vector<std::uint32_t>& carriers) {
        if (!pieces.empty()) {
            Sum& sum = felt_[carriers];
            for (const StripPiece& piece : pieces) {
                sum.add(area_of(piece));
            }
        }
    }

    /// What lies in no panel: parted by the neighbours along the rim to whose side it lies.
    void deal_rest(std::uint32_t owner, const StripAxes& axes) {
        struct Part {
            std::vector<StripPiece> pieces;
            std::vector<std::uint32_t> carriers;
        };
        std::vector<Part> parts{{rest_, {owner}}};
        const auto site = column_site_.find(owner);
        const bool is_column = site != column_site_.end() && column_site_.count(owner) == 1;
        const std::span<const std::uint32_t> rim = is_column && !rest_.empty()
                                                       ? std::as_const(rim_)[site->second]
                                                       : std::span<const std::uint32_t>{};
        for (const std::uint32_t neighbour : rim) {
            const Convex window = in_strip(half_plane(site->second, neighbour), axes);
            std::vector<Part> divided;
            for (const Part& part : parts) {
                Part beside{{}, part.carriers};
                Part away{{}, part.carriers};
                beside.carriers.push_back(sites_[neighbour].carrier);
                make_set(beside.carriers);
                for (const StripPiece& piece : part.pieces) {
                    divide(piece, window, tolerance_.noise, &beside.pieces, &away.pieces);
                }
                for (Part* one : {&beside, &away}) {
                    if (!one->pieces.empty()) {
                        divided.push_back(std::move(*one));
                    }
                }
            }
            parts = std::move(divided);
        }
        for (const Part& part : parts) {
            give(part.pieces, part.carriers);
        }
    }

    /// The side of a site on which another lies, as far as the deck reaches.
    [[nodiscard]] Convex half_plane(std::uint32_t site, std::uint32_t other) const {
        const Point at = sites_[site].at;
        const Point d = sites_[other].at - at;
        const double far = 4 * distance(box_.low, box_.high) / norm(d);
        const Point ahead = far * d;
        const Point aside{-ahead.y, ahead.x};
        return {at - aside, at - aside + ahead, at + aside + ahead, at + aside};
    }

    std::vector<Site> sites_;
    Point origin_;
    Tolerance tolerance_;
    RingArea floor_;
    Box box_;
    ClosedDiagram diagram_;
    std::vector<std::uint32_t> site_of_; ///< by node; none: a far point
    std::vector<bool> is_panel_;         ///< by vertex
    std::vector<Panel> panels_;
    BoxFinder finder_;                                        ///< of the panels
    Grouped<std::uint32_t> rim_;                              ///< by site
    std::multimap<std::uint32_t, std::uint32_t> column_site_; ///< by carrier
    std::map<std::vector<std::uint32_t>, Sum> felt_;
    std::vector<StripPiece> rest_, inside_, outside_;
    std::vector<std::uint32_t> near_;
};

} // namespace

std::vector<FeltArea> felt_areas(const Plan& plan, const FramedDeck& deck, const Sharing& sharing,
                                 std::span<const std::uint32_t> cells, Tolerance tolerance) {
    const Point origin = deck.outline.front();
    Ring outline = deck.outline;
    for (Point& p : outline) {
        p = p - origin;
    }
    std::vector<Site> sites = find_sites(plan, sharing, cells, origin, box_of(outline), tolerance);
    ColumnPanels panels(deck, std::move(sites), origin, tolerance);
    for (const std::uint32_t c : cells) {
        panels.divide_cell(sharing, c);
    }
    return panels.finish();
}

RUNNEL_NAMESPACE_END
