#include "deck/one_way.hpp"

#include "deck/marks.hpp"
#include "deck/pressure.hpp"
#include "deck/strips.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_sweep.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <numbers>

RUNNEL_NAMESPACE_BEGIN

namespace {

StripAxes axes_of(const FramedDeck& deck) {
    StripAxes axes;
    axes.origin = deck.outline.front();
    // Quarter turns exactly: the cosine of 90 degrees in radians is not zero.
    const double turns = deck.direction / 90;
    const double whole = std::round(turns);
    if (turns == whole) {
        constexpr std::array<Point, 4> quarters{{{1, 0}, {0, 1}, {-1, 0}, {0, -1}}};
        const auto quarter = static_cast<std::size_t>(std::fmod(std::fmod(whole, 4) + 4, 4));
        axes.cosine = quarters[quarter].x;
        axes.sine = quarters[quarter].y;
    } else {
        const double angle = deck.direction * std::numbers::pi / 180;
        axes.cosine = std::cos(angle);
        axes.sine = std::sin(angle);
    }
    return axes;
}

/// Station on a carrier by the level across the strips; exact at both ends.
struct Stations {
    double across_a = 0;
    double across_b = 0;
    double at_a = 0;
    double at_b = 0;

    [[nodiscard]] double at(double across) const {
        const double t = std::clamp((across - across_a) / (across_b - across_a), 0.0, 1.0);
        return (1 - t) * at_a + t * at_b + 0.0; // no negative zero
    }
};

/// What the sweep's marks stand for.
struct MarkedCarriers {
    std::span<const LineCarrier> carriers;
    std::vector<CarrierMark> marks;
    std::vector<Stations> stations; ///< by mark

    [[nodiscard]] std::uint32_t number(std::uint32_t mark) const {
        return carriers[marks[mark].carrier].number;
    }
};

Bay bay_of(const Gap& gap, std::uint32_t deck, std::uint32_t axes, const MarkedCarriers& marked) {
    Bay bay;
    bay.deck = deck;
    bay.axes = axes;
    bay.from = gap.from;
    bay.to = gap.to;
    bay.low = {gap.low_start, gap.low_end, 0};
    bay.high = {gap.high_start, gap.high_end, 0};
    if (gap.low != Gap::edge) {
        bay.low_carrier = marked.number(gap.low);
        bay.low_station_from = marked.stations[gap.low].at(gap.from);
        bay.low_station_to = marked.stations[gap.low].at(gap.to);
    }
    if (gap.high != Gap::edge) {
        bay.high_carrier = marked.number(gap.high);
        bay.high_station_from = marked.stations[gap.high].at(gap.from);
        bay.high_station_to = marked.stations[gap.high].at(gap.to);
    }
    return bay;
}

Cell cell_between(const Bay& bay, const Border& low, const Border& high, bool overhang) {
    Cell cell;
    cell.deck = bay.deck;
    cell.axes = bay.axes;
    cell.from = bay.from;
    cell.to = bay.to;
    cell.low = low;
    cell.high = high;
    cell.overhang = overhang;
    return cell;
}

void push_to_low(Sharing& sharing, const Bay& bay, Cell cell) {
    cell.carrier_side = Cell::CarrierSide::low;
    sharing.cells.push_back(cell);
    sharing.transfers.push({bay.low_carrier, bay.low_station_from, bay.low_station_to, 1});
    sharing.transfers.end_group();
}

void push_to_high(Sharing& sharing, const Bay& bay, Cell cell) {
    cell.carrier_side = Cell::CarrierSide::high;
    sharing.cells.push_back(cell);
    sharing.transfers.push({bay.high_carrier, bay.high_station_from, bay.high_station_to, 1});
    sharing.transfers.end_group();
}

/// Tributary halves: each carrier takes its bay up to the middle, and the whole of an overhang. A bay without
/// carriers makes a cell without transfers.
void push_halves(Sharing& sharing, const Bay& bay) {
    const bool low = bay.low_carrier != none;
    const bool high = bay.high_carrier != none;
    if (low && high) {
        const Border middle{(bay.low.start + bay.high.start) / 2, (bay.low.end + bay.high.end) / 2, 0};
        push_to_low(sharing, bay, cell_between(bay, bay.low, middle, false));
        push_to_high(sharing, bay, cell_between(bay, middle, bay.high, false));
    } else if (low) {
        push_to_low(sharing, bay, cell_between(bay, bay.low, bay.high, true));
    } else if (high) {
        push_to_high(sharing, bay, cell_between(bay, bay.low, bay.high, true));
    } else {
        sharing.cells.push_back(cell_between(bay, bay.low, bay.high, false));
        sharing.transfers.end_group();
    }
}

bool is_bare(const Bay& bay) {
    return bay.low_carrier == none && bay.high_carrier == none;
}

/// A bay without carriers that is no higher than `snap` across the strips is what the drawing is off by. It
/// goes to the nearest carrier of the strips beside it, at the level where they meet.
class SliverGiver {
public:
    SliverGiver(std::span<const Bay> bays, double snap) : bays_(bays), snap_(snap) {
        for (std::size_t i = 0; i < bays.size(); ++i) {
            if (!is_bare(bays[i])) {
                by_from_.push_back(i);
                by_to_.push_back(i);
            }
        }
        std::sort(by_from_.begin(), by_from_.end(),
                  [&](std::size_t l, std::size_t r) { return bays_[l].from < bays_[r].from; });
        std::sort(by_to_.begin(), by_to_.end(),
                  [&](std::size_t l, std::size_t r) { return bays_[l].to < bays_[r].to; });
    }

    /// The transfers of a sliver: to the nearest carrier, in equal parts to those that are equally near.
    /// Empty where no strip lies beside it, or it is no sliver.
    [[nodiscard]] std::vector<Transfer> give(const Bay& sliver, double noise) const {
        std::vector<Transfer> transfers;
        if (sliver.to - sliver.from > snap_) {
            return transfers;
        }
        double nearest = std::numeric_limits<double>::infinity();
        const double middle = (sliver.low.at(0.5) + sliver.high.at(0.5)) / 2;
        const auto offer = [&](std::uint32_t carrier, double along, double station) {
            const double away = std::abs(along - middle);
            if (carrier == none || away > nearest + noise) {
                return;
            }
            if (away < nearest - noise) {
                transfers.clear();
                nearest = away;
            }
            const bool there = std::any_of(transfers.begin(), transfers.end(),
                                           [&](const Transfer& t) { return t.carrier == carrier; });
            if (!there) {
                transfers.push_back({carrier, station, station, 1});
            }
        };
        const auto below = std::lower_bound(by_to_.begin(), by_to_.end(), sliver.from - snap_,
                                            [&](std::size_t i, double v) { return bays_[i].to < v; });
        for (auto it = below; it != by_to_.end() && bays_[*it].to <= sliver.to; ++it) {
            const Bay& bay = bays_[*it];
            if (bay.low.end <= reach_high(sliver) && bay.high.end >= reach_low(sliver)) {
                offer(bay.low_carrier, bay.low.end, bay.low_station_to);
                offer(bay.high_carrier, bay.high.end, bay.high_station_to);
            }
        }
        const auto above = std::lower_bound(by_from_.begin(), by_from_.end(), sliver.from,
                                            [&](std::size_t i, double v) { return bays_[i].from < v; });
        for (auto it = above; it != by_from_.end() && bays_[*it].from <= sliver.to + snap_; ++it) {
            const Bay& bay = bays_[*it];
            if (bay.low.start <= reach_high(sliver) && bay.high.start >= reach_low(sliver)) {
                offer(bay.low_carrier, bay.low.start, bay.low_station_from);
                offer(bay.high_carrier, bay.high.start, bay.high_station_from);
            }
        }
        std::sort(transfers.begin(), transfers.end(),
                  [](const Transfer& l, const Transfer& r) { return l.carrier < r.carrier; });
        for (Transfer& transfer : transfers) {
            transfer.weight = 1 / static_cast<double>(transfers.size());
        }
        return transfers;
    }

private:
    [[nodiscard]] double reach_low(const Bay& bay) const {
        return std::min(bay.low.start, bay.low.end) - snap_;
    }
    [[nodiscard]] double reach_high(const Bay& bay) const {
        return std::max(bay.high.start, bay.high.end) + snap_;
    }

    std::span<const Bay> bays_;
    double snap_;
    std::vector<std::size_t> by_from_, by_to_;
};

void push_sliver(Sharing& sharing, Bay& bay, std::span<const Transfer> transfers) {
    sharing.cells.push_back(cell_between(bay, bay.low, bay.high, true));
    sharing.transfers.push_group(transfers);
    bay.low_carrier = transfers.front().carrier; // what stands on the sliver goes to the first of them
    bay.low_station_from = transfers.front().station_from;
    bay.low_station_to = transfers.front().station_to;
}

MarkedCarriers mark_carriers(const Ring& outline, const std::vector<Ring>& openings,
                             std::span<const LineCarrier> carriers, const StripAxes& axes,
                             Tolerance tolerance) {
    return {carriers, fit_marks(outline, openings, carriers, axes, tolerance), {}};
}

std::vector<Gap> sweep(const Ring& outline, const std::vector<Ring>& openings, MarkedCarriers& marked,
                       double noise) {
    std::vector<Mark> lines;
    lines.reserve(marked.marks.size());
    for (const CarrierMark& mark : marked.marks) {
        lines.push_back(mark.line);
    }
    StripSweep swept = sweep_strips(outline, openings, lines, noise);
    for (std::size_t m = 0; m < marked.marks.size(); ++m) {
        const CarrierMark& mark = marked.marks[m];
        marked.stations.push_back(
            {swept.mark_across[m].first, swept.mark_across[m].second, mark.station_a, mark.station_b});
    }
    return std::move(swept.gaps);
}

} // namespace

void share_one_way(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                   const Framing& framing, double snap, Sharing& sharing) {
    const Tolerance tolerance{noise_of(framing.largest_coordinate), snap};
    const StripAxes axes = axes_of(deck);
    const Ring outline = to_strip(axes, deck.outline);
    std::vector<Ring> openings;
    for (const Ring& opening : deck.openings) {
        openings.push_back(to_strip(axes, opening));
    }
    MarkedCarriers marked = mark_carriers(outline, openings, carriers, axes, tolerance);
    const std::vector<Gap> gaps = sweep(outline, openings, marked, tolerance.noise);

    const auto axes_index = static_cast<std::uint32_t>(sharing.axes.size());
    sharing.axes.push_back(axes);
    const std::size_t first_bay = sharing.bays.size();
    std::vector<BayMarks> marks;
    bool any_bare = false;
    for (const Gap& gap : gaps) {
        const Bay bay = bay_of(gap, index, axes_index, marked);
        const double breadth = std::max(bay.high.start - bay.low.start, bay.high.end - bay.low.end);
        if (is_bare(bay) && breadth <= 2 * tolerance.noise) {
            continue; // an opening's edge on the deck's edge: nothing is between them
        }
        any_bare = any_bare || is_bare(bay);
        sharing.bays.push_back(bay);
        marks.push_back({gap.low, gap.high});
    }
    const std::vector<Bay> bays(sharing.bays.begin() +
                                    static_cast<std::ptrdiff_t>(any_bare ? first_bay : sharing.bays.size()),
                                sharing.bays.end());
    const SliverGiver slivers(bays, snap);
    for (std::size_t i = first_bay; i < sharing.bays.size(); ++i) {
        Bay& bay = sharing.bays[i];
        const std::vector<Transfer> transfers =
            is_bare(bay) ? slivers.give(bay, tolerance.noise) : std::vector<Transfer>{};
        if (transfers.empty()) {
            push_halves(sharing, bay);
        } else {
            push_sliver(sharing, bay, transfers);
        }
    }
    if (deck.share != Share::half) {
        make_strips(deck.share, first_bay, marks, tolerance, sharing);
    }
}

RUNNEL_NAMESPACE_END
