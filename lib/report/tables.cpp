#include "report/csv_writer.hpp"
#include "report/names.hpp"
#include "report/scale.hpp"

#include "geometry/basic.hpp"

#include <runnel/report.hpp>

RUNNEL_NAMESPACE_BEGIN

namespace {

class TableWriter {
public:
    TableWriter(const Takedown& takedown, const ReportOptions& options, const TextSink& sink)
        : takedown_(takedown), scale_(options.units.value_or(takedown.plan.units)),
          names_(takedown.plan, takedown.framing), csv_(sink), cases_(takedown.plan.cases.size()) {}

    void write(Table table) {
        switch (table) {
        case Table::members:
            members();
            break;
        case Table::reactions:
            reactions();
            break;
        case Table::rundowns:
            rundowns();
            break;
        case Table::foundations:
            foundations();
            break;
        }
        csv_.finish();
    }

private:
    void members() {
        headings({"level", "member", "role"});
        lengths({"from x", "from y", "to x", "to y", "length"});
        heading("region area", dimension::area);
        heading("tributary area", dimension::area);
        heading("influence area", dimension::area);
        headings({"bearings"});
        by_case("load ", dimension::force);
        csv_.end_row();
        for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
            for (std::uint32_t m = 0; m < takedown_.framing.levels[l].members.size(); ++m) {
                member(l, m);
            }
        }
    }

    void member(std::uint32_t level, std::uint32_t m) {
        const FramedLevel& framed = takedown_.framing.levels[level];
        const FramedMember& member = framed.members[m];
        const LevelTakedown& result = takedown_.levels[level];
        csv_.text(framed.id).text(member.id).text(name_of(member.role));
        point(member.from);
        point(member.to);
        csv_.number(member.length, scale_.length);
        csv_.number(result.region_area[m], scale_.area).number(result.tributary_area[m], scale_.area);
        csv_.number(result.influence_area[m], scale_.area);
        csv_.number(static_cast<double>(framed.bearings[m].size()));
        std::vector<Sum> totals(cases_);
        for (const CarrierLine& line : result.lines[m]) {
            totals[line.load_case].add(line.piece.total());
        }
        for (const CarrierPoint& one : result.points[m]) {
            totals[one.load_case].add(one.p);
        }
        for (const Sum& total : totals) {
            csv_.number(total.value(), scale_.force);
        }
        csv_.end_row();
    }

    [[nodiscard]] bool any_fixed() const {
        for (const LevelTakedown& level : takedown_.levels) {
            if (!level.fixed_moments.empty()) {
                return true;
            }
        }
        return false;
    }

    void reactions() {
        const bool moments = any_fixed();
        headings({"level", "member", "bearing"});
        lengths({"station"});
        headings({"on", "kind"});
        lengths({"on station", "x", "y"});
        by_case("", dimension::force);
        if (moments) {
            by_case("moment ", dimension::moment);
        }
        headings({"note"});
        csv_.end_row();
        for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
            const FramedLevel& framed = takedown_.framing.levels[l];
            for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
                for (std::size_t b = 0; b < framed.bearings[m].size(); ++b) {
                    reaction(l, m, b, moments);
                }
            }
        }
    }

    void reaction(std::uint32_t level, std::uint32_t member, std::size_t b, bool moments) {
        const FramedLevel& framed = takedown_.framing.levels[level];
        const LevelTakedown& result = takedown_.levels[level];
        const Bearing& bearing = framed.bearings[member][b];
        const std::size_t row = (framed.bearings.first(member) + b) * cases_;
        csv_.text(framed.id).text(framed.members[member].id).number(static_cast<double>(b + 1));
        csv_.number(bearing.station, scale_.length);
        csv_.text(names_.carrier(level, bearing.on)).text(Names::kind(bearing.on.kind));
        if (bearing.on.kind == CarrierKind::column) {
            csv_.text("");
        } else {
            csv_.number(bearing.on_station, scale_.length);
        }
        point(bearing.at);
        const std::span<const double> values = std::span(result.reactions).subspan(row, cases_);
        numbers(values, scale_.force);
        if (moments && result.fixed_moments.empty()) {
            for (std::size_t c = 0; c < cases_; ++c) {
                csv_.number(0);
            }
        } else if (moments) {
            numbers(std::span(result.fixed_moments).subspan(row, cases_), scale_.moment);
        }
        note(values);
        csv_.end_row();
    }

    void rundowns() {
        headings({"carrier", "kind", "level"});
        heading("tributary area", dimension::area);
        heading("influence area", dimension::area);
        heading("area in all", dimension::area);
        headings({"floors"});
        heading("self weight", dimension::force);
        by_case("added ", dimension::force);
        by_case("total ", dimension::force);
        headings({"note"});
        csv_.end_row();
        for (std::size_t i = 0; i < takedown_.columns.size(); ++i) {
            for (const Lift& lift : takedown_.columns[i].lifts) {
                lift_start(takedown_.plan.columns[i].id, CarrierKind::column, lift);
                numbers(lift.added, scale_.force);
                lift_end(lift);
            }
        }
        for (std::size_t i = 0; i < takedown_.walls.size(); ++i) {
            const std::vector<WallLift>& lifts = takedown_.walls[i].lifts;
            for (std::size_t l = 0; l < lifts.size(); ++l) {
                lift_start(takedown_.plan.walls[i].id, CarrierKind::wall, lifts[l]);
                added_to_wall(lifts[l], l > 0 ? &lifts[l - 1] : nullptr);
                lift_end(lifts[l]);
            }
        }
    }

    template <class AnyLift>
    void lift_start(std::string_view id, CarrierKind kind, const AnyLift& lift) {
        csv_.text(id).text(Names::kind(kind)).text(takedown_.framing.levels[lift.level].id);
        csv_.number(lift.tributary_area, scale_.area).number(lift.influence_area, scale_.area);
        csv_.number(lift.area_total, scale_.area);
        csv_.number(lift.floors).number(lift.self_weight, scale_.force);
    }

    template <class AnyLift>
    void lift_end(const AnyLift& lift) {
        numbers(lift.total, scale_.force);
        note(lift.total);
        csv_.end_row();
    }

    /// What a wall's total has more than the lift above and its own weight.
    void added_to_wall(const WallLift& lift, const WallLift* above) {
        for (std::size_t c = 0; c < cases_; ++c) {
            const double own = c == takedown_.self_weight_case ? lift.self_weight : 0;
            const double before = above != nullptr ? above->total[c] : 0;
            csv_.number(lift.total[c] - before - own, scale_.force);
        }
    }

    void foundations() {
        headings({"under", "kind"});
        lengths({"x", "y", "to x", "to y"});
        by_case("", dimension::force);
        heading("all", dimension::force);
        headings({"note"});
        csv_.end_row();
        for (const Foundation& foundation : takedown_.foundations) {
            csv_.text(names_.carrier(0, foundation.under)).text(Names::kind(foundation.under.kind));
            if (foundation.under.kind == CarrierKind::wall) {
                point(takedown_.plan.walls[foundation.under.index].from);
                point(takedown_.plan.walls[foundation.under.index].to);
            } else {
                point(takedown_.plan.columns[foundation.under.index].at);
                csv_.text("").text("");
            }
            numbers(foundation.reactions, scale_.force);
            Sum all;
            for (const double value : foundation.reactions) {
                all.add(value);
            }
            csv_.number(all.value(), scale_.force);
            note(foundation.reactions);
            csv_.end_row();
        }
    }

    void headings(std::initializer_list<std::string_view> texts) {
        for (const std::string_view text : texts) {
            csv_.text(text);
        }
    }
    void heading(std::string_view text, Dimension dimension) {
        csv_.text(std::string(text) + " (" + unit_text(scale_.units, dimension) + ')');
    }
    void lengths(std::initializer_list<std::string_view> texts) {
        for (const std::string_view text : texts) {
            heading(text, dimension::length);
        }
    }
    void by_case(std::string_view before, Dimension dimension) {
        for (const LoadCase& load_case : takedown_.plan.cases) {
            heading(std::string(before) + load_case.id, dimension);
        }
    }
    void point(Point p) { csv_.number(p.x, scale_.length).number(p.y, scale_.length); }
    void numbers(std::span<const double> values, double scale) {
        for (const double value : values) {
            csv_.number(value, scale);
        }
    }
    /// Names the cases that lift.
    void note(std::span<const double> reactions) {
        std::string text;
        for (std::size_t c = 0; c < reactions.size(); ++c) {
            if (reactions[c] < 0) {
                text += (text.empty() ? "uplift: " : ", ") + takedown_.plan.cases[c].id;
            }
        }
        csv_.text(text);
    }

    const Takedown& takedown_;
    Scale scale_;
    Names names_;
    CsvWriter csv_;
    std::size_t cases_;
};

} // namespace

void write_table(const Takedown& takedown, Table table, const ReportOptions& options, const TextSink& sink) {
    TableWriter(takedown, options, sink).write(table);
}

RUNNEL_NAMESPACE_END
