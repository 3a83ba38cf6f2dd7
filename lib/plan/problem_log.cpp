#include "plan/problem_log.hpp"

#include "plan/json_events.hpp"

#include <algorithm>
#include <string>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

bool ProblemLog::count(ProblemCode code) {
    const auto index = static_cast<std::size_t>(code);
    if (index >= counts_.size()) {
        return true;
    }
    return ++counts_[index] <= cap_;
}

bool ProblemLog::wants(ProblemCode code) {
    const auto index = static_cast<std::size_t>(code);
    if (index >= counts_.size() || counts_[index] < cap_) {
        return true;
    }
    ++counts_[index];
    return false;
}

Problem& ProblemLog::add(Problem problem) {
    if (!count(problem.code)) {
        return dropped_ = std::move(problem);
    }
    problems_.push_back(std::move(problem));
    return problems_.back();
}

void ProblemLog::add_at(std::uint32_t at, Problem problem) {
    if (count(problem.code)) {
        offsets_.push_back({at, problems_.size()});
        problems_.push_back(std::move(problem));
    }
}

void ProblemLog::add_rest() {
    for (std::size_t i = 0; i < counts_.size(); ++i) {
        if (counts_[i] > cap_) {
            const ProblemKind& kind = problem_kinds()[i];
            Problem rest;
            rest.code = kind.code;
            rest.severity = kind.severity;
            rest.message = "And " + std::to_string(counts_[i] - cap_) + " more `" + std::string(kind.name) +
                           "` after the first " + std::to_string(cap_) + ", the limit of what is listed.";
            problems_.push_back(std::move(rest));
        }
    }
}

std::vector<Problem> ProblemLog::take() {
    add_rest();
    return std::move(problems_);
}

std::vector<Problem> ProblemLog::take_in_order_of(std::string_view text) {
    std::sort(offsets_.begin(), offsets_.end(), [](Offset l, Offset r) { return l.at < r.at; });
    LineCounter lines(text);
    for (const Offset& offset : offsets_) {
        const LineCounter::Place place = lines.place_of(offset.at);
        problems_[offset.problem].line = place.line;
        problems_[offset.problem].column = place.column;
    }
    locate_problems(text, problems_);
    add_rest();
    const auto place = [](const Problem& p) { // what has no place comes last
        return std::pair(p.line == 0 ? 0xffffffffu : p.line, p.column);
    };
    std::stable_sort(problems_.begin(), problems_.end(),
                     [&](const Problem& l, const Problem& r) { return place(l) < place(r); });
    return std::move(problems_);
}

RUNNEL_NAMESPACE_END
