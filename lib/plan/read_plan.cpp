#include "plan/check.hpp"
#include "plan/plan_receiver.hpp"
#include "plan/problem_log.hpp"
#include "plan/sha256.hpp"

#include <runnel/plan.hpp>

#include <algorithm>
#include <limits>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Offsets are kept in 32 bits.
std::size_t most_bytes(const Limits& limits) {
    return std::min<std::size_t>(limits.text_bytes, std::numeric_limits<std::uint32_t>::max());
}

Problem too_long(std::size_t bytes, std::size_t limit) {
    Problem problem;
    problem.code = ProblemCode::too_much;
    problem.severity = kind_of(problem.code).severity;
    problem.message =
        "The text has " + std::to_string(bytes) + " bytes; the limit is " + std::to_string(limit) + '.';
    return problem;
}

ProblemCode code_of(JsonFault fault) {
    switch (fault) {
    case JsonFault::number_too_large:
        return ProblemCode::number_too_large;
    case JsonFault::too_deep:
        return ProblemCode::too_deep;
    default:
        return ProblemCode::not_json;
    }
}

void report_end(const JsonEnd& end, ProblemLog& log) {
    Problem problem;
    problem.code = code_of(end.fault);
    problem.severity = kind_of(problem.code).severity;
    problem.message = end.message;
    problem.hint = end.hint;
    log.add_at(end.at, std::move(problem));
}

} // namespace

PlanReading read_plan(std::string_view text, const Limits& limits) {
    PlanReading reading;
    if (text.size() > most_bytes(limits)) {
        reading.problems.push_back(too_long(text.size(), most_bytes(limits)));
        return reading;
    }
    reading.digest = "sha256:" + sha256_hex(text);

    ReadingContext context(text, limits);
    PlanReceiver receiver(context, reading.plan);
    const JsonEnd end = walk_json(text, limits.nesting, receiver);
    if (receiver.is_other_document()) {
        reading.problems = context.log.take_in_order_of(text);
        return reading;
    }
    if (end.fault == JsonFault::none) {
        receiver.finish();
        check_values(reading.plan, limits, receiver.doubts(), context.log);
    } else {
        report_end(end, context.log);
    }
    reading.problems = context.log.take_in_order_of(text);
    replace_unread(reading.plan);
    return reading;
}

RUNNEL_NAMESPACE_END
