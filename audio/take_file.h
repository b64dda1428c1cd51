// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/take.h"

#include <cstdint>
#include <memory>
#include <span>
#include <string>

#include <sndfile.h>

namespace sinewright::audio {

struct TakeCloser
{
    void operator()(SNDFILE* handle) const { sf_close(handle); }
};

/// An open take that has been looked at: whole, at most kMostChannels wide, not without samples.
struct TakeFile
{
    std::unique_ptr<SNDFILE, TakeCloser> handle;
    TakeInfo info;
    std::string name;            ///< `'path'`, the way every message names the file
    std::uint64_t nextFrame = 0; ///< where the handle stands
};

/// Stands at frame 0. @error as takeInfo().
[[nodiscard]] core::Result<TakeFile> openTake(const std::filesystem::path& file);

/// The next frames of all channels, as many as fit into `interleaved` or are left.
///
/// @return how many frames; 0 at the end.
/// @error Damaged when the file gives fewer than it promised.
[[nodiscard]] core::Result<std::size_t> readNext(TakeFile& take, std::span<double> interleaved);

/// Says that a sample is no number. `channel` from 1.
[[nodiscard]] core::Error notFinite(const TakeFile& take, std::uint64_t frame, int channel);

} // namespace sinewright::audio
