// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

#include <tl/expected.hpp>

namespace sinewright::core {

/// What went wrong, for callers that decide by it; the sentence for people is `Error::detail`.
enum class ErrorCode {
    InvalidArgument,   ///< a value outside its stated range
    NotFound,          ///< no such file, device or channel
    NoPermission,      ///< it is there but may not be read or written
    UnsupportedFormat, ///< not a sound file, or one of a kind that cannot be read
    Damaged,           ///< truncated, or samples that are not finite
    Empty,             ///< readable, but holds no samples
    DeviceFailed,      ///< the audio interface refused or vanished
    WriteFailed,       ///< a result could not be written
};

/// A foreseeable failure.
struct Error
{
    ErrorCode code = ErrorCode::InvalidArgument;
    std::string detail; ///< one line of English: what, which file or device, why, and what to try
};

/// Either a value or the reason why there is none. Nothing in this program throws.
template <typename T>
using Result = tl::expected<T, Error>;

/// Shorthand for `return failure(code, "...")` in a function that returns a Result.
[[nodiscard]] inline tl::unexpected<Error> failure(ErrorCode code, std::string detail)
{
    return tl::unexpected<Error>(Error{code, std::move(detail)});
}

} // namespace sinewright::core
