#include "report/csv_writer.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

using namespace runnel;
using support::takedown_of;
using support::written;

TEST_CASE("texts of a table are quoted and made safe, numbers are not") {
    const std::string csv = written([](const TextSink& sink) {
        CsvWriter writer(sink);
        writer.text("plain").text("a, b").text("say \"so\"").text("two\nlines").end_row();
        writer.text("=1+1")
            .text("+G1")
            .text("-G1")
            .text("@G1")
            .text("\tG1")
            .number(-1.5)
            .number(0.1)
            .end_row();
        writer.finish();
    });
    CHECK(csv ==
          "plain,\"a, b\",\"say \"\"so\"\"\",\"two\nlines\"\r\n'=1+1,'+G1,'-G1,'@G1,'\tG1,-1.5,0.1\r\n");
}

TEST_CASE("tables have their units in the head and a row for each thing") {
    const Takedown takedown = takedown_of(support::footbridge);
    const auto table = [&](Table which) {
        ReportOptions options;
        options.units = Units{LengthUnit::mm, ForceUnit::N};
        return written([&](const TextSink& sink) { write_table(takedown, which, options, sink); });
    };
    const std::string foundations = table(Table::foundations);
    CHECK(foundations.substr(0, foundations.find('\r')) ==
          "under,kind,x (mm),y (mm),to x (mm),to y (mm),dead (N),crowd (N),all (N),note");
    CHECK(foundations.find("\r\nP,column,0,0,,,2000,22250,24250,\r\n") != std::string::npos);
    const std::string reactions = table(Table::reactions);
    CHECK(reactions.find("\r\nwalk,b,1,0,south,member,4000,4000,0,2000,20000,\r\n") != std::string::npos);
    const std::string members = table(Table::members);
    CHECK(members.find("\r\nwalk,b,joist,4000,0,4000,2000,2000,8e+06,8e+06,1.6e+07,2,4000,40000\r\n") !=
          std::string::npos);
    const std::string rundowns = table(Table::rundowns);
    CHECK(rundowns.find("\r\nP,column,walk,4e+06,1.6e+07,4e+06,1,0,2000,22250,2000,22250,\r\n") !=
          std::string::npos);
}
