#include "deck/strips.hpp"

#include "deck/strip_beam.hpp"
#include "deck/strips_chains.hpp"
#include "deck/strips_cut.hpp"
#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <tuple>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

StripPiece piece_of(const Bay& bay) {
    return {bay.from, bay.to, bay.low, bay.high};
}

class StripMaker {
public:
    StripMaker(std::size_t first_bay, std::span<const BayMarks> marks, Tolerance tolerance, Sharing& sharing)
        : sharing_(sharing), bays_(std::span<const Bay>(sharing.bays).subspan(first_bay)), marks_(marks),
          tolerance_(tolerance) {
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

    void make_chains() {
        for_chains(bays_, marks_, [this](const Chain& chain) { push_chain(chain); });
    }

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
        if (!(start + end > 2 * tolerance_.noise)) {
            kept.to = kept.from; // two carriers on one line: nothing can be told from their distance
            return;
        }
        keep_where_positive(at, start - least_span_ratio * beside_start, end - least_span_ratio * beside_end,
                            kept);
    }

    void push_chain(const Chain& chain);
    void push_part(const Chain& chain, const ChainPart& part);

    Sharing& sharing_;
    std::span<const Bay> bays_;
    std::span<const BayMarks> marks_;
    Tolerance tolerance_;
    std::vector<ChainBay> chain_bays_;
    std::vector<Row> above_, below_; ///< bays by the mark below (above) them, by rising level
};

/// One strip for all bays of a chain that act as one beam.
void StripMaker::push_chain(const Chain& chain) {
    const Levels at{chain.from, chain.to};
    chain_bays_.clear();
    for (const std::uint32_t i : chain.bays) {
        const Bay& bay = bays_[i];
        const auto [start, end] = lengths(i, at);
        const double breadth = bay.to - bay.from;
        const double grown = (bay.high.end - bay.low.end) - (bay.high.start - bay.low.start);
        chain_bays_.push_back({is_span(i), start, end, grown / breadth, breadth});
    }
    for_parts(chain_bays_, at, tolerance_.snap, tolerance_.noise,
              [&](const ChainPart& part) { push_part(chain, part); });
}

/// A part's strip bears the load of those of its bays that are in the chain's core.
void StripMaker::push_part(const Chain& chain, const ChainPart& part) {
    const std::size_t first = std::max(part.first, chain.core);
    const std::size_t last = std::min(part.last, chain.core + chain.core_size);
    if (first >= last || !part.at.any()) {
        return;
    }
    const auto bays = chain.bays.subspan(part.first, part.last - part.first);
    if (std::none_of(bays.begin(), bays.end(), [this](std::uint32_t i) { return is_span(i); })) {
        push_alone(bays.front(), part.at); // two overhangs of a carrier are two parts
        return;
    }
    begin_strip(chain.bays[first], chain.bays[last - 1], part.at,
                part.dying ? Share::lever : Share::continuous);
    if (marks_[bays.front()].low != Gap::edge) {
        sharing_.strip_carriers.push(low_carrier(bays.front(), part.at));
    }
    for (const std::uint32_t i : bays) {
        if (marks_[i].high != Gap::edge) {
            sharing_.strip_carriers.push(high_carrier(i, part.at));
        }
    }
    sharing_.strip_carriers.end_group();
}

} // namespace

void make_strips(Share share, std::size_t first_bay, std::span<const BayMarks> marks, Tolerance tolerance,
                 Sharing& sharing) {
    StripMaker maker(first_bay, marks, tolerance, sharing);
    if (share == Share::continuous) {
        maker.make_chains();
    } else {
        maker.make_levers();
    }
}

RUNNEL_NAMESPACE_END
