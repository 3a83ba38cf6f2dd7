#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// An upright rectangle.
struct Box {
    Point low, high;

    void add(Point p) {
        low.x = p.x < low.x ? p.x : low.x;
        low.y = p.y < low.y ? p.y : low.y;
        high.x = p.x > high.x ? p.x : high.x;
        high.y = p.y > high.y ? p.y : high.y;
    }
    [[nodiscard]] Box grown(double by) const {
        return {{low.x - by, low.y - by}, {high.x + by, high.y + by}};
    }
    [[nodiscard]] bool meets(const Box& other) const {
        return low.x <= other.high.x && other.low.x <= high.x && low.y <= other.high.y &&
               other.low.y <= high.y;
    }
};

inline Box box_of(std::span<const Point> points) {
    Box box{points.front(), points.front()};
    for (const Point& p : points) {
        box.add(p);
    }
    return box;
}
inline Box box_of(Point a, Point b) {
    Box box{a, a};
    box.add(b);
    return box;
}

/// A packed R-tree of boxes that is built once (range constructor) and asked often.
class BoxTree {
public:
    explicit BoxTree(std::span<const Box> boxes);
    ~BoxTree();
    BoxTree(BoxTree&&) noexcept;
    BoxTree& operator=(BoxTree&&) noexcept;

    /// Indices of the boxes that meet `box` (closed), rising. `found` is cleared first.
    void find(const Box& box, std::vector<std::uint32_t>& found) const;

private:
    struct Tree;
    std::unique_ptr<Tree> tree_;
};

/// The same for a set that is mostly small: few boxes are gone through one by one, which beats any tree.
class BoxFinder {
public:
    BoxFinder() = default;
    explicit BoxFinder(std::vector<Box> boxes) : boxes_(std::move(boxes)) {
        constexpr std::size_t worth_a_tree = 24;
        if (boxes_.size() > worth_a_tree) {
            tree_.emplace(boxes_);
        }
    }

    void find(const Box& box, std::vector<std::uint32_t>& found) const {
        if (tree_) {
            tree_->find(box, found);
            return;
        }
        found.clear();
        for (std::uint32_t i = 0; i < boxes_.size(); ++i) {
            if (boxes_[i].meets(box)) {
                found.push_back(i);
            }
        }
    }

private:
    std::vector<Box> boxes_;
    std::optional<BoxTree> tree_;
};

RUNNEL_NAMESPACE_END
