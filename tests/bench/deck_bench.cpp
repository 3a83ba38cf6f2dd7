// Processor time per segment of sharing a level's decks among its carriers, as a ratio against
// Boost.Polygon's Voronoi diagram of the same segments in the same run, and the exponent of growth.
//
//   bench_deck [LARGEST]      default 1000000 segments
//
// Aims: two-way decks at most 1.3 times the diagram, one-way decks of joists at most 1/25 of it; exponents
// below 1.1.

#include <runnel/deck.hpp>

#include <boost/polygon/segment_data.hpp>
#include <boost/polygon/voronoi.hpp>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <ctime>
#include <fstream>
#include <numbers>
#include <string>
#include <utility>
#include <vector>

namespace {

using runnel::Point;

/// Processor time of this program, which all runs on one thread: what else the machine does disturbs it
/// least.
double seconds_since(std::clock_t start) {
    return static_cast<double>(std::clock() - start) / CLOCKS_PER_SEC;
}

struct Level {
    runnel::Plan plan;
    runnel::Framing framing;
    std::vector<std::pair<Point, Point>> segments; ///< touching at ends only

    Level() {
        plan.levels.resize(1);
        framing.levels.resize(1);
    }
    void add_member(Point from, Point to, runnel::Role role) {
        runnel::FramedMember member;
        member.role = role;
        member.from = from;
        member.to = to;
        member.length = std::hypot(to.x - from.x, to.y - from.y);
        framing.levels[0].members.push_back(std::move(member));
        for (const double x : {from.x, from.y, to.x, to.y}) {
            framing.largest_coordinate = std::max(framing.largest_coordinate, std::abs(x));
        }
    }
    void add_deck(runnel::Ring outline, runnel::SpanKind span, double direction = 0) {
        runnel::FramedDeck deck;
        deck.id = "D";
        deck.outline = std::move(outline);
        deck.span = span;
        deck.direction = direction;
        framing.levels[0].decks.push_back(std::move(deck));
    }
};

constexpr double turn = 17; // degrees

Point turned(double x, double y) {
    const double a = turn * std::numbers::pi / 180;
    return {x * std::cos(a) - y * std::sin(a), x * std::sin(a) + y * std::cos(a)};
}

/// Beams from column to column in bays of 6 to 9 m by 5 to 8 m.
std::vector<double> axes_of_bays(std::size_t bays, double least) {
    std::vector<double> axes{0};
    for (std::size_t i = 0; i < bays; ++i) {
        axes.push_back(axes.back() + least + static_cast<double>(i * 7 % 4));
    }
    return axes;
}

runnel::Ring noded_outline(const std::vector<double>& xs, const std::vector<double>& ys) {
    runnel::Ring ring;
    for (std::size_t i = 0; i + 1 < xs.size(); ++i) {
        ring.push_back(turned(xs[i], ys.front()));
    }
    for (std::size_t i = 0; i + 1 < ys.size(); ++i) {
        ring.push_back(turned(xs.back(), ys[i]));
    }
    for (std::size_t i = xs.size(); i-- > 1;) {
        ring.push_back(turned(xs[i], ys.back()));
    }
    for (std::size_t i = ys.size(); i-- > 1;) {
        ring.push_back(turned(xs.front(), ys[i]));
    }
    return ring;
}

enum class Kind { one_deck, running_on, bays, joists };

Level grid_of_beams(std::size_t segments, Kind kind) {
    Level level;
    const auto side = static_cast<std::size_t>(std::sqrt(static_cast<double>(segments) / 2));
    const std::vector<double> xs = axes_of_bays(side, 6);
    const std::vector<double> ys = axes_of_bays(side, 5);
    for (std::size_t r = 0; r < ys.size(); ++r) {
        for (std::size_t c = 0; c < xs.size(); ++c) {
            if (c + 1 < xs.size()) {
                level.segments.emplace_back(turned(xs[c], ys[r]), turned(xs[c + 1], ys[r]));
            }
            if (r + 1 < ys.size()) {
                level.segments.emplace_back(turned(xs[c], ys[r]), turned(xs[c], ys[r + 1]));
            }
        }
    }
    if (kind == Kind::running_on) {
        for (const double y : ys) {
            level.add_member(turned(xs.front(), y), turned(xs.back(), y), runnel::Role::girder);
        }
        for (const double x : xs) {
            level.add_member(turned(x, ys.front()), turned(x, ys.back()), runnel::Role::beam);
        }
    } else {
        for (const auto& [from, to] : level.segments) {
            level.add_member(from, to, runnel::Role::beam);
        }
    }
    if (kind == Kind::bays) {
        for (std::size_t r = 0; r + 1 < ys.size(); ++r) {
            for (std::size_t c = 0; c + 1 < xs.size(); ++c) {
                level.add_deck({turned(xs[c], ys[r]), turned(xs[c + 1], ys[r]), turned(xs[c + 1], ys[r + 1]),
                                turned(xs[c], ys[r + 1])},
                               runnel::SpanKind::two_way);
            }
        }
    } else {
        level.add_deck(noded_outline(xs, ys), runnel::SpanKind::two_way);
    }
    return level;
}

/// Rows of one-way decks, 120 m by 6 m, on joists 0.6 m apart.
Level rows_of_joists(std::size_t segments) {
    Level level;
    constexpr std::size_t in_row = 200;
    const std::size_t rows = std::max<std::size_t>(1, segments / in_row);
    for (std::size_t r = 0; r < rows; ++r) {
        const double y = 6.0 * static_cast<double>(r);
        for (std::size_t k = 0; k < in_row; ++k) {
            const double x = 0.3 + 0.6 * static_cast<double>(k);
            level.segments.emplace_back(turned(x, y), turned(x, y + 5.9));
            level.add_member(level.segments.back().first, level.segments.back().second, runnel::Role::joist);
        }
        level.add_deck({turned(0, y), turned(120, y), turned(120, y + 5.9), turned(0, y + 5.9)},
                       runnel::SpanKind::one_way, turn);
    }
    return level;
}

double time_of_diagram(const Level& level) {
    namespace bp = boost::polygon;
    constexpr double most = 536'870'912;
    const double scale = most / level.framing.largest_coordinate;
    const auto on_grid = [&](Point p) {
        return bp::point_data<int>(static_cast<int>(std::lround(p.x * scale)),
                                   static_cast<int>(std::lround(p.y * scale)));
    };
    std::vector<bp::segment_data<int>> segments;
    segments.reserve(level.segments.size());
    for (const auto& [from, to] : level.segments) {
        segments.emplace_back(on_grid(from), on_grid(to));
    }
    const auto start = std::clock();
    bp::voronoi_diagram<double> diagram;
    bp::construct_voronoi(segments.begin(), segments.end(), &diagram);
    return seconds_since(start);
}

struct Row {
    double segments = 0, diagram = 0, share = 0;
};

double cell_area(const runnel::Sharing& sharing) {
    double area = 0;
    for (const runnel::Cell& cell : sharing.cells) {
        area +=
            (cell.to - cell.from) * ((cell.high.start - cell.low.start + cell.high.end - cell.low.end) / 2 -
                                     (cell.high.bulge - cell.low.bulge) / 6);
    }
    return area;
}

Row measure(std::size_t segments, Kind kind) {
    const Level level = kind == Kind::joists ? rows_of_joists(segments) : grid_of_beams(segments, kind);
    Row row;
    row.segments = static_cast<double>(level.segments.size());
    row.diagram = time_of_diagram(level);
    const auto start = std::clock();
    const runnel::Sharing sharing = runnel::share_decks(level.plan, level.framing, 0);
    row.share = seconds_since(start);
    double area = 0;
    for (const double a : sharing.deck_area) {
        area += a;
    }
    if (!(std::abs(cell_area(sharing) - area) <= 1e-9 * area)) {
        std::fprintf(stderr, "areas do not close: %.9g of %.9g m2\n", cell_area(sharing), area);
        std::exit(1);
    }
    return row;
}

double exponent(double a, double b, double n_a, double n_b) {
    return std::log(b / a) / std::log(n_b / n_a);
}

double peak_megabytes() {
    std::ifstream status("/proc/self/status");
    std::string word;
    while (status >> word) {
        if (word == "VmHWM:") {
            double kib = 0;
            status >> kib;
            return kib / 1024;
        }
    }
    return 0;
}

} // namespace

int main(int argc, char** argv) {
    const double largest = argc > 1 ? std::strtod(argv[1], nullptr) : 1e6;
    const std::vector<std::pair<Kind, const char*>> kinds{
        {Kind::bays, "two-way, a deck each bay"},
        {Kind::one_deck, "two-way, one deck on beams from column to column"},
        {Kind::running_on, "two-way, one deck on beams that run on and cross"},
        {Kind::joists, "one-way, rows of joists"}};
    for (const auto& [kind, name] : kinds) {
        std::printf("%s\n%10s %12s %10s %8s %9s\n", name, "segments", "diagram us", "share us", "ratio",
                    "peak MB");
        std::vector<Row> rows;
        for (double segments = 1e4; segments <= largest * 1.001; segments *= 10) {
            measure(static_cast<std::size_t>(segments), kind); // warm: first touch of memory costs much
            rows.push_back(measure(static_cast<std::size_t>(segments), kind));
            const Row& row = rows.back();
            const double us = 1e6 / row.segments;
            std::printf("%10.0f %12.3f %10.3f %8.3f %9.0f\n", row.segments, row.diagram * us, row.share * us,
                        row.share / row.diagram, peak_megabytes());
            std::fflush(stdout);
        }
        if (rows.size() > 1) {
            const Row& a = rows.front();
            const Row& b = rows.back();
            std::printf("exponent from %.0f to %.0f segments: diagram %.3f, share %.3f\n", a.segments,
                        b.segments, exponent(a.diagram, b.diagram, a.segments, b.segments),
                        exponent(a.share, b.share, a.segments, b.segments));
        }
    }
    return 0;
}
