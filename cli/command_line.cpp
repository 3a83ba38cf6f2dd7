#include "command_line.hpp"

#include "commands.hpp"
#include "files.hpp"
#include "nearest.hpp"

#include <CLI/CLI.hpp>

#include <runnel/version.hpp>

#include <algorithm>
#include <csignal>
#include <map>
#include <sstream>
#include <thread>

namespace runnel_cli {

namespace {

constexpr unsigned most_threads = 256;

const std::map<std::string, runnel::Share> shares{{"half", runnel::Share::half},
                                                  {"lever", runnel::Share::lever},
                                                  {"continuous", runnel::Share::continuous}};
const std::map<std::string, runnel::Table> tables{{"members", runnel::Table::members},
                                                  {"reactions", runnel::Table::reactions},
                                                  {"rundowns", runnel::Table::rundowns},
                                                  {"foundations", runnel::Table::foundations}};
const std::map<std::string, runnel::Document> documents{{"plan", runnel::Document::plan},
                                                        {"result", runnel::Document::result},
                                                        {"frame", runnel::Document::frame}};

/// What CLI11 fills in before it is understood.
struct Words {
    std::string share, table, units, document;
};

std::vector<std::string> names_in(const auto& table) {
    std::vector<std::string> names;
    for (const auto& entry : table) {
        names.push_back(entry.first);
    }
    return names;
}

std::string units_are_wrong(const std::string& text) {
    const std::size_t comma = text.find(',');
    const bool right = comma != std::string::npos && runnel::length_unit(text.substr(0, comma)) &&
                       runnel::force_unit(text.substr(comma + 1));
    return right ? std::string{}
                 : "\"" + text + "\" is not a length and a force: m, mm, cm, ft or in, a comma, " +
                       "N, kN, MN, lbf or kip, for example m,kN";
}

class CommandLine {
public:
    CommandLine() : app_("Carries the gravity loads of floors down to the foundations.", "runnel") {
        app_.require_subcommand(1);
        add_version(app_);
        app_.set_help_flag("--help,-h", "Print this and end");
        app_.footer("Exit status: 0 done, 1 the input has errors or a balance does not close, 2 wrong usage, "
                    "3 a file cannot be read or written.");
        add_check();
        add_takedown();
        add_regions();
        add_schema();
        add_later("frame", "Analyse a plane frame by itself (not built yet)");
        add_later("explain", "Where the load of a carrier comes from (not built yet)");
        add_later("compare", "What changed between two plans or results (not built yet)");
    }

    int run(int count, char** arguments) {
        if (count < 2) {
            complain("a command is wanted: " + all_commands() + "; see runnel --help");
            return wrong_usage;
        }
        if (!known(arguments[1])) {
            return unknown_command(arguments[1]);
        }
        try {
            app_.parse(count, arguments);
        } catch (const CLI::ParseError& error) {
            return answer(error);
        }
        return call();
    }

private:
    void add_check() {
        CLI::App& command = add("check", "Read and check plans; print their problems");
        command.add_option("PLAN", request_.files, "Plan files; - is standard input")
            ->required()
            ->type_name("");
        add_format(command, {"text", "json"});
        add_common(command);
    }

    void add_takedown() {
        CLI::App& command =
            add("takedown", "Carry the loads down; print an account of uplift, balance, members, "
                            "rundowns and foundations");
        add_plan(command);
        add_format(command, {"text", "json", "csv"});
        command.add_option("--table", words_.table, "Of --format csv: which table (reactions)")
            ->check(CLI::IsMember(names_in(tables)))
            ->type_name("TABLE");
        command
            .add_option("-o,--output", request_.folder, "Also write result, tables and drawings into FOLDER")
            ->type_name("FOLDER");
        command.add_flag("--compare-shares", request_.compare_shares,
                         "Also show what carriers get under half, lever and continuous; with --format text "
                         "or json");
        add_common(command);
    }

    void add_regions() {
        CLI::App& command = add("regions", "Split the decks among their carriers, and nothing more");
        add_plan(command);
        add_format(command, {"json", "svg", "geojson"});
        command.add_option("--level", request_.level, "This level alone")->type_name("LEVEL");
        add_common(command);
    }

    void add_schema() {
        CLI::App& command = add("schema", "Print the JSON Schema of a document");
        command.add_option("DOCUMENT", words_.document, "plan, result or frame")
            ->required()
            ->check(CLI::IsMember(names_in(documents)))
            ->type_name("");
    }

    void add_later(const char* name, const char* what) { add(name, what).allow_extras(); }

    CLI::App& add(const char* name, const char* what) {
        CLI::App& command = *app_.add_subcommand(name, what);
        add_version(command);
        names_.push_back(name);
        return command;
    }

    static void add_version(CLI::App& command) {
        command.set_version_flag("--version", "runnel " + std::string(runnel::version()),
                                 "Print the version and end");
    }

    void add_plan(CLI::App& command) {
        command.add_option("PLAN", request_.files, "Plan file; - is standard input")
            ->required()
            ->expected(1)
            ->type_name("");
    }

    void add_format(CLI::App& command, const std::vector<std::string>& formats) {
        command.add_option("--format", request_.format, "Form of the answer (" + formats.front() + ")")
            ->check(CLI::IsMember(formats))
            ->type_name("FORM");
    }

    void add_common(CLI::App& command) {
        command
            .add_option("--share", words_.share,
                        "Share one-way decks so, instead of by the plan's setting and its decks'")
            ->check(CLI::IsMember(names_in(shares)))
            ->type_name("SHARE");
        command.add_option("--units", words_.units, "Units of the output, for example m,kN or ft,kip")
            ->type_name("LENGTH,FORCE")
            ->check(units_are_wrong);
        command
            .add_option("--threads", request_.threads,
                        "For levels side by side; the answer is the same with any number")
            ->check(CLI::Range(1U, most_threads))
            ->type_name("N");
    }

    [[nodiscard]] bool known(const std::string& word) const {
        return word == "-h" || word == "--help" || word == "--version" ||
               std::find(names_.begin(), names_.end(), word) != names_.end();
    }

    [[nodiscard]] int unknown_command(const std::string& word) const {
        const std::string meant = nearest(word, names_);
        complain(
            "there is no command \"" + word + "\"" +
            (meant.empty() ? "; the commands are " + all_commands() : "; did you mean \"" + meant + "\"?"));
        return wrong_usage;
    }

    [[nodiscard]] std::string all_commands() const {
        std::string all;
        for (const std::string& name : names_) {
            all += all.empty() ? name : ", " + name;
        }
        return all;
    }

    [[nodiscard]] int answer(const CLI::ParseError& error) const {
        std::ostringstream out;
        std::ostringstream problem;
        if (app_.exit(error, out, problem) == 0) {
            const std::string text = out.str();
            Output output = Output::standard();
            output.sink()(text);
            output.sink()(text.ends_with('\n') ? "" : "\n");
            return output.close() ? done : file_trouble;
        }
        const std::vector<CLI::App*> commands = app_.get_subcommands();
        complain(sentence_of(error) + meant_option() + "; see runnel " +
                 (commands.empty() ? "" : commands.front()->get_name() + ' ') + "--help");
        return wrong_usage;
    }

    [[nodiscard]] static std::string sentence_of(const CLI::ParseError& error) {
        const std::string text = error.what();
        const bool mismatch = dynamic_cast<const CLI::ArgumentMismatch*>(&error) != nullptr;
        const std::string name = text.substr(0, text.find(':'));
        if (!mismatch || name == text) {
            return text;
        }
        if (name.starts_with('-')) {
            return name + " wants one value after it";
        }
        return "one " + name + " is wanted, and more are given";
    }

    /// Where an option is mistyped, the one that was likely meant.
    [[nodiscard]] std::string meant_option() const {
        for (const CLI::App* command : app_.get_subcommands()) {
            std::vector<std::string> options;
            for (const CLI::Option* option : command->get_options()) {
                options.push_back(option->get_name());
            }
            for (const std::string& word : command->remaining()) {
                const std::string meant = word.starts_with("--") ? nearest(word, options) : std::string{};
                if (!meant.empty()) {
                    return "; did you mean " + meant + "?";
                }
            }
        }
        return {};
    }

    int call() {
        const std::string command = app_.get_subcommands().front()->get_name();
        if (std::string trouble = understand(); !trouble.empty()) {
            complain(trouble);
            return wrong_usage;
        }
        if (command == "check") {
            return check(request_);
        }
        if (command == "takedown") {
            return takedown(request_);
        }
        if (command == "regions") {
            return regions(request_);
        }
        if (command == "schema") {
            return schema(request_);
        }
        complain("the command \"" + command + "\" is not built yet");
        return wrong_usage;
    }

    /// Words to values. What is wrong with them together, or nothing.
    std::string understand() {
        if (!words_.share.empty()) {
            request_.share = shares.at(words_.share);
        }
        if (!words_.units.empty()) {
            const std::size_t comma = words_.units.find(',');
            request_.units = runnel::Units{*runnel::length_unit(words_.units.substr(0, comma)),
                                           *runnel::force_unit(words_.units.substr(comma + 1))};
        }
        if (!words_.document.empty()) {
            request_.document = documents.at(words_.document);
        }
        if (!words_.table.empty()) {
            request_.table = tables.at(words_.table);
            if (request_.format != "csv") {
                return "--table goes with --format csv";
            }
        }
        if (request_.compare_shares && request_.format == "csv") {
            return "--compare-shares goes with --format text or json";
        }
        if (std::count(request_.files.begin(), request_.files.end(), "-") > 1) {
            return "standard input can be read once only";
        }
        return {};
    }

    CLI::App app_;
    std::vector<std::string> names_;
    Request request_;
    Words words_;
};

} // namespace

int run(int count, char** arguments) {
    // A closed pipe shall be an error of writing, with its status, and not the end of the program.
    std::signal(SIGPIPE, SIG_IGN);
    try {
        return CommandLine().run(count, arguments);
    } catch (const std::bad_alloc&) {
        complain("there is not enough memory for this");
    } catch (const std::exception& error) {
        complain(std::string("stopped by an error of its own: ") + error.what());
    }
    return file_trouble;
}

} // namespace runnel_cli
