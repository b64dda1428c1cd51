// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/demo.h"
#include "core/oscillator/hum_tone.h"
#include "core/oscillator/lamp_oscillator.h"
#include "core/oscillator/seeded_noise.h"

#include <span>

namespace sinewright::audio {

/// The oscillator, the hum its cable picks up, and the converter at the far end, as one stream of samples.
///
/// @thread one.   @realtime render() neither allocates nor locks.
class VirtualBench final
{
public:
    /// @param trimmerOhm  where the trimmer stands at the start.
    VirtualBench(const DemoSettings& settings, double trimmerOhm);

    /// The next samples, 1.0 = full scale and never beyond, while a hand turns the trimmer towards `wantedOhm`
    /// [ohm] > 0 as fast as a hand can: a knob that jumps would throw the loop into a bounce no real bench shows.
    void render(double wantedOhm, std::span<double> samples) noexcept;

    [[nodiscard]] double trimmerOhm() const noexcept { return m_trimmerOhm; }

private:
    // constant after construction
    double m_rateHz;
    double m_perVolt;
    double m_noiseRms;
    // moves with the samples
    double m_trimmerOhm;
    core::LampOscillator m_oscillator;
    core::HumTone m_hum;
    core::SeededNoise m_noise;
};

} // namespace sinewright::audio
