#include "report/problem_json.hpp"
#include "report/result_writer.hpp"

RUNNEL_NAMESPACE_BEGIN

void ResultWriter::shares(const ShareComparison& shares) {
    json_.key("shares").open_array(JsonWriter::Layout::block);
    for (std::size_t r = 0; r < shares.runs.size(); ++r) {
        const ShareRun& run = shares.runs[r];
        json_.open_object(JsonWriter::Layout::block);
        json_.key("share").text(run.share ? name_of(*run.share) : "plan");
        json_.key("own").truth(run.own);
        json_.key("complete").truth(run.complete);
        json_.key("problems").open_array(JsonWriter::Layout::block);
        for (const Problem& problem : run.problems) {
            write_problem(json_, problem, scale_);
        }
        json_.close_array();
        if (run.complete) {
            json_.key("supports").open_array(JsonWriter::Layout::block);
            for (const ComparedCarrier& support : shares.supports) {
                compared(shares, r, support);
            }
            json_.close_array();
            json_.key("members").open_array(JsonWriter::Layout::block);
            for (const ComparedCarrier& member : shares.members) {
                compared(shares, r, member);
            }
            json_.close_array();
        }
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::compared(const ShareComparison& shares, std::size_t run, const ComparedCarrier& carrier) {
    json_.open_object();
    json_.key("id").text(names_.carrier_anywhere(carrier.level, carrier.carrier));
    json_.key("kind").text(Names::kind(carrier.carrier.kind));
    values_and_percent(shares, run, carrier, &ComparedCarrier::total, "total");
    if (carrier.carrier.kind == CarrierKind::member) {
        values_and_percent(shares, run, carrier, &ComparedCarrier::largest_reaction, "reaction");
    }
    json_.close_object();
}

void ResultWriter::values_and_percent(const ShareComparison& shares, std::size_t run,
                                      const ComparedCarrier& carrier, ComparedValues values,
                                      std::string_view key) {
    json_.key(key);
    by_case(std::span(carrier.*values).subspan(run * shares.cases, shares.cases), scale_.force);
    json_.key(std::string(key) + "_percent").open_object();
    for (std::uint32_t c = 0; c < shares.cases; ++c) {
        if (const std::optional<double> percent = shares.percent(carrier, values, {run, c})) {
            json_.key(case_id(c)).number(*percent);
        }
    }
    json_.close_object();
}

RUNNEL_NAMESPACE_END
