#pragma once

#include <runnel/deck.hpp>

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

/// Whether a deck's rule is not built yet: what stands on such a deck, and the joists under it, would look as
/// if nothing carried them, or they nothing.
[[nodiscard]] inline bool is_refused(const Sharing& sharing) {
    return std::any_of(sharing.problems.begin(), sharing.problems.end(),
                       [](const Problem& problem) { return problem.code == ProblemCode::not_supported_yet; });
}

RUNNEL_NAMESPACE_END
