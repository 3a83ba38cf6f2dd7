#include "report/account.hpp"
#include "report/deck_shares.hpp"

#include <runnel/version.hpp>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t indent = 2;
constexpr std::size_t id_width = 18; ///< columns for an id in a table

constexpr std::size_t on_width = 14;

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

} // namespace

void write_account(const Takedown& takedown, const ReportOptions& options, const TextSink& sink) {
    Account(takedown, options, sink).write();
}

Account::Account(const Takedown& takedown, const ReportOptions& options, const TextSink& sink)
    : takedown_(takedown), shares_(options.shares), scale_(options.units.value_or(takedown.plan.units)),
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
    shares();
    warnings();
    cautions();
}

void Account::head() {
    page_.heading(takedown_.plan.title.empty() ? "Plan without a title" : takedown_.plan.title);
    page_.paragraph("Takedown by runnel " + std::string(version()) + ", characteristic values by case, in " +
                        std::string(name_of(scale_.units.length)) + " and " +
                        std::string(name_of(scale_.units.force)) + ". " + shares_used(),
                    0);
    page_.blank();
    if (!takedown_.complete) {
        page_.alarm("Nothing is computed: the plan has errors.", 0);
        page_.blank();
    }
}

/// "One-way decks shared by `half`; by `lever`: D1, D4." Decks are named where they differ from the plan's
/// setting.
std::string Account::shares_used() const {
    const auto is_one_way = [](const FramedDeck& deck) { return deck.span == SpanKind::one_way; };
    const bool any = std::any_of(takedown_.framing.levels.begin(), takedown_.framing.levels.end(),
                                 [&](const FramedLevel& level) {
                                     return std::any_of(level.decks.begin(), level.decks.end(), is_one_way);
                                 });
    if (!any) {
        return "No deck spans one way.";
    }
    constexpr std::size_t most = 8; // decks that are named
    constexpr std::array<Share, 3> shares{Share::half, Share::lever, Share::continuous};
    const Share usual = takedown_.plan.settings.share;
    std::string text = "One-way decks shared by `" + std::string(name_of(usual)) + '`';
    for (const Share share : shares) {
        std::string decks;
        std::size_t count = 0;
        for (const auto& [level, deck] : decks_shared_otherwise(takedown_)) {
            if (takedown_.framing.levels[level].decks[deck].share == share && ++count <= most) {
                decks += (decks.empty() ? "" : ", ") +
                         fit(names_.source_anywhere(level, {SourceKind::deck, deck}), id_width);
            }
        }
        if (count > 0) {
            text += "; by `" + std::string(name_of(share)) + "`: " + decks +
                    (count > most ? " and " + std::to_string(count - most) + " more" : "");
        }
    }
    return text + '.';
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
    const std::vector<double>& influence = takedown_.levels[level].influence_area;
    const std::span<const double> x = reaction_rows(level, a);
    const std::span<const double> y = reaction_rows(level, b);
    return same(first.length, other.length) && same(areas[a], areas[b]) && same(influence[a], influence[b]) &&
           std::equal(x.begin(), x.end(), y.begin(), same);
}

void Account::level_members(std::uint32_t level, std::size_t most) {
    const FramedLevel& framed = takedown_.framing.levels[level];
    page_.heading("Members of " + fit(framed.id, 2 * id_width) + ", at " + length(framed.elevation) + ' ' +
                  std::string(name_of(scale_.units.length)) + "; reactions in " +
                  std::string(name_of(scale_.units.force)));
    PageTable table;
    table.names("member", id_width);
    table.describe("role", Align::left);
    table.describe(with_unit("length", dimension::length), Align::right);
    table.describe("area, " + area_unit(), Align::right);
    table.describe("influence", Align::right);
    table.names("on", on_width);
    table.describe("station", Align::right);
    case_headings(table);
    std::size_t shown = 0;
    for (const Alike& group : heaviest_members(level, most)) {
        member_rows(table, level, group);
        shown += group.count;
    }
    if (shown > 0) {
        table.print(page_, indent);
    } else if (framed.members.empty()) {
        page_.line("none: what decks carry goes to columns and walls", indent);
    }
    if (shown < framed.members.size()) {
        page_.line("and " + counted(framed.members.size() - shown, "lighter member") +
                       ": all stand in the table `reactions` and in the result document",
                   indent);
    }
    if (const double off = takedown_.levels[level].loads.curve_error; off > 0) {
        page_.paragraph("loads between skew carriers are fitted curves: force and first moment are kept, "
                        "ordinates are within " +
                            three_figures(off / scale_.line_load) + ' ' +
                            unit_text(scale_.units, dimension::line_load),
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
        std::vector<std::string> row(5);
        if (b == 0) {
            const FramedMember& one = framed.members[group.first];
            row = {named(one.id, group.count), std::string(name_of(one.role)), length(one.length),
                   area(result.tributary_area[group.first]), area(result.influence_area[group.first])};
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

namespace {

/// Areas and pressures are read in m2 or ft2, whatever the unit of lengths: a floor has millions of mm2.
Units for_areas(LengthUnit length) {
    const bool feet = length == LengthUnit::ft || length == LengthUnit::in;
    return feet ? Units{LengthUnit::ft, ForceUnit::lbf} : Units{LengthUnit::m, ForceUnit::kN};
}

} // namespace

std::string Account::area(double square_metres) const {
    constexpr int decimals = 1;
    const Units units = for_areas(scale_.units.length);
    return figure(square_metres / si_per_unit(units, dimension::area), decimals);
}

std::string Account::area_unit() const {
    return unit_text(for_areas(scale_.units.length), dimension::area);
}

std::string Account::area_load(double kilonewtons_per_square_metre) const {
    const Units units = for_areas(scale_.units.length);
    return three_figures(kilonewtons_per_square_metre / si_per_unit(units, dimension::area_load));
}

std::string Account::area_load_unit() const {
    const Units units = for_areas(scale_.units.length);
    return unit_text(units, dimension::area_load) + (units.length == LengthUnit::ft ? " (psf)" : "");
}

RUNNEL_NAMESPACE_END
