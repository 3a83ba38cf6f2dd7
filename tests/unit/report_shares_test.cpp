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
    CHECK(holds(account, "3 do not differ"));
    CHECK(holds(account, "4 do not differ"));
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
    CHECK(holds(account(), "Decks shared by `half`."));
    takedown.framing.levels[0].decks[0].share = Share::lever;
    CHECK(holds(account(), "Decks shared by `half`; by `lever`: boards."));
    const std::string result = written([&](const TextSink& sink) { write_result(takedown, {}, {}, sink); });
    CHECK(holds(result, R"("deck_shares":[{"deck":"boards","share":"lever"}])"));
    takedown.framing.levels[0].decks[0].span = SpanKind::two_way; // these have no such choice
    CHECK(holds(account(), "Decks shared by `half`."));
}
