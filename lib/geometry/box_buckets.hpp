#pragma once

#include "geometry/box_tree.hpp"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Boxes by the squares of a plain grid that they meet: found in constant time where boxes are all about
/// alike and spread evenly, as members of a floor are. Where they are not, a tree takes over.
class BoxBuckets {
public:
    explicit BoxBuckets(const std::vector<Box>& boxes) : boxes_(boxes) {
        if (boxes.empty() || !lay_out() || !fill()) {
            first_.clear();
            tree_.emplace(boxes);
        }
    }

    /// Indices of the boxes that meet `box` (closed), in no order. `found` is cleared first.
    void find(const Box& box, std::vector<std::uint32_t>& found) const {
        if (tree_) {
            tree_->find(box, found);
            return;
        }
        found.clear();
        const Range asked = range_of(box);
        for (std::size_t r = asked.r0; r <= asked.r1; ++r) {
            for (std::size_t c = asked.c0; c <= asked.c1; ++c) {
                const std::size_t square = r * columns_ + c;
                for (std::uint32_t k = first_[square]; k < first_[square + 1]; ++k) {
                    const std::uint32_t i = entries_[k];
                    if (!boxes_[i].meets(box)) {
                        continue;
                    }
                    // A box in several of the squares counts in the first that both share.
                    const Range own = range_of(boxes_[i]);
                    if (r == std::max(own.r0, asked.r0) && c == std::max(own.c0, asked.c0)) {
                        found.push_back(i);
                    }
                }
            }
        }
    }

private:
    struct Range {
        std::size_t c0, c1, r0, r1;
        [[nodiscard]] std::size_t squares() const { return (c1 - c0 + 1) * (r1 - r0 + 1); }
    };

    [[nodiscard]] Range range_of(const Box& box) const {
        const auto at = [](double x, double low, double side, std::size_t count) {
            return static_cast<std::size_t>(
                std::clamp(std::floor((x - low) / side), 0.0, static_cast<double>(count - 1)));
        };
        return {at(box.low.x, low_.x, side_, columns_), at(box.high.x, low_.x, side_, columns_),
                at(box.low.y, low_.y, side_, rows_), at(box.high.y, low_.y, side_, rows_)};
    }

    /// Squares about as large as the boxes, no more of them than a few a box.
    bool lay_out() {
        Box extent = boxes_.front();
        double sizes = 0;
        for (const Box& box : boxes_) {
            extent.add(box.low);
            extent.add(box.high);
            sizes += std::max(box.high.x - box.low.x, box.high.y - box.low.y);
        }
        const auto count = static_cast<double>(boxes_.size());
        const double breadth = extent.high.x - extent.low.x;
        const double height = extent.high.y - extent.low.y;
        constexpr double a_box = 2; // squares
        low_ = extent.low;
        side_ = std::max({sizes / count, std::sqrt(breadth * height / (a_box * count)),
                          breadth / (a_box * count), height / (a_box * count)});
        if (!(side_ > 0)) {
            return false;
        }
        columns_ = static_cast<std::size_t>(breadth / side_) + 1;
        rows_ = static_cast<std::size_t>(height / side_) + 1;
        return true;
    }

    bool fill() {
        constexpr std::size_t most_a_box = 8; // entries
        constexpr std::size_t most_a_square = 64;
        std::size_t entries = 0;
        first_.assign(columns_ * rows_ + 1, 0);
        const auto each = [&](const Range& range, auto act) {
            for (std::size_t r = range.r0; r <= range.r1; ++r) {
                for (std::size_t c = range.c0; c <= range.c1; ++c) {
                    act(r * columns_ + c);
                }
            }
        };
        for (const Box& box : boxes_) {
            const Range range = range_of(box);
            entries += range.squares();
            if (entries > most_a_box * boxes_.size()) {
                return false;
            }
            each(range, [&](std::size_t square) { ++first_[square + 1]; });
        }
        if (*std::max_element(first_.begin(), first_.end()) > most_a_square) {
            return false;
        }
        for (std::size_t s = 1; s < first_.size(); ++s) {
            first_[s] += first_[s - 1];
        }
        entries_.resize(entries);
        std::vector<std::uint32_t> next(first_.begin(), first_.end() - 1);
        for (std::uint32_t i = 0; i < boxes_.size(); ++i) {
            each(range_of(boxes_[i]), [&](std::size_t square) { entries_[next[square]++] = i; });
        }
        return true;
    }

    const std::vector<Box>& boxes_;
    Point low_;
    double side_ = 0;
    std::size_t columns_ = 0, rows_ = 0;
    std::vector<std::uint32_t> first_; ///< by square, in entries_
    std::vector<std::uint32_t> entries_;
    std::optional<BoxTree> tree_;
};

RUNNEL_NAMESPACE_END
