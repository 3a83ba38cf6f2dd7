#include "problems/bad_plans.hpp"

#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <set>
#include <string>
#include <vector>

namespace {

std::vector<bad_plans::Row> all_rows() {
    std::vector<bad_plans::Row> rows;
    for (const auto group : {bad_plans::rows_on_text(), bad_plans::rows_on_keys(),
                             bad_plans::rows_on_values(), bad_plans::rows_on_references(),
                             bad_plans::rows_on_geometry(), bad_plans::rows_on_engines_to_come()}) {
        rows.insert(rows.end(), group.begin(), group.end());
    }
    return rows;
}

std::string listing(const std::vector<runnel::Problem>& problems) {
    std::string text;
    for (const runnel::Problem& p : problems) {
        text += '\n' + std::to_string(p.line) + ':' + std::to_string(p.column) + ' ' +
                std::string(runnel::kind_of(p.code).name) + ' ' + p.pointer + ": " + p.message;
    }
    return text;
}

std::vector<runnel::Problem> errors_of(std::string_view text) {
    std::vector<runnel::Problem> problems = runnel::read_plan(text).problems;
    std::erase_if(problems, [](const runnel::Problem& p) { return p.severity != runnel::Severity::error; });
    return problems;
}

std::size_t occurrences(std::string_view text, std::string_view part) {
    std::size_t count = 0;
    for (std::size_t at = text.find(part); at != std::string_view::npos; at = text.find(part, at + 1)) {
        ++count;
    }
    return count;
}

/// Offset of a line and column, both from 1.
std::size_t offset_of(std::string_view text, std::uint32_t line, std::uint32_t column) {
    std::size_t at = 0;
    for (std::uint32_t l = 1; l < line; ++l) {
        at = text.find('\n', at) + 1;
    }
    return at + column - 1;
}

} // namespace

TEST_CASE("the plan that the rows change has no problem") {
    const runnel::PlanReading reading = runnel::read_plan(bad_plans::valid_plan());
    CHECK_MESSAGE(reading.problems.empty(), listing(reading.problems));
}

TEST_CASE("one thing changed gives one problem, with code, pointer, line and column") {
    for (const bad_plans::Row& row : all_rows()) {
        CAPTURE(row.sentence);
        REQUIRE(occurrences(bad_plans::valid_plan(), row.where) == 1);
        const bad_plans::Changed plan = bad_plans::changed(row);
        const std::vector<runnel::Problem> errors = errors_of(plan.text);
        REQUIRE_MESSAGE(errors.size() == 1, listing(errors));
        CHECK(std::string(runnel::kind_of(errors[0].code).name) ==
              std::string(runnel::kind_of(row.code).name));
        CHECK(errors[0].pointer == std::string(row.pointer));
        const bool marked = row.becomes.find("!!") != std::string_view::npos;
        if (marked) {
            CHECK_MESSAGE(errors[0].line == plan.line, errors[0].message);
            CHECK_MESSAGE(errors[0].column == plan.column, errors[0].message);
        }
        CHECK(errors[0].line > 0);
        CHECK(errors[0].message.size() > 20);
        CHECK_MESSAGE(errors[0].message.back() == '.', errors[0].message);
    }
}

TEST_CASE("the same rows keep their places on one line and behind a byte order mark") {
    for (const bad_plans::Row& row : all_rows()) {
        CAPTURE(row.sentence);
        const bad_plans::Changed plan = bad_plans::changed(row);
        if (row.becomes.find("!!") == std::string_view::npos ||
            row.becomes.find("Kiln") != std::string_view::npos) {
            continue; // without a mark, or with line breaks that matter
        }
        const std::size_t at = offset_of(plan.text, plan.line, plan.column);
        std::string flat = plan.text;
        std::replace(flat.begin(), flat.end(), '\n', ' ');
        flat.insert(0, "\xef\xbb\xbf");
        const std::vector<runnel::Problem> errors = errors_of(flat);
        REQUIRE(errors.size() == 1);
        CHECK(errors[0].code == row.code);
        CHECK(errors[0].line == 1);
        CHECK(errors[0].column == at + 3 + 1);
    }
}

TEST_CASE("every code of reading and of the plan's own geometry is provoked by a row") {
    std::set<runnel::ProblemCode> provoked;
    for (const bad_plans::Row& row : all_rows()) {
        provoked.insert(row.code);
    }
    // These three take more than one change; they have tests of their own.
    provoked.insert(runnel::ProblemCode::ambiguous_id);
    provoked.insert(runnel::ProblemCode::plane_undefined);
    provoked.insert(runnel::ProblemCode::decks_overlap); // of framing: decks of repeated levels count too
    for (const runnel::ProblemKind& kind : runnel::problem_kinds()) {
        if (kind.code == runnel::ProblemCode::lies_along) {
            break; // codes of framing begin
        }
        CHECK_MESSAGE(provoked.count(kind.code) == 1, kind.name);
    }
}

TEST_CASE("a hundred sentences: no two rows say the same and none is empty") {
    std::set<std::string_view> sentences;
    for (const bad_plans::Row& row : all_rows()) {
        CHECK_MESSAGE(sentences.insert(row.sentence).second, row.sentence);
    }
    CHECK(sentences.size() >= 100);
}

/// For the check of the schemas (schema_check.py): each row as a file, and a list of what is expected.
TEST_CASE("export of the rows") {
    const char* folder = std::getenv("RUNNEL_EXPORT_BAD_PLANS");
    if (folder == nullptr) {
        return;
    }
    std::ofstream list(std::string(folder) + "/list.tsv");
    std::size_t number = 0;
    for (const bad_plans::Row& row : all_rows()) {
        if (row.schema == bad_plans::Schema::cannot_read) {
            continue;
        }
        const std::string name = std::to_string(number++) + ".json";
        std::ofstream(std::string(folder) + '/' + name, std::ios::binary) << bad_plans::changed(row).text;
        list << name << '\t' << (row.schema == bad_plans::Schema::rejects ? "rejects" : "accepts") << '\t'
             << row.sentence << '\n';
    }
    std::ofstream(std::string(folder) + "/valid.json") << bad_plans::valid_plan();
    CHECK(list.good());
}
