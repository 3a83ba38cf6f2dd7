#include "report/page.hpp"

#include "plan/problems.hpp"

#include <runnel/report.hpp>

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

} // namespace

void write_problems(std::span<const Problem> problems, std::string_view file, Units units, bool colour,
                    const TextSink& sink) {
    for (const Problem& problem : problems) {
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
