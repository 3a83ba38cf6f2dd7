#include "deck/gathered_area.hpp"
#include "deck/lost_loads.hpp"
#include "deck/one_way.hpp"
#include "deck/strip_beam.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Length of a bay along the strips at a level across them.
double length_at(const Bay& bay, double across) {
    const double x = (across - bay.from) / (bay.to - bay.from);
    return bay.high.at(x) - bay.low.at(x);
}

double area_between(const Bay& bay, double from, double to) {
    return (to - from) * (length_at(bay, from) + length_at(bay, to)) / 2;
}

Point middle_of(const Bay& bay, const StripAxes& axes) {
    return axes.to_plan({(bay.low.at(0.5) + bay.high.at(0.5)) / 2, (bay.from + bay.to) / 2});
}

bool is_unsupported(const Bay& bay) {
    return bay.low_carrier == none && bay.high_carrier == none;
}
bool is_overhang(const Bay& bay) {
    return (bay.low_carrier == none) != (bay.high_carrier == none);
}

std::vector<std::string> ids_of(const FramedDeck& deck, GatheredArea& weak, const Plan& plan,
                                const FramedLevel& level, const Sharing& sharing) {
    constexpr std::size_t most = 20;
    std::sort(weak.carriers.begin(), weak.carriers.end());
    weak.carriers.erase(std::unique(weak.carriers.begin(), weak.carriers.end()), weak.carriers.end());
    std::vector<std::string> ids{deck.id};
    for (std::size_t i = 0; i < weak.carriers.size() && i < most; ++i) {
        ids.push_back(carrier_id(plan, level, sharing.carrier(weak.carriers[i])));
    }
    return ids;
}

/// The bays of a deck by the carrier and the side on which it bounds them, to find the back span of an
/// overhang. Most decks have none: they are listed when first asked for.
class BaysBeside {
public:
    BaysBeside(const Sharing& sharing, std::size_t first_bay) : sharing_(sharing), first_bay_(first_bay) {}

    /// Calls f(bay index) for those that `carrier` bounds from below (or above) and that overlap from..to
    /// across.
    template <class F>
    void visit(std::uint32_t carrier, bool from_below, double from, double to, F f) {
        if (rows_.empty()) {
            list();
        }
        // Bays beside one carrier do not overlap across the strips, so the last that begins before `from` is
        // the first that can reach it.
        const Row key{carrier, from_below, from, 0};
        auto it = std::upper_bound(rows_.begin(), rows_.end(), key,
                                   [](const Row& l, const Row& r) { return l.key() < r.key(); });
        if (it != rows_.begin() && std::prev(it)->carrier == carrier && std::prev(it)->below == from_below) {
            --it;
        }
        for (; it != rows_.end() && it->carrier == carrier && it->below == from_below && it->from < to;
             ++it) {
            if (sharing_.bays[it->bay].to > from) {
                f(it->bay);
            }
        }
    }

private:
    void list() {
        for (std::size_t i = first_bay_; i < sharing_.bays.size(); ++i) {
            const Bay& bay = sharing_.bays[i];
            if (bay.low_carrier != none) {
                rows_.push_back({bay.low_carrier, true, bay.from, i});
            }
            if (bay.high_carrier != none) {
                rows_.push_back({bay.high_carrier, false, bay.from, i});
            }
        }
        std::sort(rows_.begin(), rows_.end(), [](const Row& l, const Row& r) { return l.key() < r.key(); });
    }

    struct Row {
        std::uint32_t carrier;
        bool below;
        double from;
        std::size_t bay;
        [[nodiscard]] std::tuple<std::uint32_t, bool, double> key() const { return {carrier, below, from}; }
    };
    const Sharing& sharing_;
    std::size_t first_bay_;
    std::vector<Row> rows_;
};

/// The part of from..to where an overhang is longer than half of its back span by more than `snap`.
double long_overhang_area(const Bay& overhang, const Bay& back, double from, double to, double snap) {
    const auto excess = [&](double across) {
        return length_at(overhang, across) - length_at(back, across) / 2 - snap;
    };
    const double at_from = excess(from);
    const double at_to = excess(to);
    if (at_from <= 0 && at_to <= 0) {
        return 0;
    }
    const double crossing = at_from * at_to < 0 ? from + (to - from) * at_from / (at_from - at_to) : from;
    return area_between(overhang, at_from > 0 ? from : crossing, at_to > 0 || at_from <= 0 ? to : crossing);
}

void check_overhang(const Sharing& sharing, BaysBeside& beside, const Bay& overhang, double snap,
                    GatheredArea& alone, GatheredArea& too_long) {
    const bool low_is_edge = overhang.low_carrier == none;
    const std::uint32_t carrier = low_is_edge ? overhang.high_carrier : overhang.low_carrier;
    const Point place = middle_of(overhang, sharing.axes[overhang.axes]);
    const double breadth =
        std::max(overhang.high.start - overhang.low.start, overhang.high.end - overhang.low.end);
    if (breadth <= 2 * snap || overhang.to - overhang.from <= 2 * snap) {
        return; // the carrier runs along the edge, or the drawing is a little off
    }
    double backed = 0;
    beside.visit(carrier, low_is_edge, overhang.from, overhang.to, [&](std::size_t index) {
        const Bay& back = sharing.bays[index];
        const double from = std::max(overhang.from, back.from);
        const double to = std::min(overhang.to, back.to);
        if (is_overhang(back)) {
            return;
        }
        backed += area_between(overhang, from, to);
        too_long.add(long_overhang_area(overhang, back, from, to, snap), place, carrier);
    });
    const double area = area_between(overhang, overhang.from, overhang.to);
    if (const double rest = area - backed; rest > snap * (overhang.to - overhang.from)) {
        alone.add(rest, place, carrier);
    }
}

/// The bays of a deck that no carrier bounds.
std::vector<StripPiece> unsupported_pieces(const Sharing& sharing, std::size_t first_bay) {
    std::vector<StripPiece> pieces;
    for (std::size_t i = first_bay; i < sharing.bays.size(); ++i) {
        if (const Bay& bay = sharing.bays[i]; is_unsupported(bay)) {
            pieces.push_back({bay.from, bay.to, bay.low, bay.high});
        }
    }
    return pieces;
}

/// Strips of a deck under lever or continuous that no statics holds (on one carrier alone, on a back span too
/// short), or whose spans are so uneven that they cannot run on, or clamp the deck.
struct UnstableStrips {
    GatheredArea alone, short_back, by_lever, clamped;
};

/// The spans of a continuous strip beside one so short that it clamps them. Where such a span dies out the
/// strip was cut, so that what is left is about as wide all along: the middle tells.
void find_clamped(const Strip& strip, std::span<const StripCarrier> carriers, const StripAxes& axes,
                  GatheredArea& clamped) {
    const double low = strip.low.at(0.5);
    const double high = strip.high.at(0.5);
    const double level = (strip.from + strip.to) / 2;
    const auto place = [&](std::size_t i) { return carriers[i].along.at(0.5); };
    for (std::size_t i = 1; i < carriers.size(); ++i) {
        const double middle = (place(i - 1) + place(i)) / 2;
        if (middle < low || middle > high) {
            continue; // felt, but the load of another strip
        }
        const double least = least_span_ratio * (place(i) - place(i - 1));
        const bool below = i > 1 && place(i - 1) - place(i - 2) < least;
        const bool above = i + 1 < carriers.size() && place(i + 1) - place(i) < least;
        if (!below && !above) {
            continue;
        }
        const std::size_t end = below ? i - 1 : i; // of the span, where it is clamped
        clamped.add((place(i) - place(i - 1)) * (strip.to - strip.from), axes.to_plan({place(end), level}),
                    carriers[end].carrier);
        clamped.carriers.push_back(carriers[below ? i - 2 : i + 1].carrier);
    }
}

UnstableStrips find_unstable(const Sharing& sharing, BaysBeside& beside, std::uint32_t deck, Share share,
                             double snap) {
    UnstableStrips found;
    auto it = std::lower_bound(sharing.strips.begin(), sharing.strips.end(), deck,
                               [](const Strip& strip, std::uint32_t d) { return strip.deck < d; });
    for (; it != sharing.strips.end() && it->deck == deck; ++it) {
        const Strip& strip = *it;
        const auto carriers = sharing.strip_carriers[static_cast<std::size_t>(it - sharing.strips.begin())];
        if (carriers.size() > 1 && strip.share == share) {
            if (share == Share::continuous) {
                find_clamped(strip, carriers, sharing.axes[strip.axes], found.clamped);
            }
            continue;
        }
        const StripPiece piece{strip.from, strip.to, strip.low, strip.high};
        const double breadth = std::max(strip.high.start - strip.low.start, strip.high.end - strip.low.end);
        if (breadth <= 2 * snap || strip.to - strip.from <= 2 * snap) {
            continue; // the carrier runs along the edge, or the drawing is a little off
        }
        const Point place = sharing.axes[strip.axes].to_plan(
            {(strip.low.at(0.5) + strip.high.at(0.5)) / 2, (strip.from + strip.to) / 2});
        if (carriers.size() > 1) {
            found.by_lever.add(area_of(piece), place, carriers.front().carrier);
            found.by_lever.carriers.push_back(carriers.back().carrier);
            continue;
        }
        const std::uint32_t carrier = carriers.front().carrier;
        const bool goes_down = carriers.front().along.at(0.5) > strip.low.at(0.5);
        bool backed = false;
        beside.visit(carrier, goes_down, strip.from, strip.to,
                     [&](std::size_t bay) { backed = backed || !is_overhang(sharing.bays[bay]); });
        (backed ? found.short_back : found.alone).add(area_of(piece), place, carrier);
    }
    return found;
}

} // namespace

void find_weak_strips(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                      std::uint32_t deck_index, std::size_t first_bay, LostLoads& lost, Sharing& sharing) {
    const FramedLevel& level = framing.levels[level_index];
    const FramedDeck& deck = level.decks[deck_index];
    const double snap = plan.settings.snap;
    BaysBeside beside(sharing, first_bay);
    GatheredArea unsupported;
    GatheredArea alone;
    GatheredArea too_long;
    for (std::size_t i = first_bay; i < sharing.bays.size(); ++i) {
        const Bay& bay = sharing.bays[i];
        if (is_unsupported(bay)) {
            unsupported.add(area_between(bay, bay.from, bay.to), middle_of(bay, sharing.axes[bay.axes]),
                            none);
        } else if (is_overhang(bay) && deck.share == Share::half) {
            check_overhang(sharing, beside, bay, snap, alone, too_long);
        }
    }

    const auto report = [&](ProblemCode code, GatheredArea& weak, const std::string& sentence,
                            const char* hint) {
        if (weak.area <= 0) {
            return;
        }
        Problem problem = problem_at(code, deck.origin, "decks",
                                     "Level " + level.id + ", deck " + deck.id + ": " +
                                         area_text(weak.area, plan.units) + ' ' + sentence +
                                         ", the largest part at " + point_text(weak.place, plan.units) + '.',
                                     hint, ids_of(deck, weak, plan, level, sharing));
        problem.point = weak.place;
        sharing.problems.push_back(std::move(problem));
    };
    if (unsupported.area > 0) {
        const std::string text =
            lost.text(deck_index, sharing.axes.back(), unsupported_pieces(sharing, first_bay));
        report(ProblemCode::strip_unsupported, unsupported,
               "lie in strips that no carrier crosses (" + text + " would be lost)",
               "Strips run along `direction`; members along them carry nothing. Turn the direction, end the "
               "deck at its "
               "carriers, or add a member across.");
    }
    report(ProblemCode::strip_cantilevers, alone, "hang on one carrier alone",
           "Is a beam missing on the other side, or is the deck built in there?");
    report(ProblemCode::strip_cantilevers, too_long, "overhang by more than half of the span behind",
           "Is a beam missing at the edge?");
    if (deck.share != Share::half) {
        UnstableStrips unstable = find_unstable(sharing, beside, deck_index, deck.share, snap);
        report(ProblemCode::strip_unstable, unstable.alone, "hang on one carrier alone",
               "Add a carrier behind it, or share this deck by `half` if it is built in there.");
        report(ProblemCode::strip_unstable, unstable.short_back,
               "overhang by more than twenty times the span behind",
               "Is a beam missing at the edge? Statics would lift the carrier behind out of all proportion.");
        report(
            ProblemCode::strip_by_lever, unstable.by_lever,
            "lie in spans that die out beside one more than twenty times as long; there the strips are "
            "cut, and shared by lever",
            "Nothing is wrong where a carrier runs at a skew; to see how much it matters, share by `lever`.");
        report(ProblemCode::strip_clamped, unstable.clamped,
               "lie in spans beside one shorter than a twentieth of them; its two carriers clamp the strips, "
               "and one of them may be lifted",
               "Two beams side by side act as a pair that pries. If the deck is not held down on both, or is "
               "not continuous over them, share it by `lever`.");
    }
}

RUNNEL_NAMESPACE_END
