#include "report/account.hpp"

#include <runnel/version.hpp>

#include <algorithm>
#include <cmath>
#include <map>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t indent = 2;
constexpr std::size_t id_width = 18; ///< columns for an id in a table

// The columns of the members' table, one value of 16 columns and the gaps fit the page.
constexpr std::size_t on_width = 14;
constexpr std::size_t role_width = 6;
constexpr std::size_t number_width = 10;

using Align = PageTable::Align;

/// Decimals that show a tenth of a kilonewton or the next finer step.
int force_decimals(ForceUnit unit) {
    switch (unit) {
    case ForceUnit::N:
    case ForceUnit::lbf:
        return 0;
    case ForceUnit::kN:
        return 1;
    case ForceUnit::kip:
        return 2;
    case ForceUnit::MN:
        return 4;
    }
    return 1;
}

/// Decimals that show a centimetre or the next finer step.
int length_decimals(LengthUnit unit) {
    switch (unit) {
    case LengthUnit::m:
    case LengthUnit::ft:
        return 2;
    case LengthUnit::in:
        return 1;
    case LengthUnit::mm:
    case LengthUnit::cm:
        return 0;
    }
    return 2;
}

std::string counted(std::size_t count, std::string_view what) {
    return std::to_string(count) + ' ' + std::string(what) + (count == 1 ? "" : "s");
}

} // namespace

void write_account(const Takedown& takedown, const ReportOptions& options, const TextSink& sink) {
    Account(takedown, options, sink).write();
}

Account::Account(const Takedown& takedown, const ReportOptions& options, const TextSink& sink)
    : takedown_(takedown), scale_(options.units.value_or(takedown.plan.units)),
      names_(takedown.plan, takedown.framing), page_(options.colour, sink) {}

void Account::write() {
    head();
    if (takedown_.complete) {
        uplift();
        balance();
        members();
        rundowns();
        foundations();
    }
    warnings();
    cautions();
}

void Account::head() {
    page_.heading(takedown_.plan.title.empty() ? "Plan without a title" : takedown_.plan.title);
    page_.paragraph("Takedown by runnel " + std::string(version()) + ", characteristic values by case, in " +
                        std::string(name_of(scale_.units.length)) + " and " +
                        std::string(name_of(scale_.units.force)) + ", decks shared by `" +
                        std::string(name_of(takedown_.plan.settings.share)) + "` unless they say otherwise.",
                    0);
    page_.blank();
    if (!takedown_.complete) {
        page_.alarm("Nothing is computed: the plan has errors.", 0);
        page_.blank();
    }
}

void Account::uplift() {
    page_.heading("Uplift");
    if (takedown_.uplift.empty()) {
        page_.line("none: no bearing lifts with all cases together", indent);
    }
    for (const Uplift& uplift : takedown_.uplift) {
        const std::string amount = force(-uplift.value) + ' ' + unit_text(scale_.units, dimension::force);
        if (uplift.level == none) {
            page_.alarm("uplift of " + amount + " at the foundation under " +
                            fit(names_.carrier(0, uplift.on), id_width * 2),
                        indent);
            continue;
        }
        if (uplift.member == none) {
            page_.alarm("uplift of " + amount + ": " +
                            fit(names_.carrier(uplift.level, uplift.upper), id_width) + " lifts off " +
                            fit(names_.carrier_anywhere(uplift.level, uplift.on), id_width),
                        indent);
            continue;
        }
        const Bearing& bearing =
            takedown_.framing.levels[uplift.level].bearings[uplift.member][uplift.bearing];
        const Carrier member{CarrierKind::member, uplift.member};
        page_.alarm("uplift of " + amount + ": " +
                        fit(names_.carrier_anywhere(uplift.level, member), id_width) + " lifts off " +
                        fit(names_.carrier_anywhere(uplift.level, uplift.on), id_width) + " at station " +
                        length(bearing.station),
                    indent);
    }
    page_.blank();
}

void Account::balance() {
    constexpr std::size_t most_levels = 30;
    page_.heading("Balance");
    PageTable table;
    table.describe("of", Align::left, id_width);
    table.describe("case", Align::left, id_width);
    for (const std::string_view heading : {"applied", "shared", "arrived"}) {
        table.values(with_unit(heading, dimension::force));
    }
    table.values("per deck area");
    table.values("closes");
    balance_rows(table, "building", takedown_.balance);
    const std::size_t shown = std::min(most_levels, takedown_.level_balance.size());
    for (std::size_t l = 0; l < shown; ++l) {
        balance_rows(table, takedown_.framing.levels[l].id, takedown_.level_balance[l]);
    }
    table.print(page_, indent);
    if (shown < takedown_.level_balance.size()) {
        page_.line(counted(takedown_.level_balance.size() - shown, "more level") + " in the result document",
                   indent);
    }
    page_.line("per deck area in " + unit_text(scale_.units, dimension::area_load), indent);
    page_.blank();
}

void Account::balance_rows(PageTable& table, std::string_view where,
                           std::span<const Balance> balances) const {
    for (const Balance& balance : balances) {
        const bool first = &balance == balances.data();
        const double per_area =
            balance.area > 0 ? balance.applied.force / balance.area / scale_.area_load : 0;
        constexpr int area_load_decimals = 2;
        table.add_row(
            {std::string(first ? where : ""), takedown_.plan.cases[balance.load_case].id,
             force(balance.applied.force), force(balance.shared.force), force(balance.arrived.force),
             balance.area > 0 ? figure(per_area, area_load_decimals) : "", balance.closes ? "yes" : "NO"});
    }
}

void Account::members() {
    constexpr std::size_t most = 20;
    for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
        level_members(l, most);
    }
}

namespace {
/// "JB.2 (5 alike)"
std::string named(std::string_view id, std::size_t count) {
    const std::string alike = count > 1 ? " (" + std::to_string(count) + " alike)" : "";
    return fit(id, id_width - std::min(id_width / 2, alike.size())) + alike;
}
} // namespace

/// Heaviest groups of a level, in the plan's order.
std::vector<Account::Alike> Account::heaviest_members(std::uint32_t level, std::size_t most) const {
    std::vector<Alike> groups;
    const std::size_t count = takedown_.framing.levels[level].members.size();
    for (std::uint32_t m = 0; m < count; ++m) {
        constexpr std::ptrdiff_t recent = 6; // pieces of a cut joist take turns
        const auto oldest = groups.end() - std::min(recent, std::distance(groups.begin(), groups.end()));
        const auto group = std::find_if(
            oldest, groups.end(), [&](const Alike& candidate) { return alike(level, candidate.first, m); });
        if (group != groups.end()) {
            ++group->count;
        } else {
            groups.push_back({m, 1, reactions_of(level, m)});
        }
    }
    const auto heavier = [](const Alike& a, const Alike& b) {
        return a.load > b.load || (a.load == b.load && a.first < b.first);
    };
    if (groups.size() > most) {
        std::partial_sort(groups.begin(), groups.begin() + static_cast<std::ptrdiff_t>(most), groups.end(),
                          heavier);
        groups.resize(most);
    }
    std::sort(groups.begin(), groups.end(), [](const Alike& a, const Alike& b) { return a.first < b.first; });
    return groups;
}

/// All reactions of a member together, kN.
double Account::reactions_of(std::uint32_t level, std::uint32_t member) const {
    double sum = 0;
    for (const double value : reaction_rows(level, member)) {
        sum += std::abs(value);
    }
    return sum;
}

std::span<const double> Account::reaction_rows(std::uint32_t level, std::uint32_t member) const {
    const Grouped<Bearing>& bearings = takedown_.framing.levels[level].bearings;
    const std::size_t cases = takedown_.plan.cases.size();
    return std::span(takedown_.levels[level].reactions)
        .subspan(bearings.first(member) * cases, bearings[member].size() * cases);
}

/// Joists of one field, on the same carriers, whose values read the same.
bool Account::alike(std::uint32_t level, std::uint32_t a, std::uint32_t b) const {
    const FramedLevel& framed = takedown_.framing.levels[level];
    const FramedMember& first = framed.members[a];
    const FramedMember& other = framed.members[b];
    const std::span<const Bearing> of_first = framed.bearings[a];
    const std::span<const Bearing> of_other = framed.bearings[b];
    if (!first.from_field || !other.from_field || first.origin.index != other.origin.index ||
        of_first.size() != of_other.size()) {
        return false;
    }
    const auto same = [](double x, double y) {
        constexpr double three_figures = 5e-4;
        return std::abs(x - y) <= three_figures * std::max(std::abs(x), std::abs(y));
    };
    for (std::size_t i = 0; i < of_first.size(); ++i) {
        if (of_first[i].on != of_other[i].on || !same(of_first[i].station, of_other[i].station)) {
            return false;
        }
    }
    const std::vector<double>& areas = takedown_.levels[level].tributary_area;
    const std::span<const double> x = reaction_rows(level, a);
    const std::span<const double> y = reaction_rows(level, b);
    return same(first.length, other.length) && same(areas[a], areas[b]) &&
           std::equal(x.begin(), x.end(), y.begin(), same);
}

void Account::level_members(std::uint32_t level, std::size_t most) {
    const FramedLevel& framed = takedown_.framing.levels[level];
    page_.heading("Members of " + fit(framed.id, 2 * id_width) + ", at " + length(framed.elevation) + ' ' +
                  std::string(name_of(scale_.units.length)) + "; reactions in " +
                  std::string(name_of(scale_.units.force)));
    PageTable table;
    table.describe("member", Align::left, id_width);
    table.describe("role", Align::left, role_width);
    table.describe(with_unit("length", dimension::length), Align::right, number_width);
    table.describe(with_unit("area", dimension::area), Align::right, number_width);
    table.describe("on", Align::left, on_width);
    table.describe("station", Align::right, number_width);
    case_headings(table);
    std::size_t shown = 0;
    for (const Alike& group : heaviest_members(level, most)) {
        member_rows(table, level, group);
        shown += group.count;
    }
    if (shown > 0) {
        table.print(page_, indent);
    }
    if (shown < framed.members.size()) {
        page_.line("and " + counted(framed.members.size() - shown, "lighter member") +
                       ": all stand in the table `reactions` and in the result document",
                   indent);
    }
    page_.blank();
}

void Account::member_rows(PageTable& table, std::uint32_t level, const Alike& group) const {
    const FramedLevel& framed = takedown_.framing.levels[level];
    const LevelTakedown& result = takedown_.levels[level];
    const std::size_t cases = takedown_.plan.cases.size();
    const std::span<const Bearing> bearings = framed.bearings[group.first];
    const std::span<const double> reactions = reaction_rows(level, group.first);
    for (std::size_t b = 0; b < bearings.size(); ++b) {
        std::vector<std::string> row(4);
        if (b == 0) {
            const FramedMember& one = framed.members[group.first];
            row = {named(one.id, group.count), std::string(name_of(one.role)), length(one.length),
                   area(result.tributary_area[group.first])};
        }
        row.emplace_back(names_.carrier(level, bearings[b].on));
        row.push_back(length(bearings[b].station));
        for (const double value : reactions.subspan(b * cases, cases)) {
            row.push_back(reaction(value));
        }
        table.add_row(std::move(row));
    }
}

void Account::warnings() {
    std::map<std::string_view, std::size_t> codes;
    std::size_t errors = 0;
    std::size_t warnings = 0;
    std::size_t notes = 0;
    for (const Problem& problem : takedown_.problems) {
        errors += problem.severity == Severity::error ? 1U : 0U;
        warnings += problem.severity == Severity::warning ? 1U : 0U;
        notes += problem.severity == Severity::note ? 1U : 0U;
        ++codes[kind_of(problem.code).name];
    }
    page_.heading("Problems");
    std::string text =
        counted(errors, "error") + ", " + counted(warnings, "warning") + ", " + counted(notes, "note");
    std::string_view separator = ": ";
    for (const auto& [code, count] : codes) {
        text += separator;
        text += code;
        text += count > 1 ? " (" + std::to_string(count) + ")" : "";
        separator = ", ";
    }
    page_.paragraph(text, indent);
    page_.blank();
}

void Account::cautions() {
    page_.heading("Cautions");
    std::string text;
    for (const std::string_view caution : runnel::cautions()) {
        text += text.empty() ? "" : " ";
        text += caution;
    }
    page_.paragraph(text, indent);
}

void Account::case_headings(PageTable& table) const {
    for (const LoadCase& load_case : takedown_.plan.cases) {
        table.values(load_case.id);
    }
}

std::string Account::with_unit(std::string_view heading, Dimension dimension) const {
    return std::string(heading) + ", " + unit_text(scale_.units, dimension);
}

std::string Account::force(double kilonewtons) const {
    return figure(kilonewtons / scale_.force, force_decimals(scale_.units.force));
}

std::string Account::reaction(double kilonewtons) const {
    const std::string text = force(kilonewtons);
    return text.starts_with('-') ? text + " uplift" : text;
}

std::string Account::length(double metres) const {
    return figure(metres / scale_.length, length_decimals(scale_.units.length));
}

std::string Account::area(double square_metres) const {
    constexpr int decimals = 1;
    return figure(square_metres / scale_.area, decimals);
}

RUNNEL_NAMESPACE_END
