#include "report/page.hpp"
#include "support/report_support.hpp"

#include <doctest/doctest.h>

using namespace runnel;
using support::written;

TEST_CASE("figures show a tenth of the unit and at least three figures") {
    CHECK(figure(123.44, 1) == "123.4");
    CHECK(figure(12.344, 1) == "12.3");
    CHECK(figure(1.2344, 1) == "1.23");
    CHECK(figure(0.12344, 1) == "0.123");
    CHECK(figure(-7.5, 1) == "-7.50");
    CHECK(figure(0, 1) == "0.0");
    CHECK(figure(1234567.8, 1) == "1.23e+06");
    CHECK(figure(432.1, 0) == "432");
}

TEST_CASE("what rounding leaves of nothing is printed as nothing, without a sign") {
    CHECK(figure(1e-15, 1) == "0.0");
    CHECK(figure(-1e-15, 1) == "0.0");
    CHECK(figure(-0.0, 0) == "0");
}

TEST_CASE("a figure never takes more than ten characters") {
    for (double value = 1e-300; value < 1e300; value *= 7.3) {
        for (const int decimals : {0, 1, 2, 4}) {
            CHECK(figure(value, decimals).size() <= 12);
            CHECK(figure(-value, decimals).size() <= 12);
        }
    }
}

TEST_CASE("texts are cut with an ellipsis, by columns and not by bytes") {
    CHECK(fit("girder", 6) == "girder");
    CHECK(fit("girders", 6) == "girde…");
    CHECK(fit("Träger", 6) == "Träger");
    CHECK(fit("梁梁梁梁", 6) == "梁梁…");
    CHECK(columns_of(fit("梁梁梁梁", 6)) <= 6);
}

TEST_CASE("nothing that moves the cursor or turns the reading direction is printed") {
    CHECK(printable("a\nb\x1B[31mc") == "a?b?[31mc");
    CHECK(printable("\xE2\x80\xAE"
                    "live") == "?live");
    CHECK(printable("\xC2\x9B") == "?");
    CHECK(printable("\xFF") == "?");
}

TEST_CASE("three figures are shown whatever the size, but whole ones stay whole") {
    CHECK(three_figures(0) == "0");
    CHECK(three_figures(0.80034) == "0.800");
    CHECK(three_figures(9.9961) == "10.0");
    CHECK(three_figures(-57.912) == "-57.9");
    CHECK(three_figures(1234.4) == "1234");
    CHECK(three_figures(0.000912) == "0.000912");
    CHECK(three_figures(3.4e-9) == "3.40e-09");
}

TEST_CASE("a table that is too wide goes on below, with its describing columns again") {
    const std::string text = written([](const TextSink& sink) {
        Page page(false, sink);
        PageTable table;
        table.names("member", 20);
        for (int i = 0; i < 30; ++i) {
            table.values("case " + std::to_string(i));
        }
        std::vector<std::string> row{"G1"};
        for (int i = 0; i < 30; ++i) {
            row.push_back(std::to_string(1000 + i));
        }
        table.add_row(std::move(row));
        table.print(page, 2);
    });
    std::size_t tables = 0;
    for (std::size_t at = 0; (at = text.find("member", at)) != std::string::npos; ++at) {
        ++tables;
    }
    CHECK(tables == 3);
    CHECK(text.find("1000") != std::string::npos);
    CHECK(text.find("1029") != std::string::npos);
    for (std::size_t start = 0; start < text.size();) {
        const std::size_t end = text.find('\n', start);
        CHECK(end - start <= page_width);
        start = end + 1;
    }
}
