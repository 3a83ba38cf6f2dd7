#include "support/deck_support.hpp"
#include "support/random_support.hpp"

#include "geometry/basic.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <limits>
#include <numeric>

using namespace runnel;
using support::HandFramed;
using support::Motion;
using support::Random;

namespace {

struct Segment {
    Point from, to;
};

/// One random deck that spans to the nearest carrier, in plain position.
struct Drawing {
    Ring outline;
    std::vector<Ring> openings;
    std::vector<Segment> members; ///< on a deck on columns: walls
    std::vector<Point> columns;
};

bool is_in(Point p, const Ring& ring) {
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (b.x - a.x) * ((p.y - a.y) / (b.y - a.y))) {
            inside = !inside;
        }
    }
    return inside;
}
bool is_on_deck(Point p, const Drawing& d) {
    return is_in(p, d.outline) &&
           std::none_of(d.openings.begin(), d.openings.end(), [&](const Ring& o) { return is_in(p, o); });
}
/// How much of a segment runs through the deck, by sampling.
double part_on_deck(const Segment& s, const Drawing& d) {
    constexpr int samples = 200;
    int inside = 0;
    for (int i = 0; i < samples; ++i) {
        inside += is_on_deck(between(s.from, s.to, (i + 0.5) / samples), d) ? 1 : 0;
    }
    return inside / double{samples};
}

enum class Shape { convex, reentrant, rectangular, bay };

Ring outline_of(Random& random, Shape shape) {
    switch (shape) {
    case Shape::convex: {
        Ring ring;
        const int corners = random.whole(3, 12);
        for (int i = 0; i < corners; ++i) {
            const double a = 2 * std::numbers::pi * (i + random.between(0.2, 0.8)) / corners;
            ring.push_back({9 * std::cos(a), 7 * std::sin(a)});
        }
        return ring;
    }
    case Shape::reentrant:
        return random.star({0, 0}, 3, 11, random.whole(7, 15));
    case Shape::rectangular:
        return {{-9, -6}, {9, -6}, {9, 6}, {-9, 6}};
    case Shape::bay:
        return {{-4, -3}, {0, -3}, {4, -3}, {4, 3}, {-4, 3}};
    }
    return {};
}

/// Openings: in the middle, two that touch at an edge, a sliver, one on the outline.
std::vector<Ring> openings_of(Random& random, Shape shape, const Ring& outline) {
    std::vector<Ring> openings;
    constexpr std::size_t around_the_middle = 6; // an outline of fewer corners may pass it by
    if (shape == Shape::convex && outline.size() < around_the_middle) {
        return openings;
    }
    switch (random.whole(0, 5)) {
    case 0:
        openings.push_back(random.star({0, 0}, 0.3, 1.2, random.whole(3, 7)));
        std::reverse(openings.back().begin(), openings.back().end());
        break;
    case 1:
        openings.push_back({{-1, -1}, {-1, 1}, {0.5, 1}, {0.5, -1}});
        openings.push_back({{0.5, -0.5}, {0.5, 0.5}, {1.5, 0.5}, {1.5, -0.5}});
        break;
    case 2:
        openings.push_back({{-1, 0}, {-1, 1e-3}, {1, 1e-3}, {1, 0}});
        break;
    case 3:
        if (shape == Shape::rectangular) {
            openings.push_back({{-3, -6}, {-3, -4}, {1, -4}, {1, -6}});
        }
        break;
    default:
        break;
    }
    return openings;
}

void add_edges(Random& random, const Ring& ring, double part, std::vector<Segment>& members) {
    for (std::size_t i = 0; i < ring.size(); ++i) {
        if (random.chance(part)) {
            members.push_back({ring[i], ring[(i + 1) % ring.size()]});
            if (random.chance(0.5)) {
                std::swap(members.back().from, members.back().to);
            }
        }
    }
}

/// Members inside: any, level, all but parallel to another one, from the middle of another one, through one
/// point.
void add_inner(Random& random, int count, std::vector<Segment>& members) {
    for (int i = 0; i < count; ++i) {
        const Point a{random.between(-8, 8), random.between(-6, 6)};
        const Point b{random.between(-8, 8), random.between(-6, 6)};
        const int kind = members.empty() ? 0 : random.whole(0, 6);
        const Segment& other = members.empty() ? Segment{a, b} : members[members.size() / 2];
        switch (kind) {
        case 1:
            members.push_back({a, {a.x + random.between(1, 9), a.y}});
            break;
        case 2: {
            const Point d = other.to - other.from;
            const Point aside{-0.2 * d.y, 0.2 * d.x};
            members.push_back({other.from + aside, other.to + aside + 1e-9 * Point{d.y, -d.x}});
            break;
        }
        case 3:
            members.push_back({between(other.from, other.to, random.fraction()), b});
            break;
        case 4:
            members.push_back({{0.25, 0.125}, b});
            break;
        case 5:
            members.push_back({{0, -2}, {0, 2}});
            members.push_back({{-2, 0}, {2, 0}});
            break;
        default:
            members.push_back({a, b});
            break;
        }
    }
}

bool is_same(const Segment& s, const Segment& t) {
    return (s.from == t.from && s.to == t.to) || (s.from == t.to && s.to == t.from);
}
/// Lying along another one is refused before.
bool lies_along(const Segment& s, const Segment& t) {
    const double turn = cross(t.to - t.from, s.to - s.from);
    return std::abs(turn) < 1e-6 * norm(t.to - t.from) * norm(s.to - s.from) &&
           std::abs(cross(t.to - t.from, s.from - t.from)) < 1e-3 * norm(t.to - t.from);
}

Drawing draw(Random& random, Shape shape, bool on_columns) {
    Drawing d;
    d.outline = outline_of(random, shape);
    d.openings = openings_of(random, shape, d.outline);
    std::vector<Segment> members;
    add_edges(random, d.outline, random.chance(0.5) ? 1 : 0.5, members);
    for (const Ring& opening : d.openings) {
        add_edges(random, opening, random.chance(0.5) ? 1 : 0, members);
    }
    const std::size_t edges = members.size();
    add_inner(random, on_columns ? random.whole(0, 3) : random.whole(0, 12), members);
    for (std::size_t i = 0; i < members.size(); ++i) {
        const bool again = std::any_of(d.members.begin(), d.members.end(), [&](const Segment& other) {
            return is_same(other, members[i]) || (i >= edges && lies_along(members[i], other));
        });
        if (!again && (i < edges || part_on_deck(members[i], d) > 0.02) &&
            distance(members[i].from, members[i].to) > 0.05) {
            d.members.push_back(members[i]);
        }
    }
    if (on_columns) {
        if (random.chance(0.5)) {
            d.members.clear();
        }
        for (int i = random.whole(1, 20); i > 0; --i) {
            Point p{random.between(-8, 8), random.between(-6, 6)};
            p = random.chance(0.3) ? Point{std::round(p.x), std::round(p.y)} : p;
            p = random.chance(0.1) && !d.members.empty() ? d.members.front().from : p;
            if (is_on_deck(p, d)) {
                d.columns.push_back(p);
            }
        }
        std::sort(d.columns.begin(), d.columns.end(),
                  [](Point l, Point r) { return l.x != r.x ? l.x < r.x : l.y < r.y; });
        d.columns.erase(std::unique(d.columns.begin(), d.columns.end()), d.columns.end());
    }
    // Corners that stand twice, and one in the middle of an edge.
    if (random.chance(0.2)) {
        d.outline.insert(d.outline.begin() + 1, d.outline[1]);
        d.outline.insert(d.outline.begin() + 1, between(d.outline[0], d.outline[1], 0.5));
    }
    return d;
}

HandFramed framed(const Drawing& d, const Motion& move, bool on_columns) {
    HandFramed f;
    f.plan.settings.snap = 1e-6; // nothing here has been snapped: what lies beside each other is meant to
    std::vector<Ring> openings;
    for (const Ring& opening : d.openings) {
        openings.push_back(move(opening));
    }
    f.add_deck(move(d.outline), 0, openings);
    f.level().decks.back().span = on_columns ? SpanKind::columns : SpanKind::two_way;
    for (const Segment& s : d.members) {
        if (on_columns) {
            Wall wall;
            wall.id = "W" + std::to_string(f.plan.walls.size());
            wall.from = move(s.from);
            wall.to = move(s.to);
            f.level().walls.push_back(static_cast<std::uint32_t>(f.plan.walls.size()));
            f.plan.walls.push_back(wall);
        } else {
            f.add_member(move(s.from), move(s.to), Role::beam);
        }
    }
    for (const Point& p : d.columns) {
        Column column;
        column.id = "C" + std::to_string(f.plan.columns.size());
        column.at = move(p);
        f.level().columns.push_back(static_cast<std::uint32_t>(f.plan.columns.size()));
        f.plan.columns.push_back(column);
    }
    return f;
}

double area_of(const Cell& cell) {
    const double start = cell.high.start - cell.low.start;
    const double end = cell.high.end - cell.low.end;
    return (cell.to - cell.from) * ((start + end) / 2 - (cell.high.bulge - cell.low.bulge) / 6);
}

double worst_cover(const HandFramed& f, const Sharing& sharing) {
    Sum area;
    for (const Cell& cell : sharing.cells) {
        area.add(area_of(cell));
    }
    const FramedDeck& deck = f.framing.levels[0].decks[0];
    double expected = signed_area(deck.outline);
    for (const Ring& opening : deck.openings) {
        expected += signed_area(opening);
    }
    return std::abs(area.value() - expected) / expected;
}

/// The nearest carrier by going through all: its number and the station of the nearest point.
struct Nearest {
    std::uint32_t carrier = none;
    double station = 0;
    bool clear = false;
};

Nearest nearest(Point p, const Drawing& d) {
    constexpr double margin = 1e-5; // what is nearer to a tie may be either's
    struct Row {
        double away, angle, station;
        std::uint32_t carrier;
    };
    std::vector<Row> rows;
    for (std::size_t i = 0; i < d.members.size(); ++i) {
        const Segment& s = d.members[i];
        const double length = distance(s.from, s.to);
        const double station = std::clamp(station_of(p, s.from, s.to), 0.0, length);
        const Point foot = between(s.from, s.to, station / length);
        // At an end, the angle between the carrier and the way to the point; square everywhere else.
        const Point along = station <= 0 ? s.to - s.from : station >= length ? s.from - s.to : Point{};
        const Point way = p - foot;
        const double angle = std::atan2(std::abs(cross(along, way)), dot(along, way));
        rows.push_back({norm(way), angle, station, static_cast<std::uint32_t>(i)});
    }
    for (std::size_t c = 0; c < d.columns.size(); ++c) {
        // Before a wall whose end it stands at.
        rows.push_back({distance(p, d.columns[c]), -1, 0, static_cast<std::uint32_t>(d.members.size() + c)});
    }
    const double least = std::min_element(rows.begin(), rows.end(), [](const Row& l, const Row& r) {
                             return l.away < r.away;
                         })->away;
    std::vector<Row> close;
    std::copy_if(rows.begin(), rows.end(), std::back_inserter(close),
                 [&](const Row& row) { return row.away <= least + margin; });
    // Rows that are as near through one shared point are told apart by their angles, others are a tie.
    std::sort(close.begin(), close.end(), [](const Row& l, const Row& r) { return l.angle < r.angle; });
    Nearest result{close[0].carrier, close[0].station, true};
    for (std::size_t i = 1; i < close.size(); ++i) {
        const bool same_place = std::abs(close[i].away - close[0].away) <= 1e-12;
        result.clear = result.clear && same_place && close[i].angle - close[0].angle > margin;
    }
    return result;
}

struct Tally {
    int checked = 0;
    int wrong = 0;
    int holders_wrong = 0;
    double station = 0; ///< largest error
};

void check_owners_of(const Drawing& d, const Motion& move, const Sharing& sharing, Random& random,
                     int samples, Tally& tally) {
    for (int i = 0; i < samples; ++i) {
        const Point p{random.between(-11, 11), random.between(-11, 11)};
        if (!is_on_deck(p, d)) {
            continue;
        }
        const Nearest expected = nearest(p, d);
        if (!expected.clear) {
            continue;
        }
        ++tally.checked;
        const Point there = move(p);
        int holders = 0;
        Transfer owner;
        double station = 0;
        for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
            const Cell& cell = sharing.cells[c];
            const Point q = sharing.axes[cell.axes].to_strip(there);
            if (q.y < cell.from || q.y >= cell.to) {
                continue;
            }
            const double x = (q.y - cell.from) / (cell.to - cell.from);
            if (q.x >= cell.low.at(x) && q.x < cell.high.at(x)) {
                ++holders;
                owner = sharing.transfers[c].front();
                station = (1 - x) * owner.station_from + x * owner.station_to;
            }
        }
        tally.holders_wrong += holders != 1 ? 1 : 0;
        if (holders == 0) {
            continue;
        }
        if (owner.carrier != expected.carrier) {
            ++tally.wrong;
            CAPTURE(p.x);
            CAPTURE(p.y);
            CHECK(owner.carrier == expected.carrier);
        }
        tally.station = std::max(tally.station, std::abs(station - expected.station));
    }
}

} // namespace

TEST_CASE("decks that span to the nearest carrier: cover, disjoint, owner and motion on random decks") {
    const std::uint64_t seed = support::seed_of_run(20261202);
    MESSAGE("seed " << seed);
    for (const bool on_columns : {false, true}) {
        double cover = 0;
        double cover_far = 0;
        int loose = 0;
        int decks = 0;
        Tally tally;
        Tally far_tally;
        Random random(seed + (on_columns ? 1 : 0));
        for (int i = 0; i < 2400; ++i) {
            CAPTURE(i);
            CAPTURE(on_columns);
            const Drawing d = draw(random, static_cast<Shape>(i % 4), on_columns);
            if (d.members.empty() && d.columns.empty()) {
                continue;
            }
            ++decks;
            const Motion turned{i % 3 == 0 ? 0 : random.between(-180, 180), {}};
            const HandFramed plain = framed(d, turned, on_columns);
            const Sharing sharing = plain.share();
            const double here = worst_cover(plain, sharing);
            CHECK(here <= 1e-9);
            loose += here > 1e-12 ? 1 : 0;
            cover = std::max(cover, here);
            check_owners_of(d, turned, sharing, random, 40, tally);

            const Motion away{turned.degrees, {1e6 * random.between(-1, 1), 1e6 * random.between(-1, 1)}};
            const HandFramed moved = framed(d, away, on_columns);
            const Sharing moved_sharing = moved.share();
            const double there = worst_cover(moved, moved_sharing);
            CHECK(there <= 1e-9);
            cover_far = std::max(cover_far, there);
            check_owners_of(d, away, moved_sharing, random, 10, far_tally);
        }
        CHECK(tally.checked > 20'000);
        CHECK(tally.holders_wrong == 0);
        CHECK(tally.wrong == 0);
        CHECK(far_tally.wrong == 0);
        CHECK(far_tally.holders_wrong == 0);
        CHECK(tally.station <= 1e-9);
        MESSAGE(std::string(on_columns ? "on columns: " : "two-way: ")
                << decks << " decks; largest relative error of area " << cover << " (" << loose
                << " beyond 1e-12), 1000 km away " << cover_far << "; " << tally.checked + far_tally.checked
                << " points; largest error of station " << tally.station << ", away " << far_tally.station);
    }
}
