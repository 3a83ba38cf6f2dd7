#include "result_folder.hpp"

#include "files.hpp"

#include <algorithm>
#include <array>
#include <filesystem>
#include <functional>
#include <set>
#include <utility>

namespace runnel_cli {

namespace {

bool write_file(const std::filesystem::path& path,
                const std::function<void(const runnel::TextSink&)>& write) {
    Output output(path.string());
    write(output.sink());
    return output.close();
}

/// Names of drawings by level. Ids that become the same name, also where a file system does not tell capitals
/// from small letters, are numbered.
std::vector<std::string> drawing_names(const runnel::Framing& framing) {
    std::vector<std::string> names;
    std::set<std::string> taken;
    const auto take = [&](std::string name) {
        std::transform(name.begin(), name.end(), name.begin(),
                       [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; });
        return taken.insert(name).second;
    };
    for (const runnel::FramedLevel& level : framing.levels) {
        const std::string stem = "plan-" + safe_file_name(level.id);
        std::string name = stem;
        for (int number = 2; !take(name); ++number) {
            name = stem + '-' + std::to_string(number);
        }
        names.push_back(name + ".svg");
    }
    return names;
}

constexpr std::array<std::pair<const char*, runnel::Table>, 4> tables{
    {{"members.csv", runnel::Table::members},
     {"reactions.csv", runnel::Table::reactions},
     {"rundowns.csv", runnel::Table::rundowns},
     {"foundations.csv", runnel::Table::foundations}}};

/// A plan with errors gives no tables; those that lie there could be taken for its own.
void warn_of_earlier_tables(const std::filesystem::path& path) {
    for (const auto& table : tables) {
        std::error_code trouble;
        if (std::filesystem::exists(path / table.first, trouble)) {
            complain("the plan has errors: tables and drawings in " + path.string() +
                     " are of an earlier run");
            return;
        }
    }
}

} // namespace

bool write_folder(const std::string& folder, const runnel::Takedown& takedown,
                  const runnel::ReportOptions& options) {
    const std::filesystem::path path(folder);
    std::error_code trouble;
    std::filesystem::create_directories(path, trouble);
    if (trouble) {
        complain("cannot make the folder " + folder + ": " + trouble.message());
        return false;
    }
    bool written = write_file(path / "result.json", [&](const runnel::TextSink& sink) {
        runnel::write_result(takedown, {}, options, sink);
    });
    if (!takedown.complete) {
        warn_of_earlier_tables(path);
        return written;
    }
    for (const auto& table : tables) {
        written = write_file(path / table.first,
                             [&](const runnel::TextSink& sink) {
                                 runnel::write_table(takedown, table.second, options, sink);
                             }) &&
                  written;
    }
    const std::vector<std::string> names = drawing_names(takedown.framing);
    for (std::uint32_t l = 0; l < names.size(); ++l) {
        written = write_file(path / names[l],
                             [&](const runnel::TextSink& sink) {
                                 runnel::draw_level(takedown.plan, takedown.framing, l,
                                                    takedown.levels[l].sharing, options, sink);
                             }) &&
                  written;
    }
    return written;
}

} // namespace runnel_cli
