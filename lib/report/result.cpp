#include "geometry/basic.hpp"
#include "report/deck_shares.hpp"
#include "report/problem_json.hpp"
#include "report/result_writer.hpp"

#include <runnel/deck.hpp>
#include <runnel/version.hpp>

RUNNEL_NAMESPACE_BEGIN

void write_result(const Takedown& takedown, std::span<const Problem> reading_problems,
                  const ReportOptions& options, const TextSink& sink) {
    ResultWriter(takedown, options, sink).write(reading_problems);
}

ResultWriter::ResultWriter(const Takedown& takedown, const ReportOptions& options, const TextSink& sink)
    : takedown_(takedown), options_(options), scale_(options.units.value_or(takedown.plan.units)),
      names_(takedown.plan, takedown.framing), json_(sink),
      noise_(noise_of(takedown.framing.largest_coordinate)), pieces_(takedown.plan.cases.size()) {}

void ResultWriter::write(std::span<const Problem> reading_problems) {
    json_.open_object(JsonWriter::Layout::block);
    json_.key("runnel").text("result/1");
    program_and_input();
    units_and_conventions();
    settings();
    cautions_and_problems(reading_problems);
    if (takedown_.complete) {
        uplift();
        json_.key("balance");
        balances(takedown_.balance, false);
        levels();
        columns();
        walls();
        foundations();
    }
    if (options_.shares != nullptr) {
        shares(*options_.shares);
    }
    json_.close_object();
    json_.finish();
}

void ResultWriter::program_and_input() {
    json_.key("program").open_object().key("version").text(version()).close_object();
    json_.key("input").open_object().key("title").text(takedown_.plan.title);
    if (!options_.digest.empty()) {
        json_.key("digest").text(options_.digest);
    }
    json_.close_object();
}

void ResultWriter::units_and_conventions() {
    json_.key("units").open_object();
    json_.key("length").text(name_of(scale_.units.length)).key("force").text(name_of(scale_.units.force));
    json_.close_object();
    json_.key("conventions").open_object(JsonWriter::Layout::block);
    json_.key("axes").text("plan axes x, y right-handed, z up; angles in degrees, counter-clockwise from +x");
    json_.key("loads").text("positive downward");
    json_.key("reactions").text("positive upward: compression in a column is positive; uplift is negative");
    json_.key("stations").text("along a member or wall from its `from` end");
    json_.key("moments").text(
        "sagging positive; at a fixed end: positive where it holds a cantilever that runs "
        "towards the other end");
    json_.key("first_moments").text("[sum of P x, sum of P y] about the plan's origin");
    json_.key("lines").text("of one case together; neighbours that continue each other within 1e-9 of their "
                            "ordinates are one, with force and first moment kept");
    static_assert(region_chord_error == 5e-4, "the sentence below says so");
    json_.key("regions").text(
        "pieces of deck nearest to a carrier, of one-way decks by the halves of spans, whichever share the "
        "loads follow; parabolas in rings are drawn by chords that are nowhere more than 0.5 mm off and keep "
        "the area");
    json_.close_object();
}

void ResultWriter::settings() {
    const Settings& settings = takedown_.plan.settings;
    json_.key("settings").open_object();
    json_.key("share").text(name_of(settings.share));
    json_.key("deck_shares").open_array();
    for (const auto& [level, deck] : decks_shared_otherwise(takedown_)) {
        json_.open_object();
        json_.key("deck").text(names_.source_anywhere(level, {SourceKind::deck, deck}));
        json_.key("share").text(name_of(takedown_.framing.levels[level].decks[deck].share));
        json_.close_object();
    }
    json_.close_array();
    json_.key("snap").number(settings.snap, scale_.length);
    json_.key("ground_elevation").number(settings.ground_elevation, scale_.length);
    if (takedown_.self_weight_case < takedown_.plan.cases.size()) {
        json_.key("self_weight_case").text(case_id(takedown_.self_weight_case));
    } else if (!settings.self_weight_case.empty()) {
        json_.key("self_weight_case").text(settings.self_weight_case);
    }
    json_.key("defaults").open_array();
    for (const std::string& name : takedown_.plan.defaults_used) {
        json_.text(name);
    }
    json_.close_array().close_object();
}

void ResultWriter::cautions_and_problems(std::span<const Problem> reading_problems) {
    json_.key("cautions").open_array(JsonWriter::Layout::block);
    for (const std::string_view caution : cautions()) {
        json_.text(caution);
    }
    json_.close_array();
    json_.key("problems").open_array(JsonWriter::Layout::block);
    for (const Problem& problem : reading_problems) {
        write_problem(json_, problem, scale_);
    }
    for (const Problem& problem : takedown_.problems) {
        write_problem(json_, problem, scale_);
    }
    json_.close_array();
}

void ResultWriter::uplift() {
    json_.key("uplift").open_array(JsonWriter::Layout::block);
    for (const Uplift& uplift : takedown_.uplift) {
        json_.open_object();
        if (uplift.level == none) {
            json_.key("bearing").text(names_.carrier(0, uplift.on));
            json_.key("on").text("ground");
        } else if (uplift.member == none) {
            json_.key("bearing").text(names_.carrier(uplift.level, uplift.upper));
            json_.key("on").text(names_.carrier_anywhere(uplift.level, uplift.on));
            json_.key("level").text(takedown_.framing.levels[uplift.level].id);
        } else {
            const std::span<const Bearing> bearings =
                takedown_.framing.levels[uplift.level].bearings[uplift.member];
            json_.key("bearing").text(
                names_.carrier_anywhere(uplift.level, {CarrierKind::member, uplift.member}));
            json_.key("on").text(names_.carrier_anywhere(uplift.level, uplift.on));
            json_.key("level").text(takedown_.framing.levels[uplift.level].id);
            json_.key("station").number(bearings[uplift.bearing].station, scale_.length);
        }
        json_.key("combination").text("all");
        json_.key("value").number(uplift.value, scale_.force);
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::balances(std::span<const Balance> balances, bool per_area) {
    json_.open_array(JsonWriter::Layout::block);
    for (const Balance& balance : balances) {
        json_.open_object();
        json_.key("case").text(case_id(balance.load_case));
        json_.key("applied").number(balance.applied.force, scale_.force);
        json_.key("shared").number(balance.shared.force, scale_.force);
        json_.key("arrived").number(balance.arrived.force, scale_.force);
        json_.key("difference").number(balance.difference, scale_.force);
        json_.key("applied_moment");
        moment(balance.applied.moment);
        json_.key("shared_moment");
        moment(balance.shared.moment);
        json_.key("arrived_moment");
        moment(balance.arrived.moment);
        json_.key("moment_difference");
        moment(balance.moment_difference);
        json_.key("closes").truth(balance.closes);
        if (per_area && balance.area > 0) {
            json_.key("per_area").number(balance.applied.force / balance.area, scale_.area_load);
        }
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::by_case(std::span<const double> values, double scale) {
    json_.open_object();
    for (std::uint32_t c = 0; c < values.size(); ++c) {
        json_.key(case_id(c)).number(values[c], scale);
    }
    json_.close_object();
}

void ResultWriter::point(Point point) {
    json_.pair(point.x, point.y, scale_.length);
}

void ResultWriter::moment(Point moment) {
    json_.pair(moment.x, moment.y, scale_.moment);
}

RUNNEL_NAMESPACE_END
