#include "report/result_writer.hpp"

RUNNEL_NAMESPACE_BEGIN

void ResultWriter::columns() {
    json_.key("columns").open_array(JsonWriter::Layout::block);
    for (std::uint32_t i = 0; i < takedown_.columns.size(); ++i) {
        const Column& column = takedown_.plan.columns[i];
        json_.open_object(JsonWriter::Layout::block);
        json_.key("id").text(column.id);
        json_.key("at");
        point(column.at);
        json_.key("lifts").open_array(JsonWriter::Layout::block);
        for (const Lift& one : takedown_.columns[i].lifts) {
            lift(one);
        }
        json_.close_array().close_object();
    }
    json_.close_array();
}

void ResultWriter::lift(const Lift& lift) {
    json_.open_object();
    json_.key("level").text(takedown_.framing.levels[lift.level].id);
    json_.key("tributary_area").number(lift.tributary_area, scale_.area);
    json_.key("influence_area").number(lift.influence_area, scale_.area);
    json_.key("area_total").number(lift.area_total, scale_.area);
    json_.key("floors").count(lift.floors);
    json_.key("added");
    by_case(lift.added, scale_.force);
    json_.key("from").open_array();
    for (const LiftLoad& load : lift.from) {
        json_.open_object();
        json_.key("source").text(names_.source_anywhere(lift.level, load.source));
        json_.key("case").text(case_id(load.load_case));
        json_.key("p").number(load.p, scale_.force);
        json_.close_object();
    }
    json_.close_array();
    json_.key("self_weight").number(lift.self_weight, scale_.force);
    json_.key("total");
    by_case(lift.total, scale_.force);
    json_.close_object();
}

void ResultWriter::walls() {
    json_.key("walls").open_array(JsonWriter::Layout::block);
    for (std::uint32_t i = 0; i < takedown_.walls.size(); ++i) {
        json_.open_object(JsonWriter::Layout::block);
        json_.key("id").text(takedown_.plan.walls[i].id);
        json_.key("lifts").open_array(JsonWriter::Layout::block);
        for (const WallLift& lift : takedown_.walls[i].lifts) {
            json_.open_object();
            json_.key("level").text(takedown_.framing.levels[lift.level].id);
            json_.key("tributary_area").number(lift.tributary_area, scale_.area);
            json_.key("influence_area").number(lift.influence_area, scale_.area);
            json_.key("area_total").number(lift.area_total, scale_.area);
            json_.key("floors").count(lift.floors);
            json_.key("self_weight").number(lift.self_weight, scale_.force);
            json_.key("total");
            by_case(lift.total, scale_.force);
            wall_lines_and_points(lift);
            json_.close_object();
        }
        json_.close_array().close_object();
    }
    json_.close_array();
}

void ResultWriter::wall_lines_and_points(const WallLift& lift) {
    json_.key("line").open_array();
    for (const CarrierLine& line : lift.line) {
        json_.open_object();
        json_.key("case").text(case_id(line.load_case));
        line_piece(line.piece);
        json_.close_object();
    }
    json_.close_array();
    json_.key("point").open_array();
    for (const CarrierPoint& point : lift.point) {
        json_.open_object();
        json_.key("case").text(case_id(point.load_case));
        json_.key("station").number(point.station, scale_.length);
        json_.key("p").number(point.p, scale_.force);
        json_.key("source").text(names_.source_anywhere(lift.level, point.source));
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::foundations() {
    json_.key("foundations").open_array(JsonWriter::Layout::block);
    for (const Foundation& foundation : takedown_.foundations) {
        json_.open_object();
        json_.key("under").text(names_.carrier(0, foundation.under));
        json_.key("kind").text(Names::kind(foundation.under.kind));
        const bool under_wall = foundation.under.kind == CarrierKind::wall;
        if (under_wall) {
            const Wall& wall = takedown_.plan.walls[foundation.under.index];
            json_.key("from");
            point(wall.from);
            json_.key("to");
            point(wall.to);
        } else {
            json_.key("at");
            point(takedown_.plan.columns[foundation.under.index].at);
        }
        json_.key("reactions");
        by_case(foundation.reactions, scale_.force);
        if (under_wall && !takedown_.walls[foundation.under.index].lifts.empty()) {
            wall_lines_and_points(takedown_.walls[foundation.under.index].lifts.back());
        }
        json_.close_object();
    }
    json_.close_array();
}

RUNNEL_NAMESPACE_END
