// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"

#include <portaudio.h>

#include <atomic>
#include <chrono>
#include <cstdint>
#include <optional>

namespace sinewright::audio {

/// Where one stream's callback leaves its samples.
///
/// A stream that was given up may still call: closing can hang while the callback's thread lives on. So the way to the
/// ring has a gate; once shut() has returned, no callback of this stream will touch the ring again.
class CaptureTap final
{
public:
    using Clock = std::chrono::steady_clock;

    /// [dev] Before the stream is started. `ring` must outlive shut().
    /// @param lastHeard  when the stream before this one gave its last samples; the outage is then marked as a gap.
    void
    open(SampleRing& ring, const StreamFormat& format, std::optional<Clock::time_point> lastHeard);

    /// [dev] Waits for a callback that is just copying, microseconds.
    void shut() noexcept;

    /// [rt] Wait-free: copies, counts, and reads the steady clock (on Linux no system call).
    /// @param hasOverflowed  the device lost samples before these; how many is estimated from the time since the last.
    void take(const float* interleaved, std::uint64_t frames, bool hasOverflowed) noexcept;

    /// [rt] The stream has ended by itself.
    void end() noexcept { m_hasEnded.store(true, std::memory_order_release); }

    /// Any thread, wait-free.
    [[nodiscard]] std::uint64_t callbacks() const noexcept { return m_callbacks.load(); }
    [[nodiscard]] bool hasEnded() const noexcept { return m_hasEnded.load(); }
    [[nodiscard]] Clock::time_point lastHeard() const noexcept
    {
        return Clock::time_point(Clock::duration(m_lastHeard.load()));
    }
    /// For how long every sample has been exactly zero.
    [[nodiscard]] std::uint64_t silentFrames() const noexcept { return m_silentFrames.load(); }

private:
    enum class Gate { Shut, Free, Inside };

    void countGap(Clock::time_point now, std::uint64_t frames, bool hasOverflowed) noexcept;
    void countSilence(const float* interleaved, std::uint64_t frames) noexcept;

    static_assert(std::atomic<Gate>::is_always_lock_free);
    static_assert(std::atomic<Clock::rep>::is_always_lock_free);

    // written [dev] while the gate is shut, then [rt] only
    SampleRing* m_ring = nullptr;
    StreamFormat m_format;
    bool m_isResuming = false;
    // atomic: written [rt] and [dev]
    std::atomic<Gate> m_gate{Gate::Shut};
    // atomic: written [rt], read anywhere
    std::atomic<std::uint64_t> m_callbacks{0};
    std::atomic<std::uint64_t> m_silentFrames{0};
    std::atomic<Clock::rep> m_lastHeard{0};
    std::atomic<bool> m_hasEnded{false};
};

/// [rt] What PortAudio calls; `tap` is a CaptureTap. Exactly what is registered for a card, so that a test may call it.
int captureCallback(const void* input,
                    void* output,
                    unsigned long frames,
                    const PaStreamCallbackTimeInfo* time,
                    PaStreamCallbackFlags flags,
                    void* tap) noexcept;

} // namespace sinewright::audio
