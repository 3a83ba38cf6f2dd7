#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <memory>
#include <span>
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

RUNNEL_NAMESPACE_END
