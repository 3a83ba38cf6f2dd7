#pragma once

#include <runnel/export.hpp>
#include <runnel/geometry.hpp>
#include <runnel/problem.hpp>
#include <runnel/units.hpp>

#include <array>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Where an object of a plan stands in its document. Lets later problems point back at the text.
struct Origin {
    static constexpr std::uint32_t nowhere = 0xffffffff;

    std::uint32_t line = 0;   ///< from 1; 0 where the plan was built in code
    std::uint32_t column = 0; ///< from 1, in bytes
    std::uint32_t level =
        nowhere; ///< index of the level whose list holds it; `nowhere` for lists of the plan
    std::uint32_t index = nowhere; ///< index in its list
};

enum class CaseKind : std::uint8_t {
    dead,
    superimposed_dead,
    live,
    roof_live,
    snow,
    rain,
    construction,
    other
};
enum class Share : std::uint8_t { half, lever, continuous };
enum class SpanKind : std::uint8_t { one_way, two_way, columns };
enum class Role : std::uint8_t {
    joist,
    beam,
    girder
}; ///< in rising order: a lower role bears on a higher one
enum class BaseFixity : std::uint8_t { pinned, fixed };

/// Loads of one nature, kept apart all the way down.
struct LoadCase {
    std::string id;
    CaseKind kind = CaseKind::other;
    bool reducible = false; ///< default by kind: true for live only
    bool pattern = false;   ///< default by kind: true for live only
    std::string category;   ///< empty: none
    std::string one_of;     ///< empty: none
    Origin origin;
};

/// Section and material values; kN and m.
struct Section {
    std::string id;
    std::optional<double> E;           ///< kN/m2
    std::optional<double> I;           ///< m4
    std::optional<double> A;           ///< m2
    std::optional<double> depth;       ///< m
    std::optional<double> self_weight; ///< kN/m
    std::optional<double> density;     ///< kN/m3
    Origin origin;

    /// Own weight per length in kN/m: `self_weight`, else density x A, else nothing.
    [[nodiscard]] std::optional<double> weight_per_length() const {
        if (self_weight) {
            return self_weight;
        }
        if (density && A) {
            return *density * *A;
        }
        return std::nullopt;
    }
};

struct BuildLayer {
    std::string name;
    std::optional<double> thickness; ///< m, goes with density
    std::optional<double> density;   ///< kN/m3
    std::optional<double> q;         ///< kN/m2, instead of the two
};

/// A floor's build-up, cited by decks.
struct Build {
    std::string id;
    std::vector<BuildLayer> layers;
    Origin origin;

    /// Sum of the layers, kN/m2.
    [[nodiscard]] double weight_per_area() const {
        double sum = 0;
        for (const BuildLayer& layer : layers) {
            sum += layer.q ? *layer.q : layer.thickness.value_or(0) * layer.density.value_or(0);
        }
        return sum;
    }
};

struct GridLine {
    std::string id;
    Point from, to;
    Origin origin;
};

/// A vertical support. It is a bearing at every level above `base` up to and including `top`.
struct Column {
    std::string id;
    Point at;
    std::string base = "ground"; ///< level id or "ground"
    std::string top;             ///< level id
    std::string section;         ///< empty: none; its own weight counts where `self_weight` is not given
    std::optional<double> E, I, A;
    std::optional<double> self_weight; ///< kN per m of height
    std::optional<BaseFixity> base_fixity;
    Origin origin;
};

struct Wall {
    std::string id;
    Point from, to;
    std::string base = "ground";
    std::string top;
    std::optional<double> self_weight; ///< kN per m2 of wall
    Origin origin;
};

struct Member {
    std::string id;
    Role role = Role::beam;
    bool carries_deck = true;
    bool cut = false;
    bool fixed_from = false; ///< built in at the bearing at its `from` end
    bool fixed_to = false;
    Point from, to;
    std::string section; ///< empty: none
    std::vector<std::string> bears_on;
    std::vector<double> hinges; ///< stations, m
    Origin origin;
};

struct JoistField {
    std::string id;
    Ring outline;
    double direction = 0; ///< degrees counter-clockwise from +x: along the joists
    double spacing = 0;   ///< m, square to `direction`
    double offset = 0;    ///< m
    bool cut = false;
    bool edges = true;
    std::string section;
    Origin origin;
};

/// How two carrying edges of a two-way deck's convex bay divide the corner between them: by halves, or at 60
/// degrees from an edge over which the deck continues and 30 from a simply supported one.
enum class CornerAngles : std::uint8_t { equal, by_fixity };

struct Deck {
    std::string id;
    Ring outline;
    std::vector<Ring> openings;
    SpanKind span = SpanKind::one_way;
    std::optional<double> direction;                  ///< degrees: along the strips; required for one-way
    std::optional<Share> share;                       ///< else the plan's
    std::optional<double> q;                          ///< own weight, kN/m2
    std::string build;                                ///< empty: none
    CornerAngles corner_angles = CornerAngles::equal; ///< two-way decks only
    Origin origin;
};

/// A plane of pressure through three values, kN/m2.
struct PlaneOfLoad {
    std::array<Point, 3> at;
    std::array<double, 3> values;
};

struct AreaLoad {
    std::string case_id;
    double q = 0; ///< kN/m2, where `plane` is not given
    std::optional<PlaneOfLoad> plane;
    Ring outline;                   ///< empty: the decks named, or all
    std::vector<Ring> openings;     ///< holes in the outline: there it does not act, nor replace
    std::vector<std::string> decks; ///< empty: the outline, or all
    bool replaces = false;
    std::string allowance; ///< empty: none
    Origin origin;
};

struct LineLoad {
    std::string case_id;
    double w_from = 0; ///< kN/m
    double w_to = 0;
    Point from, to;
    std::string on; ///< empty: stands on the deck
    Origin origin;
};

struct PointLoad {
    std::string case_id;
    double p = 0; ///< kN
    Point at;
    std::string on;
    Origin origin;
};

struct Level {
    std::string id;
    double elevation = 0; ///< m
    std::string like;     ///< empty: none
    std::vector<Member> members;
    std::vector<JoistField> joist_fields;
    std::vector<Deck> decks;
    std::vector<AreaLoad> area_loads;
    std::vector<LineLoad> line_loads;
    std::vector<PointLoad> point_loads;
    bool own_area_loads = false; ///< the key is there, so its list stands instead of the one of `like`
    bool own_line_loads = false;
    bool own_point_loads = false;
    Origin origin;
};

struct Settings {
    double snap = 0.005;         ///< m
    double ground_elevation = 0; ///< m
    Share share = Share::half;
    std::string self_weight_case; ///< empty: the first case of kind dead
};

/// The whole input: levels, columns, walls, loads; kN and m inside, whatever the document's units were.
struct Plan {
    std::string title;
    Units units; ///< those of the document; output goes out in them
    Settings settings;
    std::vector<LoadCase> cases;
    std::vector<Section> sections;
    std::vector<Build> builds;
    std::vector<GridLine> grid;
    std::vector<Column> columns;
    std::vector<Wall> walls;
    std::vector<Level> levels;
    /// Settings that the document did not give, as "snap", ...: the result lists every default used.
    std::vector<std::string> defaults_used;
};

/// What a plan may ask for at most. Asking for more is the problem `too-much`, found before time is spent.
struct Limits {
    std::size_t text_bytes = std::size_t{2} << 30;
    std::size_t nesting = 32;
    std::size_t members = 5'000'000; ///< of all levels, generated joists and repeated levels included
    std::size_t levels = 1'000;
    std::size_t problems = 10'000; ///< past this many of one code the rest is counted, not listed
};

[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(CaseKind kind) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(Share share) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(Role role) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(SpanKind span) noexcept;

/// A plan and what is wrong with it. The plan holds whatever could be read; use it only without errors.
struct PlanReading {
    Plan plan;
    std::vector<Problem> problems; ///< in the order of the text
    std::string digest;            ///< "sha256:" and lower-case hex of the text's bytes
};

/// Reads a plan (JSON, RFC 8259, UTF-8) and checks all that needs no framing: every problem in one pass, with
/// pointer, line and column. Never throws for what the text says.
[[nodiscard]] RUNNEL_EXPORT PlanReading read_plan(std::string_view text, const Limits& limits = {});

/// The part of read_plan's checking that a plan built in code needs too: ids, references, ranges, rings,
/// limits.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_plan(const Plan& plan, const Limits& limits = {});

enum class Document : std::uint8_t { plan, result, frame };

/// The JSON Schema (2020-12) of a document.
[[nodiscard]] RUNNEL_EXPORT std::string schema_of(Document document);

RUNNEL_NAMESPACE_END
