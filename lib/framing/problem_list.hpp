#pragma once

#include "plan/problems.hpp"

#include <array>
#include <cstddef>
#include <map>
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
        join_joists_of_fields();
        return std::move(problems_);
    }

private:
    /// Joists of one field that share a fault share its problem: thirteen joists drawn too short are one
    /// mistake.
    void join_joists_of_fields() {
        struct Joined {
            std::size_t place = 0;
            std::size_t more = 0;
            std::string named;
        };
        constexpr std::size_t named_at_most = 8;
        std::map<std::pair<ProblemCode, std::string>, Joined> by_field;
        std::vector<Problem> kept;
        for (Problem& problem : problems_) {
            if (problem.pointer.find("/joist_fields/") == std::string::npos || problem.ids.empty()) {
                kept.push_back(std::move(problem));
                continue;
            }
            const auto [it, is_new] =
                by_field.try_emplace({problem.code, problem.pointer}, Joined{kept.size(), 0, {}});
            if (is_new) {
                kept.push_back(std::move(problem));
                continue;
            }
            Joined& joined = it->second;
            ++joined.more;
            if (joined.more <= named_at_most) {
                joined.named += (joined.named.empty() ? "" : ", ") + problem.ids.front();
                kept[joined.place].ids.push_back(problem.ids.front());
            }
        }
        for (const auto& [key, joined] : by_field) {
            if (joined.more > 0) {
                kept[joined.place].message += " So with " + std::to_string(joined.more) +
                                              " more of the field: " + joined.named +
                                              (joined.more > named_at_most ? ", ..." : "") + '.';
            }
        }
        problems_ = std::move(kept);
    }

    std::size_t limit_;
    std::vector<std::size_t> counts_;
    std::vector<Problem> problems_;
};

RUNNEL_NAMESPACE_END
