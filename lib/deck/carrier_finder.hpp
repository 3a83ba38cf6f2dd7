#pragma once

#include "deck/one_way.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_buckets.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Finds the carriers near each deck.
class CarrierFinder {
public:
    CarrierFinder(const std::vector<LineCarrier>& carriers, std::size_t decks) : carriers_(carriers) {
        boxes_.reserve(carriers.size());
        for (const LineCarrier& carrier : carriers) {
            boxes_.push_back(box_of(carrier.from, carrier.to));
        }
        constexpr std::size_t worth_an_index = 4; // decks: fewer are found by going through all carriers
        if (decks > worth_an_index) {
            buckets_.emplace(boxes_);
        }
    }
    CarrierFinder(const CarrierFinder&) = delete;
    CarrierFinder& operator=(const CarrierFinder&) = delete;

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
        if (buckets_) {
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
            buckets_->find(part, found_);
            near_.insert(near_.end(), found_.begin(), found_.end());
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
    std::optional<BoxBuckets> buckets_;
    std::vector<std::uint32_t> near_, found_;
    std::vector<LineCarrier> beside_;
};

RUNNEL_NAMESPACE_END
