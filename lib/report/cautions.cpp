#include <runnel/report.hpp>

#include <array>

RUNNEL_NAMESPACE_BEGIN

std::span<const std::string_view> cautions() noexcept {
    static constexpr std::array<std::string_view, 6> sentences{
        "Loads and load path are as entered.",
        "This is an aid to, and no substitute for, the judgement of a licensed engineer, who stays "
        "responsible "
        "for input, assumptions and an independent check.",
        "Values, reductions and combinations must be checked against the locally adopted code and its "
        "amendments.",
        "Gravity only, linear, small displacements, bearings rigid, no torsion of members; no stability, "
        "settlement, second-order, connection or section design.",
        "Not for construction until checked.",
        "Demo plans are fictitious."};
    return sentences;
}

RUNNEL_NAMESPACE_END
