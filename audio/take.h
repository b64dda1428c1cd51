// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"

#include <cstdint>
#include <filesystem>
#include <memory>
#include <vector>

namespace sinewright::audio {

/// What a take on disk holds.
struct TakeInfo
{
    core::SampleRate rate;
    int channels = 0;
    std::uint64_t frames = 0;
    int bitsPerSample = 0; ///< of integer formats 16, 24 or 32; of float formats 32 or 64
    bool isFloat = false;
};

/// @error NotFound, NoPermission, UnsupportedFormat, Empty, Damaged; the detail names the file and what to try.
[[nodiscard]] core::Result<TakeInfo> takeInfo(const std::filesystem::path& file);

/// One channel of a stretch of a take, 1.0 = full scale, in double precision.
///
/// @param channel     from 1.
/// @param startFrame  first frame; past the end is InvalidArgument.
/// @param frames      at most this many; fewer when the take ends before.
/// @error as takeInfo(); InvalidArgument for a channel that is not there; Damaged for samples that are not finite.
[[nodiscard]] core::Result<std::vector<double>> readTake(const std::filesystem::path& file,
                                                         int channel,
                                                         std::uint64_t startFrame,
                                                         std::uint64_t frames);

/// Plays a take into the ring at its own pace, once.
[[nodiscard]] std::unique_ptr<Source> makeTakeSource(std::filesystem::path file);

} // namespace sinewright::audio
