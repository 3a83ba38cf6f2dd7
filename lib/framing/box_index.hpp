#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <memory>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

struct Box {
    double x_min = 0, y_min = 0, x_max = 0, y_max = 0;

    [[nodiscard]] static Box around(Point a, Point b, double reach) {
        return {(a.x < b.x ? a.x : b.x) - reach, (a.y < b.y ? a.y : b.y) - reach,
                (a.x < b.x ? b.x : a.x) + reach, (a.y < b.y ? b.y : a.y) + reach};
    }
};

/// Boxes by place: a packed R-tree. It hides the only use of Boost.Geometry in this folder.
class BoxIndex {
public:
    BoxIndex();
    explicit BoxIndex(std::span<const Box> boxes);
    BoxIndex(BoxIndex&&) noexcept;
    BoxIndex& operator=(BoxIndex&&) noexcept;
    ~BoxIndex();

    /// Numbers of the boxes that meet `box`, rising, appended to `found`.
    void find(const Box& box, std::vector<std::uint32_t>& found) const;

private:
    struct Tree;
    std::unique_ptr<Tree> tree_;
};

RUNNEL_NAMESPACE_END
