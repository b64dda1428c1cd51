// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/capture_tap.h"

#include "audio/sample_ring.h"

#include <algorithm>
#include <cassert>
#include <thread>

namespace sinewright::audio {

void CaptureTap::open(SampleRing& ring,
                      const StreamFormat& format,
                      std::optional<Clock::time_point> lastHeard)
{
    assert(ring.channels() == format.channels);
    m_ring = &ring;
    m_format = format;
    m_isResuming = lastHeard.has_value();
    m_lastHeard.store(lastHeard.value_or(Clock::now()).time_since_epoch().count());
    m_gate.store(Gate::Free, std::memory_order_release);
}

void CaptureTap::shut() noexcept
{
    Gate expected = Gate::Free;
    while (!m_gate.compare_exchange_strong(expected, Gate::Shut, std::memory_order_acq_rel) &&
           expected != Gate::Shut) {
        expected = Gate::Free;
        std::this_thread::yield();
    }
}

void CaptureTap::take(const float* interleaved, std::uint64_t frames, bool hasOverflowed) noexcept
{
    Gate expected = Gate::Free;
    if (!m_gate.compare_exchange_strong(expected, Gate::Inside, std::memory_order_acq_rel)) {
        return;
    }
    const Clock::time_point now = Clock::now();
    countGap(now, frames, hasOverflowed);
    if (interleaved != nullptr) {
        countSilence(interleaved, frames);
        m_ring->push(interleaved, frames);
    } else {
        m_ring->addLoss(frames); // PortAudio gives none when it had none to give
    }
    m_lastHeard.store(now.time_since_epoch().count());
    m_callbacks.store(m_callbacks.load(std::memory_order_relaxed) + 1);
    m_gate.store(Gate::Free, std::memory_order_release);
}

void CaptureTap::countGap(Clock::time_point now, std::uint64_t frames, bool hasOverflowed) noexcept
{
    if (!m_isResuming && !hasOverflowed) {
        return;
    }
    // Nobody tells how many are missing. The last samples were as old when they came as these are now, so that the time
    // between is that of the missing frames and of these. A gap is never shorter than one frame.
    const std::chrono::duration<double> since = now - lastHeard();
    const double missing = since.count() * m_format.rate.hz - static_cast<double>(frames);
    m_ring->addLoss(static_cast<std::uint64_t>(std::max(missing, 1.0)));
    m_isResuming = false;
}

void CaptureTap::countSilence(const float* interleaved, std::uint64_t frames) noexcept
{
    // Ends at once where there is a signal.
    const auto samples = static_cast<std::ptrdiff_t>(frames) * m_format.channels;
    const bool isSilent =
        std::all_of(interleaved, interleaved + samples, [](float s) { return s == 0.0F; });
    m_silentFrames.store(isSilent ? m_silentFrames.load(std::memory_order_relaxed) + frames : 0);
}

int captureCallback(const void* input,
                    void* /*output*/,
                    unsigned long frames,
                    const PaStreamCallbackTimeInfo* /*time*/,
                    PaStreamCallbackFlags flags,
                    void* tap) noexcept
{
    static_cast<CaptureTap*>(tap)->take(
        static_cast<const float*>(input), frames, (flags & paInputOverflow) != 0);
    return paContinue;
}

} // namespace sinewright::audio
