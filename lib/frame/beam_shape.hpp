#pragma once

#include "frame/beam.hpp"

#include <cstdint>

RUNNEL_NAMESPACE_BEGIN

/// A beam as nodes and elements: the direct-stiffness side of BeamInfluence, used by nothing else.
/// Unknown are the turn at a node that is neither held nor freed, and the deflection at a node without a
/// bearing. Deflections are positive downward and turns positive where the deflection grows with the station,
/// so that the equations are those of any beam.
class BeamNodes {
public:
    static constexpr std::uint32_t absent = 0xffffffff;

    struct Node {
        double station = 0;
        std::uint32_t support = absent;
        bool held = false;  ///< its turn is known
        bool freed = false; ///< both elements end here without moment
        std::uint32_t move_unknown = absent;
        std::uint32_t turn_unknown = absent;
    };
    /// Deflection and turn of an element's two ends.
    struct Ends {
        double move_from = 0, turn_from = 0, move_to = 0, turn_to = 0;
    };

    /// Nothing where a part of the beam can move freely.
    [[nodiscard]] static std::optional<BeamNodes> of(const Beam& beam);

    [[nodiscard]] std::span<const Node> nodes() const noexcept { return nodes_; }

    /// Ends of every element, between nodes i and i + 1, when the node's bearing alone moves down by one.
    [[nodiscard]] std::vector<Ends> move(std::size_t node) const;
    /// The same when it turns by one.
    [[nodiscard]] std::vector<Ends> turn(std::size_t node) const;

private:
    static constexpr std::size_t band =
        4; ///< two unknowns a node, neighbours coupled: the diagonal and three

    [[nodiscard]] bool place_nodes(const Beam& beam);
    void number_unknowns();
    void assemble(const Beam& beam);
    [[nodiscard]] bool factorise();
    [[nodiscard]] std::array<std::array<double, 4>, 4> stiffness_of(std::size_t element) const;
    [[nodiscard]] std::array<std::uint32_t, 4> unknowns_of(std::size_t element) const;
    [[nodiscard]] std::vector<Ends> shape(std::size_t node, bool turned) const;
    void solve(std::vector<double>& right) const;
    [[nodiscard]] Ends ends_of(std::size_t element, std::array<double, 4> known,
                               const std::vector<double>& solution) const;

    std::vector<Node> nodes_;
    std::vector<double> rigidity_;               ///< EI by element
    std::vector<std::array<double, band>> rows_; ///< [0] the diagonal, [k] the entry k places before it
    std::size_t unknowns_ = 0;
};

RUNNEL_NAMESPACE_END
