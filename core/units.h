// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <compare>

namespace sinewright::core {

/// A frequency. Explicit, so that a frequency is never taken for a level or a rate.
struct Hertz
{
    double value = 0.0;
    friend constexpr auto operator<=>(const Hertz&, const Hertz&) = default;
};

/// Frames per second of a stream. Any positive value; audio interfaces give 44100 to 192000.
struct SampleRate
{
    double hz = 0.0;
    [[nodiscard]] constexpr Hertz nyquist() const { return Hertz{hz / 2.0}; }
    friend constexpr auto operator<=>(const SampleRate&, const SampleRate&) = default;
};

/// 20 log10 of an amplitude ratio; minus infinity for 0.
[[nodiscard]] double decibelsFromRatio(double ratio);

/// Inverse of decibelsFromRatio().
[[nodiscard]] double ratioFromDecibels(double decibels);

/// Level in dBFS of a tone or residual of the given rms, full scale being 1.0 peak.
///
/// 0 dBFS is the rms of a sine whose peaks just reach full scale.
/// @source AES17, from memory.
[[nodiscard]] double dbfsFromRms(double rms);

/// Rms of full scale 1.0 at a level in dBFS; inverse of dbfsFromRms().
[[nodiscard]] double rmsFromDbfs(double dbfs);

} // namespace sinewright::core
