#pragma once

#include "frame/beam.hpp"

#include <runnel/takedown.hpp>

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Adds the spans and overhangs of a member, by rising station, as a group. A bearing within `snap` of an end
/// leaves no overhang there.
void push_spans(const FramedMember& member, std::span<const Bearing> bearings, double snap,
                Grouped<Span>& spans);

/// The span that a point load counts with: over a bearing (within `noise`) the one that begins there, over
/// the last bearing the one that ends there.
[[nodiscard]] std::uint32_t span_at(std::span<const Span> spans, double last_bearing, double station,
                                    double noise);

/// True where the held moment of bearing b is that of the `to` end: positive for a cantilever of falling
/// stations.
[[nodiscard]] bool holds_falling(const FramedMember& member, std::span<const Bearing> bearings,
                                 std::size_t b);

/// How many reactions and held moments statics alone does not give; negative for a mechanism.
[[nodiscard]] int degree_of_indeterminacy(const FramedMember& member, std::span<const Bearing> bearings,
                                          double snap);

/// Works out one member after the other with the same workspace. A member on two bearings, neither hinged nor
/// built in, is plain statics (the lever rule); any other goes to the beam analyser.
class MemberPath {
public:
    MemberPath(double noise, double snap) : noise_(noise), snap_(snap) {}

    /// Load columns by rising case, span and source, and their reactions. False: the member cannot stand.
    [[nodiscard]] bool work_out(const FramedMember& member, std::span<const Bearing> bearings,
                                std::span<const Span> spans, std::span<const CarrierLine> lines,
                                std::span<const CarrierPoint> points);

    [[nodiscard]] std::span<const ReactionColumn> columns() const noexcept { return columns_; }
    /// Columns x bearings, row-major, kN.
    [[nodiscard]] std::span<const double> reactions() const noexcept { return reactions_; }
    /// The same of held moments, kNm, as BeamInfluence has them; empty where no bearing is built in.
    [[nodiscard]] std::span<const double> moments() const noexcept { return moments_; }

private:
    /// A load, or the part of it on one span.
    struct Part {
        ReactionColumn column;
        std::uint32_t index = 0; ///< of the load in its list
        bool is_point = false;
        double from = 0, to = 0; ///< the part of a line
    };

    void cut_at_spans(std::span<const Span> spans, double last_bearing, std::span<const CarrierLine> lines,
                      std::span<const CarrierPoint> points);
    void add_lever(std::span<const Bearing> bearings, std::span<const CarrierLine> lines,
                   std::span<const CarrierPoint> points);
    void add_influence(std::size_t bearings, std::span<const CarrierLine> lines,
                       std::span<const CarrierPoint> points);
    [[nodiscard]] bool prepare_influence(const FramedMember& member, std::span<const Bearing> bearings);
    /// Opens a new column where the part's is another than the last; returns its number.
    std::size_t column_for(const Part& part, std::size_t bearings, bool held);

    double noise_;
    double snap_;
    std::vector<Part> parts_;
    std::vector<ReactionColumn> columns_;
    std::vector<double> reactions_;
    std::vector<double> moments_;
    Beam beam_; ///< that influence_ was worked out for: the joists of a field are often alike
    std::optional<BeamInfluence> influence_;
};

RUNNEL_NAMESPACE_END
