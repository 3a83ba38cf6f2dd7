#include "framing/box_index.hpp"

#include <boost/geometry.hpp>
#include <boost/geometry/geometries/box.hpp>
#include <boost/geometry/geometries/point_xy.hpp>
#include <boost/geometry/index/rtree.hpp>
#include <boost/iterator/function_output_iterator.hpp>

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {
namespace bg = boost::geometry;
using TreePoint = bg::model::point<double, 2, bg::cs::cartesian>;
using TreeBox = bg::model::box<TreePoint>;
using Entry = std::pair<TreeBox, std::uint32_t>;
constexpr std::size_t entries_of_a_node = 16;
using RTree = bg::index::rtree<Entry, bg::index::quadratic<entries_of_a_node>>;

TreeBox tree_box(const Box& box) {
    return {TreePoint(box.x_min, box.y_min), TreePoint(box.x_max, box.y_max)};
}
} // namespace

struct BoxIndex::Tree {
    RTree entries;
};

BoxIndex::BoxIndex() = default;
BoxIndex::BoxIndex(BoxIndex&&) noexcept = default;
BoxIndex& BoxIndex::operator=(BoxIndex&&) noexcept = default;
BoxIndex::~BoxIndex() = default;

BoxIndex::BoxIndex(std::span<const Box> boxes) {
    std::vector<Entry> entries;
    entries.reserve(boxes.size());
    for (std::size_t i = 0; i < boxes.size(); ++i) {
        entries.emplace_back(tree_box(boxes[i]), static_cast<std::uint32_t>(i));
    }
    // The range constructor packs the tree: many times faster than inserting one by one.
    tree_ = std::make_unique<Tree>(Tree{RTree(entries.begin(), entries.end())});
}

void BoxIndex::find(const Box& box, std::vector<std::uint32_t>& found) const {
    if (!tree_) {
        return;
    }
    const auto first = static_cast<std::ptrdiff_t>(found.size());
    tree_->entries.query(
        bg::index::intersects(tree_box(box)),
        boost::make_function_output_iterator([&](const Entry& entry) { found.push_back(entry.second); }));
    std::sort(found.begin() + first, found.end());
}

RUNNEL_NAMESPACE_END
