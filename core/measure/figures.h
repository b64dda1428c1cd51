// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/envelope.h"
#include "core/measure/line_fit.h"
#include "core/measure/reading.h"
#include "core/measure/residual_spectrum.h"

namespace sinewright::core {

/// What is known of a stretch when its figures are written.
struct ToneFindings
{
    double lengthS = 0.0;
    MeasureSettings settings; ///< band limited to half the rate, harmonic count within its range
    const ToneModel& model;
    const Envelope& envelope;
    const ResidualSpectrum& residual;
    double phasorNoise = 0.0; ///< see StretchWorkspace::phasorNoise()
};

/// Writes frequency, level, harmonics, distortion, noise and hum, and the warnings that go with them.
void writeFigures(const ToneFindings& findings, Reading& reading);

} // namespace sinewright::core
