#pragma once

#include "plan/words.hpp"

#include <runnel/export.hpp>

#include <algorithm>
#include <cstdint>
#include <functional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Finds items of a list by their id: open addressing with linear probing, eight bytes an item, so that the
/// check of a large plan does not need as much memory again as the plan.
template <class Item>
class IdIndex {
public:
    IdIndex() = default;
    explicit IdIndex(std::span<const Item> items) : items_(items) {
        std::size_t size = 2;
        while (size < 2 * items.size()) {
            size *= 2;
        }
        slots_.assign(size, 0);
    }

    /// Enters item `index`; the one that already has its id, if any, stays and is given back.
    const Item* insert(std::size_t index) {
        std::uint32_t& slot = slot_of(items_[index].id);
        if (slot != 0) {
            return &items_[slot - 1];
        }
        slot = static_cast<std::uint32_t>(index) + 1;
        return nullptr;
    }
    [[nodiscard]] const Item* find(std::string_view id) const {
        if (slots_.empty()) {
            return nullptr;
        }
        const std::uint32_t slot = const_cast<IdIndex*>(this)->slot_of(id);
        return slot == 0 ? nullptr : &items_[slot - 1];
    }
    [[nodiscard]] std::size_t index_of(const Item* item) const {
        return static_cast<std::size_t>(item - items_.data());
    }

    /// "Did you mean `x`?" where an id is near; of long lists only the beginning is looked at.
    [[nodiscard]] std::string hint_for_id(std::string_view id) const {
        constexpr std::size_t most = 100;
        std::vector<std::string_view> ids;
        for (const Item& item : items_.first(std::min(items_.size(), most))) {
            ids.push_back(item.id);
        }
        return hint_for(id, ids, {});
    }

private:
    std::uint32_t& slot_of(std::string_view id) {
        const std::size_t mask = slots_.size() - 1;
        std::size_t i = std::hash<std::string_view>{}(id)&mask;
        while (slots_[i] != 0 && items_[slots_[i] - 1].id != id) {
            i = (i + 1) & mask;
        }
        return slots_[i];
    }

    std::span<const Item> items_;
    std::vector<std::uint32_t> slots_; ///< index + 1; 0: free
};

RUNNEL_NAMESPACE_END
