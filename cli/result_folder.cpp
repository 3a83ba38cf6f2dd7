#include "result_folder.hpp"

#include "files.hpp"

#include <algorithm>
#include <array>
#include <cstdio>
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

constexpr const char* result_name = "result.json";
constexpr std::array<std::pair<const char*, runnel::Table>, 4> tables{
    {{"members.csv", runnel::Table::members},
     {"reactions.csv", runnel::Table::reactions},
     {"rundowns.csv", runnel::Table::rundowns},
     {"foundations.csv", runnel::Table::foundations}}};

/// True where a file begins with the mark that drawings of this program carry.
bool is_own_drawing(const std::filesystem::path& path) {
    constexpr std::size_t beginning = 1024;
    std::string text(beginning, '\0');
    std::FILE* const file = std::fopen(path.c_str(), "rb");
    if (file == nullptr) {
        return false;
    }
    text.resize(std::fread(text.data(), 1, text.size(), file));
    std::fclose(file);
    return text.find("<!-- runnel ") != std::string::npos;
}

bool is_own(const std::filesystem::path& path) {
    const std::string name = path.filename().string();
    const bool table =
        std::any_of(tables.begin(), tables.end(), [&](const auto& one) { return name == one.first; });
    const bool drawing = name.starts_with("plan-") && name.ends_with(".svg");
    return name == result_name || table || (drawing && is_own_drawing(path));
}

/// What earlier runs wrote would be taken for part of this result. Nothing else is touched.
bool remove_earlier(const std::filesystem::path& folder) {
    std::vector<std::filesystem::path> own;
    std::error_code trouble;
    for (std::filesystem::directory_iterator entry(folder, trouble), end; !trouble && entry != end;
         entry.increment(trouble)) {
        std::error_code unknown;
        if (entry->symlink_status(unknown).type() == std::filesystem::file_type::regular &&
            is_own(entry->path())) {
            own.push_back(entry->path());
        }
    }
    if (trouble) {
        complain("cannot read the folder " + folder.string() + ": " + trouble.message());
        return false;
    }
    for (const std::filesystem::path& path : own) {
        if (!std::filesystem::remove(path, trouble) && trouble) {
            complain("cannot remove " + path.string() + " of an earlier run: " + trouble.message());
            return false;
        }
    }
    return true;
}

/// Writes files into a folder and keeps their names.
class Folder {
public:
    explicit Folder(std::filesystem::path path) : path_(std::move(path)) {}

    void write(const std::string& name, const std::function<void(const runnel::TextSink&)>& contents) {
        if (write_file(path_ / name, contents)) {
            written_ += (written_.empty() ? "" : ", ") + name;
        } else {
            failed_ = true;
        }
    }

    /// Says what was written. False where something could not be.
    [[nodiscard]] bool close() const {
        if (!written_.empty()) {
            complain("written to " + path_.string() + ": " + written_);
        }
        return !failed_;
    }

private:
    std::filesystem::path path_;
    std::string written_;
    bool failed_ = false;
};

} // namespace

bool write_folder(const std::string& name, const runnel::Takedown& takedown,
                  const runnel::ReportOptions& options) {
    std::error_code trouble;
    std::filesystem::create_directories(name, trouble);
    if (trouble) {
        complain("cannot make the folder " + name + ": " + trouble.message());
        return false;
    }
    if (!remove_earlier(name)) {
        return false;
    }
    Folder folder(name);
    folder.write(result_name,
                 [&](const runnel::TextSink& sink) { runnel::write_result(takedown, {}, options, sink); });
    if (!takedown.complete) {
        return folder.close();
    }
    for (const auto& table : tables) {
        folder.write(table.first, [&](const runnel::TextSink& sink) {
            runnel::write_table(takedown, table.second, options, sink);
        });
    }
    const std::vector<std::string> names = drawing_names(takedown.framing);
    for (std::uint32_t l = 0; l < names.size(); ++l) {
        folder.write(names[l], [&](const runnel::TextSink& sink) {
            runnel::draw_level(takedown.plan, takedown.framing, l, takedown.levels[l].sharing, options, sink);
        });
    }
    return folder.close();
}

} // namespace runnel_cli
