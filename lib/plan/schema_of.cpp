#include <runnel/plan.hpp>
#include <runnel/problem.hpp>

#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::string_view plan_schema =
#include "schema_plan.inc"
    ;
constexpr std::string_view result_schema =
#include "schema_result.inc"
    ;
constexpr std::string_view frame_schema =
#include "schema_frame.inc"
    ;

/// The one table of problem codes is read by the schemas too: a placeholder stands where its names belong.
std::string with_problem_codes(std::string_view schema) {
    constexpr std::string_view placeholder = "\"@problem-codes@\"";
    std::string codes;
    for (const ProblemKind& kind : problem_kinds()) {
        codes += codes.empty() ? "\"" : ", \"";
        codes += kind.name;
        codes += '"';
    }
    std::string text(schema);
    for (std::size_t at = text.find(placeholder); at != std::string::npos;
         at = text.find(placeholder, at + codes.size())) {
        text.replace(at, placeholder.size(), codes);
    }
    return text;
}

} // namespace

std::string schema_of(Document document) {
    switch (document) {
    case Document::plan:
        return with_problem_codes(plan_schema);
    case Document::result:
        return with_problem_codes(result_schema);
    case Document::frame:
        return with_problem_codes(frame_schema);
    }
    return {};
}

RUNNEL_NAMESPACE_END
