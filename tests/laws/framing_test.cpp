// The four laws of runnel/framing.hpp on random plans. A failing plan is found again by its seed.

#include "support/framing_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <map>
#include <random>
#include <set>

using namespace runnel;
using namespace framing_support;

namespace {

using Random = std::mt19937_64;

double uniform(Random& random, double from, double to) {
    return std::uniform_real_distribution<double>(from, to)(random);
}
int pick(Random& random, int from, int to) {
    return std::uniform_int_distribution<int>(from, to)(random);
}

/// A point as a hand draws it: off by up to `sloppy`.
Point drawn(Random& random, Point p, double sloppy) {
    const double angle = uniform(random, 0, 6.28);
    const double off = uniform(random, 0, sloppy);
    return {p.x + off * std::cos(angle), p.y + off * std::sin(angle)};
}

constexpr double snap = 0.005;

/// A building as it is meant: bays of girders on columns, beams, fields or joists between them, an overhang,
/// a wall here and there, decks with an opening, columns of an upper level on girders; drawn a little off.
Plan random_building(std::uint64_t seed) {
    Random random(seed);
    const double sloppy = 0.4 * snap; // any two drawings of one point lie within snap
    PlanBuilder p;
    const int bays_x = pick(random, 1, 3);
    const int bays_y = pick(random, 1, 3);
    std::vector<double> x{0};
    std::vector<double> y{0};
    for (int i = 0; i < bays_x; ++i) {
        x.push_back(x.back() + uniform(random, 4, 9));
    }
    for (int i = 0; i < bays_y; ++i) {
        y.push_back(y.back() + uniform(random, 4, 9));
    }
    const auto at = [&](double px, double py) { return drawn(random, {px, py}, sloppy); };
    const auto name = [](const char* kind, int i, int j) {
        return kind + std::to_string(i) + '-' + std::to_string(j);
    };
    for (int i = 0; i <= bays_x; ++i) {
        for (int j = 0; j <= bays_y; ++j) {
            p.column(name("C", i, j), {x[i], y[j]});
        }
    }
    const bool long_girders = pick(random, 0, 1) == 1;
    for (int j = 0; j <= bays_y; ++j) {
        if (long_girders) {
            p.girder(name("G", 0, j), at(x.front(), y[j]), at(x.back() + 1.2, y[j]));
        } else {
            for (int i = 0; i < bays_x; ++i) {
                p.girder(name("G", i, j), at(x[i], y[j]), at(x[i + 1], y[j]));
            }
        }
    }
    for (int j = 0; j < bays_y; ++j) {
        for (int i = 0; i < bays_x; ++i) {
            const double x1 = x[i] + uniform(random, 0.2, 0.4) * (x[i + 1] - x[i]);
            const double x2 = x[i] + uniform(random, 0.6, 0.8) * (x[i + 1] - x[i]);
            const double y1 = y[j] + uniform(random, 0.3, 0.7) * (y[j + 1] - y[j]);
            const double over = j == 0 ? -uniform(random, 0, 1) : 0;
            p.beam(name("B", i, j), at(x1, y[j] + over), at(x1, y[j + 1]));
            p.beam(name("D", i, j), at(x2, y[j]), at(x2, y[j + 1]));
            if (pick(random, 0, 1) == 1) {
                p.beam(name("E", i, j), at(x1, y1), at(x2, y1));
                p.joist(name("K", i, j), at((x1 + x2) / 2, y1), at((x1 + x2) / 2, y[j + 1]));
            } else {
                JoistField& field = p.field(name("J", i, j), rectangle(x1, y[j], x2, y[j + 1]), 0, 0.7);
                field.cut = pick(random, 0, 1) == 1;
            }
            Deck& deck = p.deck(name("deck", i, j), {at(x[i], y[j]), at(x[i + 1], y[j]),
                                                     at(x[i + 1], y[j + 1]), at(x[i], y[j + 1])});
            deck.direction = pick(random, 0, 1) * 90;
            if (pick(random, 0, 2) == 0) {
                deck.openings = {{at(x1, y[j]), at(x1, y1), at(x2, y1), at(x2, y[j])}};
            }
        }
    }
    if (pick(random, 0, 1) == 1) {
        p.wall("W", {x.back() + 1.2, y.front() - 1}, {x.back() + 1.2, y.back() + 1});
    }
    Level roof;
    roof.id = "roof";
    roof.elevation = 7;
    p.plan.levels.push_back(roof);
    Column upper;
    upper.id = "upper";
    upper.at = at((x[0] + x[1]) / 2, y[0]);
    upper.base = "floor";
    upper.top = "roof";
    p.plan.columns.push_back(upper);
    return p.plan;
}

/// Members between few points, drawn off by more and by less than snap: whatever can go wrong does.
Plan random_tangle(std::uint64_t seed) {
    Random random(seed);
    PlanBuilder p;
    std::vector<Point> points;
    for (int i = 0; i < 8; ++i) {
        points.push_back({uniform(random, 0, 10), uniform(random, 0, 10)});
    }
    const auto point = [&] {
        const int i = pick(random, 0, 7);
        const int k = pick(random, 0, 7);
        // A point, or one on the line between two.
        const double t = pick(random, 0, 1) == 0 ? 0 : uniform(random, 0.2, 0.8);
        return drawn(
            random,
            {points[i].x + t * (points[k].x - points[i].x), points[i].y + t * (points[k].y - points[i].y)},
            1.5 * snap);
    };
    for (int i = 0; i < 3; ++i) {
        p.column(numbered("C", i), point());
    }
    p.wall("W", point(), point());
    for (int i = 0; i < 10; ++i) {
        const Role role = static_cast<Role>(pick(random, 0, 2));
        p.member(numbered("M", i), role, point(), point());
    }
    p.deck("D", {points[0], drawn(random, points[0], 3), drawn(random, points[0], 3)});
    return p.plan;
}

struct SeededPlan {
    std::uint64_t seed;
    bool building;
    Plan plan;
};

std::vector<SeededPlan> random_plans(int count) {
    std::vector<SeededPlan> plans;
    for (int i = 0; i < count; ++i) {
        const auto seed = static_cast<std::uint64_t>(20261201 + i);
        const bool building = i % 2 == 0;
        plans.push_back({seed, building, building ? random_building(seed) : random_tangle(seed)});
    }
    return plans;
}

/// A bearing as the laws compare it: no numbering but ids.
struct Seen {
    std::string on;
    double station, on_station;
};
using Picture = std::map<std::string, std::vector<Seen>>;

Picture picture_of(const Plan& plan, const FramedLevel& level) {
    Picture picture;
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        std::vector<Seen>& seen = picture[level.members[m].id];
        for (const Bearing& b : level.bearings[m]) {
            seen.push_back({carrier_id(plan, level, b.on), b.station, b.on_station});
        }
    }
    return picture;
}

/// Rounding of coordinates of 1e5 m, amplified where members cross under flat angles.
constexpr double same_station = 1e-6;

void check_same(const Picture& a, const Picture& b) {
    REQUIRE(a.size() == b.size());
    for (const auto& member : a) {
        const std::string& id = member.first;
        const std::vector<Seen>& bearings = member.second;
        CAPTURE(id);
        const auto other = b.find(id);
        REQUIRE(other != b.end());
        REQUIRE(bearings.size() == other->second.size());
        for (std::size_t i = 0; i < bearings.size(); ++i) {
            CHECK(bearings[i].on == other->second[i].on);
            CHECK(std::abs(bearings[i].station - other->second[i].station) < same_station);
            CHECK(std::abs(bearings[i].on_station - other->second[i].on_station) < same_station);
        }
    }
}

double distance(Point a, Point b) {
    return std::hypot(a.x - b.x, a.y - b.y);
}

void check_moved(const Ring& ring, const Ring& moved, const Redrawing& how) {
    REQUIRE(ring.size() == moved.size());
    for (std::size_t i = 0; i < ring.size(); ++i) {
        CHECK(distance(redrawn(ring[i], how), moved[i]) < same_station);
    }
}

double distance_to_ring(Point p, const Ring& ring) {
    double least = 1e300;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        const double dx = b.x - a.x;
        const double dy = b.y - a.y;
        const double t = std::clamp(((p.x - a.x) * dx + (p.y - a.y) * dy) / (dx * dx + dy * dy), 0.0, 1.0);
        least = std::min(least, distance(p, {a.x + t * dx, a.y + t * dy}));
    }
    return least;
}

std::vector<std::string> all_codes(const Framing& framing) {
    return codes(framing, Severity::note);
}

constexpr int plans_tried = 400;

} // namespace

TEST_CASE("law of framing: random buildings are framed without errors") {
    for (const SeededPlan& tried : random_plans(plans_tried)) {
        if (!tried.building) {
            continue;
        }
        CAPTURE(tried.seed);
        const Framing framing = frame_plan(tried.plan);
        for (const Problem& problem : framing.problems) {
            CAPTURE(problem.message);
            CHECK(problem.severity != Severity::error);
        }
        CHECK(framing.levels[0].feet.size() == 1);
    }
}

TEST_CASE("law of framing: the order in which members are listed does not matter") {
    for (const SeededPlan& tried : random_plans(plans_tried)) {
        CAPTURE(tried.seed);
        CAPTURE(tried.building);
        Plan shuffled = tried.plan;
        Random random(tried.seed);
        std::shuffle(shuffled.levels[0].members.begin(), shuffled.levels[0].members.end(), random);
        const Framing a = frame_plan(tried.plan);
        const Framing b = frame_plan(shuffled);
        check_same(picture_of(tried.plan, a.levels[0]), picture_of(shuffled, b.levels[0]));
        CHECK(all_codes(a) == all_codes(b));
        for (std::size_t d = 0; d < a.levels[0].decks.size(); ++d) {
            CHECK(a.levels[0].decks[d].outline == b.levels[0].decks[d].outline);
            CHECK(a.levels[0].decks[d].openings == b.levels[0].decks[d].openings);
        }
    }
}

TEST_CASE("law of framing: turning and moving the plan changes no id and no station") {
    // Turns for which the joists along x keep their numbers: the normal with positive x is then the one that
    // was along +y.
    for (const double turn : {0.0, -17.0, -45.0, -89.0}) {
        for (const SeededPlan& tried : random_plans(plans_tried / 4)) {
            CAPTURE(tried.seed);
            CAPTURE(turn);
            const Redrawing how{"", turn, turn == -45.0 ? Point{} : Point{1e5, -7e4}, false, false};
            const Plan moved = redrawn(tried.plan, how);
            const Framing a = frame_plan(tried.plan);
            const Framing b = frame_plan(moved);
            check_same(picture_of(tried.plan, a.levels[0]), picture_of(moved, b.levels[0]));
            CHECK(all_codes(a) == all_codes(b));
            for (std::size_t m = 0; m < a.levels[0].members.size(); ++m) {
                const Point expected = redrawn(a.levels[0].members[m].from, how);
                CHECK(distance(expected, b.levels[0].members[m].from) < same_station);
            }
            for (std::size_t d = 0; d < a.levels[0].decks.size(); ++d) {
                check_moved(a.levels[0].decks[d].outline, b.levels[0].decks[d].outline, how);
            }
            CHECK(a.levels[0].feet.size() == b.levels[0].feet.size());
        }
    }
}

TEST_CASE("law of framing: every carrier comes after what bears on it") {
    for (const SeededPlan& tried : random_plans(plans_tried)) {
        CAPTURE(tried.seed);
        const Framing framing = frame_plan(tried.plan);
        const FramedLevel& level = framing.levels[0];
        std::vector<std::size_t> place(level.members.size(), 0);
        std::set<std::uint32_t> ordered;
        REQUIRE(level.order.size() == level.members.size());
        for (std::size_t g = 0; g < level.order.size(); ++g) {
            REQUIRE(level.order[g].size() == 1);
            place[level.order[g][0]] = g;
            ordered.insert(level.order[g][0]);
        }
        CHECK(ordered.size() == level.members.size());
        if (find_problem(framing, ProblemCode::load_path_loop)) {
            continue;
        }
        for (std::uint32_t m = 0; m < level.members.size(); ++m) {
            for (const Bearing& bearing : level.bearings[m]) {
                if (bearing.on.kind == CarrierKind::member) {
                    CHECK(place[bearing.on.index] > place[m]);
                }
            }
        }
    }
}

TEST_CASE("law of framing: no point moves by more than snap, and bearings touch within snap") {
    for (const SeededPlan& tried : random_plans(plans_tried)) {
        CAPTURE(tried.seed);
        const Framing framing = frame_plan(tried.plan);
        const FramedLevel& level = framing.levels[0];
        const double limit = snap * (1 + 1e-9);
        for (const FramedMember& m : level.members) {
            if (!m.from_field) {
                const Member& given = tried.plan.levels[0].members[m.origin.index];
                CHECK(distance(given.from, m.from) <= limit);
                CHECK(distance(given.to, m.to) <= limit);
            }
        }
        for (std::size_t d = 0; d < level.decks.size(); ++d) {
            const Ring& given = tried.plan.levels[0].decks[d].outline;
            // A point put into an edge lies within snap of the edge, whose ends may have moved by snap.
            for (const Point vertex : level.decks[d].outline) {
                CHECK(distance_to_ring(vertex, given) <= 2 * limit);
            }
            for (const Point vertex : given) {
                double least = 1e300;
                for (const Point framed : level.decks[d].outline) {
                    least = std::min(least, distance(vertex, framed));
                }
                CHECK(least <= limit);
            }
        }
        for (const Bearing& bearing : level.bearings.items()) {
            CHECK(distance(bearing.at, bearing.on_at) <= limit);
        }
    }
}
