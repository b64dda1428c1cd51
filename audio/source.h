// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"
#include "core/units.h"

#include <string>

namespace sinewright::audio {

class SampleRing;

/// What a source delivers once it is open.
struct StreamFormat
{
    core::SampleRate rate;
    int channels = 1; ///< interleaved in the ring
};

enum class SourceCondition {
    Idle,    ///< not started, or stopped
    Running, ///< samples come
    Silent,  ///< samples come, but for a second or more every one was exactly zero
    Lost,    ///< the device went away or stopped delivering; trying to get it back
    Ended,   ///< a take has been played to its end
};

/// What the window says about a source. `message` is one line of English for the log; empty while all is well.
struct SourceStatus
{
    SourceCondition condition = SourceCondition::Idle;
    std::string message;
};

/// Where samples come from. Three exist: card, take, demo. Each pushes into the ring on a thread of its own.
///
/// All calls but status() come from one thread, [dev]; status() from any.
class Source
{
public:
    Source() = default;
    virtual ~Source() = default;
    Source(const Source&) = delete;
    Source& operator=(const Source&) = delete;
    Source(Source&&) = delete;
    Source& operator=(Source&&) = delete;

    /// Opens the device or file and says what it delivers. May take seconds.
    [[nodiscard]] virtual core::Result<StreamFormat> open() = 0;

    /// Starts pushing into `ring`, which must outlive stop(). Call after open().
    [[nodiscard]] virtual core::Result<void> start(SampleRing& ring) = 0;

    /// Returns when nothing pushes any more. Harmless when not started.
    virtual void stop() = 0;

    /// To be called about five times a second while started: notices a stream that went dead and reopens it.
    virtual void tend() {}

    /// @thread any; does not block.
    [[nodiscard]] virtual SourceStatus status() const = 0;
};

} // namespace sinewright::audio
