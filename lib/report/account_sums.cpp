#include "report/account.hpp"

#include "geometry/basic.hpp"
#include "path/balance.hpp"
#include "report/some_cases.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t indent = 2;
constexpr std::size_t id_width = 18; ///< columns for an id in a table or sentence

/// Own weight of all columns and walls, kN.
double own_weight_of_supports(const Takedown& takedown) {
    Sum sum;
    for (const ColumnTakedown& column : takedown.columns) {
        for (const Lift& lift : column.lifts) {
            sum.add(lift.self_weight);
        }
    }
    for (const WallTakedown& wall : takedown.walls) {
        for (const WallLift& lift : wall.lifts) {
            sum.add(lift.self_weight);
        }
    }
    return sum.value();
}

/// What columns and walls bring to the members they stand on, by case, kN: it counts at their own levels and
/// again at that of the members.
std::vector<double> brought_to_members(const Takedown& takedown) {
    std::vector<Sum> sums(takedown.plan.cases.size());
    const auto is_support = [](const Source& source) {
        return source.kind == SourceKind::column || source.kind == SourceKind::wall;
    };
    for (std::size_t l = 0; l < takedown.levels.size(); ++l) {
        const LevelTakedown& level = takedown.levels[l];
        for (std::size_t m = 0; m < takedown.framing.levels[l].members.size(); ++m) {
            for (const CarrierLine& line : level.lines[m]) {
                if (is_support(line.source)) {
                    sums[line.load_case].add(line.piece.total());
                }
            }
            for (const CarrierPoint& point : level.points[m]) {
                if (is_support(point.source)) {
                    sums[point.load_case].add(point.p);
                }
            }
        }
    }
    std::vector<double> values;
    for (const Sum& sum : sums) {
        values.push_back(sum.value());
    }
    return values;
}

} // namespace

void Account::uplift() {
    page_.heading("Uplift");
    if (takedown_.uplift.empty()) {
        page_.paragraph(
            "none with all cases together, each with factor 1; single cases, patterns and factored "
            "combinations are not tried yet",
            indent);
    }
    for (const Uplift& uplift : takedown_.uplift) {
        page_.alarm(uplift_text(uplift), indent);
    }
    page_.blank();
    uplift_of_some_cases();
}

void Account::uplift_of_some_cases() {
    constexpr std::size_t most = 20;
    const std::vector<Uplift> lifts = lifts_with_some_cases(takedown_);
    if (lifts.empty()) {
        return;
    }
    page_.heading("Lift with some variable cases alone");
    page_.paragraph("permanent cases and only those variable ones that lift there, each with factor 1",
                    indent);
    const std::size_t shown = std::min(most, lifts.size());
    for (std::size_t i = 0; i < shown; ++i) {
        page_.line(uplift_text(lifts[i]), indent);
    }
    if (shown < lifts.size()) {
        page_.line("and " + std::to_string(lifts.size() - shown) + " more, with less", indent);
    }
    page_.blank();
}

/// "uplift of 2.50 kN: J.3 lifts off S at station 4.00"
std::string Account::uplift_text(const Uplift& uplift) const {
    const std::string amount =
        "uplift of " + force(-uplift.value) + ' ' + unit_text(scale_.units, dimension::force);
    if (uplift.level == none) {
        return amount + " at the foundation under " + fit(names_.carrier(0, uplift.on), id_width * 2);
    }
    if (uplift.member == none) {
        return amount + ": " + fit(names_.carrier(uplift.level, uplift.upper), id_width) + " lifts off " +
               fit(names_.carrier_anywhere(uplift.level, uplift.on), id_width);
    }
    const Bearing& bearing = takedown_.framing.levels[uplift.level].bearings[uplift.member][uplift.bearing];
    const Carrier member{CarrierKind::member, uplift.member};
    return amount + ": " + fit(names_.carrier_anywhere(uplift.level, member), id_width) + " lifts off " +
           fit(names_.carrier_anywhere(uplift.level, uplift.on), id_width) + " at station " +
           length(bearing.station);
}

void Account::balance() {
    constexpr std::size_t most_levels = 30;
    page_.heading("Balance");
    PageTable table;
    table.names("of", id_width);
    table.names("case", id_width);
    for (const std::string_view heading : {"applied", "shared", "arrived"}) {
        table.values(with_unit(heading, dimension::force));
    }
    table.values(with_unit("moved", dimension::length));
    table.values("per area");
    table.values("closes");
    balance_rows(table, "building", takedown_.balance, true);
    const std::size_t shown = std::min(most_levels, takedown_.level_balance.size());
    std::size_t empty_rows = 0;
    for (std::size_t l = 0; l < shown; ++l) {
        empty_rows += balance_rows(table, takedown_.framing.levels[l].id, takedown_.level_balance[l], false);
    }
    const bool twice = support_rows(table);
    table.print(page_, indent);
    if (shown < takedown_.level_balance.size()) {
        page_.line(counted(takedown_.level_balance.size() - shown, "more level") + " in the result document",
                   indent);
    }
    if (empty_rows > 0) {
        page_.line("left out: " + counted(empty_rows, "row") + " of levels without load of that case",
                   indent);
    }
    if (twice) {
        page_.paragraph(
            "counted twice: what columns and walls bring to members they stand on is in the rows of "
            "their own levels and in that of the members",
            indent);
    }
    page_.line("per area: what is applied per deck area in " + area_load_unit(), indent);
    page_.paragraph("moved: how far on plan sharing moved the resultant of what was applied, as halves and "
                    "nearest carriers do and statics does not",
                    indent);
    page_.paragraph("closes: the three forces agree, and so do the moments of shared and arrived about both "
                    "plan axes",
                    indent);
    page_.blank();
}

/// Distance on plan of the resultants of what was applied and what was shared; blank where up and down
/// cancel, so that there is no resultant.
std::string Account::moved(const Balance& balance) const {
    const double force = std::abs(balance.applied.force);
    if (force <= closing * balance.applied.magnitude) {
        return "";
    }
    const double metres = norm(balance.shared.moment - balance.applied.moment) / force;
    const std::string text = length(metres);
    return text.find_first_of("123456789") == std::string::npos ? "0" : text;
}

/// Rows of levels without load of a case are left out; how many.
std::size_t Account::balance_rows(PageTable& table, std::string_view where, std::span<const Balance> balances,
                                  bool all) const {
    std::size_t left_out = 0;
    bool first = true;
    for (const Balance& balance : balances) {
        if (!all && balance.closes && balance.applied.magnitude == 0) {
            ++left_out;
            continue;
        }
        table.add_row({std::string(first ? where : ""), takedown_.plan.cases[balance.load_case].id,
                       force(balance.applied.force), force(balance.shared.force),
                       force(balance.arrived.force), moved(balance),
                       balance.area > 0 ? area_load(balance.applied.force / balance.area) : "",
                       balance.closes ? "yes" : "NO"});
        first = false;
    }
    return left_out;
}

/// What no level shows, and what two of them show, so that the rows of levels add up to the building's. True
/// where something counts twice.
bool Account::support_rows(PageTable& table) const {
    const auto add_row = [&](std::string_view what, std::uint32_t load_case, double value) {
        const std::string text = force(value);
        table.add_row({std::string(what), takedown_.plan.cases[load_case].id, text, text, text, "", "", ""});
    };
    const double own_weight = own_weight_of_supports(takedown_);
    if (own_weight != 0 && takedown_.self_weight_case != none) {
        add_row("columns, walls", takedown_.self_weight_case, own_weight);
    }
    const std::vector<double> brought = brought_to_members(takedown_);
    bool any = false;
    for (std::uint32_t c = 0; c < brought.size(); ++c) {
        if (brought[c] != 0) {
            add_row(any ? "" : "counted twice", c, -brought[c]);
            any = true;
        }
    }
    return any;
}

RUNNEL_NAMESPACE_END
