#include "path/influence_sites.hpp"

#include <algorithm>
#include <array>
#include <map>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A stretch of a wall that cells go to.
struct WallStretch {
    std::uint32_t carrier = none;
    double from = 0, to = 0; ///< stations
};

struct Supports {
    std::vector<Site> columns;
    std::vector<WallStretch> walls;
};

Supports supports_of(const Plan& plan, const Sharing& sharing, std::span<const std::uint32_t> cells,
                     Point origin) {
    std::map<std::uint32_t, WallStretch> stretches; // of columns without length
    for (const std::uint32_t c : cells) {
        for (const Transfer& transfer : sharing.transfers[c]) {
            const double low = std::min(transfer.station_from, transfer.station_to);
            const double high = std::max(transfer.station_from, transfer.station_to);
            const auto [it, is_new] =
                stretches.emplace(transfer.carrier, WallStretch{transfer.carrier, low, high});
            if (!is_new) {
                it->second.from = std::min(it->second.from, low);
                it->second.to = std::max(it->second.to, high);
            }
        }
    }
    Supports supports;
    for (const auto& [number, stretch] : stretches) {
        const Carrier carrier = sharing.carrier(number);
        if (carrier.kind == CarrierKind::column) {
            supports.columns.push_back({plan.columns[carrier.index].at - origin, number});
        } else if (carrier.kind == CarrierKind::wall) {
            supports.walls.push_back(stretch);
        }
    }
    return supports;
}

/// Four points far out close the cells of all others.
std::array<Point, 4> far_points(const Box& box) {
    const Point middle = between(box.low, box.high, 0.5);
    constexpr double many = 6;
    const double away = many * distance(box.low, box.high);
    return {{middle + Point{away, 0}, middle + Point{0, away}, middle + Point{-away, 0},
             middle + Point{0, -away}}};
}

} // namespace

ClosedDiagram::ClosedDiagram(std::span<const AxisLine> lines, std::vector<Point> points, const Box& box,
                             double noise) {
    const std::array<Point, 4> guards = far_points(box);
    points.insert(points.end(), guards.begin(), guards.end());
    const Box window = box_of(points).grown(noise);
    bool first = true;
    // Where rounding to the grid has upset the topology, a grid that is turned will hardly do the same.
    for (const double radians : {0.0, 0.3, 1.0, 2.2}) {
        const Grid grid(window, radians);
        NodedLines cut = node_on_grid(lines, points, grid);
        const std::span<const std::uint32_t> open(
            cut.node_of_point.data() + cut.node_of_point.size() - guards.size(), guards.size());
        VoronoiDiagram drawn = segment_voronoi(lines, cut, grid, open, noise);
        const bool sound = cut.settled && drawn.trusted;
        if (sound || first) {
            noded = std::move(cut);
            voronoi = std::move(drawn);
        }
        if (sound) {
            break;
        }
        first = false;
    }
}

namespace {

AxisLine line_of(const Wall& wall, const WallStretch& stretch, Point origin) {
    AxisLine line;
    line.origin = wall.from - origin;
    const double length = distance(wall.from, wall.to);
    line.direction = (1 / length) * (wall.to - wall.from);
    line.from = stretch.from;
    line.to = stretch.to;
    line.a = line.origin + line.from * line.direction;
    line.b = line.origin + line.to * line.direction;
    return line;
}

/// Places on walls: their ends, and where they face a column that no other support lies nearer to.
void add_places_on_walls(const Plan& plan, const Sharing& sharing, const Supports& supports, Point origin,
                         const Box& box, Tolerance tolerance, std::vector<Site>& sites) {
    std::vector<AxisLine> lines;
    std::vector<Point> points;
    for (const WallStretch& stretch : supports.walls) {
        lines.push_back(line_of(plan.walls[sharing.carrier(stretch.carrier).index], stretch, origin));
        sites.push_back({lines.back().a, stretch.carrier});
        if (stretch.to - stretch.from > tolerance.snap) {
            sites.push_back({lines.back().b, stretch.carrier});
        }
    }
    for (const Site& column : supports.columns) {
        points.push_back(column.at);
    }
    const ClosedDiagram diagram(lines, points, box, tolerance.noise);
    const auto pieces = static_cast<std::uint32_t>(diagram.noded.pieces.size());
    std::vector<std::uint32_t> column_of(diagram.noded.nodes.size(), none);
    for (std::uint32_t c = 0; c < points.size(); ++c) {
        column_of[diagram.noded.node_of_point[c]] = c;
    }
    for (const VoronoiDiagram::Arc& arc : diagram.voronoi.arcs) {
        const std::uint32_t piece = std::min(arc.left, arc.right);
        const std::uint32_t other = std::max(arc.left, arc.right);
        if (piece >= pieces || other < pieces || column_of[other - pieces] == none) {
            continue;
        }
        const std::uint32_t line = diagram.noded.pieces[piece].line;
        const double station = lines[line].station_of(points[column_of[other - pieces]]);
        if (station > lines[line].from + tolerance.snap && station < lines[line].to - tolerance.snap) {
            sites.push_back({lines[line].at(station), supports.walls[line].carrier});
        }
    }
}

} // namespace

std::vector<Site> find_sites(const Plan& plan, const Sharing& sharing, std::span<const std::uint32_t> cells,
                             Point origin, const Box& box, Tolerance tolerance) {
    const Supports supports = supports_of(plan, sharing, cells, origin);
    std::vector<Site> sites = supports.columns;
    if (!supports.walls.empty()) {
        add_places_on_walls(plan, sharing, supports, origin, box, tolerance, sites);
    }
    return sites;
}

RUNNEL_NAMESPACE_END
