#pragma once

#include <runnel/deck.hpp>
#include <runnel/framing.hpp>
#include <runnel/load.hpp>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <string>

namespace support {

/// A plan of one level and its framing, put together by hand: members and decks go straight into the framed
/// level, so that sharing and loads are tested without the framing engine.
struct HandFramed {
    runnel::Plan plan;
    runnel::Framing framing;

    HandFramed() {
        plan.cases = {{"dead", runnel::CaseKind::dead, false, false, {}, {}, {}},
                      {"live", runnel::CaseKind::live, true, true, {}, {}, {}}};
        plan.levels.resize(1);
        plan.levels[0].id = "L";
        framing.levels.resize(1);
        framing.levels[0].id = "L";
        framing.levels[0].plan_level = 0;
    }

    runnel::FramedLevel& level() { return framing.levels[0]; }

    std::uint32_t add_member(runnel::Point from, runnel::Point to, runnel::Role role = runnel::Role::joist) {
        runnel::FramedMember member;
        member.id = "M" + std::to_string(level().members.size());
        member.role = role;
        member.from = from;
        member.to = to;
        member.length = std::hypot(to.x - from.x, to.y - from.y);
        level().members.push_back(member);
        grow(from);
        grow(to);
        return static_cast<std::uint32_t>(level().members.size() - 1);
    }

    void add_deck(runnel::Ring outline, double direction, std::vector<runnel::Ring> openings = {}) {
        runnel::FramedDeck deck;
        deck.id = "D" + std::to_string(level().decks.size());
        for (const runnel::Point& p : outline) {
            grow(p);
        }
        deck.outline = std::move(outline);
        deck.openings = std::move(openings);
        deck.direction = direction;
        level().decks.push_back(std::move(deck));
    }

    void add_area_load(const std::string& load_case, double q, runnel::Ring outline = {},
                       bool replaces = false) {
        runnel::AreaLoad load;
        load.case_id = load_case;
        load.q = q;
        load.outline = std::move(outline);
        load.replaces = replaces;
        level().area_loads.push_back(std::move(load));
    }

    runnel::Sharing share() const { return runnel::share_decks(plan, framing, 0); }
    runnel::LevelLoads load(const runnel::Sharing& sharing) const {
        return runnel::load_carriers(plan, framing, 0, sharing);
    }

private:
    void grow(runnel::Point p) {
        framing.largest_coordinate = std::max({framing.largest_coordinate, std::abs(p.x), std::abs(p.y)});
    }
};

/// Turns by `degrees` about the origin, then moves.
struct Motion {
    double degrees = 0;
    runnel::Point shift;

    runnel::Point operator()(runnel::Point p) const {
        const double a = degrees * std::numbers::pi / 180;
        return {shift.x + p.x * std::cos(a) - p.y * std::sin(a),
                shift.y + p.x * std::sin(a) + p.y * std::cos(a)};
    }
    runnel::Ring operator()(const runnel::Ring& ring) const {
        runnel::Ring moved;
        for (const runnel::Point& p : ring) {
            moved.push_back((*this)(p));
        }
        return moved;
    }
};

inline double total(std::span<const runnel::CarrierLine> lines, std::uint32_t load_case) {
    double sum = 0;
    for (const runnel::CarrierLine& line : lines) {
        sum += line.load_case == load_case ? line.piece.total() : 0;
    }
    return sum;
}
inline double total(std::span<const runnel::CarrierPoint> points, std::uint32_t load_case) {
    double sum = 0;
    for (const runnel::CarrierPoint& point : points) {
        sum += point.load_case == load_case ? point.p : 0;
    }
    return sum;
}

} // namespace support
