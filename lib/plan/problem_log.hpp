#pragma once

#include <runnel/problem.hpp>

#include <array>
#include <cstddef>
#include <cstdint>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Collects problems, at most so many of one code; the rest is counted.
class ProblemLog {
public:
    explicit ProblemLog(std::size_t cap) : cap_(cap) {}

    /// The problem as kept, to be added to; past the cap it is only counted.
    Problem& add(Problem problem);
    /// False, and counted, if one more of this code would not be listed: then its text need not be made.
    [[nodiscard]] bool wants(ProblemCode code);
    /// With the offset in the document of what it concerns; line and column follow in `take`.
    void add_at(std::uint32_t at, Problem problem);

    /// All of them; at the end, for each code past the cap, how many more there are.
    [[nodiscard]] std::vector<Problem> take();
    /// The same with lines and columns, in the order of the text.
    [[nodiscard]] std::vector<Problem> take_in_order_of(std::string_view text);

private:
    bool count(ProblemCode code);
    void add_rest();

    static constexpr std::size_t codes = static_cast<std::size_t>(ProblemCode::balance_open) + 1;
    std::size_t cap_;
    std::array<std::size_t, codes> counts_{};
    std::vector<Problem> problems_;
    Problem dropped_; ///< what is past the cap
    struct Offset {
        std::uint32_t at;
        std::size_t problem;
    };
    std::vector<Offset> offsets_;
};

RUNNEL_NAMESPACE_END
