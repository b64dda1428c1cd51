// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/take_file.h"

#include "audio/promised_size.h"
#include "audio/sample_ring.h"

#include <algorithm>
#include <cerrno>
#include <cstdio>
#include <system_error>
#include <vector>

namespace sinewright::audio {

namespace {

namespace fs = std::filesystem;
using core::ErrorCode;

constexpr const char* kKinds = "WAV, FLAC, AIFF and CAF can be read";

/// libsndfile's own number for an encoding it knows of but does not decode; not among the public ones. Seen in 1.2.0.
constexpr int kUnimplementedEncoding = 18;

core::Error errorOf(std::errc code, const std::string& name, const std::string& reason)
{
    if (code == std::errc::permission_denied) {
        return {ErrorCode::NoPermission,
                name + " may not be read by this user: give yourself read permission on it"};
    }
    if (code == std::errc::no_such_file_or_directory || code == std::errc::not_a_directory) {
        return {ErrorCode::NotFound, name + " does not exist: check the path and the spelling"};
    }
    return {ErrorCode::NotFound, name + " cannot be opened (" + reason + "): try a copy of it"};
}

/// What can be said before anybody looks inside. A pipe is refused here, for opening one may wait for ever.
core::Result<void> checkReadable(const fs::path& file, const std::string& name)
{
    std::error_code failed;
    const fs::file_status status = fs::status(file, failed);
    if (status.type() == fs::file_type::not_found) {
        return tl::unexpected(errorOf(std::errc::no_such_file_or_directory, name, {}));
    }
    if (status.type() == fs::file_type::none) {
        return tl::unexpected(errorOf(std::errc(failed.value()), name, failed.message()));
    }
    if (fs::is_directory(status)) {
        return core::failure(ErrorCode::UnsupportedFormat,
                             name + " is a folder, not a sound file: name a file in it");
    }
    if (!fs::is_regular_file(status)) {
        return core::failure(ErrorCode::UnsupportedFormat,
                             name + " is a device or a pipe, not a sound file: save the samples to "
                                    "a file first");
    }
    errno = 0;
    std::FILE* const probe = std::fopen(file.c_str(), "rb");
    if (probe == nullptr) {
        const std::error_code why(errno, std::generic_category());
        return tl::unexpected(errorOf(std::errc(why.value()), name, why.message()));
    }
    const int firstByte = std::fgetc(probe);
    std::fclose(probe);
    if (firstByte == EOF) {
        return core::failure(ErrorCode::Empty,
                             name + " is an empty file: record or export the take again");
    }
    return {};
}

core::Error openError(const std::string& name)
{
    const int code = sf_error(nullptr);
    if (code == SF_ERR_UNRECOGNISED_FORMAT) {
        return {ErrorCode::UnsupportedFormat,
                name + " is not a sound file, whatever its name says: " + kKinds};
    }
    if (code == SF_ERR_UNSUPPORTED_ENCODING || code == kUnimplementedEncoding) {
        return {ErrorCode::UnsupportedFormat,
                name + " holds samples in an encoding that cannot be read: " + kKinds +
                    ", so export it as one of these"};
    }
    return {ErrorCode::Damaged,
            name + " has a damaged or cut-off header (" + sf_strerror(nullptr) +
                "): record or export the take again"};
}

void describeEncoding(int format, TakeInfo& info)
{
    switch (format & SF_FORMAT_SUBMASK) {
    case SF_FORMAT_PCM_S8:
    case SF_FORMAT_PCM_U8:
        info.bitsPerSample = 8;
        break;
    case SF_FORMAT_PCM_16:
    case SF_FORMAT_ALAC_16:
        info.bitsPerSample = 16;
        break;
    case SF_FORMAT_ALAC_20:
        info.bitsPerSample = 20;
        break;
    case SF_FORMAT_PCM_24:
    case SF_FORMAT_ALAC_24:
        info.bitsPerSample = 24;
        break;
    case SF_FORMAT_PCM_32:
    case SF_FORMAT_ALAC_32:
        info.bitsPerSample = 32;
        break;
    case SF_FORMAT_FLOAT:
        info.bitsPerSample = 32;
        info.isFloat = true;
        break;
    case SF_FORMAT_DOUBLE:
        info.bitsPerSample = 64;
        info.isFloat = true;
        break;
    default:
        break; // a lossy encoding has no such figure
    }
}

/// The last frame must be there: a shortened FLAC file is only found out by going to its end.
bool hasLastFrame(SNDFILE* handle, const SF_INFO& layout)
{
    std::vector<double> frame(static_cast<std::size_t>(layout.channels));
    return sf_seek(handle, layout.frames - 1, SF_SEEK_SET) == layout.frames - 1 &&
           sf_readf_double(handle, frame.data(), 1) == 1 && sf_seek(handle, 0, SF_SEEK_SET) == 0;
}

core::Error cutOff(const std::string& name)
{
    return {ErrorCode::Damaged,
            name + " is cut off: its header promises more sound than it holds; copy or record it "
                   "again"};
}

} // namespace

core::Result<TakeFile> openTake(const fs::path& file)
{
    TakeFile take;
    take.name = "'" + file.string() + "'";
    const std::string& name = take.name;
    if (const auto readable = checkReadable(file, name); !readable) {
        return tl::unexpected(readable.error());
    }
    SF_INFO layout{};
    take.handle.reset(sf_open(file.c_str(), SFM_READ, &layout));
    if (!take.handle) {
        return tl::unexpected(openError(name));
    }
    if (layout.channels > kMostChannels) {
        return core::failure(ErrorCode::UnsupportedFormat,
                             name + " has " + std::to_string(layout.channels) +
                                 " channels, and at most " + std::to_string(kMostChannels) +
                                 " can be read: export fewer of them");
    }
    if (missingSoundBytes(file) > 0) {
        return tl::unexpected(cutOff(name));
    }
    if (layout.frames <= 0) {
        return core::failure(ErrorCode::Empty,
                             name + " has a header but no samples: record or export it again");
    }
    if (layout.seekable != 0 && !hasLastFrame(take.handle.get(), layout)) {
        return tl::unexpected(cutOff(name));
    }
    take.info.rate = core::SampleRate{static_cast<double>(layout.samplerate)};
    take.info.channels = layout.channels;
    take.info.frames = static_cast<std::uint64_t>(layout.frames);
    describeEncoding(layout.format, take.info);
    return take;
}

core::Result<std::size_t> readNext(TakeFile& take, std::span<double> interleaved)
{
    const std::uint64_t fits = interleaved.size() / static_cast<std::size_t>(take.info.channels);
    const std::uint64_t wanted = std::min(fits, take.info.frames - take.nextFrame);
    if (wanted == 0) {
        return std::size_t{0};
    }
    const sf_count_t got =
        sf_readf_double(take.handle.get(), interleaved.data(), static_cast<sf_count_t>(wanted));
    if (got <= 0) {
        return core::failure(ErrorCode::Damaged,
                             take.name + " cannot be read past frame " +
                                 std::to_string(take.nextFrame) + " of " +
                                 std::to_string(take.info.frames) + ": copy or record it again");
    }
    take.nextFrame += static_cast<std::uint64_t>(got);
    return static_cast<std::size_t>(got);
}

core::Error notFinite(const TakeFile& take, std::uint64_t frame, int channel)
{
    return {ErrorCode::Damaged,
            take.name + " holds a sample that is no number (frame " + std::to_string(frame) +
                ", channel " + std::to_string(channel) +
                "): export it again, or read a stretch without it"};
}

} // namespace sinewright::audio
