#pragma once

#include "geometry/box_tree.hpp"

#include <runnel/geometry.hpp>

#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The ring without corners within `snap` of the one before: what will be one point after snapping.
[[nodiscard]] Ring without_repeats(const Ring& ring, double snap);

/// Area by half the length around: the width, on average, of what is long and narrow.
[[nodiscard]] double mean_width(const Ring& ring);

struct SelfContact {
    Point at;
    double gap = 0; ///< between the two parts of the ring, m; 0 where they cross
};

/// A place where a ring (without repeats) comes within `snap` of itself elsewhere than at a corner's own two
/// edges; nothing if it is simple. O(n log n): a sweep that compares neighbours only (Shamos and Hoey 1976).
[[nodiscard]] std::optional<SelfContact> self_contact(const Ring& ring, double snap);

enum class Side : std::uint8_t { inside, outside };

/// A ring that is asked where points lie.
class RingQuery {
public:
    RingQuery(const Ring& ring, double snap);

    /// By counting crossings of a ray; on the boundary either answer may come.
    [[nodiscard]] bool holds(Point p) const;
    [[nodiscard]] bool is_near(Point p) const;
    [[nodiscard]] const Box& box() const { return box_; }
    /// A point of `other`'s boundary that lies on that side of this ring by more than `snap`.
    [[nodiscard]] std::optional<Point> point_beyond(const Ring& other, Side side) const;

private:
    void edges_near(const Box& box, std::vector<std::uint32_t>& found) const;
    [[nodiscard]] bool is_beyond(Point p, Side side) const;
    [[nodiscard]] Point corner(std::uint32_t i) const { return ring_[i < ring_.size() ? i : 0]; }

    Ring ring_;
    double snap_;
    Box box_;
    std::optional<BoxTree> tree_; ///< of edges; small rings do without
};

/// A point well inside the ring.
[[nodiscard]] Point interior_point(const Ring& ring);

/// A point of the area that two simple rings share by more than `snap`; nothing if they are apart or only
/// touch.
[[nodiscard]] std::optional<Point> shared_point(const RingQuery& a, const Ring& ring_a, const RingQuery& b,
                                                const Ring& ring_b);

RUNNEL_NAMESPACE_END
