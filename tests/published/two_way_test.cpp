// Published examples of two-way panels and of decks on columns, run through the whole takedown. Sources stand
// beside each; "from memory" where the source was not at hand when the row was written.

#include <runnel/plan.hpp>
#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <string>
#include <vector>

using namespace runnel;
using doctest::Approx;

namespace {

std::string text_of(Point p) {
    return "[" + std::to_string(p.x) + "," + std::to_string(p.y) + "]";
}
std::string text_of(const Ring& ring) {
    std::string text;
    for (const Point& p : ring) {
        text += (text.empty() ? "" : ",") + text_of(p);
    }
    return "[" + text + "]";
}

/// A floor at 3 m in kN and m with one deck under one area load.
class Floor {
public:
    Floor(const Ring& deck, const std::string& rule, double q) {
        deck_ = R"({"id":"D",)" + rule + R"(,"outline":)" + text_of(deck) + "}";
        load_ = R"({"case":"all","q":)" + std::to_string(q) + "}";
    }
    Floor& column(Point at) {
        columns_ += (columns_.empty() ? "" : ",") + std::string(R"({"id":"C)") + std::to_string(count_++) +
                    R"(","at":)" + text_of(at) + R"(,"top":"floor"})";
        return *this;
    }
    Floor& beam(Point from, Point to) {
        beams_ += (beams_.empty() ? "" : ",") + std::string(R"({"id":"B)") + std::to_string(beam_count_++) +
                  R"(","role":"beam","from":)" + text_of(from) + R"(,"to":)" + text_of(to) + "}";
        return *this;
    }
    /// A column at each corner and a beam along each edge of a ring.
    Floor& framed_around(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            column(ring[i]).beam(ring[i], ring[(i + 1) % ring.size()]);
        }
        return *this;
    }

    [[nodiscard]] Takedown taken_down() const {
        const PlanReading reading =
            read_plan(R"({"runnel":"plan/1","units":{"length":"m","force":"kN"},
            "cases":[{"id":"all","kind":"live"}],"columns":[)" +
                      columns_ + R"(],"levels":[{"id":"floor","elevation":3,"members":[)" + beams_ +
                      R"(],"decks":[)" + deck_ + R"(],"area_loads":[)" + load_ + "]}]}");
        REQUIRE_MESSAGE(!has_errors(reading.problems), errors_of(reading.problems));
        Takedown takedown = take_down(reading.plan);
        REQUIRE_MESSAGE(takedown.complete, errors_of(takedown.problems));
        CHECK(check_balance(takedown).empty());
        return takedown;
    }

private:
    static std::string errors_of(const std::vector<Problem>& problems) {
        std::string errors;
        for (const Problem& problem : problems) {
            errors += problem.severity == Severity::error ? problem.message + "\n" : "";
        }
        return errors;
    }

    std::string deck_, load_, columns_, beams_;
    int count_ = 0;
    int beam_count_ = 0;
};

constexpr const char* two_way = R"("span":"two-way")";
constexpr const char* by_fixity = R"("span":"two-way","corner_angles":"by_fixity")";
constexpr const char* on_columns = R"("span":"columns")";

Ring rectangle(double x0, double y0, double x1, double y1) {
    return {{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}};
}

/// Bays of 6 m by 4 m, `across` by `up`: beams between neighbouring columns along all lines, those along x
/// first, row by row from the bottom, then those along y, column by column from the left.
Floor bays_of_6_by_4(int across, int up) {
    Floor floor(rectangle(0, 0, 6 * across, 4 * up), by_fixity, 1);
    const auto node = [](int i, int j) { return Point{6.0 * i, 4.0 * j}; };
    for (int j = 0; j <= up; ++j) {
        for (int i = 0; i <= across; ++i) {
            floor.column(node(i, j));
        }
    }
    for (int j = 0; j <= up; ++j) {
        for (int i = 0; i < across; ++i) {
            floor.beam(node(i, j), node(i + 1, j));
        }
    }
    for (int i = 0; i <= across; ++i) {
        for (int j = 0; j < up; ++j) {
            floor.beam(node(i, j), node(i, j + 1));
        }
    }
    return floor;
}

/// Total load on a beam, what goes to its ends as to points included; and its ordinate at a station.
double total(const Takedown& t, std::size_t beam) {
    double sum = 0;
    for (const CarrierPoint& point : t.levels[0].points[beam]) {
        sum += point.p;
    }
    for (const CarrierLine& line : t.levels[0].lines[beam]) {
        sum += line.piece.total();
    }
    return sum;
}
double line_at(const Takedown& t, std::size_t beam, double station) {
    double w = 0;
    for (const CarrierLine& line : t.levels[0].lines[beam]) {
        if (station >= line.piece.from && station < line.piece.to) {
            w += line.piece.at(station);
        }
    }
    return w;
}
double reaction(const Takedown& t, std::size_t beam, std::size_t bearing) {
    return t.levels[0].reactions[t.framing.levels[0].bearings.first(beam) + bearing];
}
/// Bending moment in the middle of a simple beam, by statics from its first reaction and its line loads.
double moment_in_the_middle(const Takedown& t, std::size_t beam) {
    const double middle = t.framing.levels[0].members[beam].length / 2;
    double moment = reaction(t, beam, 0) * middle;
    for (const CarrierLine& line : t.levels[0].lines[beam]) {
        if (line.piece.from < middle) {
            const LinePiece left = line.piece.between(line.piece.from, std::min(line.piece.to, middle));
            moment -= left.total() * (middle - left.from) - left.first_moment();
        }
    }
    return moment;
}

void check_totals(const Takedown& t, const std::vector<double>& totals, double relative) {
    double sum = 0;
    for (std::size_t beam = 0; beam < totals.size(); ++beam) {
        CAPTURE(beam);
        CHECK(total(t, beam) == Approx(totals[beam]).epsilon(relative));
        sum += totals[beam];
    }
    CHECK(t.balance[0].arrived.force == Approx(sum).epsilon(relative));
}

} // namespace

TEST_CASE("D08: a panel of 4 m by 6 m under 10 kPa: trapezoids on the long beams, triangles on the short") {
    // Open teaching notes on two-way panels, 45 degree lines: areas (lx ly - lx^2 / 2) / 2 and lx^2 / 4;
    // equivalent uniform loads for moment q lx / 2 (1 - 1 / (3 k^2)) with k = ly / lx, and q lx / 3.
    const Ring panel = rectangle(0, 0, 6, 4);
    const Takedown t = Floor(panel, two_way, 10).framed_around(panel).taken_down();
    check_totals(t, {80, 40, 80, 40}, 1e-12);
    CHECK(line_at(t, 0, 3) == Approx(20).epsilon(1e-12));
    CHECK(line_at(t, 0, 1) == Approx(10).epsilon(1e-12));
    CHECK(line_at(t, 1, 2) == Approx(20).epsilon(1e-12));
    CHECK(moment_in_the_middle(t, 0) == Approx(76.666667).epsilon(1e-8));
    CHECK(moment_in_the_middle(t, 1) == Approx(26.666667).epsilon(1e-7));
    CHECK(reaction(t, 0, 0) == Approx(40).epsilon(1e-12));
    CHECK(reaction(t, 1, 1) == Approx(20).epsilon(1e-12));
}

TEST_CASE("D12: a square panel of 4 m under 5.5 kPa: triangles of 11 kN/m, 14.67 kNm in the middle") {
    // Open note "Load distribution": 14.67 kNm under the triangle; a uniform load of the same total gives 11
    // only. (The note prints the moments in kN/m.)
    const Ring panel = rectangle(0, 0, 4, 4);
    const Takedown t = Floor(panel, two_way, 5.5).framed_around(panel).taken_down();
    check_totals(t, {22, 22, 22, 22}, 1e-12);
    for (std::size_t beam = 0; beam < 4; ++beam) {
        CHECK(line_at(t, beam, 2) == Approx(11).epsilon(1e-12));
        CHECK(moment_in_the_middle(t, beam) == Approx(14.67).epsilon(3e-4));
        CHECK(total(t, beam) * 4 / 8 == Approx(11).epsilon(1e-12));
    }
}

// DIN 1045:1988-07, 20.1.5, and DAfStb Heft 240 (from memory): where a continuous and a simply supported edge
// meet, the load divides at 60 degrees from the continuous one, between like edges at 45. Areas derived here,
// by exact trigonometry; each bay is 6 m by 4 m.
TEST_CASE("H01: by fixity, all edges alike: 8 on the long, 4 on the short beams") {
    check_totals(bays_of_6_by_4(1, 1).taken_down(), {8, 8, 4, 4}, 1e-12);
}

TEST_CASE("H02: by fixity, one long edge continuous: 11.5026 on it, 6.6410 and 2.9282 on the others") {
    const Takedown t = bays_of_6_by_4(1, 2).taken_down();
    check_totals(t, {6.6410162, 2 * 11.502577, 6.6410162, 2.9282032, 2.9282032, 2.9282032, 2.9282032}, 5e-8);
    const double ridge = 4 / (1 + std::sqrt(3.0)); // from the simply supported long edge
    CHECK(line_at(t, 0, 3) == Approx(ridge).epsilon(1e-12));
    CHECK(line_at(t, 1, 3) == Approx(2 * (4 - ridge)).epsilon(1e-12));
}

TEST_CASE("H03: by fixity, both short edges continuous: 5.1962 on the long edges, 6.8038 on the short") {
    const Takedown t = bays_of_6_by_4(3, 1).taken_down();
    // The middle bay's long beams are the second of each row; the inner beams along y take the middle bay's
    // short edges and those of the end bays, which have one short edge continuous.
    CHECK(total(t, 1) == Approx(5.1961524).epsilon(5e-8));
    CHECK(total(t, 4) == Approx(5.1961524).epsilon(5e-8));
    CHECK(line_at(t, 1, 3) == Approx(std::sqrt(3.0)).epsilon(1e-12));
    const double end_bay = 24 - total(t, 0) - total(t, 3) - total(t, 6);
    CHECK(total(t, 7) - end_bay == Approx(6.8038476).epsilon(5e-8));
    CHECK(total(t, 8) == Approx(total(t, 7)).epsilon(1e-12));
}

TEST_CASE("H04: by fixity, both long edges continuous: 9.6906 on them, 2.3094 on the short") {
    const Takedown t = bays_of_6_by_4(1, 3).taken_down();
    check_totals(t,
                 {6.6410162, 11.502577 + 9.6905989, 11.502577 + 9.6905989, 6.6410162, 2.9282032, 2.3094011,
                  2.9282032, 2.9282032, 2.3094011, 2.9282032},
                 5e-8);
}

TEST_CASE("H06: a beam of 3 m between continuous bays: its load rises to 2.598 m of slab, or half its span") {
    // DAfStb Heft 240 as summarised by the Hochschule Wismar's open notes: a concealed beam takes a triangle
    // below 60 degree lines, b_E = l / 2 tan 60, that becomes a trapezoid at half the slab's span.
    const auto middle_bay_of = [](double span) {
        Floor floor(rectangle(0, 0, 3, 3 * span), by_fixity, 1);
        for (int j = 0; j <= 3; ++j) {
            floor.column({0, j * span}).column({3, j * span});
            floor.beam({0, j * span}, {3, j * span});
        }
        for (int j = 0; j < 3; ++j) {
            floor.beam({0, j * span}, {0, j * span + span}).beam({3, j * span}, {3, j * span + span});
        }
        // An inner beam takes the middle bay's end, which is continuous at both, and an end bay's.
        const Takedown t = floor.taken_down();
        return total(t, 1) - (3 * span - total(t, 0) - total(t, 4) - total(t, 5));
    };
    CHECK(middle_bay_of(6) == Approx(3 * 2.598 / 2).epsilon(3e-5));
    // Half of 4 m: a trapezoid 2 m high, its slopes at 60 degrees.
    CHECK(middle_bay_of(4) == Approx(2 * (3 - 2 / std::sqrt(3.0))).epsilon(1e-12));
}

TEST_CASE("I01: a rectangle of 9 by 5 divides into b (2a - b) / 4 and b^2 / 4") {
    // Closed form, as in open teaching notes.
    const Ring panel = rectangle(0, 0, 9, 5);
    check_totals(Floor(panel, two_way, 1).framed_around(panel).taken_down(), {16.25, 6.25, 16.25, 6.25},
                 1e-12);
}

TEST_CASE("I02: a 3-4-5 triangle divides by its inradius") {
    // Closed form; in a convex panel the nearest edge is what O. Aichholzer and F. Aurenhammer, Straight
    // skeletons (1995/96) define; from memory.
    const Ring panel{{0, 0}, {3, 0}, {0, 4}};
    check_totals(Floor(panel, two_way, 1).framed_around(panel).taken_down(), {1.5, 2.5, 2.0}, 1e-12);
}

TEST_CASE("I04: a trapezoid with legs of 5 divides along a ridge of 2 m") {
    // Closed form from the same definition; from memory.
    const Ring panel{{0, 0}, {10, 0}, {7, 4}, {3, 4}};
    check_totals(Floor(panel, two_way, 1).framed_around(panel).taken_down(), {12, 5, 6, 5}, 1e-12);
}

TEST_CASE("I05: in an L of 6 by 6 less 3 by 3 the nearest line gives other areas than a straight skeleton") {
    // Straight skeleton (definition: Aichholzer and Aurenhammer 1995/96, from memory): 6.75, 2.25, 4.5. The
    // nearest line puts a parabola beside the re-entrant corner: 6.8897, 2.25, 4.3603.
    const Ring panel{{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}};
    const Takedown t = Floor(panel, two_way, 1).framed_around(panel).taken_down();
    check_totals(t, {6.8897, 2.25, 4.3603, 4.3603, 2.25, 6.8897}, 1e-5);
    CHECK(std::abs(total(t, 0) - 6.75) > 0.1);
    CHECK(std::abs(total(t, 2) - 4.5) > 0.1);
}

TEST_CASE("I08: a flat slab on a grid of unequal bays gives its columns the products of half spacings") {
    // Closed form: the Voronoi cell of a rectangular grid; from memory.
    Floor floor(rectangle(-1, -0.5, 21, 11.5), on_columns, 1);
    for (const double x : {0.0, 6.0, 14.0, 20.0}) {
        for (const double y : {0.0, 5.0, 11.0}) {
            floor.column({x, y});
        }
    }
    const Takedown t = floor.taken_down();
    const std::vector<double> areas{12, 22, 14, 21, 38.5, 24.5, 21, 38.5, 24.5, 12, 22, 14};
    for (std::size_t c = 0; c < areas.size(); ++c) {
        CHECK(t.columns[c].lifts[0].tributary_area == Approx(areas[c]).epsilon(1e-12));
        CHECK(t.columns[c].lifts[0].total[0] == Approx(areas[c]).epsilon(1e-12));
    }
}

TEST_CASE("I10: a triangular bay on three columns divides through its circumcentre") {
    // Derived by hand: circumcentre (4, 5/3); 23/3, 23/3 and 26/3.
    const Ring panel{{0, 0}, {8, 0}, {4, 6}};
    Floor floor(panel, on_columns, 1);
    for (const Point& corner : panel) {
        floor.column(corner);
    }
    const Takedown t = floor.taken_down();
    CHECK(t.columns[0].lifts[0].tributary_area == Approx(23.0 / 3).epsilon(1e-12));
    CHECK(t.columns[1].lifts[0].tributary_area == Approx(23.0 / 3).epsilon(1e-12));
    CHECK(t.columns[2].lifts[0].tributary_area == Approx(26.0 / 3).epsilon(1e-12));
}
