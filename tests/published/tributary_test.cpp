// Published examples of tributary areas and load paths, run through the whole takedown. Sources stand beside
// each; values are the source's, in its units.

#include <runnel/plan.hpp>
#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;
using doctest::Approx;

namespace {

const double kip = si_per_unit({LengthUnit::ft, ForceUnit::kip}, dimension::force);
const double lb = kip / 1000;
const double ft = 0.3048;
const double plf = lb / ft;

Takedown taken_down(const std::string& text) {
    const PlanReading reading = read_plan(text);
    std::string errors;
    for (const Problem& problem : reading.problems) {
        errors += problem.severity == Severity::error ? problem.message + "\n" : "";
    }
    REQUIRE_MESSAGE(!has_errors(reading.problems), errors);
    Takedown takedown = take_down(reading.plan);
    for (const Problem& problem : takedown.problems) {
        errors += problem.severity == Severity::error ? problem.message + "\n" : "";
    }
    REQUIRE_MESSAGE(takedown.complete, errors);
    CHECK(check_balance(takedown).empty());
    return takedown;
}

std::uint32_t member_of(const Takedown& t, const std::string& id) {
    const auto& members = t.framing.levels[0].members;
    const auto it =
        std::find_if(members.begin(), members.end(), [&](const FramedMember& m) { return m.id == id; });
    REQUIRE(it != members.end());
    return static_cast<std::uint32_t>(it - members.begin());
}

/// Line load on a member at a station, all sources of a case, kN/m.
double line_at(const Takedown& t, std::uint32_t member, double station, std::uint32_t load_case) {
    double w = 0;
    for (const CarrierLine& line : t.levels[0].lines[member]) {
        if (line.load_case == load_case && station >= line.piece.from && station <= line.piece.to) {
            w += line.piece.at(station);
        }
    }
    return w;
}

double reaction(const Takedown& t, std::uint32_t member, std::size_t bearing, std::uint32_t load_case) {
    const std::size_t first = t.framing.levels[0].bearings.first(member);
    return t.levels[0].reactions[(first + bearing) * t.plan.cases.size() + load_case];
}

std::string posts(const std::vector<std::pair<double, double>>& places) {
    std::string text;
    for (std::size_t i = 0; i < places.size(); ++i) {
        text += (i > 0 ? "," : "") + std::string(R"({"id":"C)") + std::to_string(i) + R"(","at":[)" +
                std::to_string(places[i].first) + "," + std::to_string(places[i].second) +
                R"(],"top":"floor"})";
    }
    return text;
}

std::string plan(const std::string& columns, const std::string& level) {
    return R"({"runnel":"plan/1","units":{"length":"ft","force":"lbf"},
        "cases":[{"id":"all","kind":"live"}],"columns":[)" +
           columns + R"(],"levels":[{"id":"floor","elevation":10,)" + level + "}]}";
}

} // namespace

TEST_CASE("D01: a floor beam 20 ft long with 10 ft of tributary width under 100 psf") {
    // J. Ochshorn, Structural Elements for Architects and Builders, 3rd ed. (open web edition), chapter 1,
    // figs. 1.5 and 1.6: 1 kip/ft, 20 kip in all, reactions of 10 kip.
    const Takedown t = taken_down(plan(posts({{0, 0}, {20, 0}, {0, 10}, {20, 10}, {0, 20}, {20, 20}}),
                                       R"("members":[
        {"id":"A","role":"beam","from":[0,0],"to":[20,0]},
        {"id":"B","role":"beam","from":[0,10],"to":[20,10]},
        {"id":"C","role":"beam","from":[0,20],"to":[20,20]}],
        "decks":[{"id":"D","direction":90,"outline":[[0,0],[20,0],[20,20],[0,20]]}],
        "area_loads":[{"case":"all","q":"100 psf"}])"));
    const std::uint32_t b = member_of(t, "B");
    CHECK(line_at(t, b, 10 * ft, 0) == Approx(1 * kip / ft).epsilon(1e-12));
    CHECK(reaction(t, b, 0, 0) == Approx(10 * kip).epsilon(1e-12));
    CHECK(reaction(t, b, 1, 0) == Approx(10 * kip).epsilon(1e-12));
}

TEST_CASE("D03: joists of 18 ft at 2 ft under 50 psf, on a beam of 16 ft, on columns") {
    // University of Oregon, ARCH 461 courseware, example 19-1: joist 100 lb/ft and 900 lb at each end; the
    // beam's load of 7200 lb taken as 450 lb/ft, its column 3600 lb. The source spreads the joists' ends
    // evenly along the beam; with the end joists over the columns the same total reaches the pair of columns.
    const Takedown t = taken_down(plan(posts({{0, 0}, {16, 0}, {0, 18}, {16, 18}}), R"("members":[
        {"id":"S","role":"beam","from":[0,0],"to":[16,0]},
        {"id":"N","role":"beam","from":[0,18],"to":[16,18]}],
        "joist_fields":[{"id":"J","outline":[[0,0],[16,0],[16,18],[0,18]],"direction":90,"spacing":2}],
        "decks":[{"id":"D","direction":0,"outline":[[0,0],[16,0],[16,18],[0,18]]}],
        "area_loads":[{"case":"all","q":"50 psf"}])"));
    const std::uint32_t joist = member_of(t, "J.4");
    CHECK(line_at(t, joist, 3, 0) == Approx(100 * plf).epsilon(1e-12));
    CHECK(reaction(t, joist, 0, 0) == Approx(900 * lb).epsilon(1e-12));
    double on_pair = 0;
    for (const Foundation& foundation : t.foundations) {
        if (foundation.under.index < 2) {
            on_pair += foundation.reactions[0];
            CHECK(foundation.reactions[0] == Approx(3600 * lb).epsilon(1e-12));
        }
    }
    CHECK(on_pair == Approx(7200 * lb).epsilon(1e-12));
}

TEST_CASE("D06: an inner column in bays of 30 ft by 30 ft under a roof and two floors of 50 psf") {
    // Coleman, Structural Systems Design, example: 900 sq ft, roof 45,000 lb, floors 90,000 lb, 135,000 lb in
    // all.
    std::string columns;
    std::string members;
    for (int i = 0; i <= 2; ++i) {
        for (int j = 0; j <= 2; ++j) {
            columns += (columns.empty() ? "" : ",") + std::string(R"({"id":"C)") + std::to_string(i) +
                       std::to_string(j) + R"(","at":[)" + std::to_string(30 * i) + "," +
                       std::to_string(30 * j) + R"(],"top":"roof"})";
        }
    }
    for (int j = 0; j <= 2; ++j) {
        for (int i = 0; i < 2; ++i) {
            members += (members.empty() ? "" : ",") + std::string(R"({"id":"G)") + std::to_string(i) +
                       std::to_string(j) + R"(","role":"girder","from":[)" + std::to_string(30 * i) + "," +
                       std::to_string(30 * j) + R"(],"to":[)" + std::to_string(30 * i + 30) + "," +
                       std::to_string(30 * j) + "]}";
        }
    }
    const std::string body = R"("members":[)" + members + R"(],
        "decks":[{"id":"D","direction":90,"outline":[[0,0],[60,0],[60,60],[0,60]]}],
        "area_loads":[{"case":"all","q":"50 psf"}])";
    const Takedown t = taken_down(
        R"({"runnel":"plan/1","units":{"length":"ft","force":"lbf"},"cases":[{"id":"all","kind":"dead"}],
        "columns":[)" +
        columns + R"(],"levels":[{"id":"second","elevation":12,)" + body +
        R"(},{"id":"third","elevation":24,"like":"second"},{"id":"roof","elevation":36,"like":"second"}]})");
    const auto& lifts = t.columns[4].lifts; // C11
    REQUIRE(lifts.size() == 3);
    CHECK(lifts[0].tributary_area == Approx(900 * ft * ft).epsilon(1e-12));
    CHECK(lifts[0].total[0] == Approx(45000 * lb).epsilon(1e-12));
    CHECK(lifts[2].total[0] - lifts[0].total[0] == Approx(90000 * lb).epsilon(1e-12));
    CHECK(lifts[2].total[0] == Approx(135000 * lb).epsilon(1e-12));
    CHECK(lifts[2].area_total == Approx(2700 * ft * ft).epsilon(1e-12));
    CHECK(lifts[2].floors == 3);
}

TEST_CASE("D10: a classroom floor on bar joists of 15 ft at 2.5 ft, 4 in of slab and 40 psf") {
    // R. C. Hibbeler, Structural Analysis (8th ed. numbering), example 2.1; from memory: 72 psf, 180 lb/ft,
    // 1350 lb.
    const Takedown t = taken_down(plan(posts({{0, 0}, {10, 0}, {0, 15}, {10, 15}}), R"("members":[
        {"id":"S","role":"beam","from":[0,0],"to":[10,0]},{"id":"N","role":"beam","from":[0,15],"to":[10,15]}],
        "joist_fields":[{"id":"J","outline":[[0,0],[10,0],[10,15],[0,15]],"direction":90,"spacing":2.5}],
        "decks":[{"id":"D","direction":0,"outline":[[0,0],[10,0],[10,15],[0,15]]}],
        "area_loads":[{"case":"all","q":"32 psf"},{"case":"all","q":"40 psf"}])"));
    const std::uint32_t joist = member_of(t, "J.3");
    CHECK(line_at(t, joist, 2, 0) == Approx(180 * plf).epsilon(1e-12));
    CHECK(reaction(t, joist, 1, 0) == Approx(1350 * lb).epsilon(1e-12));
}

TEST_CASE("D13: a storage slab of 15 ft by 10 ft, 6 in thick, under 250 psf") {
    // R. C. Hibbeler, Structural Analysis (8th ed. numbering), problem 1-1: dead 10,800 lb, live 37,500 lb,
    // 48,300 lb in all.
    const Takedown t = taken_down(R"({"runnel":"plan/1","units":{"length":"ft","force":"lbf"},
        "cases":[{"id":"dead","kind":"dead"},{"id":"live","kind":"live"}],
        "builds":[{"id":"slab","layers":[{"name":"stone concrete","thickness":"6 in","density":"144 pcf"}]}],
        "walls":[{"id":"W","from":[0,0],"to":[0,10],"top":"floor"},{"id":"E","from":[15,0],"to":[15,10],"top":"floor"}],
        "levels":[{"id":"floor","elevation":10,
        "decks":[{"id":"D","direction":0,"build":"slab","outline":[[0,0],[15,0],[15,10],[0,10]]}],
        "area_loads":[{"case":"live","q":"250 psf"}]}]})");
    REQUIRE(t.balance.size() == 2);
    CHECK(t.balance[0].arrived.force == Approx(10800 * lb).epsilon(1e-12));
    CHECK(t.balance[1].arrived.force == Approx(37500 * lb).epsilon(1e-12));
    CHECK(t.foundations[0].reactions[0] + t.foundations[0].reactions[1] == Approx(24150 * lb).epsilon(1e-12));
}

TEST_CASE("D15: a wall between spans of 14 ft and 10 ft takes 12 ft of 100 psf") {
    // Tributary width of a beam or wall between two bays, a common open teaching example: 1200 lb/ft.
    const Takedown t = taken_down(
        R"({"runnel":"plan/1","units":{"length":"ft","force":"lbf"},"cases":[{"id":"all","kind":"live"}],
        "walls":[{"id":"A","from":[0,0],"to":[0,9],"top":"floor"},{"id":"B","from":[14,0],"to":[14,9],"top":"floor"},
                 {"id":"C","from":[24,0],"to":[24,9],"top":"floor"}],
        "levels":[{"id":"floor","elevation":10,
        "decks":[{"id":"D","direction":0,"outline":[[0,0],[24,0],[24,9],[0,9]]}],
        "area_loads":[{"case":"all","q":"100 psf"}]}]})");
    REQUIRE(t.walls[1].lifts.size() == 1);
    const auto& line = t.walls[1].lifts[0].line;
    REQUIRE(line.size() == 1);
    CHECK(line[0].piece.c[0] == Approx(1200 * plf).epsilon(1e-12));
    CHECK(t.foundations[1].reactions[0] == Approx(1200 * 9 * lb).epsilon(1e-12));
}

TEST_CASE(
    "I08: columns of a grid of unequal bays with a slab edge past them take the products of half spacings") {
    // Closed form: the Voronoi cell of a rectangular grid; beams through the columns divided at the middle of
    // their spans give the same areas. Areas 12, 22, 14, 21, 38.5, 24.5, 21, 38.5, 24.5, 12, 22, 14 of 264.
    std::vector<std::pair<double, double>> places;
    std::string members;
    for (const double x : {0.0, 6.0, 14.0, 20.0}) {
        for (const double y : {0.0, 5.0, 11.0}) {
            places.emplace_back(x, y);
        }
        members += (members.empty() ? "" : ",") + std::string(R"({"id":"B)") +
                   std::to_string(static_cast<int>(x)) + R"(","role":"beam","from":[)" + std::to_string(x) +
                   R"(,-0.5],"to":[)" + std::to_string(x) + ",11.5]}";
    }
    const Takedown t = taken_down(plan(posts(places), R"("members":[)" + members + R"(],
        "decks":[{"id":"D","direction":0,"outline":[[-1,-0.5],[21,-0.5],[21,11.5],[-1,11.5]]}],
        "area_loads":[{"case":"all","q":1}])"));
    const std::vector<double> areas{12, 22, 14, 21, 38.5, 24.5, 21, 38.5, 24.5, 12, 22, 14};
    double sum = 0;
    for (std::size_t c = 0; c < areas.size(); ++c) {
        CHECK(t.columns[c].lifts[0].tributary_area == Approx(areas[c] * ft * ft).epsilon(1e-12));
        sum += t.columns[c].lifts[0].tributary_area;
    }
    CHECK(sum == Approx(264 * ft * ft).epsilon(1e-12));
}
