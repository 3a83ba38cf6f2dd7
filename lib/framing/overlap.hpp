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

RUNNEL_NAMESPACE_END
