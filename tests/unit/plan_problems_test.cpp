#include "plan/problems.hpp"

#include <doctest/doctest.h>

using namespace runnel;

namespace {
constexpr Units metres{LengthUnit::m, ForceUnit::kN};
}

TEST_CASE("a place is told to the millimetre, near the origin and 1,000 km away, without zeros at the end") {
    CHECK(point_text({4.5, 1}, metres) == "(4.5, 1)");
    CHECK(point_text({1000012.3754, -2000003.25}, metres) == "(1000012.375, -2000003.25)");
    CHECK(point_text({1.0 / 3, 200}, metres) == "(0.333, 200)");
    CHECK(point_text({1e15, 0}, metres) == "(1000000000000000, 0)");
    CHECK(point_text({0.0006, -0.0123}, metres) == "(0.001, -0.012)");
}

TEST_CASE("a place in other units has the decimals that tell a millimetre") {
    CHECK(point_text({4.5004, 1}, {LengthUnit::mm, ForceUnit::N}) == "(4500, 1000)");
    CHECK(point_text({4.5014, 1}, {LengthUnit::cm, ForceUnit::N}) == "(450.1, 100)");
    CHECK(point_text({0.3048 * 100000.125, 0.3048}, {LengthUnit::ft, ForceUnit::kip}) == "(100000.125, 1)");
    CHECK(point_text({0.0254 * 120.25, 0.0254 * 7}, {LengthUnit::in, ForceUnit::lbf}) == "(120.25, 7)");
}

TEST_CASE("rounding of zero is zero, and has no sign") {
    CHECK(point_text({-1e-12, -0.0004}, metres) == "(0, 0)");
    CHECK(point_text({-0.0, 0}, metres) == "(0, 0)");
}
