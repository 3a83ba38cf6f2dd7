#include "report/json_writer.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <limits>

using namespace runnel;
using support::written;

namespace {

std::string as_json(std::string_view text) {
    std::string json = written([&](const TextSink& sink) {
        JsonWriter writer(sink);
        writer.text(text);
        writer.finish();
    });
    json.pop_back(); // the last line's end
    return json;
}

std::string as_json(double value) {
    std::string json = written([&](const TextSink& sink) {
        JsonWriter writer(sink);
        writer.number(value);
        writer.finish();
    });
    json.pop_back();
    return json;
}

} // namespace

TEST_CASE("texts are escaped where JSON asks for it") {
    CHECK(as_json("G\"1\"") == R"("G\"1\"")");
    CHECK(as_json("a\\b/c") == R"("a\\b/c")");
    CHECK(as_json("two\nlines\tand a bell\x07") == R"("two\u000alines\u0009and a bell\u0007")");
    CHECK(as_json(std::string_view("\0", 1)) == R"("\u0000")");
    CHECK(as_json("\x7F") == R"("\u007f")");
    CHECK(as_json("Träger 梁 𝛿") == "\"Träger 梁 𝛿\"");
}

TEST_CASE("bytes that are not UTF-8 never reach a document") {
    const std::string mark = "\xEF\xBF\xBD";
    CHECK(as_json("a\xFFz") == "\"a" + mark + "z\"");
    CHECK(as_json("\xC0\xAF") == '"' + mark + mark + '"');                       // overlong slash
    CHECK(as_json("\xE2\x82") == '"' + mark + mark + '"');                       // cut short
    CHECK(as_json("\xED\xA0\x80") == '"' + mark + mark + mark + '"');            // a surrogate
    CHECK(as_json("\xF4\x90\x80\x80") == '"' + mark + mark + mark + mark + '"'); // beyond the last character
    CHECK(as_json("\x80") == '"' + mark + '"');
}

TEST_CASE("numbers are the shortest text that reads back") {
    CHECK(as_json(0.1) == "0.1");
    CHECK(as_json(1.0 / 3) == "0.3333333333333333");
    CHECK(as_json(5.0) == "5");
    CHECK(as_json(-0.0) == "0");
    CHECK(as_json(1e300) == "1e+300");
    CHECK(as_json(std::numeric_limits<double>::denorm_min()) == "5e-324");
    CHECK(as_json(std::numeric_limits<double>::infinity()) == "null");
}

TEST_CASE("entries of a block stand on lines of their own, those of a line do not") {
    const std::string json = written([](const TextSink& sink) {
        JsonWriter writer(sink);
        writer.open_object(JsonWriter::Layout::block);
        writer.key("at").pair(1, 2.5);
        writer.key("list").open_array(JsonWriter::Layout::block).count(1).truth(true).close_array();
        writer.key("none").open_array(JsonWriter::Layout::block).close_array();
        writer.close_object();
        writer.finish();
    });
    CHECK(json == "{\n \"at\": [1,2.5],\n \"list\": [\n  1,\n  true\n ],\n \"none\": []\n}\n");
}

TEST_CASE("a long document is handed on in parts") {
    std::size_t parts = 0;
    std::size_t bytes = 0;
    const TextSink sink = [&](std::string_view part) {
        ++parts;
        bytes += part.size();
    };
    JsonWriter writer(sink);
    writer.open_array(JsonWriter::Layout::block);
    for (int i = 0; i < 100000; ++i) {
        writer.pair(i, 0.5);
    }
    writer.close_array();
    writer.finish();
    CHECK(parts > 10);
    CHECK(bytes > 1000000);
}
