// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/oscillator/amplifier_step.h"
#include "core/oscillator/decimator.h"
#include "core/oscillator/hum_tone.h"
#include "core/oscillator/lamp_loop.h"
#include "core/oscillator/seeded_noise.h"
#include "core/oscillator/wien_network.h"
#include "core/units.h"

#include <array>
#include <cstddef>
#include <cstdint>
#include <span>

namespace sinewright::core {

/// The lamp-stabilised oscillator, sample by sample.
///
/// The two capacitor states turn by an exact rotation with the residual injected by a first-order hold, so that a free
/// oscillation neither grows nor decays by rounding; the amplifier is one implicit equation a step, solved by a
/// bracketed Newton iteration; the filament's temperature follows by a second-order Adams-Bashforth step. Below
/// 176.4 kHz several steps make a sample, behind a low-pass as in a converter, so that the same build reads the same at
/// every rate and its harmonics do not fold back.
///
/// Other parts: make a new oscillator.
///
/// @thread    one; not synchronised.   @realtime  run() neither allocates nor locks.
/// @accuracy  at 192 kHz against a run in steps eight times finer: level 5e-4 above 0.9 V, THD 2.5 % relative
///            (tst_lamp_oscillator); nearer to the threshold the level is the more sensitive, 0.5 % at 0.33 V.
/// @source    Exponential time differencing: Cox and Matthews 2002, from memory.
class LampOscillator final
{
public:
    /// @param rate  samples per second of the output, 44.1 kHz and up.
    /// @param seed  of the noise; the same seed gives the same samples.
    LampOscillator(const LampOscillatorParts& parts, SampleRate rate, std::uint64_t seed);

    /// Puts the loop on the settled orbit of the linear amplifier at this trimmer, the enclosure cold.
    void startSettled(double trimmerOhm);

    /// Cold lamp, empty capacitors but for a trace of noise: switch-on.
    void startCold(double trimmerOhm);

    /// Fills `volts` with the next samples of the output [V] while the trimmer moves evenly from where it stood to
    /// `trimmerOhm` [ohm] > 0.
    /// @param volts  at least one.
    void run(double trimmerOhm, std::span<double> volts) noexcept;

private:
    static constexpr std::size_t kMostStepsPerRefresh = 64;

    struct State
    {
        double seriesVolt = 0.0;   // on the series arm's capacitor
        double shuntVolt = 0.0;    // on the shunt arm's capacitor, the amplifier's + input
        double residualVolt = 0.0; // output less gain times shuntVolt
        AmplifierStep::Solution amplifier{0.0, 0.0};
        double filamentKelvin = 0.0;
        double filamentWatt = 0.0;
    };

    /// Lamp resistance about a temperature: a parabola that serves until the next refresh.
    struct LampSeries
    {
        double kelvin = 0.0;
        double ohm = 0.0;
        double slope = 0.0;
        double halfCurvature = 0.0;
    };

    void start(const State& state, double trimmerOhm);
    void refresh() noexcept;
    void warmUp() noexcept;
    void advance(std::span<double> volts, double fromOhm, double ohmPerStep) noexcept;
    [[nodiscard]] double inputDisturbanceVolt() noexcept;

    // constant after construction
    LampOscillatorParts m_parts;
    std::size_t m_stepsPerSample;
    double m_stepS;
    std::size_t m_samplesPerRefresh; // as many as keep within kMostStepsPerRefresh
    AmplifierStep m_amplifier;
    double m_noiseVolt; // rms in a step
    double m_jitterMemory;
    double m_jitterDrive;

    // moves with the samples
    State m_state;
    double m_trimmerOhm = 0.0;
    WienStep m_network;
    LampSeries m_lamp;
    double m_ambientKelvin;
    double m_jitterRatio = 0.0;
    std::size_t m_samplesToRefresh = 0;
    std::uint64_t m_refreshes = 0;
    SeededNoise m_noise;
    HumTone m_hum;
    Decimator m_decimator;
    std::array<double, kMostStepsPerRefresh> m_steps{};
};

} // namespace sinewright::core
