#include "deck/one_way.hpp"

#include "deck/pressure.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_sweep.hpp"

#include <array>
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
    double across_from = 0;
    double across_to = 0;
    double length = 0;

    [[nodiscard]] double at(double across) const {
        const double t = std::clamp((across - across_from) / (across_to - across_from), 0.0, 1.0);
        return t * length + 0.0; // no negative zero
    }
};

Bay bay_of(const Gap& gap, std::uint32_t deck, std::uint32_t axes, std::span<const LineCarrier> carriers,
           std::span<const std::uint32_t> carrier_of_mark, std::span<const Stations> stations) {
    Bay bay;
    bay.deck = deck;
    bay.axes = axes;
    bay.from = gap.from;
    bay.to = gap.to;
    bay.low = {gap.low_start, gap.low_end, 0};
    bay.high = {gap.high_start, gap.high_end, 0};
    if (gap.low != Gap::edge) {
        bay.low_carrier = carriers[carrier_of_mark[gap.low]].number;
        bay.low_station_from = stations[gap.low].at(gap.from);
        bay.low_station_to = stations[gap.low].at(gap.to);
    }
    if (gap.high != Gap::edge) {
        bay.high_carrier = carriers[carrier_of_mark[gap.high]].number;
        bay.high_station_from = stations[gap.high].at(gap.from);
        bay.high_station_to = stations[gap.high].at(gap.to);
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
    sharing.transfers.push({bay.low_carrier, bay.low_station_from, bay.low_station_to, {1, 0, 0, 0}});
    sharing.transfers.end_group();
}

void push_to_high(Sharing& sharing, const Bay& bay, Cell cell) {
    cell.carrier_side = Cell::CarrierSide::high;
    sharing.cells.push_back(cell);
    sharing.transfers.push({bay.high_carrier, bay.high_station_from, bay.high_station_to, {1, 0, 0, 0}});
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

} // namespace

void share_one_way(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                   const Framing& framing, double snap, Sharing& sharing) {
    const double noise = noise_of(framing.largest_coordinate);
    const StripAxes axes = axes_of(deck);
    const Ring outline = to_strip(axes, deck.outline);
    std::vector<Ring> openings;
    for (const Ring& opening : deck.openings) {
        openings.push_back(to_strip(axes, opening));
    }

    // A carrier that runs along the strips but for what the user takes as the same point takes nothing from
    // them.
    std::vector<Mark> marks;
    std::vector<std::uint32_t> carrier_of_mark;
    for (std::uint32_t i = 0; i < carriers.size(); ++i) {
        const Mark mark{axes.to_strip(carriers[i].from), axes.to_strip(carriers[i].to)};
        if (std::abs(mark.b.y - mark.a.y) > snap) {
            marks.push_back(mark);
            carrier_of_mark.push_back(i);
        }
    }

    const StripSweep sweep = sweep_strips(outline, openings, marks, noise);

    std::vector<Stations> stations(marks.size());
    for (std::size_t m = 0; m < marks.size(); ++m) {
        const LineCarrier& carrier = carriers[carrier_of_mark[m]];
        stations[m] = {sweep.mark_across[m].first, sweep.mark_across[m].second,
                       distance(carrier.from, carrier.to)};
    }

    const auto axes_index = static_cast<std::uint32_t>(sharing.axes.size());
    sharing.axes.push_back(axes);
    for (const Gap& gap : sweep.gaps) {
        const Bay bay = bay_of(gap, index, axes_index, carriers, carrier_of_mark, stations);
        const bool unsupported = bay.low_carrier == none && bay.high_carrier == none;
        const double breadth = std::max(bay.high.start - bay.low.start, bay.high.end - bay.low.end);
        if (unsupported && breadth <= 2 * noise) {
            continue; // an opening's edge on the deck's edge: nothing is between them
        }
        sharing.bays.push_back(bay);
        push_halves(sharing, bay);
    }
}

RUNNEL_NAMESPACE_END
