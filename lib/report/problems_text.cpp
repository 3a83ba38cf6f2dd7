#include "report/page.hpp"

#include "plan/problems.hpp"

#include <runnel/report.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

std::string place_of(const Problem& problem, std::string_view file, Units units) {
    std::string place = printable(file);
    if (problem.line > 0) {
        place += (place.empty() ? "line " : ":") + std::to_string(problem.line) + ':' +
                 std::to_string(problem.column);
    } else if (!problem.pointer.empty()) {
        place += (place.empty() ? "" : " ") + printable(problem.pointer);
    }
    if (problem.point) {
        place += (place.empty() ? "" : ", ") + std::string("at ") + point_text(*problem.point, units);
    }
    return place;
}

std::string_view style_of(Severity severity) {
    switch (severity) {
    case Severity::error:
        return "\x1B[1;31m";
    case Severity::warning:
        return "\x1B[1;33m";
    case Severity::note:
        return "\x1B[1m";
    }
    return {};
}

/// What stops the work first; within a severity as they came.
std::vector<const Problem*> by_severity(std::span<const Problem> problems) {
    std::vector<const Problem*> sorted;
    sorted.reserve(problems.size());
    for (const Severity severity : {Severity::error, Severity::warning, Severity::note}) {
        for (const Problem& problem : problems) {
            if (problem.severity == severity) {
                sorted.push_back(&problem);
            }
        }
    }
    return sorted;
}

} // namespace

void write_problems(std::span<const Problem> problems, std::string_view file, Units units, bool colour,
                    const TextSink& sink) {
    for (const Problem* const next : by_severity(problems)) {
        const Problem& problem = *next;
        std::string text;
        if (colour) {
            text += style_of(problem.severity);
        }
        text += name_of(problem.severity);
        text += ' ';
        text += kind_of(problem.code).name;
        if (colour) {
            text += "\x1B[0m";
        }
        const std::string place = place_of(problem, file, units);
        text += place.empty() ? "\n" : "  " + place + '\n';
        text += "  " + printable(problem.message) + '\n';
        if (!problem.hint.empty()) {
            text += "  Hint: " + printable(problem.hint) + '\n';
        }
        sink(text);
    }
}

RUNNEL_NAMESPACE_END
