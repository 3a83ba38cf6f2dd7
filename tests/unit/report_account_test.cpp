#include "report/page.hpp"
#include "report/some_cases.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <array>
#include <sstream>

using namespace runnel;
using support::written;

namespace {

constexpr std::string_view ellipsis = "\xE2\x80\xA6";

/// The footbridge with so many cases on it, all with long ids, of loads that grow by a factor of forty.
Takedown with_cases(std::size_t count) {
    Plan plan = read_plan(support::footbridge).plan;
    plan.levels[0].members[0].id = "the girder on the southern side of the bridge";
    plan.columns[0].id = "the column that stands under its western end";
    plan.levels[0].point_loads.clear();
    plan.levels[0].area_loads.clear();
    plan.cases.resize(1);
    double q = 0.01;
    for (std::size_t c = 1; c < count; ++c, q *= -40) {
        LoadCase load_case;
        load_case.id = "a case with a rather long name, number " + std::to_string(c);
        load_case.kind = CaseKind::live;
        plan.cases.push_back(load_case);
        AreaLoad load;
        load.case_id = load_case.id;
        load.q = q;
        plan.levels[0].area_loads.push_back(load);
    }
    return take_down(std::move(plan));
}

std::string account_of(const Takedown& takedown, Units units) {
    ReportOptions options;
    options.units = units;
    return written([&](const TextSink& sink) { write_account(takedown, options, sink); });
}

std::string single_spaced(const std::string& text) {
    std::string result;
    for (const char c : text) {
        if (c != ' ' || result.empty() || result.back() != ' ') {
            result += c;
        }
    }
    return result;
}

bool cuts_a_digit(std::string_view line) {
    for (std::size_t at = 0; (at = line.find(ellipsis, at)) != std::string_view::npos; ++at) {
        std::size_t word = at;
        while (word > 0 && line[word - 1] != ' ') {
            --word;
        }
        const std::string_view cell = line.substr(word, at - word);
        if (!cell.empty() && cell.find_first_not_of("0123456789.+-e(,") == std::string_view::npos) {
            return true;
        }
    }
    return false;
}

/// A beam over two columns with an overhang, loaded there by a live case and between them by another.
constexpr std::string_view seesaw = R"({
  "runnel": "plan/1", "title": "Seesaw", "units": {"length": "m", "force": "kN"},
  "cases": [{"id": "dead", "kind": "dead"}, {"id": "inside", "kind": "live"}, {"id": "outside", "kind": "live"}],
  "columns": [{"id": "P", "at": [0, 0], "top": "walk", "self_weight": 1},
              {"id": "Q", "at": [4, 0], "top": "walk", "self_weight": 1}],
  "levels": [{"id": "walk", "elevation": 5,
    "members": [{"id": "B", "role": "beam", "from": [0, 0], "to": [6, 0]}],
    "point_loads": [{"case": "dead", "p": 4, "at": [2, 0], "on": "B"},
                    {"case": "inside", "p": 40, "at": [2, 0], "on": "B"},
                    {"case": "outside", "p": 20, "at": [6, 0], "on": "B"}]}]})";

} // namespace

TEST_CASE("no number is ever cut, whatever the cases, and no line is wider than the page") {
    for (std::size_t count = 1; count <= 12; ++count) {
        const Takedown takedown = with_cases(count);
        REQUIRE(takedown.complete);
        for (const Units units :
             {Units{LengthUnit::m, ForceUnit::kN}, Units{LengthUnit::mm, ForceUnit::N},
              Units{LengthUnit::ft, ForceUnit::kip}, Units{LengthUnit::in, ForceUnit::lbf},
              Units{LengthUnit::cm, ForceUnit::MN}}) {
            std::istringstream lines(account_of(takedown, units));
            for (std::string line; std::getline(lines, line);) {
                CAPTURE(line);
                CHECK(columns_of(line) <= page_width);
                CHECK_FALSE(cuts_a_digit(line));
            }
        }
    }
}

TEST_CASE("a continued table shows each case once and all of its digits") {
    const std::string account = account_of(with_cases(12), {});
    CHECK(cuts_a_digit("  joist  0.0\xE2\x80\xA6")); // the check itself
    CHECK(account.find("the girder on the\xE2\x80\xA6") != std::string::npos);
}

TEST_CASE("pressures and areas are read in m2 or ft2, with three figures, whatever the unit of lengths") {
    const Takedown takedown = support::takedown_of(support::footbridge);
    const std::array<std::pair<Units, std::string_view>, 4> expected{
        {{{LengthUnit::mm, ForceUnit::kN}, "per deck area in kN/m2"},
         {{LengthUnit::cm, ForceUnit::N}, "per deck area in kN/m2"},
         {{LengthUnit::ft, ForceUnit::kip}, "per deck area in lbf/ft2 (psf)"},
         {{LengthUnit::in, ForceUnit::lbf}, "per deck area in lbf/ft2 (psf)"}}};
    for (const auto& [units, sentence] : expected) {
        const std::string account = account_of(takedown, units);
        CHECK(account.find(sentence) != std::string::npos);
        const bool feet = units.length == LengthUnit::ft || units.length == LengthUnit::in;
        // Dead load of 0.5 kN/m2 is 10.44 lbf/ft2: 0.5 / 0.0044482216152605 * 0.3048^2.
        CHECK(account.find(feet ? " 10.4 " : " 0.500 ") != std::string::npos);
        CHECK(account.find(feet ? "area, ft2" : "area, m2") != std::string::npos);
    }
}

TEST_CASE("own weight of columns has a row, so that rows of levels add up to the building's") {
    const Takedown takedown = support::takedown_of(seesaw);
    const std::string account = single_spaced(account_of(takedown, {}));
    // 4 kN on the beam and two columns of 5 m at 1 kN/m.
    CHECK(account.find("building dead 14.0 14.0 14.0") != std::string::npos);
    CHECK(account.find("walk dead 4.00 4.00 4.00") != std::string::npos);
    CHECK(account.find("columns, walls dead 10.0 10.0 10.0") != std::string::npos);
}

TEST_CASE("a bearing that only some variable cases would lift is named") {
    const Takedown takedown = support::takedown_of(seesaw);
    REQUIRE(takedown.uplift.empty());
    // P: dead 2 upward, inside 20 upward, outside 20 x 2 / 4 = 10 downward; without `inside` 8 kN lift. The
    // column's own weight of 5 kN leaves 3 at its foundation.
    const std::vector<Uplift> lifts = lifts_with_some_cases(takedown);
    REQUIRE(lifts.size() == 2);
    CHECK(lifts[0].value == doctest::Approx(-8));
    CHECK(lifts[0].level == 0);
    CHECK(lifts[1].value == doctest::Approx(-3));
    CHECK(lifts[1].level == none);
    const std::string account = account_of(takedown, {});
    CHECK(account.find("Lift with some variable cases alone") != std::string::npos);
    CHECK(account.find("uplift of 8.00 kN: B lifts off P at station 0.00") != std::string::npos);
    CHECK(account.find("uplift of 3.00 kN at the foundation under P") != std::string::npos);
}

TEST_CASE("nothing lifts where all loads press") {
    CHECK(lifts_with_some_cases(support::takedown_of(support::footbridge)).empty());
}

namespace {

/// A floor of two beams and an overhang of 2 m beyond the second, on columns; `share` of its deck.
std::string overhanging(std::string_view share) {
    std::string text = R"({
  "runnel": "plan/1", "title": "Balcony", "units": {"length": "m", "force": "kN"},
  "settings": {"share": ")";
    text += share;
    text += R"("},
  "cases": [{"id": "dead", "kind": "dead"}, {"id": "live", "kind": "live"}, {"id": "wind", "kind": "other"}],
  "columns": [{"id": "P", "at": [0, 0], "top": "floor"}, {"id": "Q", "at": [0, 5], "top": "floor"},
              {"id": "R", "at": [6, 0], "top": "floor"}, {"id": "S", "at": [6, 5], "top": "floor"}],
  "levels": [{"id": "floor", "elevation": 3,
    "decks": [{"id": "D", "span": "one-way", "direction": 0, "outline": [[0, 0], [8, 0], [8, 5], [0, 5]]}],
    "members": [{"id": "A", "role": "beam", "from": [0, 0], "to": [0, 5]},
                {"id": "B", "role": "beam", "from": [6, 0], "to": [6, 5]}],
    "area_loads": [{"case": "live", "q": 2},
                   {"case": "wind", "q": 1, "outline": [[0, 0], [3, 0], [3, 5], [0, 5]]},
                   {"case": "wind", "q": -1, "outline": [[3, 0], [6, 0], [6, 5], [3, 5]]}],
    "line_loads": [{"case": "dead", "w": 3, "from": [1, 1], "to": [1, 4]}]}]})";
    return text;
}

} // namespace

TEST_CASE("how far sharing by halves moves the resultant is shown, and that statics leaves it in place") {
    const std::string halves = single_spaced(account_of(support::takedown_of(overhanging("half")), {}));
    // Live: 2 kN/m2 x 8 m x 5 m. Halves bring 30 kN to A and 30 + 20 to B: at 6 x 50 / 80 = 3.75 m instead of
    // 4 m. The line load follows statics under every share. Wind presses as much as it lifts.
    CHECK(halves.find("floor dead 9.00 9.00 9.00 0 0.225 yes") != std::string::npos);
    CHECK(halves.find(" live 80.0 80.0 80.0 0.250 2.00 yes") != std::string::npos);
    CHECK(halves.find(" wind 0.0 0.0 0.0 0 yes") != std::string::npos);
    const std::string statics = single_spaced(account_of(support::takedown_of(overhanging("lever")), {}));
    CHECK(statics.find(" live 80.0 80.0 80.0 0 2.00 yes") != std::string::npos);
    const Units millimetres{LengthUnit::mm, ForceUnit::kN};
    const std::string fine =
        single_spaced(account_of(support::takedown_of(overhanging("half")), millimetres));
    CHECK(fine.find("moved, mm") != std::string::npos);
    CHECK(fine.find(" live 80.0 80.0 80.0 250 2.00 yes") != std::string::npos);
}
