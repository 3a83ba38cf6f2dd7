#pragma once

#include "report/json_writer.hpp"
#include "report/names.hpp"
#include "report/scale.hpp"

#include <runnel/takedown.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Writes the parts of a result document in their order. Holds what all of them need: names, units, the
/// writer, and workspaces that are used again from carrier to carrier.
class ResultWriter {
public:
    ResultWriter(const Takedown& takedown, const ReportOptions& options, const TextSink& sink);

    void write(std::span<const Problem> reading_problems);

private:
    // The document's head.
    void program_and_input();
    void units_and_conventions();
    void settings();
    void cautions_and_problems(std::span<const Problem> reading_problems);

    // Sums.
    void uplift();
    void balances(std::span<const Balance> balances, bool per_area);

    // Levels.
    void levels();
    void level(std::uint32_t level);
    void decks(std::uint32_t level);
    void regions(std::uint32_t level);
    void members(std::uint32_t level);
    void member(std::uint32_t level, std::uint32_t member);
    void bearings(std::uint32_t level, std::uint32_t member);
    void loads(std::uint32_t level, std::uint32_t member);
    void spans(std::uint32_t level, std::uint32_t member);

    // Vertical supports.
    void columns();
    void lift(const Lift& lift);
    void walls();
    void wall_lines_and_points(const WallLift& lift);
    void foundations();

    // The comparison of shares.
    void shares(const ShareComparison& shares);
    void compared(const ShareComparison& shares, std::size_t run, const ComparedCarrier& carrier);
    void values_and_percent(const ShareComparison& shares, std::size_t run, const ComparedCarrier& carrier,
                            ComparedValues values, std::string_view key);

    // Shared by all.
    void by_case(std::span<const double> values, double scale);
    /// from, to, start, end and, where it is not linear, curve.
    void line_piece(const LinePiece& piece);
    void point(Point point);
    void moment(Point moment);
    [[nodiscard]] std::string_view case_id(std::uint32_t load_case) const {
        return takedown_.plan.cases[load_case].id;
    }

    const Takedown& takedown_;
    const ReportOptions& options_;
    Scale scale_;
    Names names_;
    JsonWriter json_;
    double noise_ = 0;                           ///< m, of stations
    std::vector<std::vector<LinePiece>> pieces_; ///< by case
};

RUNNEL_NAMESPACE_END
