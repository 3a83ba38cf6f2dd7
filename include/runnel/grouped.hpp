#pragma once

#include <runnel/export.hpp>

#include <cassert>
#include <cstddef>
#include <cstdint>
#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Items in groups, held in one flat array: group g is items[begin[g]] up to items[begin[g + 1]].
template <class T>
class Grouped {
public:
    Grouped() = default;

    /// From pairs of (group, item) in any order; items keep their order within a group.
    [[nodiscard]] static Grouped from_pairs(std::size_t groups,
                                            std::vector<std::pair<std::uint32_t, T>> pairs) {
        Grouped result;
        result.begin_.assign(groups + 1, 0);
        for (const auto& [group, item] : pairs) {
            assert(group < groups);
            ++result.begin_[group + 1];
        }
        for (std::size_t g = 0; g < groups; ++g) {
            result.begin_[g + 1] += result.begin_[g];
        }
        std::vector<std::size_t> next(result.begin_.begin(), result.begin_.end() - 1);
        result.items_.resize(pairs.size());
        for (auto& [group, item] : pairs) {
            result.items_[next[group]++] = std::move(item);
        }
        return result;
    }

    /// Appends a group after the last.
    void push_group(std::span<const T> items) {
        items_.insert(items_.end(), items.begin(), items.end());
        begin_.push_back(items_.size());
    }

    /// Appends an item to the group that is being built; close it with end_group.
    void push(T item) { items_.push_back(std::move(item)); }
    void end_group() { begin_.push_back(items_.size()); }

    void reserve(std::size_t groups, std::size_t items) {
        begin_.reserve(groups + 1);
        items_.reserve(items);
    }

    [[nodiscard]] std::size_t size() const noexcept { return begin_.size() - 1; }
    [[nodiscard]] bool empty() const noexcept { return size() == 0; }
    [[nodiscard]] std::span<const T> operator[](std::size_t group) const {
        return {items_.data() + begin_[group], begin_[group + 1] - begin_[group]};
    }
    [[nodiscard]] std::span<T> operator[](std::size_t group) {
        return {items_.data() + begin_[group], begin_[group + 1] - begin_[group]};
    }
    /// Index in `items` of the first of a group.
    [[nodiscard]] std::size_t first(std::size_t group) const { return begin_[group]; }
    [[nodiscard]] std::span<const T> items() const noexcept { return items_; }
    [[nodiscard]] std::span<T> items() noexcept { return items_; }

private:
    std::vector<std::size_t> begin_{0};
    std::vector<T> items_;
};

RUNNEL_NAMESPACE_END
