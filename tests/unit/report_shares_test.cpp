#include "support/framing_support.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using support::takedown_of;
using support::written;

namespace {

/// Half, lever and continuous of the footbridge, made up: lever stops, continuous takes a tenth of the crowd
/// off joist b and its columns and brings dead load to none.
ShareComparison made_up(const Takedown& takedown) {
    ShareComparison shares = compare_shares(takedown);
    REQUIRE(shares.runs.size() == 3);
    REQUIRE(shares.cases == 2);
    REQUIRE(shares.own == 0);
    shares.runs[2].complete = true;
    shares.runs[2].problems.clear();
    shares.runs[1].complete = false;
    for (std::vector<ComparedCarrier>* carriers : {&shares.supports, &shares.members}) {
        for (ComparedCarrier& carrier : *carriers) {
            for (std::vector<double>* values : {&carrier.total, &carrier.largest_reaction}) {
                for (std::size_t c = 0; !values->empty() && c < 2; ++c) {
                    (*values)[4 + c] = (*values)[c];
                }
            }
        }
    }
    return shares;
}

bool holds(const std::string& text, std::string_view part) {
    return text.find(part) != std::string::npos;
}

ReportOptions with(const ShareComparison& shares) {
    ReportOptions options;
    options.shares = &shares;
    return options;
}

std::string account_of(const Takedown& takedown, const ShareComparison& shares) {
    return written([&](const TextSink& sink) { write_account(takedown, with(shares), sink); });
}

std::string result_of(const Takedown& takedown, const ShareComparison& shares) {
    return written([&](const TextSink& sink) { write_result(takedown, {}, with(shares), sink); });
}

} // namespace

TEST_CASE("what differs between shares is shown with its per cent, uplift in words, and new loads as new") {
    const Takedown takedown = takedown_of(support::footbridge);
    ShareComparison shares = made_up(takedown);
    shares.runs[1].problems = {{}};
    shares.runs[1].problems[0].code = ProblemCode::strip_unsupported;
    shares.runs[1].problems[0].message = "a strip hangs on b alone.";
    CHECK(holds(account_of(takedown, shares), "none differs"));
    ComparedCarrier& column = shares.supports[1]; // Q: 2 dead, 20.75 crowd
    REQUIRE(takedown.plan.columns[column.carrier.index].id == "Q");
    column.total[4] = -1;
    column.total[5] = column.total[1] * 1.1;
    ComparedCarrier& joist = shares.members[3]; // b
    joist.total[0] = 0;
    joist.total[4] = 0.5;
    const std::string account = account_of(takedown, shares);
    CHECK(holds(account, "difference from `half`, which this plan uses"));
    CHECK(holds(account, "`lever` stops:"));
    CHECK(holds(account, "strip-unsupported: a strip hangs on b alone."));
    CHECK(holds(account, "-1.00 uplift  -150.0"));
    CHECK(holds(account, "+10.0"));
    CHECK(holds(account, "0.500  new"));
    CHECK(holds(account, "3 others do not differ"));
    CHECK(holds(account, "4 others do not differ"));
    CHECK(holds(account, "sorted by their\n  largest change as part of what the carrier takes"));
}

TEST_CASE("a plan without members has no tables of members to compare") {
    Takedown takedown = takedown_of(support::footbridge);
    ShareComparison shares = made_up(takedown);
    CHECK(holds(account_of(takedown, shares), "Members, largest reaction"));
    shares.members.clear();
    const std::string account = account_of(takedown, shares);
    CHECK(holds(account, "Columns and walls, at their feet\n    none differs"));
    CHECK(!holds(account, "Members, all load on them"));
    CHECK(!holds(account, "Members, largest reaction"));
}

TEST_CASE("the result lists every share with its values, and none for a share that stopped") {
    const Takedown takedown = takedown_of(support::footbridge);
    ShareComparison shares = made_up(takedown);
    shares.supports[0].total[5] *= 2;
    const std::string result = result_of(takedown, shares);
    CHECK(holds(result, R"("share": "half",)"));
    CHECK(holds(result, R"({"id":"P","kind":"column","total":{"dead":2,"crowd":22.25},)"
                        R"("total_percent":{"dead":0,"crowd":0}})"));
    CHECK(holds(result, R"("total":{"dead":2,"crowd":44.5},"total_percent":{"dead":0,"crowd":100}})"));
    CHECK(holds(result, R"("reaction":{"dead":2,"crowd":20},"reaction_percent":{"dead":0,"crowd":0})"));
    const std::size_t lever = result.find(R"("share": "lever")");
    const std::size_t continuous = result.find(R"("share": "continuous")");
    REQUIRE(lever < continuous);
    CHECK(!holds(result.substr(lever, continuous - lever), "supports"));
}

TEST_CASE("decks that are shared otherwise than the plan says are named") {
    Takedown takedown = takedown_of(support::footbridge);
    const auto account = [&] {
        std::string text = written([&](const TextSink& sink) { write_account(takedown, {}, sink); });
        std::replace(text.begin(), text.end(), '\n', ' ');
        return text;
    };
    CHECK(holds(account(), "One-way decks shared by `half`."));
    takedown.framing.levels[0].decks[0].share = Share::lever;
    CHECK(holds(account(), "One-way decks shared by `half`; by `lever`: boards."));
    const std::string result = written([&](const TextSink& sink) { write_result(takedown, {}, {}, sink); });
    CHECK(holds(result, R"("deck_shares":[{"deck":"boards","share":"lever"}])"));
    takedown.framing.levels[0].decks[0].span = SpanKind::two_way; // these have no such choice
    CHECK(holds(account(), "No deck spans one way."));
}

namespace {

/// Three beams of 4 m along y at 0, 5 and 10, each on two columns, and a deck that spans over them, with 3
/// kN/m2 of live load.
framing_support::PlanBuilder three_beams(double past_last = 0) {
    framing_support::PlanBuilder builder;
    for (int i = 0; i < 3; ++i) {
        const std::string n = std::to_string(i);
        builder.column("S" + n, {5.0 * i, 0}).column("N" + n, {5.0 * i, 4});
        builder.beam("B" + n, {5.0 * i, 0}, {5.0 * i, 4});
    }
    builder.deck("D", framing_support::rectangle(0, 0, 10 + past_last, 4)).direction = 0;
    AreaLoad load;
    load.case_id = builder.plan.cases.back().id;
    load.q = 3;
    builder.floor().area_loads.push_back(load);
    return builder;
}

const ComparedCarrier& compared_member(const ShareComparison& shares, std::uint32_t index) {
    return *std::find_if(shares.members.begin(), shares.members.end(),
                         [&](const ComparedCarrier& c) { return c.carrier.index == index; });
}

} // namespace

TEST_CASE("a floor over two equal spans brings 3/8 and 10/8 of a span where halves bring 1/2 and 1") {
    using doctest::Approx;
    framing_support::PlanBuilder builder = three_beams();
    const ShareComparison shares = compare_shares(builder.plan);
    REQUIRE(shares.runs.size() == 3);
    for (const ShareRun& run : shares.runs) {
        CHECK(run.complete);
    }
    const std::size_t live = shares.cases - 1;
    const double span = 3 * 5 * 4;
    const auto value = [&](std::uint32_t beam, std::size_t run) {
        return compared_member(shares, beam).total[run * shares.cases + live];
    };
    // Reactions of a beam of two equal spans under uniform load: any handbook of beam formulas.
    CHECK(value(0, 0) == Approx(span / 2));
    CHECK(value(0, 1) == Approx(span / 2));
    CHECK(value(0, 2) == Approx(span * 3 / 8));
    CHECK(value(1, 0) == Approx(span));
    CHECK(value(1, 2) == Approx(span * 10 / 8));
    CHECK(*shares.percent(compared_member(shares, 0), &ComparedCarrier::total, {2, live}) == Approx(-25));
    CHECK(*shares.percent(compared_member(shares, 1), &ComparedCarrier::total, {2, live}) == Approx(25));
    CHECK(*shares.percent(compared_member(shares, 1), &ComparedCarrier::largest_reaction, {2, live}) ==
          Approx(25));
    CHECK(*shares.percent(compared_member(shares, 1), &ComparedCarrier::total, {1, live}) == 0);
    CHECK(!shares.percent(shares.supports[0], &ComparedCarrier::largest_reaction, {2, live}));
    CHECK(shares.members[0].difference == Approx(0.25));
    // The plan's own is what the others are measured by.
    builder.plan.settings.share = Share::continuous;
    const ShareComparison other = compare_shares(builder.plan);
    CHECK(other.own == 2);
    CHECK(*other.percent(compared_member(other, 0), &ComparedCarrier::total, {0, live}) == Approx(100.0 / 3));
    TakedownOptions options;
    options.share = Share::lever;
    CHECK(compare_shares(builder.plan, options).own == 1);
}

TEST_CASE("a plan that mixes shares is compared with its own mixture") {
    framing_support::PlanBuilder builder = three_beams();
    builder.deck("E", framing_support::rectangle(0, -2, 10, 0)).direction = 90;
    builder.beam("F0", {0, -2}, {5, -2});
    builder.beam("F1", {5, -2}, {10, -2});
    for (int i = 0; i < 3; ++i) {
        builder.column("F" + std::to_string(3 + i), {5.0 * i, -2});
    }
    builder.beam("G0", {0, 0}, {5, 0});
    builder.beam("G1", {5, 0}, {10, 0});
    builder.floor().decks[0].share = Share::continuous;
    const ShareComparison shares = compare_shares(builder.plan);
    REQUIRE(shares.runs.size() == 4);
    CHECK(shares.own == 0);
    CHECK(!shares.runs[0].share);
    REQUIRE(shares.runs[0].complete);
    const std::size_t live = shares.cases - 1;
    CHECK(*shares.percent(compared_member(shares, 1), &ComparedCarrier::total, {1, live}) ==
          doctest::Approx(-20));
    CHECK(*shares.percent(compared_member(shares, 1), &ComparedCarrier::total, {3, live}) == 0);
}

TEST_CASE("a share that errors stop says why, and the others are compared") {
    framing_support::PlanBuilder builder = three_beams();
    builder.floor().members.erase(builder.floor().members.begin(), builder.floor().members.begin() + 2);
    const ShareComparison shares = compare_shares(builder.plan); // all hangs on the last beam
    CHECK(shares.runs[0].complete);
    CHECK(shares.runs[0].problems.empty());
    for (const std::size_t run : {1U, 2U}) {
        CHECK(!shares.runs[run].complete);
        REQUIRE(!shares.runs[run].problems.empty());
        CHECK(!shares.percent(shares.members[0], &ComparedCarrier::total, {run, 0}));
    }
    CHECK(shares.members[0].difference == 0);
    const Takedown takedown = take_down(builder.plan);
    CHECK(holds(account_of(takedown, shares), "`continuous` stops:"));
}

TEST_CASE("by how much fitted line loads may be off is said for each level") {
    Takedown takedown = takedown_of(support::footbridge);
    const auto result = [&] {
        return written([&](const TextSink& sink) { write_result(takedown, {}, {}, sink); });
    };
    const auto account = [&] {
        return written([&](const TextSink& sink) { write_account(takedown, {}, sink); });
    };
    CHECK(!holds(result(), "curve_error"));
    CHECK(!holds(account(), "fitted"));
    takedown.levels[0].loads.curve_error = 2e-6;
    CHECK(holds(result(), R"("curve_error": 2e-06)"));
    CHECK(holds(account(), "within 2.00e-06 kN/m"));
}
