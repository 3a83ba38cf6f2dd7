// Time per joist of reading, framing, sharing, loading, takedown and writing, for plans of 10,000 to
// 1,000,000 joists, as ratios against std::sort of the joists' shuffled end points in the same run, and the
// exponent of growth.
//
//   bench_takedown [LARGEST]      default 1000000

#include <runnel/report.hpp>
#include <runnel/takedown.hpp>

#include <algorithm>
#include <charconv>
#include <chrono>
#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <fstream>
#include <random>
#include <string>
#include <vector>

namespace {

using Clock = std::chrono::steady_clock;

double seconds_since(Clock::time_point start) {
    return std::chrono::duration<double>(Clock::now() - start).count();
}

void append(std::string& text, double value) {
    char buffer[32];
    const auto [end, error] = std::to_chars(buffer, buffer + sizeof buffer, value);
    text.append(buffer, end);
}

void append_member(std::string& text, const std::string& id, const char* role, double x0, double y0,
                   double x1, double y1) {
    text += R"({"id":")" + id + R"(","role":")" + role + R"(","from":[)";
    append(text, x0);
    text += ',';
    append(text, y0);
    text += "],\"to\":[";
    append(text, x1);
    text += ',';
    append(text, y1);
    text += "],\"section\":\"s\"},\n";
}

/// Bays of 9 m x 6 m in rows of 40, sixteen joists each in between, girders on columns; joists are members of
/// the text.
std::string plan_text(std::size_t joists) {
    constexpr std::size_t per_bay = 16;
    constexpr std::size_t bays_in_row = 40;
    const std::size_t bays = std::max<std::size_t>(1, joists / per_bay);
    const std::size_t rows = (bays + bays_in_row - 1) / bays_in_row;
    const std::size_t columns = std::min(bays, bays_in_row);
    std::string text = R"({"runnel":"plan/1","title":"Endless shed","units":{"length":"m","force":"kN"},
"cases":[{"id":"dead","kind":"dead"},{"id":"live","kind":"live"},{"id":"snow","kind":"snow"}],
"sections":[{"id":"s","self_weight":0.2}],
"columns":[)";
    for (std::size_t r = 0; r <= rows; ++r) {
        for (std::size_t c = 0; c <= columns; ++c) {
            text += r + c > 0 ? ",\n" : "";
            text += R"({"id":"C)" + std::to_string(r) + '.' + std::to_string(c) + R"(","at":[)";
            append(text, 9.0 * static_cast<double>(c));
            text += ',';
            append(text, 6.0 * static_cast<double>(r));
            text += R"(],"top":"floor"})";
        }
    }
    text += "],\n\"levels\":[{\"id\":\"floor\",\"elevation\":4,\"members\":[\n";
    for (std::size_t r = 0; r <= rows; ++r) {
        for (std::size_t c = 0; c < columns; ++c) {
            const double x = 9.0 * static_cast<double>(c);
            const double y = 6.0 * static_cast<double>(r);
            append_member(text, "G" + std::to_string(r) + '.' + std::to_string(c), "girder", x, y, x + 9, y);
        }
    }
    std::string decks;
    for (std::size_t r = 0; r < rows; ++r) {
        const double y = 6.0 * static_cast<double>(r);
        for (std::size_t c = 0; c < columns; ++c) {
            const double x = 9.0 * static_cast<double>(c);
            for (std::size_t k = 0; k < per_bay; ++k) {
                const double xj = x + 9.0 * (static_cast<double>(k) + 0.5) / per_bay;
                append_member(text,
                              "J" + std::to_string(r) + '.' + std::to_string(c) + '.' + std::to_string(k),
                              "joist", xj, y, xj, y + 6);
            }
        }
        decks += decks.empty() ? "" : ",\n";
        decks += R"({"id":"D)" + std::to_string(r) + R"(","direction":0,"q":1.5,"outline":[[0,)";
        append(decks, y);
        decks += "],[";
        append(decks, 9.0 * static_cast<double>(columns));
        decks += ',';
        append(decks, y);
        decks += "],[";
        append(decks, 9.0 * static_cast<double>(columns));
        decks += ',';
        append(decks, y + 6);
        decks += "],[0,";
        append(decks, y + 6);
        decks += "]]}";
    }
    text.resize(text.size() - 2); // the last comma
    text += "],\n\"decks\":[" + decks;
    text += R"(],"area_loads":[{"case":"dead","q":0.5},{"case":"live","q":2.5},{"case":"snow","q":0.8}]}]})";
    return text;
}

double peak_megabytes() {
    std::ifstream status("/proc/self/status");
    std::string word;
    while (status >> word) {
        if (word == "VmHWM:") {
            double kib = 0;
            status >> kib;
            return kib / 1024;
        }
    }
    return 0;
}

struct Row {
    double joists = 0;
    double bytes = 0;
    double reference = 0, read = 0, frame = 0, share = 0, load = 0, check = 0, takedown = 0, write = 0;
};

double time_of_sort(const runnel::Plan& plan) {
    std::vector<runnel::Point> ends;
    for (const runnel::Member& member : plan.levels[0].members) {
        ends.push_back(member.from);
        ends.push_back(member.to);
    }
    std::mt19937_64 random(1);
    std::shuffle(ends.begin(), ends.end(), random);
    const auto start = Clock::now();
    std::sort(ends.begin(), ends.end(),
              [](runnel::Point l, runnel::Point r) { return l.y != r.y ? l.y < r.y : l.x < r.x; });
    return seconds_since(start);
}

/// The five law checkers as the takedown runs them after every split.
void check_laws(const runnel::Plan& plan, const runnel::Framing& framing, const runnel::Sharing& sharing,
                const runnel::LevelLoads& loads) {
    const std::size_t broken = check_cover(framing, 0, sharing).size() +
                               check_disjoint(framing, 0, sharing).size() +
                               check_owners(plan, framing, 0, sharing, 4, 1).size() +
                               check_force(plan, framing, 0, sharing, loads).size() +
                               check_moment(plan, framing, 0, sharing, loads).size();
    if (broken != 0) {
        std::fprintf(stderr, "%zu laws are broken\n", broken);
        std::exit(1);
    }
}

Row measure(std::size_t joists) {
    Row row;
    const std::string text = plan_text(joists);
    row.bytes = static_cast<double>(text.size());
    auto start = Clock::now();
    runnel::PlanReading reading = runnel::read_plan(text);
    row.read = seconds_since(start);
    if (runnel::has_errors(reading.problems)) {
        std::fprintf(stderr, "the plan has errors: %s\n", reading.problems.front().message.c_str());
        std::exit(1);
    }
    row.joists = static_cast<double>(reading.plan.levels[0].members.size());
    row.reference = time_of_sort(reading.plan);
    start = Clock::now();
    {
        const runnel::Framing framing = runnel::frame_plan(reading.plan);
        row.frame = seconds_since(start);
        start = Clock::now();
        const runnel::Sharing sharing = runnel::share_decks(reading.plan, framing, 0);
        row.share = seconds_since(start);
        start = Clock::now();
        const runnel::LevelLoads loads = runnel::load_carriers(reading.plan, framing, 0, sharing);
        row.load = seconds_since(start);
        start = Clock::now();
        check_laws(reading.plan, framing, sharing, loads);
        row.check = seconds_since(start);
    }
    start = Clock::now();
    const runnel::Takedown takedown = runnel::take_down(std::move(reading.plan));
    row.takedown = seconds_since(start);
    if (!takedown.complete) {
        std::fprintf(stderr, "the takedown did not end: %s\n", takedown.problems.front().message.c_str());
        std::exit(1);
    }
    std::size_t written = 0;
    start = Clock::now();
    runnel::write_result(takedown, {}, {}, [&](std::string_view part) { written += part.size(); });
    row.write = seconds_since(start);
    return row;
}

double exponent(double a, double b, double n_a, double n_b) {
    return std::log(b / a) / std::log(n_b / n_a);
}

} // namespace

int main(int argc, char** argv) {
    const double largest = argc > 1 ? std::strtod(argv[1], nullptr) : 1e6;
    std::printf("%10s %8s %10s %10s %10s %10s %10s %10s %10s %10s %9s\n", "members", "MB/s", "sort us",
                "read us", "frame us", "share us", "load us", "check us", "all us", "write us", "peak MB");
    std::vector<Row> rows;
    for (double joists = 1e4; joists <= largest * 1.001; joists *= 10) {
        measure(static_cast<std::size_t>(joists)); // warm: first touch of memory costs more than the work
        rows.push_back(measure(static_cast<std::size_t>(joists)));
        const Row& r = rows.back();
        const double us = 1e6 / r.joists;
        std::printf("%10.0f %8.1f %10.3f %10.3f %10.3f %10.3f %10.3f %10.3f %10.3f %10.3f %9.0f\n", r.joists,
                    r.bytes / r.read / 1e6, r.reference * us, r.read * us, r.frame * us, r.share * us,
                    r.load * us, r.check * us, r.takedown * us, r.write * us, peak_megabytes());
        std::printf("%10s %8s %10s %10.1f %10.1f %10.1f %10.1f %10.1f %10.1f %10.1f   times the sort\n", "",
                    "", "1", r.read / r.reference, r.frame / r.reference, r.share / r.reference,
                    r.load / r.reference, r.check / r.reference, r.takedown / r.reference,
                    r.write / r.reference);
    }
    if (rows.size() > 1) {
        const Row& a = rows.front();
        const Row& b = rows.back();
        std::printf(
            "exponent from %.0f to %.0f members: sort %.3f, read %.3f, frame %.3f, share %.3f, load %.3f, "
            "check %.3f, "
            "takedown "
            "%.3f, write %.3f\n",
            a.joists, b.joists, exponent(a.reference, b.reference, a.joists, b.joists),
            exponent(a.read, b.read, a.joists, b.joists), exponent(a.frame, b.frame, a.joists, b.joists),
            exponent(a.share, b.share, a.joists, b.joists), exponent(a.load, b.load, a.joists, b.joists),
            exponent(a.check, b.check, a.joists, b.joists),
            exponent(a.takedown, b.takedown, a.joists, b.joists),
            exponent(a.write, b.write, a.joists, b.joists));
    }
    return 0;
}
