#include "deck/strips.hpp"

#include "deck/strip_beam.hpp"
#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <tuple>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::uint32_t no_bay = std::numeric_limits<std::uint32_t>::max();

StripPiece piece_of(const Bay& bay) {
    return {bay.from, bay.to, bay.low, bay.high};
}

struct Levels {
    double from = 0, to = 0;

    [[nodiscard]] bool any() const { return to > from; }
};

/// Narrows levels to where a quantity that is linear in between, and has these values at both ends, is not
/// negative.
void keep_where_positive(const Levels& whole, double start, double end, Levels& kept) {
    if (start < 0 && end < 0) {
        kept.to = kept.from;
    } else if (start < 0 || end < 0) {
        const double x = start / (start - end);
        const double level = (1 - x) * whole.from + x * whole.to;
        (start < 0 ? kept.from : kept.to) = start < 0 ? std::max(kept.from, level) : std::min(kept.to, level);
    }
}

class StripMaker {
public:
    StripMaker(std::size_t first_bay, std::span<const BayMarks> marks, double noise, Sharing& sharing)
        : sharing_(sharing), bays_(std::span<const Bay>(sharing.bays).subspan(first_bay)), marks_(marks),
          noise_(noise) {
        for (std::uint32_t i = 0; i < bays_.size(); ++i) {
            if (marks_[i].low != Gap::edge) {
                above_.push_back({marks_[i].low, bays_[i].from, i});
            }
            if (marks_[i].high != Gap::edge) {
                below_.push_back({marks_[i].high, bays_[i].from, i});
            }
        }
        const auto by_place = [](const Row& l, const Row& r) {
            return std::tie(l.mark, l.from, l.bay) < std::tie(r.mark, r.from, r.bay);
        };
        std::sort(above_.begin(), above_.end(), by_place);
        std::sort(below_.begin(), below_.end(), by_place);
    }

    void make_levers() {
        for (std::uint32_t i = 0; i < bays_.size(); ++i) {
            if (!marks_[i].bare()) {
                push_bay(i, {bays_[i].from, bays_[i].to});
            }
        }
    }

    void make_chains();

private:
    struct Row {
        std::uint32_t mark;
        double from;
        std::uint32_t bay;
    };

    [[nodiscard]] bool is_span(std::uint32_t i) const {
        return marks_[i].low != Gap::edge && marks_[i].high != Gap::edge;
    }

    StripCarrier low_carrier(std::uint32_t i, const Levels& at) const {
        const Bay& bay = bays_[i];
        const auto [x, y] = fractions(i, at);
        return {bay.low_carrier, stretch_of(bay.low, x, y),
                (1 - x) * bay.low_station_from + x * bay.low_station_to,
                (1 - y) * bay.low_station_from + y * bay.low_station_to};
    }
    StripCarrier high_carrier(std::uint32_t i, const Levels& at) const {
        const Bay& bay = bays_[i];
        const auto [x, y] = fractions(i, at);
        return {bay.high_carrier, stretch_of(bay.high, x, y),
                (1 - x) * bay.high_station_from + x * bay.high_station_to,
                (1 - y) * bay.high_station_from + y * bay.high_station_to};
    }
    std::pair<double, double> fractions(std::uint32_t i, const Levels& at) const {
        const StripPiece piece = piece_of(bays_[i]);
        return {at.from == piece.from ? 0 : piece.fraction(at.from),
                at.to == piece.to ? 1 : piece.fraction(at.to)};
    }

    void begin_strip(std::uint32_t low, std::uint32_t high, const Levels& at, Share share) {
        const auto [x, y] = fractions(low, at);
        const auto [z, w] = fractions(high, at);
        sharing_.strips.push_back({bays_[low].deck, bays_[low].axes, at.from, at.to,
                                   stretch_of(bays_[low].low, x, y), stretch_of(bays_[high].high, z, w),
                                   share});
    }

    /// Shares a bay by lever between two levels of it.
    void push_bay(std::uint32_t i, const Levels& at) {
        if (!at.any()) {
            return;
        }
        if (is_span(i)) {
            begin_strip(i, i, at, Share::lever);
            sharing_.strip_carriers.push(low_carrier(i, at));
            sharing_.strip_carriers.push(high_carrier(i, at));
            sharing_.strip_carriers.end_group();
            return;
        }
        // The bays behind the overhang's carrier, by rising level; they do not overlap.
        const bool goes_down = marks_[i].low == Gap::edge;
        const std::uint32_t mark = goes_down ? marks_[i].high : marks_[i].low;
        const std::vector<Row>& rows = goes_down ? above_ : below_;
        double level = at.from;
        auto row = std::upper_bound(rows.begin(), rows.end(), std::pair(mark, at.from),
                                    [](const auto& k, const Row& r) {
                                        return k.first != r.mark ? k.first < r.mark : k.second < r.from;
                                    });
        if (row != rows.begin() && std::prev(row)->mark == mark) {
            --row;
        }
        for (; row != rows.end() && row->mark == mark && row->from < at.to; ++row) {
            const Levels both{std::max(level, row->from), std::min(at.to, bays_[row->bay].to)};
            if (!is_span(row->bay) || !both.any()) {
                continue;
            }
            push_alone(i, {level, both.from});
            push_overhang(i, row->bay, both);
            level = both.to;
        }
        push_alone(i, {level, at.to});
    }

    /// An overhang without a back span: all of it to its carrier.
    void push_alone(std::uint32_t i, const Levels& at) {
        if (!at.any()) {
            return;
        }
        begin_strip(i, i, at, Share::lever);
        sharing_.strip_carriers.push(marks_[i].low == Gap::edge ? high_carrier(i, at) : low_carrier(i, at));
        sharing_.strip_carriers.end_group();
    }

    void push_overhang(std::uint32_t i, std::uint32_t back, const Levels& at) {
        Levels held = at;
        keep_long_spans(back, i, at, held);
        if (!held.any()) {
            push_alone(i, at);
            return;
        }
        push_alone(i, {at.from, held.from});
        begin_strip(i, i, held, Share::lever);
        sharing_.strip_carriers.push(low_carrier(back, held));
        sharing_.strip_carriers.push(high_carrier(back, held));
        sharing_.strip_carriers.end_group();
        push_alone(i, {held.to, at.to});
    }

    [[nodiscard]] std::pair<double, double> lengths(std::uint32_t i, const Levels& at) const {
        const auto [x, y] = fractions(i, at);
        return {bays_[i].high.at(x) - bays_[i].low.at(x), bays_[i].high.at(y) - bays_[i].low.at(y)};
    }

    /// Narrows levels to those where a span is long enough for what lies beside it.
    void keep_long_spans(std::uint32_t span, std::uint32_t beside, const Levels& at, Levels& kept) const {
        const auto [start, end] = lengths(span, at);
        const auto [beside_start, beside_end] = lengths(beside, at);
        if (!(start + end > 2 * noise_)) {
            kept.to = kept.from; // two carriers on one line: nothing can be told from their distance
            return;
        }
        keep_where_positive(at, start - least_span_ratio * beside_start, end - least_span_ratio * beside_end,
                            kept);
    }

    void push_chain(std::span<const std::uint32_t> chain, const Levels& at);
    void push_bays(std::span<const std::uint32_t> chain, const Levels& at) {
        for (const std::uint32_t i : chain) {
            push_bay(i, at);
        }
    }

    Sharing& sharing_;
    std::span<const Bay> bays_;
    std::span<const BayMarks> marks_;
    double noise_;
    std::vector<Row> above_, below_; ///< bays by the mark below (above) them, by rising level
};

/// One strip for a chain of bays, where its spans are long enough for each other; the rest bay by bay.
void StripMaker::push_chain(std::span<const std::uint32_t> chain, const Levels& at) {
    if (!at.any()) {
        return;
    }
    Levels held = at;
    std::size_t spans = 0;
    for (std::size_t k = 0; k < chain.size() && held.any(); ++k) {
        if (is_span(chain[k])) {
            ++spans;
            if (k > 0) {
                keep_long_spans(chain[k], chain[k - 1], at, held);
            }
            if (k + 1 < chain.size()) {
                keep_long_spans(chain[k], chain[k + 1], at, held);
            }
        }
    }
    if (spans == 0 || !held.any()) {
        push_bays(chain, at);
        return;
    }
    push_bays(chain, {at.from, held.from});
    begin_strip(chain.front(), chain.back(), held, Share::continuous);
    if (marks_[chain.front()].low != Gap::edge) {
        sharing_.strip_carriers.push(low_carrier(chain.front(), held));
    }
    for (const std::uint32_t i : chain) {
        if (marks_[i].high != Gap::edge) {
            sharing_.strip_carriers.push(high_carrier(i, held));
        }
    }
    sharing_.strip_carriers.end_group();
    push_bays(chain, {held.to, at.to});
}

/// Goes up through the levels at which bays begin and end. A chain stays open until one of its bays ends or
/// another joins it, so that an opening or a short joist cuts its own chains only.
void StripMaker::make_chains() {
    std::vector<std::uint32_t> by_from;
    for (std::uint32_t i = 0; i < bays_.size(); ++i) {
        if (!marks_[i].bare() && bays_[i].to > bays_[i].from) {
            by_from.push_back(i);
        }
    }
    std::vector<std::uint32_t> by_to = by_from;
    std::sort(by_from.begin(), by_from.end(), [&](std::uint32_t l, std::uint32_t r) {
        return std::pair(bays_[l].from, l) < std::pair(bays_[r].from, r);
    });
    std::sort(by_to.begin(), by_to.end(), [&](std::uint32_t l, std::uint32_t r) {
        return std::pair(bays_[l].to, l) < std::pair(bays_[r].to, r);
    });
    std::uint32_t marks = 0;
    for (const std::uint32_t i : by_from) {
        for (const std::uint32_t mark : {marks_[i].low, marks_[i].high}) {
            marks = mark == Gap::edge ? marks : std::max(marks, mark + 1);
        }
    }
    std::vector<std::uint32_t> above(marks, no_bay); // by mark: the bay beside it at this level
    std::vector<std::uint32_t> below(marks, no_bay);
    std::vector<std::uint32_t> chain_of(bays_.size(), no_bay); // by its first bay
    std::vector<std::vector<std::uint32_t>> bays_of(bays_.size());
    std::vector<double> opened(bays_.size(), 0);
    std::vector<std::uint32_t> loose; // bays of chains that were closed at this level, and new ones

    const auto close = [&](std::uint32_t bay, double level) {
        const std::uint32_t chain = chain_of[bay];
        if (chain == no_bay) {
            return;
        }
        push_chain(bays_of[chain], {opened[chain], level});
        for (const std::uint32_t i : bays_of[chain]) {
            chain_of[i] = no_bay;
            loose.push_back(i);
        }
        bays_of[chain] = {};
    };
    const auto before = [&](std::uint32_t i) {
        return marks_[i].low == Gap::edge ? no_bay : below[marks_[i].low];
    };
    const auto after = [&](std::uint32_t i) {
        return marks_[i].high == Gap::edge ? no_bay : above[marks_[i].high];
    };
    std::size_t start = 0;
    std::size_t end = 0;
    while (end < by_to.size()) {
        double level = bays_[by_to[end]].to;
        if (start < by_from.size()) {
            level = std::min(level, bays_[by_from[start]].from);
        }
        loose.clear();
        for (; end < by_to.size() && bays_[by_to[end]].to == level; ++end) {
            const std::uint32_t i = by_to[end];
            close(i, level);
            if (marks_[i].low != Gap::edge && above[marks_[i].low] == i) {
                above[marks_[i].low] = no_bay;
            }
            if (marks_[i].high != Gap::edge && below[marks_[i].high] == i) {
                below[marks_[i].high] = no_bay;
            }
        }
        for (; start < by_from.size() && bays_[by_from[start]].from == level; ++start) {
            const std::uint32_t i = by_from[start];
            loose.push_back(i);
            if (marks_[i].low != Gap::edge) {
                above[marks_[i].low] = i;
            }
            if (marks_[i].high != Gap::edge) {
                below[marks_[i].high] = i;
            }
            for (const std::uint32_t beside : {before(i), after(i)}) {
                if (beside != no_bay) {
                    close(beside, level);
                }
            }
        }
        for (std::size_t k = 0; k < loose.size(); ++k) {
            std::uint32_t i = loose[k];
            if (bays_[i].to <= level || chain_of[i] != no_bay) {
                continue;
            }
            while (before(i) != no_bay) {
                i = before(i);
            }
            opened[i] = level;
            for (std::uint32_t next = i; next != no_bay; next = after(next)) {
                chain_of[next] = i;
                bays_of[i].push_back(next);
            }
        }
    }
}

} // namespace

void make_strips(Share share, std::size_t first_bay, std::span<const BayMarks> marks, double noise,
                 Sharing& sharing) {
    StripMaker maker(first_bay, marks, noise, sharing);
    if (share == Share::continuous) {
        maker.make_chains();
    } else {
        maker.make_levers();
    }
}

RUNNEL_NAMESPACE_END
