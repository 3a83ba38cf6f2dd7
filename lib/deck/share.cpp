#include "deck/doubtful.hpp"
#include "deck/nearest.hpp"
#include "deck/one_way.hpp"
#include "deck/refused.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "plan/problems.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <optional>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Members and walls of a level that decks may bear on.
std::vector<LineCarrier> line_carriers(const Plan& plan, const FramedLevel& level, const Sharing& sharing) {
    std::vector<LineCarrier> carriers;
    carriers.reserve(level.members.size() + level.walls.size());
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        if (level.members[m].carries_deck) {
            carriers.push_back({m, level.members[m].from, level.members[m].to});
        }
    }
    for (const std::uint32_t w : level.walls) {
        carriers.push_back({sharing.number_of({CarrierKind::wall, w}), plan.walls[w].from, plan.walls[w].to});
    }
    return carriers;
}

void refuse(const FramedLevel& level, const FramedDeck& deck, std::string_view what, Sharing& sharing) {
    sharing.problems.push_back(problem_at(ProblemCode::not_supported_yet, deck.origin, "decks",
                                          "Level " + level.id + ", deck " + deck.id + ": " +
                                              std::string(what) + " is not supported yet.",
                                          "Use \"span\": \"one-way\" with \"share\": \"half\".", {deck.id}));
}

/// Finds the carriers near each deck.
class CarrierFinder {
public:
    CarrierFinder(const std::vector<LineCarrier>& carriers, std::size_t decks) : carriers_(carriers) {
        boxes_.reserve(carriers.size());
        for (const LineCarrier& carrier : carriers) {
            boxes_.push_back(box_of(carrier.from, carrier.to));
        }
        constexpr std::size_t worth_a_tree = 4; // decks: fewer are found by going through all carriers
        if (decks > worth_a_tree) {
            tree_.emplace(boxes_);
        }
    }

    /// Carriers whose rectangle along the deck's longest edge meets the deck's own, within `snap`; upright
    /// ones alone would find most of a level beside a long deck that lies askew. Rising.
    [[nodiscard]] const std::vector<LineCarrier>& find(const FramedDeck& deck, double snap) {
        const Box box = box_of(deck.outline).grown(snap);
        beside_.clear();
        const StripAxes axes = longest_edge(deck);
        const Box turned = extent(deck.outline, axes).grown(snap);
        const auto add = [&](std::uint32_t i) {
            const LineCarrier& carrier = carriers_[i];
            if (box_of(axes.to_strip(carrier.from), axes.to_strip(carrier.to)).meets(turned)) {
                beside_.push_back(carrier);
            }
        };
        if (tree_) {
            find_along(turned, axes);
            std::for_each(near_.begin(), near_.end(), add);
        } else {
            for (std::uint32_t i = 0; i < boxes_.size(); ++i) {
                if (boxes_[i].meets(box)) {
                    add(i);
                }
            }
        }
        return beside_;
    }

private:
    /// Asks for a long rectangle in parts about as long as broad.
    void find_along(const Box& turned, const StripAxes& axes) {
        constexpr double most = 32;
        const double length = turned.high.x - turned.low.x;
        const double breadth = turned.high.y - turned.low.y;
        const double parts = std::clamp(std::round(length / breadth), 1.0, most);
        near_.clear();
        for (double i = 0; i < parts; ++i) {
            const double from = turned.low.x + length * i / parts;
            const double to = turned.low.x + length * (i + 1) / parts;
            Box part = box_of(axes.to_plan({from, turned.low.y}), axes.to_plan({to, turned.high.y}));
            part.add(axes.to_plan({from, turned.high.y}));
            part.add(axes.to_plan({to, turned.low.y}));
            tree_->find_more(part, near_);
        }
        std::sort(near_.begin(), near_.end());
        near_.erase(std::unique(near_.begin(), near_.end()), near_.end());
    }

    static StripAxes longest_edge(const FramedDeck& deck) {
        StripAxes axes;
        axes.origin = deck.outline.front();
        double longest = 0;
        for (std::size_t i = 0; i < deck.outline.size(); ++i) {
            const Point d = deck.outline[(i + 1) % deck.outline.size()] - deck.outline[i];
            const double length = norm(d);
            if (length > longest) {
                longest = length;
                axes.cosine = d.x / length;
                axes.sine = d.y / length;
            }
        }
        return axes;
    }
    static Box extent(const Ring& ring, const StripAxes& axes) {
        const Point first = axes.to_strip(ring.front());
        Box box = box_of(first, first);
        for (const Point& p : ring) {
            box.add(axes.to_strip(p));
        }
        return box;
    }

    const std::vector<LineCarrier>& carriers_;
    std::vector<Box> boxes_;
    std::optional<BoxTree> tree_;
    std::vector<std::uint32_t> near_;
    std::vector<LineCarrier> beside_;
};

double area_of(const FramedDeck& deck) {
    double area = std::abs(signed_area(deck.outline));
    for (const Ring& opening : deck.openings) {
        area -= std::abs(signed_area(opening));
    }
    return area;
}

} // namespace

Sharing share_decks(const Plan& plan, const Framing& framing, std::uint32_t level_index) {
    const FramedLevel& level = framing.levels[level_index];
    Sharing sharing;
    sharing.members = static_cast<std::uint32_t>(level.members.size());
    sharing.walls = static_cast<std::uint32_t>(plan.walls.size());
    sharing.columns = static_cast<std::uint32_t>(plan.columns.size());

    const std::vector<LineCarrier> carriers = line_carriers(plan, level, sharing);
    CarrierFinder finder(carriers, level.decks.size());
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        sharing.deck_area.push_back(area_of(deck));
        if (deck.span == SpanKind::one_way && deck.share != Share::half) {
            refuse(level, deck, "share " + std::string(name_of(deck.share)), sharing);
            continue;
        }
        if (deck.span == SpanKind::two_way && deck.corner_angles == CornerAngles::by_fixity) {
            refuse(level, deck, "corner_angles by-fixity", sharing);
            continue;
        }
        const std::vector<LineCarrier>& beside = finder.find(deck, plan.settings.snap);
        if (deck.span != SpanKind::one_way) {
            share_nearest(plan, framing, level_index, d, beside, sharing);
            continue;
        }
        const std::size_t first_bay = sharing.bays.size();
        share_one_way(deck, d, beside, framing, plan.settings.snap, sharing);
        find_weak_strips(plan, framing, level_index, d, first_bay, sharing);
    }
    if (!is_refused(sharing)) { // a deck that gives nothing to anybody would raise doubts about its joists
        find_doubtful_members(plan, level, sharing);
    }
    return sharing;
}

RUNNEL_NAMESPACE_END
