#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Reports pairs of decks that share area wider than `snap`.
void refuse_overlaps(LevelDraft& draft);

/// What two areas share.
struct SharedArea {
    double area = 0;   ///< m2
    double around = 0; ///< length of its border, m
    Point at;          ///< the middle of its largest piece
};

/// An area with openings, as convex pieces between neighbouring levels of y.
class ConvexPieces {
public:
    /// `rings`: outline and openings, either way round. Only what lies between y_min and y_max is kept.
    ConvexPieces(const std::vector<Ring>& rings, double y_min, double y_max);

    [[nodiscard]] const std::vector<Ring>& pieces() const { return pieces_; }

private:
    std::vector<Ring> pieces_;
};

/// The part of a convex ring that lies in another; both counter-clockwise (Sutherland and Hodgman 1974).
[[nodiscard]] Ring clip_convex(const Ring& subject, const Ring& clip);

RUNNEL_NAMESPACE_END
