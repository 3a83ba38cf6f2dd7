#include <runnel/problem.hpp>
#include <runnel/version.hpp>

#include <algorithm>
#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {
constexpr std::array kinds{
#define RUNNEL_PROBLEM_ROW(enumerator, code, severity, meaning)                                              \
    ProblemKind{ProblemCode::enumerator, code, Severity::severity, meaning},
    RUNNEL_PROBLEM_TABLE(RUNNEL_PROBLEM_ROW)
#undef RUNNEL_PROBLEM_ROW
};
} // namespace

std::string_view version() noexcept {
    return RUNNEL_VERSION;
}

std::span<const ProblemKind> problem_kinds() noexcept {
    return kinds;
}

const ProblemKind& kind_of(ProblemCode code) noexcept {
    return kinds[static_cast<std::size_t>(code)];
}

std::string_view name_of(Severity severity) noexcept {
    switch (severity) {
    case Severity::error:
        return "error";
    case Severity::warning:
        return "warning";
    case Severity::note:
        return "note";
    }
    return "";
}

bool has_errors(std::span<const Problem> problems) noexcept {
    return std::any_of(problems.begin(), problems.end(),
                       [](const Problem& p) { return p.severity == Severity::error; });
}

RUNNEL_NAMESPACE_END
