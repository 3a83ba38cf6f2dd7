#include <doctest/doctest.h>

#include <runnel/problem.hpp>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <map>
#include <set>
#include <string>
#include <vector>

// Rules of the house that no compiler holds.

namespace fs = std::filesystem;

namespace {

const fs::path top = RUNNEL_SOURCE_DIR;

std::string text_of(const fs::path& path) {
    std::ifstream file(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(file), {}};
}

std::vector<fs::path> files_in(const fs::path& folder) {
    std::vector<fs::path> files;
    for (const fs::directory_entry& entry : fs::recursive_directory_iterator(folder)) {
        if (entry.is_regular_file()) {
            files.push_back(entry.path());
        }
    }
    std::sort(files.begin(), files.end());
    return files;
}

/// What stands between the quotes or angles of a file's include lines, the opening mark first: "<vector", ...
std::vector<std::string> includes_of(const fs::path& path) {
    std::vector<std::string> includes;
    std::ifstream file(path);
    for (std::string line; std::getline(file, line);) {
        constexpr std::string_view directive = "#include ";
        if (line.starts_with(directive)) {
            const std::string rest = line.substr(directive.size());
            includes.push_back(rest.substr(0, rest.find_first_of("\">", 1)));
        }
    }
    return includes;
}

/// For each folder of lib/ the ones it may include from: those upstream of it.
const std::map<std::string, std::set<std::string>> upstream{
    {"geometry", {}},
    {"frame", {}},
    {"plan", {}},
    {"framing", {"plan"}},
    {"deck", {"plan", "framing"}},
    {"load", {"plan", "framing", "deck"}},
    {"path", {"plan", "framing", "deck", "load"}},
    {"code", {"plan"}},
    {"worst", {"plan", "framing", "deck", "load", "path", "code"}},
    {"report", {"plan", "framing", "deck", "load", "path", "code", "worst"}}};

} // namespace

TEST_CASE("load flows one way: a folder of lib includes only what stands upstream of it") {
    for (const fs::path& file : files_in(top / "lib")) {
        const std::string folder = fs::relative(file, top / "lib").begin()->string();
        if (folder == "CMakeLists.txt") {
            continue;
        }
        CAPTURE(file.string());
        REQUIRE(upstream.count(folder) == 1);
        for (const std::string& include : includes_of(file)) {
            const std::size_t slash = include.find('/');
            if (include[0] != '"' || slash == std::string::npos) {
                continue;
            }
            const std::string from = include.substr(1, slash - 1);
            const bool stands_alone = from == "geometry" || from == "frame";
            CAPTURE(include);
            CHECK((from == folder || stands_alone || upstream.at(folder).count(from) == 1));
            CHECK((!stands_alone || from == folder || folder != "geometry"));
        }
    }
}

TEST_CASE("geometry knows nothing of structures, the frame analyser nothing of plans") {
    const std::set<std::string> plain{"<runnel/export.hpp", "<runnel/geometry.hpp", "<runnel/line_piece.hpp",
                                      "<runnel/grouped.hpp", "<runnel/frame.hpp"};
    for (const std::string folder : {"geometry", "frame"}) {
        for (const fs::path& file : files_in(top / "lib" / folder)) {
            for (const std::string& include : includes_of(file)) {
                CAPTURE(file.string());
                CAPTURE(include);
                CHECK((!include.starts_with("<runnel/") || plain.count(include) == 1));
            }
        }
    }
}

TEST_CASE("public headers include the standard library and each other, nothing else") {
    for (const fs::path& file : files_in(top / "include")) {
        for (const std::string& include : includes_of(file)) {
            CAPTURE(file.string());
            CAPTURE(include);
            CHECK(include[0] == '<');
            CHECK((include.find('/') == std::string::npos || include.starts_with("<runnel/")));
            CHECK((include.find(".h") == std::string::npos || include.starts_with("<runnel/")));
        }
        const std::string text = text_of(file);
        for (const char* const word : {"boost", "Boost", "Eigen", "nlohmann"}) {
            CAPTURE(word);
            CHECK(text.find(word) == std::string::npos);
        }
    }
}

TEST_CASE("the library never prints, never ends the program, asks neither environment nor files") {
    for (const fs::path& file : files_in(top / "lib")) {
        const std::string text = text_of(file);
        CAPTURE(file.string());
        for (const char* const word :
             {"<iostream>", "<cstdio>", "<fstream>", "printf(", "std::cout", "std::cerr", "exit(", "abort(",
              "terminate(", "getenv(", "setlocale("}) {
            CAPTURE(word);
            CHECK(text.find(word) == std::string::npos);
        }
    }
}

TEST_CASE("nothing stands at the top but the house itself") {
    const std::set<std::string> house{"CMakeLists.txt", "README.md", "DEVELOPERS.md", "include", "lib", "cli",
                                      "tests",          "samples"};
    for (const fs::directory_entry& entry : fs::directory_iterator(top)) {
        const std::string name = entry.path().filename().string();
        CAPTURE(name);
        CHECK((name.starts_with(".") || house.count(name) == 1));
    }
}

TEST_CASE("the published table lists every problem code as the program knows it") {
    const std::string text = text_of(top / "DEVELOPERS.md");
    for (const runnel::ProblemKind& kind : runnel::problem_kinds()) {
        const std::string row = "| `" + std::string(kind.name) + "` | " +
                                std::string(name_of(kind.severity)) + " | " + std::string(kind.meaning) +
                                " |";
        CAPTURE(row);
        CHECK(text.find(row) != std::string::npos);
    }
}
