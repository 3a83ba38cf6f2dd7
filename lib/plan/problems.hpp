#pragma once

#include <runnel/plan.hpp>
#include <runnel/problem.hpp>

#include <initializer_list>
#include <string>
#include <string_view>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

/// RFC 6901 pointer of an object in a list of the plan or of one of its levels, e.g. "/levels/0/members/3".
[[nodiscard]] std::string pointer_to(const Origin& origin, std::string_view list);

/// A problem of the usual severity at an object of the plan. `list` names the list that holds it.
[[nodiscard]] Problem problem_at(ProblemCode code, const Origin& origin, std::string_view list,
                                 std::string message, std::string hint = {},
                                 std::vector<std::string> ids = {});

/// A problem at a value inside that object; `inside` is the rest of the pointer, e.g. "/bears_on/1". Its line
/// and column are found by locate_problems when they are asked for.
[[nodiscard]] Problem problem_inside(ProblemCode code, const Origin& origin, std::string_view list,
                                     std::string_view inside, std::string message, std::string hint = {},
                                     std::vector<std::string> ids = {});

/// Short text of a number for sentences: up to six significant figures, no exponent where it can be helped.
[[nodiscard]] std::string text_of(double value);
/// A quantity in the document's units, with its unit.
[[nodiscard]] std::string quantity_text(double si_value, Units units, Dimension dimension);
/// A length in the document's units, with its unit: "0.012 m".
[[nodiscard]] std::string length_text(double metres, Units units);
[[nodiscard]] std::string area_text(double square_metres, Units units);
[[nodiscard]] std::string force_text(double kilonewtons, Units units);
/// A plan point in the document's units, to the millimetre or less wherever it lies: "(4.5, 1)",
/// "(400012.375, -3)".
[[nodiscard]] std::string point_text(Point point, Units units);

/// Shortest text that reads back to the same double (data files).
[[nodiscard]] std::string exact_text(double value);

RUNNEL_NAMESPACE_END
