// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

namespace sinewright::app {

// What is taken from the command line and from the settings file before anything is opened; a source may hold less.
inline constexpr double kLowestRateHz = 8000.0;
inline constexpr double kHighestRateHz = 768000.0;
inline constexpr double kHighestBandHz = kHighestRateHz / 2.0;
inline constexpr int kHighestChannel = 1024;
inline constexpr int kLowestHarmonicCount = 2;
inline constexpr int kHighestHarmonicCount = 32;
inline constexpr double kLowestFullScaleVrms = 1e-6;
inline constexpr double kHighestFullScaleVrms = 1e6;
inline constexpr int kLargestPictureScale = 2;

} // namespace sinewright::app
