#pragma once

#include "plan/json_tree.hpp"
#include "plan/object_reader.hpp"
#include "plan/plan_keys.hpp"

#include <runnel/plan.hpp>

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// What checks need to know of a reading: lists of which something could not be read, so that a reference
/// into them may be right.
struct Doubts {
    bool cases = false;
    bool case_kinds = false;
    bool sections = false;
    bool builds = false;
    bool levels = false;
    bool supports = false;
    std::vector<LaterReference> references;
};

/// Takes a plan's values in the order of the text and makes the plan of them. Only the item that is being
/// read is kept as a tree; levels and their lists pass straight through.
class PlanReceiver final : public JsonReceiver {
public:
    PlanReceiver(ReadingContext& context, Plan& plan);

    bool scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) override;
    bool key(std::string_view name, std::uint32_t at) override;
    bool open(JsonKind kind, std::uint32_t at) override;
    bool close() override;

    /// Reports what the plan as a whole lacks; call after the walk if it went to the end.
    void finish();
    [[nodiscard]] const Doubts& doubts() const { return doubts_; }
    /// True if `runnel` names something else than plan/1: nothing behind it was looked at.
    [[nodiscard]] bool is_other_document() const { return is_other_document_; }

private:
    using Keys = std::uint32_t; ///< a set of PlanKey

    [[nodiscard]] bool begin_value(JsonKind kind, std::uint32_t at);
    void capture_done();
    void read_plan_value(const JsonValue& value);
    void read_level_value(const JsonValue& value);
    void read_item(const JsonValue& value);
    void read_plan_item(ObjectReader& object, const Origin& origin);
    void read_level_item(ObjectReader& object, const Origin& origin);
    void read_version(const JsonValue& value);
    void enter_list(std::uint32_t at);
    void begin_level(std::uint32_t at);
    void end_level();
    void know_units();
    void doubt(PlanKey list);
    [[nodiscard]] bool may_keep_item(std::uint32_t at);
    void report_here(ProblemCode code, std::uint32_t at, std::string pointer, std::string message,
                     std::string hint = {});
    [[nodiscard]] std::string_view noun_here() const;
    [[nodiscard]] std::string owner_here() const;
    [[nodiscard]] const Place* place_here() const { return in_level_ ? &level_place_ : nullptr; }

    template <class Item>
    void keep(std::vector<Item>& list, Item item, const Origin& origin);

    ReadingContext& context_;
    Plan& plan_;
    Doubts doubts_;
    JsonTree tree_;
    bool capturing_ = false;
    bool skipping_ = false;
    std::size_t skip_depth_ = 0;

    bool in_plan_ = false;
    bool in_levels_ = false;
    bool in_level_ = false;
    bool in_list_ = false;
    bool is_other_document_ = false;
    PlanKey key_ = PlanKey::runnel; ///< whose value is read, or whose list
    Keys plan_keys_ = 0;            ///< seen so far
    Keys level_keys_ = 0;
    bool units_known_ = false;

    Level level_;
    std::uint32_t plan_at_ = 0;
    std::uint32_t level_at_ = 0;
    std::uint32_t level_count_ = 0;
    std::uint32_t item_count_ = 0; ///< in the list that is read
    std::size_t list_count_ = 0;   ///< the same, to be compared with the limit
    std::size_t member_count_ = 0; ///< in all levels
    Place levels_place_ = Place::of_key(nullptr, "levels");
    Place level_place_;
    Place list_place_;
};

RUNNEL_NAMESPACE_END
