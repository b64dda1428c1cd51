// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "core/measure/line_fit.h"

namespace sinewright::core {

/// The averaged cycle of a stretch and what is left of it without the fundamental.
///
/// Averaging a long stretch in phase keeps what repeats with the fundamental, that is its harmonics, up to 127 of them
/// as far as half the rate allows; they are summed over one cycle, so that no phase is left empty however the rate and
/// the tone are related.
///
/// @param model  fitted to `transform`; its harmonics are used as they are, higher ones are read from the transform.
[[nodiscard]] CycleView cycleOf(const StretchTransform& transform, const ToneModel& model);

} // namespace sinewright::core
