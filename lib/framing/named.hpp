#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// What members name in `bears_on`. A member with a list bears on what stands in it and on nothing else.
class NamedCarriers {
public:
    /// Reads all lists; names that are nothing on this level are reported.
    explicit NamedCarriers(LevelDraft& draft);

    [[nodiscard]] bool has_list(std::uint32_t member) const { return list_of_[member] != none; }
    [[nodiscard]] bool names(std::uint32_t member, Carrier carrier) const;
    /// Notes that a member touches a carrier; of use only where it names it.
    void mark_touched(std::uint32_t member, Carrier carrier);
    /// Reports named carriers that nothing was found to touch.
    void refuse_untouched() const;

private:
    struct Named {
        Carrier carrier;
        std::uint32_t place; ///< in the list
        bool touched = false;
    };
    struct List {
        std::uint32_t member;
        std::vector<Named> named;
    };

    LevelDraft& draft_;
    std::vector<std::uint32_t> list_of_; ///< by member
    std::vector<List> lists_;
};

RUNNEL_NAMESPACE_END
