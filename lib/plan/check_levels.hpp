#pragma once

#include "plan/check_context.hpp"

#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Ids of what stands on each level, and looks through `like` where a level does not have one itself.
class LevelIndex {
public:
    explicit LevelIndex(CheckContext& context);

    [[nodiscard]] const Member* member(std::size_t level, std::string_view id) const;
    [[nodiscard]] const Deck* deck(std::size_t level, std::string_view id) const;
    /// A joist `FIELD.n` or a piece `FIELD.n.k` that a field of the level can make.
    [[nodiscard]] bool is_joist(std::size_t level, std::string_view id) const;

    /// The id of a reference on a level: "LEVEL/ID" loses its level if it is this one; nothing if it is
    /// another.
    [[nodiscard]] std::optional<std::string_view> local_id(std::size_t level, std::string_view id) const;

    struct Ids {
        IdIndex<Member> members;
        IdIndex<JoistField> fields;
        IdIndex<Deck> decks;
    };
    std::vector<Ids> ids;

private:
    template <class Found>
    auto through_like(std::size_t level, Found found) const -> decltype(found(ids[0]));

    CheckContext& context_;
};

void check_members(CheckContext& context, const LevelIndex& index, std::size_t level);
void check_joist_fields(CheckContext& context, std::size_t level);
void check_decks(CheckContext& context, std::size_t level);
/// Openings of a deck or of an area load's outline: each a good ring, inside the outline but for `snap`, and
/// no two sharing area. `outside`: the code of one that reaches outside. An empty outline is one that could
/// not be worked with, and nothing is compared with it.
void check_openings(CheckContext& context, const std::vector<Ring>& openings, const Ring& outline,
                    const Subject& subject, ProblemCode outside);
void check_loads(CheckContext& context, const LevelIndex& index, std::size_t level);
void check_later_references(CheckContext& context, const LevelIndex& index);

RUNNEL_NAMESPACE_END
