#include "deck/strips_chains.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::uint32_t no_bay = std::numeric_limits<std::uint32_t>::max();
/// Over equal spans a moment dies down to 0.268 of it from each to the next: to 1e-13 over so many.
constexpr std::size_t felt_bays = 23;
constexpr std::size_t most_core_bays = 2 * felt_bays; // makes the least work where joists end one by one

/// Goes up through the levels at which bays begin and end. A chain stays open until one of its bays ends or
/// another joins it, so that an opening or a short joist cuts what is near it only.
class ChainSweep {
public:
    ChainSweep(std::span<const Bay> bays, std::span<const BayMarks> marks,
               const std::function<void(const Chain&)>& use)
        : bays_(bays), marks_(marks), use_(use), is_loose_(bays.size(), false), chains_over_(bays.size()) {
        std::uint32_t count = 0;
        for (const BayMarks& of_bay : marks) {
            for (const std::uint32_t mark : {of_bay.low, of_bay.high}) {
                count = mark == Gap::edge ? count : std::max(count, mark + 1);
            }
        }
        above_.assign(count, no_bay);
        below_.assign(count, no_bay);
    }

    void run() {
        const std::vector<std::uint32_t> by_from = sorted_by([](const Bay& bay) { return bay.from; });
        const std::vector<std::uint32_t> by_to = sorted_by([](const Bay& bay) { return bay.to; });
        std::size_t start = 0;
        std::size_t end = 0;
        while (end < by_to.size()) {
            double level = bays_[by_to[end]].to;
            if (start < by_from.size()) {
                level = std::min(level, bays_[by_from[start]].from);
            }
            for (; end < by_to.size() && bays_[by_to[end]].to == level; ++end) {
                take_out(by_to[end], level);
            }
            for (; start < by_from.size() && bays_[by_from[start]].from == level; ++start) {
                put_in(by_from[start], level);
            }
            open_chains(level);
        }
    }

private:
    struct OpenChain {
        double from = 0;
        std::vector<std::uint32_t> bays;
        std::size_t core = 0, core_size = 0;
    };

    template <class Level>
    [[nodiscard]] std::vector<std::uint32_t> sorted_by(Level level) const {
        std::vector<std::uint32_t> sorted;
        for (std::uint32_t i = 0; i < bays_.size(); ++i) {
            if (!marks_[i].bare() && bays_[i].to > bays_[i].from) {
                sorted.push_back(i);
            }
        }
        std::sort(sorted.begin(), sorted.end(), [&](std::uint32_t l, std::uint32_t r) {
            return std::pair(level(bays_[l]), l) < std::pair(level(bays_[r]), r);
        });
        return sorted;
    }

    [[nodiscard]] std::uint32_t before(std::uint32_t bay) const {
        return marks_[bay].low == Gap::edge ? no_bay : below_[marks_[bay].low];
    }
    [[nodiscard]] std::uint32_t after(std::uint32_t bay) const {
        return marks_[bay].high == Gap::edge ? no_bay : above_[marks_[bay].high];
    }

    void take_out(std::uint32_t bay, double level) {
        close_over(bay, level);
        is_loose_[bay] = false;
        if (const std::uint32_t mark = marks_[bay].low; mark != Gap::edge && above_[mark] == bay) {
            above_[mark] = no_bay;
        }
        if (const std::uint32_t mark = marks_[bay].high; mark != Gap::edge && below_[mark] == bay) {
            below_[mark] = no_bay;
        }
    }

    void put_in(std::uint32_t bay, double level) {
        if (marks_[bay].low != Gap::edge) {
            above_[marks_[bay].low] = bay;
        }
        if (marks_[bay].high != Gap::edge) {
            below_[marks_[bay].high] = bay;
        }
        set_loose(bay);
        for (const std::uint32_t beside : {before(bay), after(bay)}) {
            if (beside != no_bay) {
                close_over(beside, level);
            }
        }
    }

    void set_loose(std::uint32_t bay) {
        is_loose_[bay] = true;
        loose_.push_back(bay);
    }

    /// Closes the chains in which a bay has a say.
    void close_over(std::uint32_t bay, double level) {
        while (!chains_over_[bay].empty()) {
            const std::uint32_t id = chains_over_[bay].back();
            OpenChain& chain = open_[id];
            use_({chain.bays, chain.core, chain.core_size, chain.from, level});
            for (const std::uint32_t i : chain.bays) {
                std::erase(chains_over_[i], id);
            }
            for (std::size_t k = 0; k < chain.core_size; ++k) {
                set_loose(chain.bays[chain.core + k]);
            }
            free_.push_back(id);
        }
    }

    /// Bays whose chains were closed at this level, and new ones, become cores again.
    void open_chains(double level) {
        for (std::size_t k = 0; k < loose_.size(); ++k) {
            std::uint32_t bay = loose_[k];
            if (!is_loose_[bay]) {
                continue;
            }
            while (before(bay) != no_bay && is_loose_[before(bay)]) {
                bay = before(bay);
            }
            run_.clear();
            for (; bay != no_bay && is_loose_[bay]; bay = after(bay)) {
                is_loose_[bay] = false;
                run_.push_back(bay);
            }
            const std::size_t parts = (run_.size() + most_core_bays - 1) / most_core_bays;
            for (std::size_t p = 0; p < parts; ++p) {
                const std::size_t first = run_.size() * p / parts;
                const std::size_t last = run_.size() * (p + 1) / parts;
                open_chain(std::span(run_).subspan(first, last - first), level);
            }
        }
        loose_.clear();
    }

    void open_chain(std::span<const std::uint32_t> core, double level) {
        if (free_.empty()) {
            free_.push_back(static_cast<std::uint32_t>(open_.size()));
            open_.emplace_back();
        }
        const std::uint32_t id = free_.back();
        free_.pop_back();
        OpenChain& chain = open_[id];
        chain.from = level;
        chain.bays.clear();
        std::uint32_t bay = before(core.front());
        for (std::size_t k = 0; k < felt_bays && bay != no_bay; ++k, bay = before(bay)) {
            chain.bays.push_back(bay);
        }
        std::reverse(chain.bays.begin(), chain.bays.end());
        chain.core = chain.bays.size();
        chain.core_size = core.size();
        chain.bays.insert(chain.bays.end(), core.begin(), core.end());
        bay = after(core.back());
        for (std::size_t k = 0; k < felt_bays && bay != no_bay; ++k, bay = after(bay)) {
            chain.bays.push_back(bay);
        }
        for (const std::uint32_t i : chain.bays) {
            chains_over_[i].push_back(id);
        }
    }

    std::span<const Bay> bays_;
    std::span<const BayMarks> marks_;
    const std::function<void(const Chain&)>& use_;
    std::vector<std::uint32_t> above_, below_; ///< by mark: the bay beside it at this level
    std::vector<std::uint32_t> loose_;         ///< bays in no core at this level; some may have ended
    std::vector<bool> is_loose_;
    std::vector<OpenChain> open_;
    std::vector<std::uint32_t> free_; ///< of open_
    std::vector<std::vector<std::uint32_t>> chains_over_;
    std::vector<std::uint32_t> run_;
};

} // namespace

void for_chains(std::span<const Bay> bays, std::span<const BayMarks> marks,
                const std::function<void(const Chain&)>& use) {
    ChainSweep(bays, marks, use).run();
}

RUNNEL_NAMESPACE_END
