#pragma once

#include "report/json_writer.hpp"
#include "report/scale.hpp"

#include <runnel/problem.hpp>

#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// A problem as an object; `file` is left out where it is empty.
void write_problem(JsonWriter& json, const Problem& problem, const Scale& scale, std::string_view file = {});

RUNNEL_NAMESPACE_END
