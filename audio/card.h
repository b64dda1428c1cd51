// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"

#include <memory>
#include <string>
#include <vector>

namespace sinewright::audio {

/// One input of an audio interface as the system offers it.
struct CardInfo
{
    std::string hostApi;
    std::string name;
    int inputChannels = 0;
    double defaultRateHz = 0.0;
    std::vector<double> ratesHz; ///< of 44.1, 48, 88.2, 96, 176.4, 192 kHz those it accepts
    bool isDefault = false;
};

/// The interfaces that can be captured from. May take seconds; [dev].
[[nodiscard]] core::Result<std::vector<CardInfo>> listCards();

/// Which input to open.
struct CardChoice
{
    std::string hostApi; ///< empty: any
    std::string
        name; ///< exact name or an unambiguous part of it, case ignored; empty: the default input
    double rateHz = 0.0; ///< 0: the card's default
    int channels = 0;    ///< how many to open; 0: two where there are two
};

/// Capture through PortAudio as 32-bit float, without clipping or dither on the way.
///
/// A stream that stops delivering is noticed within a second; tend() then closes it, looks for the device by name and
/// goes on when it is back, with the outage marked as a gap.
[[nodiscard]] std::unique_ptr<Source> makeCardSource(CardChoice choice);

} // namespace sinewright::audio
