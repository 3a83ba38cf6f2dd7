#include "report/problem_json.hpp"

#include <runnel/report.hpp>

RUNNEL_NAMESPACE_BEGIN

void write_problem(JsonWriter& json, const Problem& problem, const Scale& scale, std::string_view file) {
    json.open_object();
    if (!file.empty()) {
        json.key("file").text(file);
    }
    json.key("severity").text(name_of(problem.severity));
    json.key("code").text(kind_of(problem.code).name);
    json.key("message").text(problem.message);
    if (!problem.hint.empty()) {
        json.key("hint").text(problem.hint);
    }
    json.key("pointer").text(problem.pointer);
    json.key("line").count(problem.line);
    json.key("column").count(problem.column);
    if (problem.point) {
        json.key("point").pair(problem.point->x, problem.point->y, scale.length);
    }
    json.key("ids").open_array();
    for (const std::string& id : problem.ids) {
        json.text(id);
    }
    json.close_array().close_object();
}

void write_problems_json(std::span<const FileProblems> files, const TextSink& sink) {
    JsonWriter json(sink);
    json.open_object(JsonWriter::Layout::block);
    json.key("problems").open_array(JsonWriter::Layout::block);
    for (const FileProblems& file : files) {
        for (const Problem& problem : file.problems) {
            write_problem(json, problem, Scale(file.units), file.file);
        }
    }
    json.close_array().close_object();
    json.finish();
}

RUNNEL_NAMESPACE_END
