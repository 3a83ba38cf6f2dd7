#pragma once

#include "geometry/basic.hpp"
#include "path/path.hpp"

#include <doctest/doctest.h>

#include <string>
#include <utility>
#include <vector>

/// A building put together by hand, member by member and bearing by bearing: the load path without decks.
namespace path_building {

using namespace runnel;

inline constexpr std::uint32_t dead = 0, live = 1;

struct LevelParts {
    FramedLevel framed;
    std::vector<std::pair<std::uint32_t, Bearing>> bearings;
    std::vector<std::uint32_t> order;
    std::vector<std::pair<Carrier, CarrierLine>> lines;
    std::vector<std::pair<Carrier, CarrierPoint>> points;
    std::vector<std::pair<Carrier, CarrierAreas::Piece>> areas;
};

class Building {
public:
    Building() {
        plan.cases = {{"dead", CaseKind::dead, false, false, {}, {}, {}},
                      {"live", CaseKind::live, true, true, {}, {}, {}}};
    }

    std::uint32_t level(const std::string& id, double elevation) {
        parts.emplace_back();
        parts.back().framed.id = id;
        parts.back().framed.elevation = elevation;
        return static_cast<std::uint32_t>(parts.size() - 1);
    }
    Carrier column(const std::string& id, Point at, std::uint32_t top, std::uint32_t base = none,
                   double self_weight = 0) {
        Column column;
        column.id = id;
        column.at = at;
        column.self_weight = self_weight;
        plan.columns.push_back(column);
        framing.column_top.push_back(top);
        framing.column_base.push_back(base);
        return {CarrierKind::column, static_cast<std::uint32_t>(plan.columns.size() - 1)};
    }
    Carrier wall(const std::string& id, Point from, Point to, std::uint32_t top, std::uint32_t base = none,
                 double self_weight = 0) {
        Wall wall;
        wall.id = id;
        wall.from = from;
        wall.to = to;
        wall.self_weight = self_weight;
        plan.walls.push_back(wall);
        framing.wall_top.push_back(top);
        framing.wall_base.push_back(base);
        return {CarrierKind::wall, static_cast<std::uint32_t>(plan.walls.size() - 1)};
    }
    /// Members must be given in the order of the load path.
    Carrier member(std::uint32_t level, const std::string& id, Point from, Point to,
                   std::vector<double> hinges = {}) {
        FramedMember member;
        member.id = id;
        member.from = from;
        member.to = to;
        member.length = distance(from, to);
        member.hinges = std::move(hinges);
        parts[level].framed.members.push_back(member);
        const auto index = static_cast<std::uint32_t>(parts[level].framed.members.size() - 1);
        parts[level].order.push_back(index);
        return {CarrierKind::member, index};
    }
    void bears(std::uint32_t level, Carrier member, double station, Carrier on, double on_station = 0,
               bool fixed = false) {
        Bearing bearing;
        bearing.station = station;
        bearing.on = on;
        bearing.on_station = on_station;
        bearing.fixed = fixed;
        parts[level].bearings.emplace_back(member.index, bearing);
    }
    void stands(std::uint32_t level, Carrier upper, Carrier lower, double lower_from, double upper_from = 0,
                double upper_to = 0, double lower_to = -1) {
        Foot foot;
        foot.upper = upper;
        foot.lower = lower;
        foot.upper_from = upper_from;
        foot.upper_to = upper_to;
        foot.lower_from = lower_from;
        foot.lower_to = lower_to < 0 ? lower_from : lower_to;
        parts[level].framed.feet.push_back(foot);
    }
    void uniform(std::uint32_t level, Carrier on, std::uint32_t load_case, double from, double to, double w) {
        parts[level].lines.push_back({on, {load_case, {SourceKind::deck, 0}, {from, to, {w, 0, 0, 0, 0}}}});
    }
    void point(std::uint32_t level, Carrier on, std::uint32_t load_case, double station, double p) {
        parts[level].points.push_back({on, {load_case, {SourceKind::point_load, 0}, station, p}});
    }
    void area(std::uint32_t level, Carrier on, double from, double to, double breadth) {
        parts[level].areas.push_back({on, {from, to, breadth, breadth}});
    }

    [[nodiscard]] Takedown take_down() {
        PathInput input;
        const auto columns = static_cast<std::uint32_t>(plan.columns.size());
        const auto walls = static_cast<std::uint32_t>(plan.walls.size());
        framing.largest_coordinate = 20;
        for (std::uint32_t l = 0; l < parts.size(); ++l) {
            LevelParts& part = parts[l];
            FramedLevel& framed = part.framed;
            const auto members = static_cast<std::uint32_t>(framed.members.size());
            framed.bearings = Grouped<Bearing>::from_pairs(members, part.bearings);
            for (std::uint32_t m = 0; m < members; ++m) {
                for (Bearing& bearing : framed.bearings[m]) {
                    bearing.at = framed.members[m].from;
                }
            }
            for (const std::uint32_t m : part.order) {
                framed.order.push(m);
                framed.order.end_group();
            }
            list_supports(l);
            Sharing sharing;
            sharing.members = members;
            sharing.walls = walls;
            sharing.columns = columns;
            input.loads.push_back(loads_of(part, sharing));
            input.areas.push_back(areas_of(part, sharing));
            input.sharing.push_back(std::move(sharing));
            framing.levels.push_back(framed);
            framing.top_down.push_back(l);
        }
        std::sort(framing.top_down.begin(), framing.top_down.end(), [&](std::uint32_t a, std::uint32_t b) {
            return parts[a].framed.elevation > parts[b].framed.elevation;
        });
        return pass_down(plan, framing, std::move(input));
    }

    Plan plan;
    Framing framing;
    std::vector<LevelParts> parts;

private:
    /// Columns and walls bear at every level above their base up to their top.
    void list_supports(std::uint32_t level) {
        FramedLevel& framed = parts[level].framed;
        const auto bears_here = [&](std::uint32_t top, std::uint32_t base) {
            return framed.elevation <= parts[top].framed.elevation &&
                   (base == none || framed.elevation > parts[base].framed.elevation);
        };
        for (std::uint32_t c = 0; c < plan.columns.size(); ++c) {
            if (bears_here(framing.column_top[c], framing.column_base[c])) {
                framed.columns.push_back(c);
            }
        }
        for (std::uint32_t w = 0; w < plan.walls.size(); ++w) {
            if (bears_here(framing.wall_top[w], framing.wall_base[w])) {
                framed.walls.push_back(w);
            }
        }
    }
    [[nodiscard]] Point at(const FramedLevel& framed, Carrier carrier, double station) const {
        if (carrier.kind == CarrierKind::column) {
            return plan.columns[carrier.index].at;
        }
        const Point from = carrier.kind == CarrierKind::wall ? plan.walls[carrier.index].from
                                                             : framed.members[carrier.index].from;
        const Point to = carrier.kind == CarrierKind::wall ? plan.walls[carrier.index].to
                                                           : framed.members[carrier.index].to;
        return from + (station / distance(from, to)) * (to - from);
    }
    /// The account of what was put on is added up here by whole loads, in another way than the library does.
    [[nodiscard]] LevelLoads loads_of(const LevelParts& part, const Sharing& sharing) const {
        LevelLoads loads;
        std::vector<std::pair<std::uint32_t, CarrierLine>> lines;
        std::vector<std::pair<std::uint32_t, CarrierPoint>> points;
        std::vector<DeckBalance> balance(plan.cases.size());
        const auto put = [&](std::uint32_t load_case, Point where, double p) {
            ForceSum& sum = balance[load_case].applied;
            sum.force += p;
            sum.moment = sum.moment + p * where;
            sum.magnitude += std::abs(p);
        };
        for (std::uint32_t c = 0; c < plan.cases.size(); ++c) {
            balance[c].load_case = c;
            for (const auto& [carrier, line] : part.lines) {
                if (line.load_case == c) {
                    lines.emplace_back(sharing.number_of(carrier), line);
                    const double centre = line.piece.from + line.piece.first_moment() / line.piece.total();
                    put(c, at(part.framed, carrier, centre), line.piece.total());
                }
            }
            for (const auto& [carrier, point] : part.points) {
                if (point.load_case == c) {
                    points.emplace_back(sharing.number_of(carrier), point);
                    put(c, at(part.framed, carrier, point.station), point.p);
                }
            }
            balance[c].shared = balance[c].applied;
        }
        loads.lines = Grouped<CarrierLine>::from_pairs(sharing.carrier_count(), std::move(lines));
        loads.points = Grouped<CarrierPoint>::from_pairs(sharing.carrier_count(), std::move(points));
        loads.balance = std::move(balance);
        return loads;
    }
    [[nodiscard]] static CarrierAreas areas_of(const LevelParts& part, const Sharing& sharing) {
        CarrierAreas areas;
        areas.area.assign(sharing.carrier_count(), 0);
        std::vector<std::pair<std::uint32_t, CarrierAreas::Piece>> pieces;
        for (const auto& [carrier, piece] : part.areas) {
            pieces.emplace_back(sharing.number_of(carrier), piece);
            areas.area[sharing.number_of(carrier)] +=
                piece.to > piece.from
                    ? (piece.to - piece.from) * ((piece.start + piece.end) / 2 - piece.bulge / 6)
                    : piece.start;
        }
        areas.pieces = Grouped<CarrierAreas::Piece>::from_pairs(sharing.carrier_count(), std::move(pieces));
        return areas;
    }
};

inline double reaction(const Takedown& takedown, std::uint32_t level, Carrier member, std::size_t bearing,
                       std::uint32_t load_case) {
    const std::size_t first = takedown.framing.levels[level].bearings.first(member.index);
    return takedown.levels[level].reactions[(first + bearing) * takedown.plan.cases.size() + load_case];
}

inline std::vector<const Problem*> problems_of(const Takedown& takedown, ProblemCode code) {
    std::vector<const Problem*> found;
    for (const Problem& problem : takedown.problems) {
        if (problem.code == code) {
            found.push_back(&problem);
        }
    }
    return found;
}

inline void check_all_close(const Takedown& takedown) {
    REQUIRE(takedown.complete);
    for (const Problem* problem : problems_of(takedown, ProblemCode::balance_open)) {
        FAIL_CHECK(problem->message);
    }
    for (const Balance& balance : takedown.balance) {
        CHECK(balance.closes);
    }
}

} // namespace path_building
