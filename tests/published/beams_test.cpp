#include "frame/beam.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <string>
#include <vector>

using namespace runnel;

// Reactions and support moments of published beams. Each row names its source; "from memory" where the source
// was not at hand when the row was written. `printed` is what the source prints, held to its rounding;
// `computed` is the same worked out independently to eight digits, held to 1e-7.

namespace {

struct LineRow {
    double from, to, start, end;
};
struct PointRow {
    double station, p;
};
struct MomentRow {
    double station;
    double printed, computed; // hogging positive, as fixed-end moments are tabled
};
struct Row {
    const char* name;
    const char* source;
    double length;
    std::vector<BeamSupport> supports;
    std::vector<LineRow> lines;
    std::vector<PointRow> points;
    std::vector<double> printed; // reactions; empty: the source prints none
    double rounding;             // of what is printed, absolute
    std::vector<double> computed;
    std::vector<MomentRow> moments;
    std::vector<double> span_stiffness;
};

constexpr const char* awc = "American Wood Council, Design Aid No. 6, Beam Formulas (2005/2007)";
constexpr const char* awc_memory =
    "American Wood Council, Design Aid No. 6, Beam Formulas (2005/2007), from memory";
constexpr const char* aisc = "AISC Steel Construction Manual, Table 3-23, equal-span continuous beams";
constexpr const char* aisc_memory = "AISC Steel Construction Manual, Table 3-23, from memory";
constexpr const char* fem_memory =
    "table of fixed-end moments (Hibbeler, Structural Analysis; Kassimali, Structural Analysis), from memory";
constexpr const char* hibbeler_memory = "R. C. Hibbeler, Structural Analysis, 8th ed., from memory";

const std::vector<Row>& rows() {
    static const std::vector<Row> all{
        // Beam formulas; w = 1 or P = 1 and l = 1 unless the row says otherwise.
        {"simple beam, uniform load",
         awc_memory,
         1,
         {{0}, {1}},
         {{0, 1, 1, 1}},
         {},
         {0.5, 0.5},
         1e-9,
         {0.5, 0.5},
         {},
         {}},
        {"simple beam, load rising to the right end",
         awc_memory,
         1,
         {{0}, {1}},
         {{0, 1, 0, 2}},
         {},
         {0.3333, 0.6667},
         5e-5,
         {0.33333333, 0.66666667},
         {},
         {}},
        {"simple beam, triangular load",
         awc_memory,
         1,
         {{0}, {1}},
         {{0, 0.5, 0, 2}, {0.5, 1, 2, 0}},
         {},
         {0.5, 0.5},
         1e-9,
         {0.5, 0.5},
         {},
         {}},
        {"cantilever, load rising to the built-in end",
         aisc_memory,
         1,
         {{1, true}},
         {{0, 1, 0, 2}},
         {},
         {1.0},
         1e-9,
         {1.0},
         {{1, 0.33333333, 0.33333333}},
         {}},
        {"propped cantilever, uniform load: 3/8, 5/8, 1/8",
         awc,
         1,
         {{0}, {1, true}},
         {{0, 1, 1, 1}},
         {},
         {0.375, 0.625},
         1e-9,
         {0.375, 0.625},
         {{1, 0.125, 0.125}},
         {}},
        {"propped cantilever, point load at midspan: 5/16, 11/16, 3/16",
         awc_memory,
         1,
         {{0}, {1, true}},
         {},
         {{0.5, 1}},
         {0.3125, 0.6875},
         1e-9,
         {0.3125, 0.6875},
         {{1, 0.1875, 0.1875}},
         {}},
        {"built in at both ends, uniform load: 1/12",
         awc,
         1,
         {{0, true}, {1, true}},
         {{0, 1, 1, 1}},
         {},
         {0.5, 0.5},
         1e-9,
         {0.5, 0.5},
         {{0, 0.0833333, 0.083333333}, {1, 0.0833333, 0.083333333}},
         {}},
        {"overhang of 2 beyond 6, w = 5 on the whole",
         awc,
         8,
         {{0}, {6}},
         {{0, 8, 5, 5}},
         {},
         {13.333, 26.667},
         5e-4,
         {13.333333333, 26.666666667},
         {{6, 10, 10}},
         {}},
        {"overhang of 2 beyond 6, P = 9 at its tip",
         awc_memory,
         8,
         {{0}, {6}},
         {},
         {{8, 9}},
         {-3, 12},
         1e-9,
         {-3, 12},
         {{6, 18, 18}},
         {}},
        {"two equal spans, uniform load on one",
         awc_memory,
         2,
         {{0}, {1}, {2}},
         {{0, 1, 1, 1}},
         {},
         {0.4375, 0.625, -0.0625},
         1e-9,
         {0.4375, 0.625, -0.0625},
         {{1, 0.0625, 0.0625}},
         {}},
        {"two equal spans, uniform load on both: 3/8, 10/8, 3/8",
         awc,
         2,
         {{0}, {1}, {2}},
         {{0, 2, 1, 1}},
         {},
         {0.375, 1.25, 0.375},
         1e-9,
         {0.375, 1.25, 0.375},
         {{1, 0.125, 0.125}},
         {}},
        {"two equal spans, a point load at each midspan",
         awc_memory,
         2,
         {{0}, {1}, {2}},
         {},
         {{0.5, 1}, {1.5, 1}},
         {0.3125, 1.375, 0.3125},
         1e-9,
         {0.3125, 1.375, 0.3125},
         {{1, 0.1875, 0.1875}},
         {}},
        {"three equal spans, uniform load",
         aisc,
         3,
         {{0}, {1}, {2}, {3}},
         {{0, 3, 1, 1}},
         {},
         {0.4, 1.1, 1.1, 0.4},
         1e-9,
         {0.4, 1.1, 1.1, 0.4},
         {{1, 0.1, 0.1}, {2, 0.1, 0.1}},
         {}},
        {"three equal spans, uniform load on the first two",
         aisc,
         3,
         {{0}, {1}, {2}, {3}},
         {{0, 2, 1, 1}},
         {},
         {0.383, 1.2, 0.45, -0.033},
         5e-4,
         {0.38333333, 1.2, 0.45, -0.033333333},
         {{1, 0.1167, 0.11666667}, {2, 0.0333, 0.033333333}},
         {}},
        {"four equal spans, uniform load",
         aisc,
         4,
         {{0}, {1}, {2}, {3}, {4}},
         {{0, 4, 1, 1}},
         {},
         {0.393, 1.143, 0.928, 1.143, 0.393},
         1e-3, // the middle one is printed cut, not rounded
         {0.39285714, 1.1428571, 0.92857143, 1.1428571, 0.39285714},
         {{1, 0.1071, 0.10714286}, {2, 0.0714, 0.071428571}},
         {}},
        {"four equal spans, uniform load on the first and third",
         aisc,
         4,
         {{0}, {1}, {2}, {3}, {4}},
         {{0, 1, 1, 1}, {2, 3, 1, 1}},
         {},
         {0.446, 0.572, 0.464, 0.572, -0.054},
         1e-3,
         {0.44642857, 0.57142857, 0.46428571, 0.57142857, -0.053571429},
         {{1, 0.0536, 0.053571429}, {2, 0.0357, 0.035714286}, {3, 0.0536, 0.053571429}},
         {}},
        // Fixed-end moments.
        {"built in, w = 12 on 5",
         fem_memory,
         5,
         {{0, true}, {5, true}},
         {{0, 5, 12, 12}},
         {},
         {},
         1e-9,
         {30, 30},
         {{0, 25, 25}, {5, 25, 25}},
         {}},
        {"built in, P = 20 at 2 of 5: P a b2 / l2",
         "W. S. Megson, Structural and Stress Analysis, Example 13.20",
         5,
         {{0, true}, {5, true}},
         {},
         {{2, 20}},
         {},
         1e-9,
         {12.96, 7.04},
         {{0, 14.4, 14.4}, {5, 9.6, 9.6}},
         {}},
        {"built in, load rising to 10 on 6: w l2 / 30 and / 20",
         fem_memory,
         6,
         {{0, true}, {6, true}},
         {{0, 6, 0, 10}},
         {},
         {9, 21},
         1e-9,
         {9, 21},
         {{0, 12, 12}, {6, 18, 18}},
         {}},
        {"built in, triangle with peak 24 on 8: 5 w l2 / 96",
         fem_memory,
         8,
         {{0, true}, {8, true}},
         {{0, 4, 0, 24}, {4, 8, 24, 0}},
         {},
         {},
         1e-9,
         {48, 48},
         {{0, 80, 80}, {8, 80, 80}},
         {}},
        {"built in on the left, w = 8 on 6: w l2 / 8",
         fem_memory,
         6,
         {{0, true}, {6}},
         {{0, 6, 8, 8}},
         {},
         {30, 18},
         1e-9,
         {30, 18},
         {{0, 36, 36}},
         {}},
        {"built in on the left, load rising to 12 at the pin of 10: 7 w l2 / 120",
         fem_memory,
         10,
         {{0, true}, {10}},
         {{0, 10, 0, 12}},
         {},
         {},
         1e-9,
         {27, 33},
         {{0, 70, 70}},
         {}},
        {"built in on the left, P = 16 at the middle of 6: 3 P l / 16",
         fem_memory,
         6,
         {{0, true}, {6}},
         {},
         {{3, 16}},
         {11, 5},
         1e-9,
         {11, 5},
         {{0, 18, 18}},
         {}},
        // Worked examples.
        {"built in at 0 and 14, bearing at 8, load rising to 6 on the second span",
         hibbeler_memory,
         14,
         {{0, true}, {8}, {14, true}},
         {{8, 14, 0, 6}},
         {},
         {},
         5e-3,
         {-0.57857143, 4.95, 13.628571},
         {{0, -1.54, -1.5428571}, {8, 3.09, 3.0857143}, {14, 12.86, 12.857143}},
         {}},
        // The source distributes moments and stops early, 0.2 % from exact.
        {"three spans of 12, 12 and 8, ends built in",
         hibbeler_memory,
         32,
         {{0, true}, {12}, {24}, {32, true}},
         {{12, 24, 20, 20}},
         {{28, 250}},
         {},
         0.15,
         {-15.657895, 122.63158, 263.94737, 119.07895},
         {{0, -62.5, -62.631579}, {12, 125.2, 125.26316}, {24, 281.5, 281.57895}, {32, 234.3, 234.21053}},
         {}},
        {"two spans of 15 and 20, the second twice as stiff",
         hibbeler_memory,
         35,
         {{0, true}, {15}, {35}},
         {{0, 15, 240, 240}, {15, 35, 250, 250}},
         {},
         {},
         0.06,
         {1423.5294, 5089.7059, 2086.7647},
         {{0, 2617.7, 2617.6471}, {15, 8264.7, 8264.7059}},
         {300, 600}},
        {"spans of 20 and 30 with an overhang of 10, built in on the left",
         "A. Kassimali, Structural Analysis, Example D.3 (three-moment equation)",
         60,
         {{0, true}, {20}, {50}},
         {{20, 60, 1.8, 1.8}},
         {{10, 45}},
         {},
         1e-9,
         {20.25, 53.5, 43.25},
         {{0, 97.5, 97.5}, {20, 142.5, 142.5}, {50, 90, 90}},
         {}},
        {"spans of 6 and 5, built in on the left, P = 100 at 4 and w = 20 on the second",
         "H. P. Sudarshan, VTU notes on the slope deflection method",
         11,
         {{0, true}, {6}, {11}},
         {{6, 11, 20, 20}},
         {{4, 100}},
         {29.4, 135.6, 35.0},
         5e-2,
         {29.398148, 135.60185, 35.0},
         {{0, 51.38, 51.388889}, {6, 75, 75}},
         {}},
        // Coefficients 0.061 and 0.019 have two digits, so the printed moments are 0.3 % off.
        {"spans of 8, 10 and 6, q = 2 on the first",
         "I. Karnovsky and O. Lebed, Advanced Methods of Structural Analysis, Table A.14",
         24,
         {{0}, {8}, {18}, {24}},
         {{0, 8, 2, 2}},
         {},
         {},
         0.03,
         {7.026616, 9.9954373, -1.4276299, 0.40557668},
         {{8, 7.808, 7.7870722}, {18, -2.432, -2.4334601}},
         {}},
        // Coefficients with three digits: 0.3 %. The largest hogging moment at the second bearing.
        {"three spans of 7.2, 51.84 on all and 54 on the first two",
         "university teaching example (pattern loading)",
         21.6,
         {{0}, {7.2}, {14.4}, {21.6}},
         {{0, 14.4, 105.84, 105.84}, {14.4, 21.6, 51.84, 51.84}},
         {},
         {},
         1.2,
         {},
         {{7.2, 596.3, 595.33056}},
         {}},
        // Loads that floors bring.
        {"joist of 18 ft at 2 ft under 50 psf: 900 lb",
         "University of Oregon, ARCH 461, Example 19-1",
         18,
         {{0}, {18}},
         {{0, 18, 100, 100}},
         {},
         {900, 900},
         1e-9,
         {900, 900},
         {},
         {}},
        {"beam of 16 ft under its joists: 3600 lb",
         "University of Oregon, ARCH 461, Example 19-1",
         16,
         {{0}, {16}},
         {{0, 16, 450, 450}},
         {},
         {3600, 3600},
         1e-9,
         {3600, 3600},
         {},
         {}},
        {"long edge of a 6 x 4 panel, trapezoid with peak 20",
         "open teaching notes on two-way panels",
         6,
         {{0}, {6}},
         {{0, 2, 0, 20}, {2, 4, 20, 20}, {4, 6, 20, 0}},
         {},
         {40, 40},
         1e-9,
         {40, 40},
         {},
         {}},
        {"short edge of a 6 x 4 panel, triangle with peak 20",
         "open teaching notes on two-way panels",
         4,
         {{0}, {4}},
         {{0, 2, 0, 20}, {2, 4, 20, 0}},
         {},
         {20, 20},
         1e-9,
         {20, 20},
         {},
         {}},
    };
    return all;
}

struct Found {
    std::vector<double> reactions, moments;
};

Found solve(const Row& row) {
    const auto influence = BeamInfluence::of({row.length, row.supports, {}, row.span_stiffness});
    REQUIRE(influence);
    Found found;
    found.reactions.assign(row.supports.size(), 0);
    found.moments.assign(row.supports.size(), 0);
    for (const LineRow& line : row.lines) {
        influence->add_line(
            {line.from, line.to, {line.start, (line.end - line.start) / (line.to - line.from)}},
            found.reactions, found.moments);
    }
    for (const PointRow& point : row.points) {
        influence->add_point(point.station, point.p, found.reactions, found.moments);
    }
    return found;
}

/// Hogging moment over a bearing: from what stands beyond it, towards the end of the beam.
double hogging_at(const Row& row, const Found& found, double station) {
    double moment = 0;
    for (const LineRow& line : row.lines) {
        const double from = std::max(line.from, station);
        if (from >= line.to) {
            continue;
        }
        const double length = line.to - from;
        const double start =
            line.start + (line.end - line.start) * (from - line.from) / (line.to - line.from);
        moment += length * start * (from + length / 2 - station) +
                  length * (line.end - start) / 2 * (from + length * 2 / 3 - station);
    }
    for (const PointRow& point : row.points) {
        moment += point.p * std::max(point.station - station, 0.0);
    }
    for (std::size_t i = 0; i < row.supports.size(); ++i) {
        if (row.supports[i].station > station) {
            moment -= found.reactions[i] * (row.supports[i].station - station) + found.moments[i];
        }
    }
    // At a built-in right end nothing stands beyond; what the beam brings from the left is held there.
    if (station == row.supports.back().station && row.supports.back().turn_held) {
        return -found.moments.back();
    }
    return moment;
}

double digits(double found, double expected) {
    const double off = std::abs(found - expected) / std::max(std::abs(expected), 1e-300);
    return off == 0 ? 16 : std::min(16.0, -std::log10(off));
}

} // namespace

TEST_CASE("published beams: reactions and support moments") {
    std::string table = "digits that agree with the value worked out independently (8 are given)\n";
    for (const Row& row : rows()) {
        INFO(row.name, " [", row.source, "]");
        const Found found = solve(row);
        double worst = 16;
        double size = 0;
        for (const double reaction : found.reactions) {
            size = std::max(size, std::abs(reaction));
        }
        for (std::size_t i = 0; i < row.printed.size(); ++i) {
            CHECK(std::abs(found.reactions[i] - row.printed[i]) <= row.rounding);
        }
        for (std::size_t i = 0; i < row.computed.size(); ++i) {
            CHECK(std::abs(found.reactions[i] - row.computed[i]) <= 1e-7 * size);
            worst = std::min(worst, digits(found.reactions[i], row.computed[i]));
        }
        for (const MomentRow& moment : row.moments) {
            const double hogging = hogging_at(row, found, moment.station);
            // Moments of table rows are printed to four digits at best; those of examples to the row's
            // rounding.
            CHECK(std::abs(hogging - moment.printed) <= std::max(row.rounding, 5e-5));
            CHECK(std::abs(hogging - moment.computed) <= 1e-7 * std::max(std::abs(moment.computed), 1e-2));
            worst = std::min(worst, digits(hogging, moment.computed));
        }
        char line[160];
        std::snprintf(line, sizeof line, "%5.1f  %s\n", worst, row.name);
        table += line;
    }
    MESSAGE(table);
}
