#pragma once

#include <runnel/framing.hpp>
#include <runnel/load.hpp>
#include <runnel/plan.hpp>

#include <cstdint>
#include <string>
#include <string_view>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

/// What carriers, decks and sources are called in output. Within a level an id stands bare; elsewhere an id
/// that occurs on several levels is written LEVEL/ID.
class Names {
public:
    Names(const Plan& plan, const Framing& framing);

    /// Within the level.
    [[nodiscard]] std::string_view carrier(std::uint32_t level, Carrier carrier) const;
    /// Anywhere in the document.
    [[nodiscard]] std::string carrier_anywhere(std::uint32_t level, Carrier carrier) const;

    /// Where a point load comes from: the id of a deck, member, column or wall, `point_loads[i]`,
    /// `line_loads[i]` or `own_weight`. `level` is the one that the load came in at.
    [[nodiscard]] std::string source(std::uint32_t level, Source source) const;
    [[nodiscard]] std::string source_anywhere(std::uint32_t level, Source source) const;

    [[nodiscard]] static std::string_view kind(CarrierKind kind);

private:
    using Levels = std::unordered_map<std::string_view, std::uint32_t>;
    [[nodiscard]] std::string qualified(const Levels& levels, std::uint32_t level, std::string_view id) const;

    const Plan& plan_;
    const Framing& framing_;
    Levels members_; ///< the level that has the id, or `none` where several have
    Levels decks_;
};

RUNNEL_NAMESPACE_END
