#pragma once

#include "plan/plan_receiver.hpp"
#include "plan/problem_log.hpp"

#include <runnel/plan.hpp>

RUNNEL_NAMESPACE_BEGIN

/// The checking behind check_plan. With doubts the plan comes from a text: what is `unread` there has been
/// reported and is passed over.
void check_values(const Plan& plan, const Limits& limits, const std::optional<Doubts>& doubts,
                  ProblemLog& log);

/// Puts plain values where the plan still holds `unread`, so that a faulty plan can be shown.
void replace_unread(Plan& plan);

RUNNEL_NAMESPACE_END
