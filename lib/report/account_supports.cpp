#include "report/account.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t indent = 2;
constexpr std::size_t id_width = 20;
constexpr std::size_t most_supports = 40; ///< columns and walls that the account lists

using Align = PageTable::Align;

double magnitude(std::span<const double> values) {
    return std::accumulate(values.begin(), values.end(), 0.0,
                           [](double sum, double value) { return sum + std::abs(value); });
}

/// Indices of the heaviest, rising.
std::vector<std::size_t> heaviest(const std::vector<double>& weights) {
    std::vector<std::size_t> order(weights.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(),
                     [&](std::size_t a, std::size_t b) { return weights[a] > weights[b]; });
    order.resize(std::min(order.size(), most_supports));
    std::sort(order.begin(), order.end());
    return order;
}

std::string left_out(std::size_t count, std::string_view table) {
    return "and " + std::to_string(count) + " lighter: all stand in the table `" + std::string(table) +
           "` and in the result document";
}

template <class Supports>
std::vector<double> weights_of(const Supports& supports) {
    std::vector<double> weights;
    weights.reserve(supports.size());
    for (const auto& support : supports) {
        weights.push_back(support.lifts.empty() ? 0 : magnitude(support.lifts.back().total));
    }
    return weights;
}

} // namespace

void Account::rundowns() {
    page_.heading("Rundowns, each lift at its foot, " + unit_text(scale_.units, dimension::force));
    PageTable table;
    table.names("column, wall", id_width);
    table.names("level", id_width - 4);
    table.describe("area, " + area_unit(), Align::right);
    table.describe("influence", Align::right);
    table.describe("in all", Align::right);
    table.describe("own weight", Align::right);
    case_headings(table);
    const std::vector<std::size_t> columns = heaviest(weights_of(takedown_.columns));
    const std::vector<std::size_t> walls = heaviest(weights_of(takedown_.walls));
    for (const std::size_t c : columns) {
        lift_rows<Lift>(table, takedown_.plan.columns[c].id, takedown_.columns[c].lifts);
    }
    for (const std::size_t w : walls) {
        lift_rows<WallLift>(table, takedown_.plan.walls[w].id, takedown_.walls[w].lifts);
    }
    if (!columns.empty() || !walls.empty()) {
        table.print(page_, indent);
    }
    const std::size_t rest =
        takedown_.columns.size() + takedown_.walls.size() - columns.size() - walls.size();
    if (rest > 0) {
        page_.line(left_out(rest, "rundowns"), indent);
    }
    page_.blank();
}

template <class AnyLift>
void Account::lift_rows(PageTable& table, std::string_view id, std::span<const AnyLift> lifts) const {
    for (const AnyLift& lift : lifts) {
        const bool first = &lift == lifts.data();
        std::vector<std::string> row{std::string(first ? id : ""), takedown_.framing.levels[lift.level].id,
                                     area(lift.tributary_area),    area(lift.influence_area),
                                     area(lift.area_total),        force(lift.self_weight)};
        for (const double total : lift.total) {
            row.push_back(reaction(total));
        }
        table.add_row(std::move(row));
    }
}

void Account::foundations() {
    page_.heading("Foundations, " + unit_text(scale_.units, dimension::force));
    PageTable table;
    table.names("under", id_width);
    table.describe("kind", Align::left);
    table.describe("at", Align::left);
    case_headings(table);
    table.values("all");
    std::vector<double> weights;
    for (const Foundation& foundation : takedown_.foundations) {
        weights.push_back(magnitude(foundation.reactions));
    }
    const std::vector<std::size_t> shown = heaviest(weights);
    const auto place = [this](Point p) { return '(' + length(p.x) + ", " + length(p.y) + ')'; };
    for (const std::size_t f : shown) {
        const Foundation& foundation = takedown_.foundations[f];
        const bool wall = foundation.under.kind == CarrierKind::wall;
        const std::uint32_t index = foundation.under.index;
        std::vector<std::string> row{
            std::string(names_.carrier(0, foundation.under)), std::string(Names::kind(foundation.under.kind)),
            wall ? place(takedown_.plan.walls[index].from) + " to " + place(takedown_.plan.walls[index].to)
                 : place(takedown_.plan.columns[index].at)};
        for (const double value : foundation.reactions) {
            row.push_back(reaction(value));
        }
        row.push_back(
            reaction(std::accumulate(foundation.reactions.begin(), foundation.reactions.end(), 0.0)));
        table.add_row(std::move(row));
    }
    if (!shown.empty()) {
        table.print(page_, indent);
    }
    if (shown.size() < takedown_.foundations.size()) {
        page_.line(left_out(takedown_.foundations.size() - shown.size(), "foundations"), indent);
    }
    page_.blank();
}

RUNNEL_NAMESPACE_END
