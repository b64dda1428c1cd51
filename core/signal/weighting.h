// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"

namespace sinewright::core {

/// Amplitude factor of a weighting at a frequency, 1 at 1 kHz.
///
/// A: from the pole frequencies of the standard's analytic form, exact, not the rounded ones. 468: from the rational
/// form of the recommendation's network, brought to 0 dB at 1 kHz (as published it is 0.039 dB low there).
///
/// @param frequencyHz  [Hz] >= 0.
/// @source  A: IEC 61672-1:2013, Annex E, from memory; 468: Rec. ITU-R BS.468-4, Annex 1; rational form from public
///          copies.
[[nodiscard]] double weightingFactor(Weighting weighting, double frequencyHz);

} // namespace sinewright::core
