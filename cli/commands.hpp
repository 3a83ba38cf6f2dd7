#pragma once

#include "status.hpp"

#include <runnel/plan.hpp>
#include <runnel/report.hpp>

#include <optional>
#include <string>
#include <vector>

namespace runnel_cli {

/// What the command line asks for. Each command reads what concerns it.
struct Request {
    std::vector<std::string> files; ///< "-" is standard input
    std::string format;
    std::optional<runnel::Table> table;
    std::string folder; ///< empty: none
    std::string level;  ///< empty: all
    std::optional<runnel::Share> share;
    bool compare_shares = false;
    std::optional<runnel::Units> units;
    unsigned threads = 1;
    runnel::Document document = runnel::Document::plan;
};

Status check(const Request& request);
Status takedown(const Request& request);
Status regions(const Request& request);
Status schema(const Request& request);

} // namespace runnel_cli
