#pragma once

#include <runnel/problem.hpp>

#include <span>
#include <string>

namespace support {

/// The errors among problems, a line each, to show why a test's plan was refused.
inline std::string texts_of_errors(std::span<const runnel::Problem> problems) {
    std::string text;
    for (const runnel::Problem& problem : problems) {
        if (problem.severity == runnel::Severity::error) {
            text += std::string(runnel::kind_of(problem.code).name) + ": " + problem.message + "\n";
        }
    }
    return text;
}

} // namespace support
