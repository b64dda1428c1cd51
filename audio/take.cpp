// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/take.h"

#include "audio/take_file.h"

#include <algorithm>
#include <cmath>
#include <string>

namespace sinewright::audio {

namespace {

using core::ErrorCode;

constexpr std::uint64_t kChunkFrames = 4096;

core::Result<void> goTo(TakeFile& take, int channel, std::uint64_t startFrame)
{
    const TakeInfo& info = take.info;
    if (channel < 1 || channel > info.channels) {
        return core::failure(ErrorCode::InvalidArgument,
                             take.name + " has no channel " + std::to_string(channel) + ": " +
                                 (info.channels == 1
                                      ? "it has one, so choose 1"
                                      : "choose one from 1 to " + std::to_string(info.channels)));
    }
    if (startFrame >= info.frames) {
        return core::failure(ErrorCode::InvalidArgument,
                             take.name + " ends before the start asked for: it has " +
                                 std::to_string(info.frames) + " frames at " +
                                 std::to_string(std::lround(info.rate.hz)) +
                                 " Hz, so choose an earlier start");
    }
    if (startFrame > 0 &&
        sf_seek(take.handle.get(), static_cast<sf_count_t>(startFrame), SEEK_SET) < 0) {
        return core::failure(ErrorCode::Damaged,
                             take.name + " cannot be read from the start asked for: start at 0");
    }
    take.nextFrame = startFrame;
    return {};
}

} // namespace

core::Result<TakeInfo> takeInfo(const std::filesystem::path& file)
{
    return openTake(file).map([](const TakeFile& take) { return take.info; });
}

core::Result<std::vector<double>> readTake(const std::filesystem::path& file,
                                           int channel,
                                           std::uint64_t startFrame,
                                           std::uint64_t frames)
{
    auto take = openTake(file);
    if (!take) {
        return tl::unexpected(take.error());
    }
    if (const auto there = goTo(*take, channel, startFrame); !there) {
        return tl::unexpected(there.error());
    }
    const auto stride = static_cast<std::size_t>(take->info.channels);
    const std::uint64_t wanted = std::min(frames, take->info.frames - startFrame);
    std::vector<double> interleaved(kChunkFrames * stride);
    std::vector<double> samples;
    samples.reserve(wanted);
    while (samples.size() < wanted) {
        const auto got = readNext(*take, interleaved);
        if (!got) {
            return tl::unexpected(got.error());
        }
        const auto used = std::min<std::uint64_t>(*got, wanted - samples.size());
        for (std::size_t i = 0; i < used; ++i) {
            const double sample = interleaved[i * stride + static_cast<std::size_t>(channel - 1)];
            if (!std::isfinite(sample)) {
                return tl::unexpected(notFinite(*take, startFrame + samples.size(), channel));
            }
            samples.push_back(sample);
        }
    }
    return samples;
}

} // namespace sinewright::audio
