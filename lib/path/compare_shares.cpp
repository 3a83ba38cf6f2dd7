#include <runnel/share_comparison.hpp>

#include "geometry/basic.hpp"
#include "path/balance.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::array<Share, 3> all_shares{Share::half, Share::lever, Share::continuous};

/// The share that all one-way decks of a takedown have; none where they differ.
std::optional<Share> common_share(const Takedown& takedown) {
    std::optional<Share> common;
    for (const FramedLevel& level : takedown.framing.levels) {
        for (const FramedDeck& deck : level.decks) {
            if (deck.span != SpanKind::one_way) {
                continue;
            }
            if (common && *common != deck.share) {
                return std::nullopt;
            }
            common = deck.share;
        }
    }
    return common ? common : takedown.plan.settings.share;
}

std::vector<Problem> errors_of(const Takedown& takedown) {
    std::vector<Problem> errors;
    std::copy_if(takedown.problems.begin(), takedown.problems.end(), std::back_inserter(errors),
                 [](const Problem& problem) { return problem.severity == Severity::error; });
    return errors;
}

/// Reads the values of takedowns off, run by run: besides the plan's own takedown no more than one is kept.
class Comparer {
public:
    Comparer(ShareComparison& comparison, std::size_t cases) : to_(comparison) { to_.cases = cases; }

    void read_off(const Takedown& takedown, std::size_t run) {
        ShareRun& about = to_.runs[run];
        about.complete = takedown.complete;
        about.problems = errors_of(takedown);
        if (!takedown.complete) {
            return;
        }
        if (to_.supports.empty() && to_.members.empty()) {
            list_carriers(takedown);
        }
        for (const Balance& balance : takedown.balance) {
            to_.noise = std::max(to_.noise, closing * balance.applied.magnitude);
        }
        for (ComparedCarrier& support : to_.supports) {
            const bool column = support.carrier.kind == CarrierKind::column;
            const std::uint32_t i = support.carrier.index;
            write(support.total, run,
                  column ? takedown.columns[i].lifts.back().total : takedown.walls[i].lifts.back().total);
        }
        for (ComparedCarrier& member : to_.members) {
            write(member.total, run, load_on(takedown, member));
            write(member.largest_reaction, run, largest_reaction(takedown, member));
        }
    }

    void measure_and_sort() {
        for (std::vector<ComparedCarrier>* carriers : {&to_.supports, &to_.members}) {
            for (ComparedCarrier& carrier : *carriers) {
                carrier.difference =
                    std::max(difference_in(carrier.total), difference_in(carrier.largest_reaction));
            }
            std::stable_sort(carriers->begin(), carriers->end(),
                             [](const ComparedCarrier& a, const ComparedCarrier& b) {
                                 return a.difference > b.difference;
                             });
        }
    }

private:
    void list_carriers(const Takedown& takedown) {
        const auto add_supports = [this](CarrierKind kind, const auto& supports) {
            for (std::uint32_t i = 0; i < supports.size(); ++i) {
                if (!supports[i].lifts.empty()) {
                    to_.supports.push_back(empty({kind, i}, supports[i].lifts.back().level));
                }
            }
        };
        add_supports(CarrierKind::column, takedown.columns);
        add_supports(CarrierKind::wall, takedown.walls);
        for (std::uint32_t l = 0; l < takedown.levels.size(); ++l) {
            for (std::uint32_t m = 0; m < takedown.framing.levels[l].members.size(); ++m) {
                to_.members.push_back(empty({CarrierKind::member, m}, l));
            }
        }
    }

    [[nodiscard]] ComparedCarrier empty(Carrier carrier, std::uint32_t level) const {
        ComparedCarrier compared;
        compared.carrier = carrier;
        compared.level = level;
        compared.total.resize(to_.runs.size() * to_.cases);
        if (carrier.kind == CarrierKind::member) {
            compared.largest_reaction.resize(to_.runs.size() * to_.cases);
        }
        return compared;
    }

    void write(std::vector<double>& values, std::size_t run, const std::vector<double>& by_case) const {
        std::copy(by_case.begin(), by_case.end(),
                  values.begin() + static_cast<std::ptrdiff_t>(run * to_.cases));
    }

    [[nodiscard]] std::vector<double> load_on(const Takedown& takedown, const ComparedCarrier& member) const {
        const LevelTakedown& level = takedown.levels[member.level];
        std::vector<Sum> sums(to_.cases);
        for (const CarrierLine& line : level.lines[member.carrier.index]) {
            sums[line.load_case].add(line.piece.total());
        }
        for (const CarrierPoint& point : level.points[member.carrier.index]) {
            sums[point.load_case].add(point.p);
        }
        std::vector<double> loads;
        for (const Sum& sum : sums) {
            loads.push_back(sum.value());
        }
        return loads;
    }

    [[nodiscard]] std::vector<double> largest_reaction(const Takedown& takedown,
                                                       const ComparedCarrier& member) const {
        const Grouped<Bearing>& bearings = takedown.framing.levels[member.level].bearings;
        const double* reaction =
            takedown.levels[member.level].reactions.data() + bearings.first(member.carrier.index) * to_.cases;
        const std::size_t count = bearings[member.carrier.index].size();
        std::vector<double> largest(to_.cases);
        for (std::size_t b = 0; b < count; ++b) {
            for (std::size_t c = 0; c < to_.cases; ++c, ++reaction) {
                largest[c] = b == 0 ? *reaction : std::max(largest[c], *reaction);
            }
        }
        return largest;
    }

    /// See ComparedCarrier::difference.
    [[nodiscard]] double difference_in(const std::vector<double>& values) const {
        if (values.empty() || !to_.runs[to_.own].complete) {
            return 0;
        }
        const double* own = values.data() + to_.own * to_.cases;
        double all = 0;
        for (std::size_t c = 0; c < to_.cases; ++c) {
            all += std::abs(own[c]);
        }
        double largest = 0;
        for (std::size_t r = 0; r < to_.runs.size(); ++r) {
            for (std::size_t c = 0; to_.runs[r].complete && c < to_.cases; ++c) {
                largest = std::max(largest, std::abs(values[r * to_.cases + c] - own[c]));
            }
        }
        if (largest <= to_.noise) {
            return 0;
        }
        return all > to_.noise ? largest / all : std::numeric_limits<double>::infinity();
    }

    ShareComparison& to_;
};

} // namespace

std::optional<double> ShareComparison::percent(const ComparedCarrier& carrier, ComparedValues values,
                                               RunCase at) const {
    const std::vector<double>& all = carrier.*values;
    if (!runs[at.run].complete || !runs[own].complete || all.empty()) {
        return std::nullopt;
    }
    constexpr double whole = 100;
    const double base = all[own * cases + at.load_case];
    const double difference = all[at.run * cases + at.load_case] - base;
    if (std::abs(difference) <= noise) {
        return 0;
    }
    return std::abs(base) > noise ? std::optional(whole * difference / std::abs(base)) : std::nullopt;
}

ShareComparison compare_shares(const Takedown& own, const TakedownOptions& options) {
    ShareComparison comparison;
    const std::optional<Share> common = common_share(own);
    if (!common) {
        comparison.runs.push_back({std::nullopt, true, false, {}});
    }
    for (const Share share : all_shares) {
        if (common == share) {
            comparison.own = comparison.runs.size();
        }
        comparison.runs.push_back({share, common == share, false, {}});
    }
    Comparer comparer(comparison, own.plan.cases.size());
    comparer.read_off(own, comparison.own);
    for (std::size_t r = 0; r < comparison.runs.size(); ++r) {
        if (r != comparison.own) {
            TakedownOptions other = options;
            other.share = comparison.runs[r].share;
            comparer.read_off(take_down(own.plan, other), r);
        }
    }
    comparer.measure_and_sort();
    return comparison;
}

ShareComparison compare_shares(const Plan& plan, const TakedownOptions& options) {
    return compare_shares(take_down(plan, options), options);
}

RUNNEL_NAMESPACE_END
