#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// A member over or at a column or wall.
struct SupportContact {
    Carrier on;
    double station = 0;
    double on_station = 0; ///< on a wall
};

/// Two members that meet or cross, each pair once.
struct MemberContact {
    std::uint32_t a = none, b = none;
    double station_a = 0, station_b = 0;
};

/// Everything that touches on a level, before any rule says who bears on whom.
struct Contacts {
    Grouped<SupportContact> supports; ///< by member
    std::vector<MemberContact> meetings;
};

/// Finds all contacts, and reports members that lie along each other or along walls.
[[nodiscard]] Contacts find_contacts(LevelDraft& draft);

RUNNEL_NAMESPACE_END
