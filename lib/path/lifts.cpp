#include "deck/pressure.hpp"
#include "geometry/basic.hpp"
#include "geometry/line_pieces.hpp"
#include "path/area_path.hpp"
#include "path/influence.hpp"
#include "path/level_path.hpp"
#include "path/places.hpp"

#include <algorithm>
#include <tuple>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Height of a lift: down to the next level where `passes` says that the column or wall bears, or to its
/// foot.
template <class Passes>
double height_below(const Takedown& takedown, std::uint32_t level, std::uint32_t base, const Passes& passes) {
    const Framing& framing = takedown.framing;
    const double head = framing.levels[level].elevation;
    double foot = base == none ? takedown.plan.settings.ground_elevation : framing.levels[base].elevation;
    const auto here = std::find(framing.top_down.begin(), framing.top_down.end(), level);
    for (auto below = here + 1; below < framing.top_down.end(); ++below) {
        if (*below == base) {
            break;
        }
        if (passes(framing.levels[*below])) {
            foot = framing.levels[*below].elevation;
            break;
        }
    }
    return head - foot;
}

double weight_per_height(const Plan& plan, const Column& column) {
    if (column.self_weight) {
        return *column.self_weight;
    }
    const auto section = std::find_if(plan.sections.begin(), plan.sections.end(),
                                      [&](const Section& s) { return s.id == column.section; });
    return column.section.empty() || section == plan.sections.end()
               ? 0
               : section->weight_per_length().value_or(0);
}

/// Area and floors of a lift: what arrives at this level, what transfers bring from above, and the lift
/// above.
template <class AnyLift>
void add_areas(AnyLift& lift, const AreaBrought& arrived, const AnyLift* above) {
    lift.tributary_area = arrived.own;
    lift.area_total = arrived.own + arrived.above + (above != nullptr ? above->area_total : 0);
    lift.floors =
        std::max(arrived.floors, above != nullptr ? above->floors : 0) + (arrived.own > 0 ? 1U : 0U);
}

void add_up_lift(Lift& lift, std::size_t cases, std::uint32_t weight_case) {
    std::vector<Sum> added(cases);
    std::vector<Sum> total(cases);
    for (const LiftLoad& load : lift.from) {
        total[load.load_case].add(load.p);
        if (load.source.kind != SourceKind::column && load.source.kind != SourceKind::wall) {
            added[load.load_case].add(load.p);
        }
    }
    if (weight_case != none) {
        total[weight_case].add(lift.self_weight);
    }
    for (std::size_t c = 0; c < cases; ++c) {
        lift.added.push_back(added[c].value());
        lift.total.push_back(total[c].value());
    }
}

void add_column_lift(Takedown& takedown, std::uint32_t level_index, std::uint32_t column,
                     const AreaBrought& arrived) {
    const LevelTakedown& level = takedown.levels[level_index];
    const Plan& plan = takedown.plan;
    std::vector<Lift>& lifts = takedown.columns[column].lifts;
    const std::uint32_t carrier = level.sharing.number_of({CarrierKind::column, column});
    Lift lift;
    lift.level = level_index;
    lift.height = height_below(
        takedown, level_index, takedown.framing.column_base[column], [column](const FramedLevel& below) {
            return std::binary_search(below.columns.begin(), below.columns.end(), column);
        });
    for (const CarrierPoint& point : level.points[carrier]) {
        lift.from.push_back({point.source, point.load_case, point.p});
    }
    for (const CarrierLine& line : level.lines[carrier]) {
        lift.from.push_back({line.source, line.load_case, line.piece.total()});
    }
    if (!lifts.empty()) {
        for (std::uint32_t c = 0; c < lifts.back().total.size(); ++c) {
            if (lifts.back().total[c] != 0) {
                lift.from.push_back({{SourceKind::column, column}, c, lifts.back().total[c]});
            }
        }
    }
    if (takedown.self_weight_case != none) {
        lift.self_weight = weight_per_height(plan, plan.columns[column]) * lift.height;
    }
    lift.influence_area = level.influence_area[carrier];
    add_areas(lift, arrived, lifts.empty() ? nullptr : &lifts.back());
    add_up_lift(lift, plan.cases.size(), takedown.self_weight_case);
    lifts.push_back(std::move(lift));
}

/// Lines of all sources, summed by case.
std::vector<CarrierLine> merged_by_case(std::vector<std::vector<LinePiece>> pieces, Source source,
                                        double noise) {
    std::vector<CarrierLine> lines;
    for (std::uint32_t c = 0; c < pieces.size(); ++c) {
        for (const LinePiece& piece : merged(std::move(pieces[c]), noise)) {
            lines.push_back({c, source, piece});
        }
    }
    return lines;
}

/// Points sorted by case, source and station; those that came down the same wall at one station are one.
void sort_and_join(std::vector<CarrierPoint>& points, Source self, double noise) {
    std::stable_sort(points.begin(), points.end(), [](const CarrierPoint& a, const CarrierPoint& b) {
        return std::tuple(a.load_case, a.source.kind, a.source.index, a.station) <
               std::tuple(b.load_case, b.source.kind, b.source.index, b.station);
    });
    std::size_t kept = 0;
    for (const CarrierPoint& point : points) {
        CarrierPoint* const last = kept > 0 ? &points[kept - 1] : nullptr;
        if (last != nullptr && point.source == self && last->source == self &&
            last->load_case == point.load_case && point.station - last->station <= noise) {
            last->p += point.p;
        } else {
            points[kept++] = point;
        }
    }
    points.resize(kept);
}

void add_up_wall_lift(WallLift& lift, std::size_t cases) {
    std::vector<Sum> total(cases);
    for (const CarrierLine& line : lift.line) {
        total[line.load_case].add(line.piece.total());
    }
    for (const CarrierPoint& point : lift.point) {
        total[point.load_case].add(point.p);
    }
    for (const Sum& sum : total) {
        lift.total.push_back(sum.value());
    }
}

/// Lines and points at the foot of a wall's lift: what the level puts on it, what the lift above brings, and
/// own weight as a line.
void load_wall_lift(const Takedown& takedown, std::uint32_t wall, const WallLift* above, WallLift& lift) {
    const LevelTakedown& level = takedown.levels[lift.level];
    const std::uint32_t carrier = level.sharing.number_of({CarrierKind::wall, wall});
    const Source self{SourceKind::wall, wall};
    const double noise = noise_of(takedown.framing.largest_coordinate);
    std::vector<std::vector<LinePiece>> pieces(takedown.plan.cases.size());
    const auto take_lines = [&pieces](std::span<const CarrierLine> lines) {
        for (const CarrierLine& line : lines) {
            pieces[line.load_case].push_back(line.piece);
        }
    };
    const std::span<const CarrierPoint> own = level.points[carrier];
    take_lines(level.lines[carrier]);
    lift.point.assign(own.begin(), own.end());
    if (above != nullptr) {
        take_lines(above->line);
        for (const CarrierPoint& point : above->point) {
            lift.point.push_back({point.load_case, self, point.station, point.p});
        }
    }
    sort_and_join(lift.point, self, noise);
    const double weight = takedown.plan.walls[wall].self_weight.value_or(0) * lift.height;
    if (takedown.self_weight_case != none && weight != 0) {
        const double length = length_of(takedown.plan.walls[wall]);
        lift.self_weight = weight * length;
        pieces[takedown.self_weight_case].push_back({0, length, {weight, 0, 0, 0, 0}});
    }
    lift.line = merged_by_case(std::move(pieces), self, noise);
}

void add_wall_lift(Takedown& takedown, std::uint32_t level_index, std::uint32_t wall,
                   const AreaBrought& arrived) {
    std::vector<WallLift>& lifts = takedown.walls[wall].lifts;
    const WallLift* const above = lifts.empty() ? nullptr : &lifts.back();
    WallLift lift;
    lift.level = level_index;
    lift.height = height_below(takedown, level_index, takedown.framing.wall_base[wall],
                               [wall](const FramedLevel& below) {
                                   return std::binary_search(below.walls.begin(), below.walls.end(), wall);
                               });
    load_wall_lift(takedown, wall, above, lift);
    const LevelTakedown& level = takedown.levels[level_index];
    lift.influence_area = level.influence_area[level.sharing.number_of({CarrierKind::wall, wall})];
    add_areas(lift, arrived, above);
    add_up_wall_lift(lift, takedown.plan.cases.size());
    lifts.push_back(std::move(lift));
}

} // namespace

void pass_areas_and_lifts(Takedown& takedown, std::uint32_t level_index, const LevelPath& path,
                          const CarrierAreas& areas) {
    const std::vector<AreaBrought> arrived = pass_areas(takedown, level_index, path, areas);
    const FramedLevel& framed = takedown.framing.levels[level_index];
    LevelTakedown& level = takedown.levels[level_index];
    const Sharing& sharing = level.sharing;
    const Tolerance tolerance{noise_of(takedown.framing.largest_coordinate), takedown.plan.settings.snap};
    const FloorPieces pieces = floor_pieces(takedown.plan, framed, sharing, tolerance);
    level.influence_area = influence_areas(framed, sharing, path, pieces, tolerance);
    for (const std::uint32_t column : framed.columns) {
        add_column_lift(takedown, level_index, column,
                        arrived[sharing.number_of({CarrierKind::column, column})]);
    }
    for (const std::uint32_t wall : framed.walls) {
        add_wall_lift(takedown, level_index, wall, arrived[sharing.number_of({CarrierKind::wall, wall})]);
    }
}

RUNNEL_NAMESPACE_END
