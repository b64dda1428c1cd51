// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstdint>
#include <filesystem>

namespace sinewright::audio {

/// How many bytes of sound a WAV or AIFF file promises in its header but does not hold.
///
/// libsndfile takes such a file for a shorter one without a word; a recording cut off by a full disk or a broken copy
/// must not pass for a whole one.
///
/// @return 0 for a whole file, for any other kind of file, and where the header promises nothing: a writer that could
///         not go back to fill in the size leaves it open.
/// @source Chunk layout: RIFF (IBM and Microsoft 1991), RF64 (EBU Tech 3306), AIFF (Apple 1989); all from memory.
[[nodiscard]] std::uint64_t missingSoundBytes(const std::filesystem::path& file);

} // namespace sinewright::audio
