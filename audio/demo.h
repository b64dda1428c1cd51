// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"
#include "core/oscillator/lamp_oscillator.h"

#include <atomic>
#include <cstddef>
#include <cstdint>
#include <memory>
#include <vector>

namespace sinewright::audio {

/// The virtual bench: oscillator, what the cable picks up, and the interface it goes into. Invented values.
struct DemoSettings
{
    core::LampOscillatorParts parts;
    core::SampleRate rate{96000.0};
    double trimmerOhm = 355.0;          ///< for renderDemo(); the source goes by its knob
    double fullScaleVrms = 4.0;         ///< [V] rms of a full-scale sine at the interface's input
    double interfaceNoiseDbfs = -112.0; ///< rms, white over the whole rate's band
    double humAtOutputVrms = 0.0;       ///< [V] added behind the oscillator
    double warmUpSpeedUp = 1.0;         ///< the enclosure warms this much faster than in life
    bool startsCold = false;            ///< switch-on transient instead of a settled start
    std::uint64_t seed = 1;
};

/// The knob that the window turns while the demo runs. Any thread; wait-free.
struct DemoTrimmer
{
    std::atomic<double> ohm{355.0};
};

/// What the trimmer's travel covers [ohm].
inline constexpr double kDemoTrimmerLowestOhm = 226.0;
inline constexpr double kDemoTrimmerHighestOhm = 480.0;

/// The virtual bench as a source: one channel, paced like a card.
///
/// It starts anew, with the trimmer where the knob stands, at every start(). `trimmer` is read block by block and
/// followed as fast as a hand can turn.
///
/// @param trimmer  not null; its ohms > 0.
/// @error open(): InvalidArgument for a rate outside 44.1 to 768 kHz.
[[nodiscard]] std::unique_ptr<Source> makeDemoSource(const DemoSettings& settings,
                                                     std::shared_ptr<const DemoTrimmer> trimmer);

/// `frames` samples of the demo, 1.0 = full scale, as fast as they can be made; for the command line and for tests.
/// At least the first `settleS` [s] >= 0 are thrown away.
[[nodiscard]] std::vector<double>
renderDemo(const DemoSettings& settings, double settleS, std::size_t frames);

} // namespace sinewright::audio
