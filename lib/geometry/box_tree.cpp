#include "geometry/box_tree.hpp"

#include <boost/geometry.hpp>
#include <boost/geometry/geometries/box.hpp>
#include <boost/geometry/geometries/register/point.hpp>
#include <boost/geometry/index/rtree.hpp>
#include <boost/iterator/function_output_iterator.hpp>

#include <algorithm>
#include <utility>

// Registered under the namespace's full name, since the macro opens Boost's own namespaces.
BOOST_GEOMETRY_REGISTER_POINT_2D(runnel::Point, double, boost::geometry::cs::cartesian, x, y)

RUNNEL_NAMESPACE_BEGIN

namespace bgi = boost::geometry::index;
using BoostBox = boost::geometry::model::box<Point>;
using Entry = std::pair<BoostBox, std::uint32_t>;

struct BoxTree::Tree {
    bgi::rtree<Entry, bgi::rstar<16>> entries;
};

BoxTree::BoxTree(std::span<const Box> boxes) : tree_(std::make_unique<Tree>()) {
    std::vector<Entry> entries;
    entries.reserve(boxes.size());
    for (std::size_t i = 0; i < boxes.size(); ++i) {
        entries.emplace_back(BoostBox(boxes[i].low, boxes[i].high), static_cast<std::uint32_t>(i));
    }
    tree_->entries = bgi::rtree<Entry, bgi::rstar<16>>(entries);
}

BoxTree::BoxTree() = default;
BoxTree::~BoxTree() = default;
BoxTree::BoxTree(BoxTree&&) noexcept = default;
BoxTree& BoxTree::operator=(BoxTree&&) noexcept = default;

void BoxTree::find_more(const Box& box, std::vector<std::uint32_t>& found) const {
    if (!tree_) {
        return;
    }
    const auto first = static_cast<std::ptrdiff_t>(found.size());
    tree_->entries.query(bgi::intersects(BoostBox(box.low, box.high)),
                         boost::make_function_output_iterator(
                             [&found](const Entry& entry) { found.push_back(entry.second); }));
    std::sort(found.begin() + first, found.end());
}

RUNNEL_NAMESPACE_END
