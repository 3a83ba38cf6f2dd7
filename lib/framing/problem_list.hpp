#pragma once

#include "plan/problems.hpp"

#include <array>
#include <cstddef>
#include <string>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Problems as they are found. Past the limit of one code they are counted and not listed, and their text is
/// not even made: a wrong plan of a million joists must not cost a million sentences.
class ProblemList {
public:
    explicit ProblemList(std::size_t limit_of_one_code)
        : limit_(limit_of_one_code), counts_(problem_kinds().size()) {}

    /// `make` returns the Problem; it is called only where there is room.
    template <class Make>
    void add(ProblemCode code, Make&& make) {
        if (counts_[static_cast<std::size_t>(code)]++ < limit_) {
            problems_.push_back(make());
        }
    }

    /// Whether the next problem of a code will be listed, not only counted.
    [[nodiscard]] bool has_room(ProblemCode code) const {
        return counts_[static_cast<std::size_t>(code)] < limit_;
    }

    /// All problems, with one that counts for each code that ran over the limit.
    [[nodiscard]] std::vector<Problem> take() {
        for (const ProblemKind& kind : problem_kinds()) {
            const std::size_t count = counts_[static_cast<std::size_t>(kind.code)];
            if (count > limit_) {
                Problem more;
                more.code = kind.code;
                more.severity = kind.severity;
                more.message = "There are " + std::to_string(count - limit_) + " more problems " +
                               std::string(kind.name) + " than the " + std::to_string(limit_) + " listed.";
                problems_.push_back(std::move(more));
            }
        }
        return std::move(problems_);
    }

private:
    std::size_t limit_;
    std::vector<std::size_t> counts_;
    std::vector<Problem> problems_;
};

RUNNEL_NAMESPACE_END
