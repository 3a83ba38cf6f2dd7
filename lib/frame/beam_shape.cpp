#include "frame/beam_shape.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr double epsilon = std::numeric_limits<double>::epsilon();

/// Stations closer than this part of the length are one: they differ by rounding only.
constexpr double same_station = 64 * epsilon;

/// A pivot that elimination makes this small beside the diagonal it came from has lost half of its digits:
/// what is left is rounding, and the part moves freely. Sound beams stay above the ratio of their shortest to
/// longest part.
const double least_pivot = std::sqrt(epsilon);

} // namespace

std::optional<BeamNodes> BeamNodes::of(const Beam& beam) {
    BeamNodes nodes;
    if (!nodes.place_nodes(beam)) {
        return std::nullopt;
    }
    nodes.number_unknowns();
    nodes.assemble(beam);
    if (!nodes.factorise()) {
        return std::nullopt;
    }
    return nodes;
}

/// Nodes from the first bearing to the last: what lies beyond is straight while it bears no load. False where
/// a hinge leaves an end free, or bearings are missing or coincide.
bool BeamNodes::place_nodes(const Beam& beam) {
    if (beam.supports.empty()) {
        return false;
    }
    const double noise = same_station * beam.length;
    for (std::size_t i = 0; i < beam.supports.size(); ++i) {
        Node node;
        node.station = beam.supports[i].station;
        node.support = static_cast<std::uint32_t>(i);
        node.held = beam.supports[i].turn_held;
        if (!nodes_.empty() && !(node.station - nodes_.back().station > noise)) {
            return false;
        }
        nodes_.push_back(node);
    }
    const double first = nodes_.front().station;
    const double last = nodes_.back().station;
    const auto node_at = [&](double station) {
        return std::find_if(nodes_.begin(), nodes_.end(),
                            [&](const Node& node) { return std::abs(node.station - station) <= noise; });
    };
    const auto add_inner = [&](double station, bool freed) {
        const auto found = node_at(station);
        if (found != nodes_.end()) {
            found->freed = found->freed || freed;
        } else {
            Node node;
            node.station = station;
            node.freed = freed;
            const auto place = std::find_if(nodes_.begin(), nodes_.end(),
                                            [&](const Node& n) { return n.station > station; });
            nodes_.insert(place, node);
        }
    };
    for (const double hinge : beam.hinges) {
        const bool at_free_end = hinge <= noise || hinge >= beam.length - noise;
        const bool parts_an_end = (hinge <= first + noise && first > noise) ||
                                  (hinge >= last - noise && last < beam.length - noise);
        if (parts_an_end && !at_free_end) {
            return false;
        }
        if (hinge >= first - noise && hinge <= last + noise) {
            add_inner(hinge, true);
        }
    }
    for (const BeamStiffness& step : beam.stiffness) {
        if (step.from > first + noise && step.from < last - noise) {
            add_inner(step.from, false);
        }
    }
    for (Node& node : nodes_) {
        node.held = node.held && !node.freed;
    }
    return true;
}

void BeamNodes::number_unknowns() {
    std::uint32_t next = 0;
    for (std::size_t i = 0; i < nodes_.size(); ++i) {
        Node& node = nodes_[i];
        const bool at_end = i == 0 || i + 1 == nodes_.size();
        // The end of the beam, or an overhang, puts no moment on the first and the last bearing.
        node.freed = node.freed || (at_end && !node.held && nodes_.size() > 1);
        if (node.support == absent) {
            node.move_unknown = next++;
        }
        if (!node.held && !node.freed) {
            node.turn_unknown = next++;
        }
    }
    unknowns_ = next;
}

/// Stiffness of an element in the order of Ends; ends freed of moment are condensed.
std::array<std::array<double, 4>, 4> BeamNodes::stiffness_of(std::size_t element) const {
    const Node& a = nodes_[element];
    const Node& b = nodes_[element + 1];
    const double l = b.station - a.station;
    const double k = rigidity_[element] / (l * l * l);
    if (a.freed && b.freed) {
        return {};
    }
    if (a.freed) {
        return {{{3 * k, 0, -3 * k, 3 * k * l},
                 {0, 0, 0, 0},
                 {-3 * k, 0, 3 * k, -3 * k * l},
                 {3 * k * l, 0, -3 * k * l, 3 * k * l * l}}};
    }
    if (b.freed) {
        return {{{3 * k, 3 * k * l, -3 * k, 0},
                 {3 * k * l, 3 * k * l * l, -3 * k * l, 0},
                 {-3 * k, -3 * k * l, 3 * k, 0},
                 {0, 0, 0, 0}}};
    }
    return {{{12 * k, 6 * k * l, -12 * k, 6 * k * l},
             {6 * k * l, 4 * k * l * l, -6 * k * l, 2 * k * l * l},
             {-12 * k, -6 * k * l, 12 * k, -6 * k * l},
             {6 * k * l, 2 * k * l * l, -6 * k * l, 4 * k * l * l}}};
}

std::array<std::uint32_t, 4> BeamNodes::unknowns_of(std::size_t element) const {
    const Node& a = nodes_[element];
    const Node& b = nodes_[element + 1];
    return {a.move_unknown, a.turn_unknown, b.move_unknown, b.turn_unknown};
}

void BeamNodes::assemble(const Beam& beam) {
    rows_.assign(unknowns_, {});
    for (std::size_t e = 0; e + 1 < nodes_.size(); ++e) {
        const double middle = (nodes_[e].station + nodes_[e + 1].station) / 2;
        double rigidity = 1;
        for (const BeamStiffness& step : beam.stiffness) {
            rigidity = step.from <= middle ? step.EI : rigidity;
        }
        rigidity_.push_back(rigidity);
        const auto stiffness = stiffness_of(e);
        const auto unknowns = unknowns_of(e);
        for (std::size_t i = 0; i < 4; ++i) {
            for (std::size_t j = 0; j < 4; ++j) {
                if (unknowns[i] != absent && unknowns[j] != absent && unknowns[j] <= unknowns[i]) {
                    rows_[unknowns[i]][unknowns[i] - unknowns[j]] += stiffness[i][j];
                }
            }
        }
    }
}

/// L D L^T in the band, without exchange of rows: the matrix is symmetric and, for a beam that stands,
/// positive.
bool BeamNodes::factorise() {
    for (std::size_t i = 0; i < unknowns_; ++i) {
        const double before = rows_[i][0];
        const std::size_t reach = std::min(i, band - 1);
        for (std::size_t k = reach; k >= 1; --k) {
            const std::size_t j = i - k;
            // rows_[i][k] holds L(i, j) D(j) until the row is done.
            for (std::size_t m = k + 1; m <= reach && m - k < band; ++m) {
                rows_[i][k] -= rows_[i][m] * rows_[j][m - k];
            }
        }
        for (std::size_t k = 1; k <= reach; ++k) {
            const double product = rows_[i][k];
            rows_[i][k] = product / rows_[i - k][0];
            rows_[i][0] -= product * rows_[i][k];
        }
        if (!(rows_[i][0] > least_pivot * before)) {
            return false;
        }
    }
    return nodes_.size() > 1 || nodes_.front().held;
}

void BeamNodes::solve(std::vector<double>& right) const {
    for (std::size_t i = 0; i < unknowns_; ++i) {
        for (std::size_t k = 1; k <= std::min(i, band - 1); ++k) {
            right[i] -= rows_[i][k] * right[i - k];
        }
    }
    for (std::size_t i = 0; i < unknowns_; ++i) {
        right[i] /= rows_[i][0];
    }
    for (std::size_t i = unknowns_; i-- > 0;) {
        for (std::size_t k = 1; k <= std::min(i, band - 1); ++k) {
            right[i - k] -= rows_[i][k] * right[i];
        }
    }
}

/// Known and found values of an element's ends; a freed end turns as the straight or bent element makes it.
BeamNodes::Ends BeamNodes::ends_of(std::size_t element, std::array<double, 4> known,
                                   const std::vector<double>& solution) const {
    const auto unknowns = unknowns_of(element);
    for (std::size_t i = 0; i < 4; ++i) {
        known[i] = unknowns[i] == absent ? known[i] : solution[unknowns[i]];
    }
    const Node& a = nodes_[element];
    const Node& b = nodes_[element + 1];
    Ends ends{known[0], known[1], known[2], known[3]};
    const double chord = (ends.move_to - ends.move_from) / (b.station - a.station);
    if (a.freed && b.freed) {
        ends.turn_from = chord;
        ends.turn_to = chord;
    } else if (a.freed) {
        ends.turn_from = (3 * chord - ends.turn_to) / 2;
    } else if (b.freed) {
        ends.turn_to = (3 * chord - ends.turn_from) / 2;
    }
    return ends;
}

std::vector<BeamNodes::Ends> BeamNodes::shape(std::size_t node, bool turned) const {
    const std::size_t elements = nodes_.size() - 1;
    const auto known_of = [&](std::size_t element) {
        std::array<double, 4> known{};
        if (element == node) {
            known[turned ? 1 : 0] = 1;
        } else if (element + 1 == node) {
            known[turned ? 3 : 2] = 1;
        }
        return known;
    };
    std::vector<double> right(unknowns_, 0.0);
    for (std::size_t e = node == 0 ? 0 : node - 1; e < std::min(node + 1, elements); ++e) {
        const auto stiffness = stiffness_of(e);
        const auto unknowns = unknowns_of(e);
        const auto known = known_of(e);
        for (std::size_t i = 0; i < 4; ++i) {
            for (std::size_t j = 0; j < 4; ++j) {
                if (unknowns[i] != absent && unknowns[j] == absent) {
                    right[unknowns[i]] -= stiffness[i][j] * known[j];
                }
            }
        }
    }
    solve(right);
    std::vector<Ends> ends;
    ends.reserve(elements);
    for (std::size_t e = 0; e < elements; ++e) {
        ends.push_back(ends_of(e, known_of(e), right));
    }
    return ends;
}

std::vector<BeamNodes::Ends> BeamNodes::move(std::size_t node) const {
    return shape(node, false);
}

std::vector<BeamNodes::Ends> BeamNodes::turn(std::size_t node) const {
    return shape(node, true);
}

RUNNEL_NAMESPACE_END
