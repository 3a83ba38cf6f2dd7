#include "commands.hpp"

#include "files.hpp"
#include "nearest.hpp"
#include "progress.hpp"
#include "result_folder.hpp"

#include <runnel/takedown.hpp>

#include <algorithm>
#include <initializer_list>
#include <iterator>
#include <string>
#include <string_view>
#include <tuple>

namespace runnel_cli {

namespace {

/// Whether the last key of a pointer is one of a list.
bool ends_in(const std::string& pointer, std::initializer_list<std::string_view> keys) {
    const std::size_t slash = pointer.rfind('/');
    const std::string_view key = std::string_view(pointer).substr(slash == std::string::npos ? 0 : slash + 1);
    return std::find(keys.begin(), keys.end(), key) != keys.end();
}

/// Errors beside which the rest of the plan can still be gone through: they take nothing from it that
/// framing, decks and the places of loads need.
bool leaves_values(const runnel::Problem& problem) {
    using Code = runnel::ProblemCode;
    switch (problem.code) {
    case Code::unknown_key:
    case Code::duplicate_key:
    case Code::not_supported_yet:
    case Code::no_dead_case:
    case Code::conflicting_keys:
        return true;
    case Code::unknown_id:
        return ends_in(problem.pointer, {"case", "section", "build"});
    case Code::wrong_type:
    case Code::bad_quantity:
    case Code::wrong_dimension:
    case Code::out_of_range:
        return ends_in(problem.pointer,
                       {"q", "w", "w_from", "w_to", "p", "self_weight", "E", "I", "A", "depth", "density"});
    default:
        return false;
    }
}

/// A plan's text and what reading it gave.
struct Input {
    std::string file;
    std::string text;
    runnel::PlanReading reading;

    [[nodiscard]] bool usable() const { return !runnel::has_errors(reading.problems); }
    /// True where its errors left the plan's values whole: nothing that was understood is missing.
    [[nodiscard]] bool whole() const {
        return std::all_of(reading.problems.begin(), reading.problems.end(), [](const runnel::Problem& p) {
            return p.severity != runnel::Severity::error || leaves_values(p);
        });
    }
};

std::optional<Input> read_input(const std::string& file, const Request& request) {
    std::optional<std::string> text = read_file(file);
    if (!text) {
        return std::nullopt;
    }
    Input input{file == "-" ? "standard input" : file, std::move(*text), {}};
    input.reading = runnel::read_plan(input.text);
    if (request.share) {
        std::vector<std::string>& defaults = input.reading.plan.defaults_used;
        defaults.erase(std::remove(defaults.begin(), defaults.end(), "share"), defaults.end());
    }
    return input;
}

runnel::TakedownOptions takedown_options(const Request& request) {
    runnel::TakedownOptions options;
    options.share = request.share;
    options.threads = request.threads;
    return options;
}

runnel::ReportOptions report_options(const Request& request, const Input& input) {
    runnel::ReportOptions options;
    options.units = request.units;
    options.digest = input.reading.digest;
    options.colour = colour_on(stdout);
    return options;
}

/// Problems of reading and of the phases after it. With errors among the first they are put in the order of
/// the text, those without a place last.
std::vector<runnel::Problem> together(const std::vector<runnel::Problem>& read,
                                      std::vector<runnel::Problem> later) {
    std::vector<runnel::Problem> all = read;
    all.insert(all.end(), std::make_move_iterator(later.begin()), std::make_move_iterator(later.end()));
    if (runnel::has_errors(read)) {
        std::stable_sort(all.begin(), all.end(), [](const runnel::Problem& a, const runnel::Problem& b) {
            return std::tuple(a.line == 0, a.line, a.column) < std::tuple(b.line == 0, b.line, b.column);
        });
    }
    return all;
}

/// Own weight must go somewhere, or the phases after reading could not be gone through: where reading refused
/// the plan for want of a dead case, it gets one for as long as they last.
runnel::Takedown take_down_beside_errors(runnel::PlanReading& reading,
                                         const runnel::TakedownOptions& options) {
    const bool lent =
        std::any_of(reading.problems.begin(), reading.problems.end(),
                    [](const runnel::Problem& p) { return p.code == runnel::ProblemCode::no_dead_case; });
    if (lent) {
        runnel::LoadCase dead;
        dead.id = "dead";
        dead.kind = runnel::CaseKind::dead;
        reading.plan.cases.push_back(std::move(dead));
    }
    runnel::Takedown takedown = runnel::take_down(std::move(reading.plan), options);
    if (lent) {
        takedown.plan.cases.pop_back();
    }
    return takedown;
}

/// The takedown of a plan, with what reading it found among its problems; one without results where the plan
/// has errors. Where they leave its values whole, framing, sharing and loads are gone through all the same
/// for their problems.
runnel::Takedown take_down(Input& input, const Request& request) {
    runnel::Takedown takedown;
    if (input.whole()) {
        const Progress progress("taking the loads down");
        takedown = take_down_beside_errors(input.reading, takedown_options(request));
        runnel::locate_problems(input.text, takedown.problems);
    } else {
        takedown.plan = std::move(input.reading.plan);
    }
    const bool errors_of_reading = !input.usable();
    takedown.problems = together(input.reading.problems, std::move(takedown.problems));
    takedown.complete = takedown.complete && !errors_of_reading;
    return takedown;
}

runnel::ShareComparison compare_shares(const Input& input, const runnel::Takedown& takedown,
                                       const Request& request) {
    const Progress progress("comparing the shares");
    runnel::ShareComparison shares = runnel::compare_shares(takedown, takedown_options(request));
    for (runnel::ShareRun& run : shares.runs) {
        runnel::locate_problems(input.text, run.problems);
    }
    return shares;
}

void complain_of(const std::string& file, runnel::Units units, const std::vector<runnel::Problem>& problems) {
    runnel::write_problems(problems, file, units, colour_on(stderr), standard_error());
}

constexpr const char* not_gone_through = "Framing and loads are not checked until these are mended.\n";

std::string counted(std::size_t count, const std::string& what) {
    return std::to_string(count) + ' ' + what + (count == 1 ? "" : "s");
}

/// "2 errors, 1 warning, no notes" as one line.
std::string summary(const std::vector<runnel::Problem>& problems) {
    const auto count = [&](runnel::Severity severity) {
        return static_cast<std::size_t>(
            std::count_if(problems.begin(), problems.end(),
                          [severity](const runnel::Problem& p) { return p.severity == severity; }));
    };
    return counted(count(runnel::Severity::error), "error") + ", " +
           counted(count(runnel::Severity::warning), "warning") + ", " +
           counted(count(runnel::Severity::note), "note");
}

Status worse(Status a, Status b) {
    return std::max(a, b);
}

} // namespace

Status check(const Request& request) {
    struct Checked {
        std::string file;
        runnel::Units units;
        std::vector<runnel::Problem> problems;
        bool whole;
    };
    Status status = done;
    std::vector<Checked> plans;
    for (const std::string& file : request.files) {
        std::optional<Input> input = read_input(file, request);
        if (!input) {
            status = worse(status, file_trouble);
            continue;
        }
        runnel::Takedown takedown = take_down(*input, request);
        status = worse(status, runnel::has_errors(takedown.problems) ? input_errors : done);
        plans.push_back({input->file, takedown.plan.units, std::move(takedown.problems), input->whole()});
    }
    Output output = Output::standard();
    if (request.format == "json") {
        std::vector<runnel::FileProblems> files;
        for (const Checked& plan : plans) {
            files.push_back({request.files.size() > 1 ? plan.file : std::string{},
                             request.units.value_or(plan.units), plan.problems});
        }
        runnel::write_problems_json(files, output.sink());
    } else {
        for (const Checked& plan : plans) {
            runnel::write_problems(plan.problems, plan.file, plan.units, colour_on(stdout), output.sink());
            output.sink()(plan.file + ": " + summary(plan.problems) + '\n');
            output.sink()(plan.whole ? "" : not_gone_through);
        }
    }
    return output.close() ? status : file_trouble;
}

Status takedown(const Request& request) {
    std::optional<Input> input = read_input(request.files.front(), request);
    if (!input) {
        return file_trouble;
    }
    const runnel::Takedown takedown = take_down(*input, request);
    runnel::ReportOptions options = report_options(request, *input);
    runnel::ShareComparison shares;
    if (request.compare_shares && input->usable()) {
        shares = compare_shares(*input, takedown, request);
        options.shares = &shares;
    }

    Output output = Output::standard();
    if (request.format == "json") {
        runnel::write_result(takedown, {}, options, output.sink());
    } else if (takedown.complete && request.format == "csv") {
        runnel::write_table(takedown, request.table.value_or(runnel::Table::reactions), options,
                            output.sink());
    } else if (takedown.complete || options.shares != nullptr) {
        runnel::write_account(takedown, options, output.sink());
    }
    bool written = output.close();
    if (request.format != "json") {
        complain_of(input->file, takedown.plan.units, takedown.problems);
        standard_error()(input->whole() ? "" : not_gone_through);
    }
    if (!request.folder.empty()) {
        written = write_folder(request.folder, takedown, options) && written;
    }
    if (!written) {
        return file_trouble;
    }
    return runnel::has_errors(takedown.problems) ? input_errors : done;
}

namespace {

struct Split {
    runnel::Framing framing;
    std::vector<runnel::Sharing> sharings;
    std::vector<runnel::Problem> problems;
};

/// Only the levels asked for are split.
Split split_decks(runnel::Plan& plan, const Request& request, std::optional<std::uint32_t> level) {
    const Progress progress("splitting the decks");
    if (request.share) {
        plan.settings.share = *request.share;
        for (runnel::Level& one : plan.levels) {
            for (runnel::Deck& deck : one.decks) {
                deck.share.reset();
            }
        }
    }
    Split split;
    split.framing = runnel::frame_plan(plan);
    split.problems = split.framing.problems;
    split.sharings.resize(split.framing.levels.size());
    for (std::uint32_t l = 0; l < split.framing.levels.size(); ++l) {
        if (!level || *level == l) {
            split.sharings[l] = runnel::share_decks(plan, split.framing, l);
            const std::vector<runnel::Problem>& more = split.sharings[l].problems;
            split.problems.insert(split.problems.end(), more.begin(), more.end());
        }
    }
    return split;
}

/// Index of the level that is asked for. False, with a sentence on standard error, where there is none.
bool find_level(const runnel::Plan& plan, const Request& request, std::optional<std::uint32_t>& level) {
    std::vector<std::string> ids;
    for (const runnel::Level& one : plan.levels) {
        if (one.id == request.level) {
            level = static_cast<std::uint32_t>(ids.size());
        }
        ids.push_back(one.id);
    }
    if (!request.level.empty() && !level) {
        const std::string meant = nearest(request.level, ids);
        complain("the plan has no level \"" + request.level + '"' +
                 (meant.empty() ? "" : "; did you mean \"" + meant + "\"?"));
        return false;
    }
    if (request.format == "svg" && !level && plan.levels.size() != 1) {
        complain("a drawing shows one level: give --level, one of " + counted(plan.levels.size(), "level"));
        return false;
    }
    return true;
}

runnel::RegionFormat region_format(const std::string& name) {
    if (name == "svg") {
        return runnel::RegionFormat::svg;
    }
    return name == "geojson" ? runnel::RegionFormat::geojson : runnel::RegionFormat::json;
}

} // namespace

Status regions(const Request& request) {
    std::optional<Input> input = read_input(request.files.front(), request);
    if (!input) {
        return file_trouble;
    }
    runnel::RegionView view;
    view.format = region_format(request.format);
    Split split;
    if (input->usable()) {
        if (!find_level(input->reading.plan, request, view.level)) {
            return wrong_usage;
        }
        split = split_decks(input->reading.plan, request, view.level);
        runnel::locate_problems(input->text, split.problems);
    }
    std::vector<runnel::Problem> problems = input->reading.problems;
    problems.insert(problems.end(), split.problems.begin(), split.problems.end());
    Output output = Output::standard();
    runnel::write_regions(input->reading.plan, split.framing, split.sharings, problems, view,
                          report_options(request, *input), output.sink());
    if (view.format == runnel::RegionFormat::svg) {
        complain_of(input->file, input->reading.plan.units, problems);
    }
    if (!output.close()) {
        return file_trouble;
    }
    return runnel::has_errors(problems) ? input_errors : done;
}

Status schema(const Request& request) {
    Output output = Output::standard();
    output.sink()(runnel::schema_of(request.document));
    return output.close() ? done : file_trouble;
}

} // namespace runnel_cli
