#pragma once

#include <runnel/framing.hpp>

#include <cstdint>
#include <string>
#include <vector>

/// Small plans for tests, built in code, and what tests ask of a framing.
namespace framing_support {

/// A plan of one level, "floor" at 3.6 m, to which things are added.
class PlanBuilder {
public:
    PlanBuilder();

    PlanBuilder& column(const std::string& id, runnel::Point at);
    PlanBuilder& wall(const std::string& id, runnel::Point from, runnel::Point to);
    runnel::Member& member(const std::string& id, runnel::Role role, runnel::Point from, runnel::Point to);
    PlanBuilder& girder(const std::string& id, runnel::Point from, runnel::Point to);
    PlanBuilder& beam(const std::string& id, runnel::Point from, runnel::Point to);
    PlanBuilder& joist(const std::string& id, runnel::Point from, runnel::Point to);
    runnel::JoistField& field(const std::string& id, runnel::Ring outline, double direction, double spacing);
    runnel::Deck& deck(const std::string& id, runnel::Ring outline);

    [[nodiscard]] runnel::Level& floor() { return plan.levels.front(); }
    runnel::Plan plan;
};

/// "J.", 3 -> "J.3".
[[nodiscard]] std::string numbered(std::string name, int number);
[[nodiscard]] runnel::Ring rectangle(double x0, double y0, double x1, double y1);

/// How a plan is drawn anew; what it means stays the same.
struct Redrawing {
    std::string name;
    double turn = 0; ///< degrees
    runnel::Point move;
    bool members_turned_about = false; ///< from and to of listed members exchanged
    bool list_reversed = false;        ///< listed members in reverse order
};
/// As drawn; turned; moved far; both; members from the other end; list reversed.
[[nodiscard]] std::vector<Redrawing> redrawings();
[[nodiscard]] runnel::Plan redrawn(runnel::Plan plan, const Redrawing& how);
[[nodiscard]] runnel::Point redrawn(runnel::Point point, const Redrawing& how);

/// "A on B" for every bearing, sorted; without stations.
[[nodiscard]] std::vector<std::string> who_bears_on_whom(const runnel::Plan& plan,
                                                         const runnel::Framing& framing);
/// The codes of problems of at least a severity, sorted; `points_merged` left out.
[[nodiscard]] std::vector<std::string> codes(const runnel::Framing& framing,
                                             runnel::Severity at_least = runnel::Severity::warning);
[[nodiscard]] const runnel::Problem* find_problem(const runnel::Framing& framing, runnel::ProblemCode code);
[[nodiscard]] std::uint32_t member_index(const runnel::FramedLevel& level, const std::string& id);
[[nodiscard]] std::string carrier_id(const runnel::Plan& plan, const runnel::FramedLevel& level,
                                     runnel::Carrier carrier);
[[nodiscard]] std::vector<std::string> member_ids(const runnel::FramedLevel& level);

} // namespace framing_support
