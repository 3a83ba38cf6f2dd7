#pragma once

#include "report/names.hpp"
#include "report/page.hpp"
#include "report/scale.hpp"

#include <runnel/takedown.hpp>

#include <cstdint>
#include <span>
#include <string>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// "3 rows"
inline std::string counted(std::size_t count, std::string_view what) {
    return std::to_string(count) + ' ' + std::string(what) + (count == 1 ? "" : "s");
}

/// The parts of the short account, in their order.
class Account {
public:
    Account(const Takedown& takedown, const ReportOptions& options, const TextSink& sink);

    void write();

private:
    void head();
    [[nodiscard]] std::string shares_used() const;
    void uplift();
    void balance();
    void members();
    void level_members(std::uint32_t level, std::size_t most);
    void rundowns();
    void foundations();
    void shares();
    void warnings();
    void cautions();

    void uplift_of_some_cases();
    [[nodiscard]] std::string uplift_text(const Uplift& uplift) const;
    std::size_t balance_rows(PageTable& table, std::string_view where, std::span<const Balance> balances,
                             bool all) const;
    bool support_rows(PageTable& table) const;
    [[nodiscard]] std::string moved(const Balance& balance) const;
    /// Joists of one field that read the same stand in one row, under the first one's id.
    struct Alike {
        std::uint32_t first = 0; ///< member
        std::size_t count = 0;
        double load = 0; ///< kN, of one of them
    };
    [[nodiscard]] std::vector<Alike> heaviest_members(std::uint32_t level, std::size_t most) const;
    [[nodiscard]] bool alike(std::uint32_t level, std::uint32_t a, std::uint32_t b) const;
    [[nodiscard]] double reactions_of(std::uint32_t level, std::uint32_t member) const;
    [[nodiscard]] std::span<const double> reaction_rows(std::uint32_t level, std::uint32_t member) const;
    void member_rows(PageTable& table, std::uint32_t level, const Alike& group) const;
    template <class AnyLift>
    void lift_rows(PageTable& table, std::string_view id, std::span<const AnyLift> lifts) const;
    void case_headings(PageTable& table) const;
    /// "heading, kN"
    [[nodiscard]] std::string with_unit(std::string_view heading, Dimension dimension) const;

    [[nodiscard]] std::string force(double kilonewtons) const;
    /// A reaction: uplift is named in words.
    [[nodiscard]] std::string reaction(double kilonewtons) const;
    [[nodiscard]] std::string length(double metres) const;
    /// In m2 or ft2, whatever the document's units; pressures likewise in kN/m2 or lbf/ft2.
    [[nodiscard]] std::string area(double square_metres) const;
    [[nodiscard]] std::string area_unit() const;
    [[nodiscard]] std::string area_load(double kilonewtons_per_square_metre) const;
    [[nodiscard]] std::string area_load_unit() const;

    struct ComparedGroup {
        const ComparedCarrier* first = nullptr;
        std::size_t count = 0;
    };
    void stopped_share(const ShareRun& run);
    void compared(std::string_view heading, const std::vector<ComparedCarrier>& carriers,
                  ComparedValues values);
    [[nodiscard]] std::vector<ComparedGroup> differing(const std::vector<ComparedCarrier>& carriers,
                                                       ComparedValues values) const;
    void compared_rows(PageTable& table, const ComparedGroup& group, ComparedValues values) const;

    const Takedown& takedown_;
    const ShareComparison* shares_;
    Scale scale_;
    Names names_;
    Page page_;
};

RUNNEL_NAMESPACE_END
