#pragma once

#include <runnel/export.hpp>
#include <runnel/plan.hpp>
#include <runnel/share_comparison.hpp>
#include <runnel/takedown.hpp>

#include <cstdint>
#include <functional>
#include <optional>
#include <span>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Takes text as it is made; called many times with parts in order.
using TextSink = std::function<void(std::string_view)>;

struct ReportOptions {
    std::optional<Units> units; ///< else the plan's
    std::string digest;         ///< of the plan's text; empty: none
    bool colour = false;        ///< text account only
    /// Shown in the account and the result document where given; of the same takedown.
    const ShareComparison* shares = nullptr;
};

enum class Table : std::uint8_t { members, reactions, rundowns, foundations };

/// The cautions that every report prints, a sentence each.
[[nodiscard]] RUNNEL_EXPORT std::span<const std::string_view> cautions() noexcept;

/// The result document (result/1), streamed in fixed key order; the same takedown gives the same bytes.
/// An incomplete takedown gives a document with its problems and nothing computed.
/// `reading_problems` come before the takedown's own.
RUNNEL_EXPORT void write_result(const Takedown& takedown, std::span<const Problem> reading_problems,
                                const ReportOptions& options, const TextSink& sink);

/// The short account for people, never wider than 100 columns: uplift, balance with load per deck area,
/// members, rundowns, foundations, warnings, cautions. Of plans with many members, columns and walls it shows
/// the heaviest and says how many are left out.
RUNNEL_EXPORT void write_account(const Takedown& takedown, const ReportOptions& options,
                                 const TextSink& sink);

/// A table as CSV (RFC 4180), units in the header. A text that a spreadsheet would take for a formula gets an
/// apostrophe before it.
RUNNEL_EXPORT void write_table(const Takedown& takedown, Table table, const ReportOptions& options,
                               const TextSink& sink);

enum class RegionFormat : std::uint8_t { json, geojson, svg };

/// What a drawing or list of regions shows.
struct RegionView {
    RegionFormat format = RegionFormat::json;
    std::optional<std::uint32_t> level; ///< index; all levels where not given. SVG draws one level: the first
};

/// The split alone. JSON: {"units", "problems", "levels": [{id, regions}]} with regions as in the result
/// document. GeoJSON (RFC 7946, but in plan coordinates): one feature a region. SVG: a level to scale, with
/// `<path class="region" data-deck data-carrier>`, `<line class="member" data-id>`, `class="column"` and
/// `class="wall"` with `data-id`. `sharings` are by level; those of levels that are not shown may be empty.
/// An empty `framing` gives a document without levels.
RUNNEL_EXPORT void write_regions(const Plan& plan, const Framing& framing, std::span<const Sharing> sharings,
                                 std::span<const Problem> problems, const RegionView& view,
                                 const ReportOptions& options, const TextSink& sink);

/// The SVG of one level.
RUNNEL_EXPORT void draw_level(const Plan& plan, const Framing& framing, std::uint32_t level,
                              const Sharing& sharing, const ReportOptions& options, const TextSink& sink);

/// Problems for people, one block each: severity, code, place, sentence, hint; errors first, then warnings,
/// then notes. `file` stands before line and column.
RUNNEL_EXPORT void write_problems(std::span<const Problem> problems, std::string_view file, Units units,
                                  bool colour, const TextSink& sink);

/// {"problems": [...]} as in the result document, with `file` on each where it is not empty.
struct FileProblems {
    std::string file;
    Units units;
    std::span<const Problem> problems;
};
RUNNEL_EXPORT void write_problems_json(std::span<const FileProblems> files, const TextSink& sink);

RUNNEL_NAMESPACE_END
