#include "geometry/basic.hpp"
#include "geometry/line_pieces.hpp"
#include "path/level_path.hpp"
#include "path/places.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <tuple>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Stations of a wall to stations on what a stretch of it stands on; force is kept exactly.
struct StationMap {
    double upper_from = 0, lower_from = 0;
    double rate = 1; ///< of lower stations to upper ones; 0 where the stretch is but a point

    explicit StationMap(const Foot& foot) : upper_from(foot.upper_from), lower_from(foot.lower_from) {
        const double upper = foot.upper_to - foot.upper_from;
        const double lower = foot.lower_to - foot.lower_from;
        const double noise = noise_of(std::max(std::abs(foot.upper_to), std::abs(foot.lower_to)));
        rate = upper > noise && std::abs(lower) > noise ? lower / upper : 0;
        // Parallel lines differ from rate one by rounding only; exactly one keeps intensities as they are.
        if (rate != 0 && std::abs(std::abs(lower) - upper) <= noise) {
            rate = lower < 0 ? -1 : 1;
        }
    }
    [[nodiscard]] double at(double station) const { return lower_from + rate * (station - upper_from); }

    [[nodiscard]] LinePiece of(const LinePiece& piece) const {
        LinePiece moved = piece;
        if (rate < 0) {
            moved = piece.between(piece.to, piece.to);
            for (std::size_t k = 1; k < moved.c.size(); k += 2) {
                moved.c[k] = -moved.c[k];
            }
        }
        moved.from = at(rate < 0 ? piece.to : piece.from);
        moved.to = at(rate < 0 ? piece.from : piece.to);
        double scale = 1 / std::abs(rate);
        for (double& c : moved.c) {
            c *= scale;
            scale /= std::abs(rate);
        }
        return moved;
    }
};

/// Feet of one wall at a level by rising station, and the borders where one stretch ends and the next begins.
/// The first and the last take what lies before and beyond them by rounding, so that nothing is lost.
struct WallFeet {
    std::vector<const Foot*> feet;
    std::vector<double> ends; ///< of each stretch on the wall

    [[nodiscard]] std::size_t holding(double station) const {
        std::size_t i = 0;
        while (i + 1 < feet.size() && station > ends[i]) {
            ++i;
        }
        return i;
    }
};

std::vector<WallFeet> group_walls(const std::vector<Foot>& feet) {
    std::vector<const Foot*> walls;
    for (const Foot& foot : feet) {
        if (foot.upper.kind == CarrierKind::wall) {
            walls.push_back(&foot);
        }
    }
    std::stable_sort(walls.begin(), walls.end(), [](const Foot* a, const Foot* b) {
        return std::tuple(a->upper.index, a->upper_from) < std::tuple(b->upper.index, b->upper_from);
    });
    std::vector<WallFeet> groups;
    for (std::size_t i = 0; i < walls.size(); ++i) {
        if (i == 0 || walls[i]->upper != walls[i - 1]->upper) {
            groups.emplace_back();
        } else {
            groups.back().ends.back() = (walls[i - 1]->upper_to + walls[i]->upper_from) / 2;
        }
        groups.back().feet.push_back(walls[i]);
        groups.back().ends.push_back(std::numeric_limits<double>::infinity());
    }
    return groups;
}

struct FootLoads {
    std::vector<std::pair<std::uint32_t, CarrierLine>> lines;
    std::vector<std::pair<std::uint32_t, CarrierPoint>> points;
};

void stand_column(const Takedown& takedown, const Sharing& sharing, const Foot& foot, FootLoads& loads) {
    const std::vector<Lift>& lifts = takedown.columns[foot.upper.index].lifts;
    if (lifts.empty()) {
        return; // nothing bears on it anywhere
    }
    const Lift& lift = lifts.back();
    const std::uint32_t carrier = sharing.number_of(foot.lower);
    for (std::uint32_t c = 0; c < lift.total.size(); ++c) {
        if (lift.total[c] != 0) {
            loads.points.push_back(
                {carrier, {c, {SourceKind::column, foot.upper.index}, foot.lower_from, lift.total[c]}});
        }
    }
}

void stand_line(const CarrierLine& line, const WallFeet& wall, const Sharing& sharing, double noise,
                FootLoads& loads) {
    const Source source{SourceKind::wall, wall.feet.front()->upper.index};
    double from = line.piece.from;
    for (std::size_t i = wall.holding(from + noise); i < wall.feet.size() && from < line.piece.to; ++i) {
        // A border within rounding of the piece's end does not cut it.
        const double to = wall.ends[i] < line.piece.to - noise ? wall.ends[i] : line.piece.to;
        const LinePiece part =
            from == line.piece.from && to == line.piece.to ? line.piece : line.piece.between(from, to);
        const StationMap map(*wall.feet[i]);
        const std::uint32_t carrier = sharing.number_of(wall.feet[i]->lower);
        if (map.rate != 0 && wall.feet[i]->lower.kind != CarrierKind::column) {
            loads.lines.push_back({carrier, {line.load_case, source, map.of(part)}});
        } else {
            loads.points.push_back(
                {carrier, {line.load_case, source, wall.feet[i]->lower_from, part.total()}});
        }
        from = to;
    }
}

void stand_wall(const Takedown& takedown, const Sharing& sharing, const WallFeet& wall, double noise,
                FootLoads& loads) {
    const std::uint32_t index = wall.feet.front()->upper.index;
    if (takedown.walls[index].lifts.empty()) {
        return; // nothing bears on it anywhere
    }
    const WallLift& lift = takedown.walls[index].lifts.back();
    for (const CarrierLine& line : lift.line) {
        stand_line(line, wall, sharing, noise, loads);
    }
    for (const CarrierPoint& point : lift.point) {
        const Foot& foot = *wall.feet[wall.holding(point.station)];
        loads.points.push_back(
            {sharing.number_of(foot.lower),
             {point.load_case, {SourceKind::wall, index}, StationMap(foot).at(point.station), point.p}});
    }
}

template <class Load>
void sort_by_case_and_source(Grouped<Load>& loads) {
    for (std::size_t g = 0; g < loads.size(); ++g) {
        const std::span<Load> group = loads[g];
        std::stable_sort(group.begin(), group.end(), [](const Load& a, const Load& b) {
            return std::tuple(a.load_case, a.source.kind, a.source.index) <
                   std::tuple(b.load_case, b.source.kind, b.source.index);
        });
    }
}

} // namespace

void stand_feet(const Takedown& takedown, std::uint32_t level, LevelPath& path) {
    const Sharing& sharing = takedown.levels[level].sharing;
    const std::vector<Foot>& feet = takedown.framing.levels[level].feet;
    const double noise = noise_of(takedown.framing.largest_coordinate);
    FootLoads loads;
    for (const Foot& foot : feet) {
        if (foot.upper.kind == CarrierKind::column) {
            stand_column(takedown, sharing, foot, loads);
        }
    }
    for (const WallFeet& wall : group_walls(feet)) {
        stand_wall(takedown, sharing, wall, noise, loads);
    }
    path.foot_lines = Grouped<CarrierLine>::from_pairs(sharing.carrier_count(), std::move(loads.lines));
    path.foot_points = Grouped<CarrierPoint>::from_pairs(sharing.carrier_count(), std::move(loads.points));
    sort_by_case_and_source(path.foot_lines);
    sort_by_case_and_source(path.foot_points);
}

RUNNEL_NAMESPACE_END
