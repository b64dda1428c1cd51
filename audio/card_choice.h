// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/card.h"

#include <span>
#include <string>
#include <vector>

namespace sinewright::audio {

/// An input as PortAudio lists it.
struct CardInput
{
    int device = -1; ///< PortAudio's number, good within one session
    std::string hostApi;
    std::string name;
    int channels = 0;
    double defaultRateHz = 0.0;
    bool isDefault = false;          ///< of the whole system
    bool isDefaultOfHostApi = false; ///< among those of its host API
};

/// `name (host API)`: what messages call an input, and what finds it again without doubt.
[[nodiscard]] std::string labelOf(const CardInput& input);

/// The one input a choice means. Pure.
///
/// An exact name or label wins, then one that differs in case alone, then the only one that has the words in it.
/// @error NotFound         nothing fits; the detail lists what there is.
/// @error InvalidArgument  several fit; the detail lists them.
/// @error DeviceFailed     there is no input at all.
[[nodiscard]] core::Result<CardInput> chooseInput(std::span<const CardInput> inputs,
                                                  const CardChoice& choice);

/// How many channels a choice opens. Pure.
/// @error InvalidArgument  more than the input has, or than a ring takes.
[[nodiscard]] core::Result<int> chooseChannels(const CardInput& input, const CardChoice& choice);

} // namespace sinewright::audio
