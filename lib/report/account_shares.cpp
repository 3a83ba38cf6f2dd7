#include "report/account.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t indent = 2;
constexpr std::size_t id_width = 22;
constexpr std::size_t case_width = 14;
constexpr std::size_t most_groups = 20; ///< of carriers that a table lists

std::string_view name_of_run(const ShareRun& run) {
    return run.share ? name_of(*run.share) : "the plan's";
}

/// "+12.5", "0.0"; "new" where the plan's own value is nothing.
std::string percent_text(const std::optional<double>& percent) {
    constexpr double widest = 1000; // above it a factor says more than per cent
    if (!percent) {
        return "new";
    }
    if (std::abs(*percent) >= widest) {
        return *percent > 0 ? "> +999" : "< -999";
    }
    const double tenths = std::round(*percent * 10) / 10;
    std::string text = figure(tenths, 1);
    text.resize(text.find('.') + 2); // a tenth of a per cent, also of small ones
    return (tenths > 0 ? "+" : "") + text;
}

/// Whether all values of two carriers read the same.
bool read_the_same(const std::vector<double>& a, const std::vector<double>& b) {
    constexpr double three_figures = 5e-4;
    return std::equal(a.begin(), a.end(), b.begin(), b.end(), [](double x, double y) {
        return std::abs(x - y) <= three_figures * std::max(std::abs(x), std::abs(y));
    });
}

} // namespace

void Account::shares() {
    if (shares_ == nullptr) {
        return;
    }
    const ShareRun& own = shares_->runs[shares_->own];
    page_.heading("Shares compared, " + unit_text(scale_.units, dimension::force));
    page_.paragraph("%: difference from " +
                        (own.share ? '`' + std::string(name_of_run(own)) + "`, which this plan uses"
                                   : std::string("the plan's own shares, which are not all alike")) +
                        "; carriers and cases that differ, sorted by their largest change as part of what "
                        "the carrier takes in all cases together",
                    indent);
    for (const ShareRun& run : shares_->runs) {
        if (!run.complete) {
            stopped_share(run);
        }
    }
    page_.blank();
    const auto complete = std::count_if(shares_->runs.begin(), shares_->runs.end(),
                                        [](const ShareRun& run) { return run.complete; });
    if (own.complete && complete > 1) {
        compared("Columns and walls, at their feet", shares_->supports, &ComparedCarrier::total);
        compared("Members, all load on them", shares_->members, &ComparedCarrier::total);
        compared("Members, largest reaction", shares_->members, &ComparedCarrier::largest_reaction);
    }
}

void Account::stopped_share(const ShareRun& run) {
    constexpr std::size_t most = 3;
    page_.line('`' + std::string(name_of_run(run)) + "` stops:", indent);
    for (std::size_t i = 0; i < std::min(most, run.problems.size()); ++i) {
        const Problem& problem = run.problems[i];
        page_.paragraph(std::string(kind_of(problem.code).name) + ": " + problem.message, 2 * indent);
    }
    if (run.problems.size() > most) {
        page_.line("and " + counted(run.problems.size() - most, "more error"), 2 * indent);
    }
}

/// Carriers that differ; joists of one field that read the same in one group.
std::vector<Account::ComparedGroup> Account::differing(const std::vector<ComparedCarrier>& carriers,
                                                       ComparedValues values) const {
    std::vector<ComparedGroup> groups;
    const auto differs = [&](const ComparedCarrier& carrier) {
        for (std::size_t i = 0; i < (carrier.*values).size(); ++i) {
            const RunCase at{i / shares_->cases, i % shares_->cases};
            const std::optional<double> percent = shares_->percent(carrier, values, at);
            if (shares_->runs[at.run].complete && (!percent || *percent != 0)) {
                return true;
            }
        }
        return false;
    };
    const auto same = [&](const ComparedCarrier& a, const ComparedCarrier& b) {
        return a.carrier.kind == CarrierKind::member && a.level == b.level &&
               alike(a.level, a.carrier.index, b.carrier.index) && read_the_same(a.*values, b.*values);
    };
    for (const ComparedCarrier& carrier : carriers) {
        if (!differs(carrier)) {
            continue;
        }
        constexpr std::ptrdiff_t recent = 6; // as in the list of members
        const auto oldest = groups.end() - std::min(recent, std::distance(groups.begin(), groups.end()));
        const auto group = std::find_if(oldest, groups.end(), [&](const ComparedGroup& candidate) {
            return same(*candidate.first, carrier);
        });
        if (group != groups.end()) {
            ++group->count;
        } else {
            groups.push_back({&carrier, 1});
        }
    }
    return groups;
}

void Account::compared(std::string_view heading, const std::vector<ComparedCarrier>& carriers,
                       ComparedValues values) {
    if (carriers.empty()) {
        return; // a plan without members
    }
    page_.line(heading, indent);
    PageTable table;
    table.names("of", id_width);
    table.names("case", case_width);
    table.values(name_of_run(shares_->runs[shares_->own]));
    for (std::size_t r = 0; r < shares_->runs.size(); ++r) {
        if (r != shares_->own && shares_->runs[r].complete) {
            table.values(name_of_run(shares_->runs[r]));
            table.values("%");
        }
    }
    const std::vector<ComparedGroup> groups = differing(carriers, values);
    std::size_t differ = 0;
    std::size_t shown = 0;
    for (std::size_t g = 0; g < groups.size(); ++g) {
        differ += groups[g].count;
        if (g < most_groups) {
            compared_rows(table, groups[g], values);
            shown = differ;
        }
    }
    if (!groups.empty()) {
        table.print(page_, 2 * indent);
    }
    if (differ > shown) {
        page_.line("and " + std::to_string(differ - shown) +
                       " more that differ less: all stand in the result document",
                   2 * indent);
    }
    if (differ < carriers.size()) {
        page_.line(differ == 0 ? "none differs"
                               : std::to_string(carriers.size() - differ) + " others do not differ",
                   2 * indent);
    }
    page_.blank();
}

void Account::compared_rows(PageTable& table, const ComparedGroup& group, ComparedValues values) const {
    const ComparedCarrier& carrier = *group.first;
    const std::string alike = group.count > 1 ? " (" + std::to_string(group.count) + " alike)" : "";
    const std::vector<double>& all = carrier.*values;
    const bool lifts = values == &ComparedCarrier::largest_reaction ||
                       carrier.carrier.kind != CarrierKind::member; // a load on a member lifts nothing
    bool first = true;
    for (std::size_t c = 0; c < shares_->cases; ++c) {
        std::vector<std::string> row{
            first ? fit(names_.carrier_anywhere(carrier.level, carrier.carrier), id_width - alike.size()) +
                        alike
                  : std::string{},
            takedown_.plan.cases[c].id};
        const auto add = [&](std::size_t run) {
            const double value = all[run * shares_->cases + c];
            row.push_back(lifts ? reaction(value) : force(value));
        };
        add(shares_->own);
        bool differs = false;
        for (std::size_t r = 0; r < shares_->runs.size(); ++r) {
            if (r != shares_->own && shares_->runs[r].complete) {
                const std::optional<double> percent = shares_->percent(carrier, values, {r, c});
                differs = differs || !percent || *percent != 0;
                add(r);
                row.push_back(percent_text(percent));
            }
        }
        if (differs) {
            table.add_row(std::move(row));
            first = false;
        }
    }
}

RUNNEL_NAMESPACE_END
