#include "nearest.hpp"

#include <algorithm>
#include <numeric>
#include <vector>

namespace runnel_cli {

namespace {

/// Letters to insert, drop or replace, and neighbours to exchange (optimal string alignment).
std::size_t steps_between(std::string_view a, std::string_view b) {
    std::vector<std::size_t> before(b.size() + 1);
    std::vector<std::size_t> above(b.size() + 1);
    std::vector<std::size_t> row(b.size() + 1);
    std::iota(above.begin(), above.end(), std::size_t{0});
    for (std::size_t i = 1; i <= a.size(); ++i) {
        row[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            const std::size_t changed = above[j - 1] + (a[i - 1] == b[j - 1] ? 0 : 1);
            row[j] = std::min({above[j] + 1, row[j - 1] + 1, changed});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]) {
                row[j] = std::min(row[j], before[j - 2] + 1);
            }
        }
        before.swap(above);
        above.swap(row);
    }
    return above[b.size()];
}

} // namespace

std::string nearest(std::string_view word, std::span<const std::string> words) {
    std::string best;
    std::size_t least = word.size() / 3 + 2;
    for (const std::string& candidate : words) {
        const std::size_t steps = steps_between(word, candidate);
        if (steps < least && steps < candidate.size()) {
            least = steps;
            best = candidate;
        }
    }
    return best;
}

} // namespace runnel_cli
