#include "deck/strips_cut.hpp"

#include "deck/strip_beam.hpp"

#include <algorithm>
#include <cmath>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

void keep_where_positive(const Levels& whole, double start, double end, Levels& kept) {
    if (start < 0 && end < 0) {
        kept.to = kept.from;
    } else if (start < 0 || end < 0) {
        const double x = start / (start - end);
        const double level = (1 - x) * whole.from + x * whole.to;
        (start < 0 ? kept.from : kept.to) = start < 0 ? std::max(kept.from, level) : std::min(kept.to, level);
    }
}

namespace {

class ChainCutter {
public:
    ChainCutter(std::span<const ChainBay> bays, const Levels& at, double snap, double noise)
        : bays_(bays), at_(at), snap_(snap), noise_(noise) {
        for (std::size_t k = 0; k + 1 < bays.size(); ++k) {
            compare(k, k + 1);
            compare(k + 1, k);
        }
        std::sort(changes_.begin(), changes_.end(),
                  [](const Change& l, const Change& r) { return l.level < r.level; });
    }

    void run(const std::function<void(const ChainPart&)>& use) {
        if (changes_.empty()) {
            use({0, bays_.size(), at_, false});
            return;
        }
        cuts_.assign(bays_.size(), 0);
        dying_.assign(bays_.size(), 0);
        std::vector<ChainPart> open;
        std::vector<ChainPart> next;
        auto it = changes_.begin();
        double level = at_.from;
        while (true) {
            for (; it != changes_.end() && it->level <= level; ++it) {
                (it->dies ? dying_ : cuts_)[it->bay] += it->step;
            }
            next.clear();
            if (level < at_.to) {
                find_parts(level, next);
            }
            close(open, next, level, use);
            std::swap(open, next);
            if (!(level < at_.to)) {
                return;
            }
            level = it != changes_.end() ? it->level : at_.to;
        }
    }

private:
    /// A bay begins (1) or ceases (-1) to die, or to be cut from the one before it.
    struct Change {
        double level = 0;
        std::size_t bay = 0;
        bool dies = false;
        int step = 0;
    };

    void add(const Levels& where, std::size_t bay, bool dies) {
        if (where.any()) {
            changes_.push_back({where.from, bay, dies, 1});
            changes_.push_back({where.to, bay, dies, -1});
        }
    }

    /// Notes where bay k is too short for its neighbour.
    void compare(std::size_t k, std::size_t beside) {
        const ChainBay& bay = bays_[k];
        const ChainBay& other = bays_[beside];
        const std::size_t joint = std::max(k, beside);
        if (!bay.span) {
            if (!other.span) {
                add(at_, joint, false); // two overhangs of one carrier
            }
            return;
        }
        const bool no_span = !(bay.start + bay.end > 2 * noise_); // two carriers on one line
        if (other.span && !no_span && runs_on(bay, other)) {
            return;
        }
        Levels held = at_;
        if (no_span) {
            held.to = held.from;
        } else {
            keep_where_positive(at_, bay.start - least_span_ratio * other.start,
                                bay.end - least_span_ratio * other.end, held);
        }
        const std::size_t what = other.span ? k : joint;
        if (!held.any()) {
            add(at_, what, other.span);
        } else {
            add({at_.from, held.from}, what, other.span);
            add({held.to, at_.to}, what, other.span);
        }
    }

    /// As wide all along, over the whole bay or over as far as the span beside it is long: a short slice of
    /// a wedge looks even, but is none.
    [[nodiscard]] bool runs_on(const ChainBay& bay, const ChainBay& beside) const {
        const double far = std::max({bay.breadth, beside.start, beside.end});
        const double change = std::abs(bay.growth) * far;
        return change <= snap_ && 2 * change <= std::min(bay.start, bay.end);
    }

    void find_parts(double level, std::vector<ChainPart>& parts) const {
        std::size_t first = 0;
        for (std::size_t k = 1; k <= bays_.size(); ++k) {
            if (k < bays_.size() && cuts_[k] == 0 && !ends_between(k - 1, k) && !ends_between(k, k - 1)) {
                continue;
            }
            bool dying = false;
            for (std::size_t i = first; i < k; ++i) {
                dying = dying || dying_[i] > 0;
            }
            parts.push_back({first, k, {level, at_.to}, dying});
            first = k;
        }
    }
    [[nodiscard]] bool ends_between(std::size_t dying, std::size_t beside) const {
        return dying_[dying] > 0 && bays_[beside].span;
    }

    /// Parts that go on stay open; both lists rise, so that one pass finds them.
    void close(const std::vector<ChainPart>& open, std::vector<ChainPart>& next, double level,
               const std::function<void(const ChainPart&)>& use) const {
        auto it = next.begin();
        for (const ChainPart& part : open) {
            while (it != next.end() && it->first < part.first) {
                ++it;
            }
            if (it != next.end() && it->same_bays(part)) {
                it->at.from = part.at.from;
            } else {
                use({part.first, part.last, {part.at.from, level}, part.dying});
            }
        }
    }

    std::span<const ChainBay> bays_;
    Levels at_;
    double snap_, noise_;
    std::vector<Change> changes_;
    std::vector<int> cuts_;  ///< by bay: how many reasons cut it from the one before it
    std::vector<int> dying_; ///< by bay: beside how many spans it dies
};

} // namespace

void for_parts(std::span<const ChainBay> bays, const Levels& at, double snap, double noise,
               const std::function<void(const ChainPart&)>& use) {
    if (at.any()) {
        ChainCutter(bays, at, snap, noise).run(use);
    }
}

RUNNEL_NAMESPACE_END
