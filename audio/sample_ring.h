// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <atomic>
#include <cstddef>
#include <cstdint>
#include <optional>
#include <vector>

#include <boost/lockfree/spsc_queue.hpp>

namespace sinewright::audio {

/// The widest stream and take that is read; common practice for the largest interfaces.
inline constexpr int kMostChannels = 32;

/// A block as it comes out of the ring.
struct RingBlock
{
    std::uint64_t firstFrame = 0;   ///< counted from the start of the source, lost frames included
    std::uint64_t lostBefore = 0;   ///< frames lost right before it
    std::vector<float> interleaved; ///< frames x channels, 1.0 = full scale
};

/// The lock-free way from whoever has samples to the analyser thread: one pusher, one popper.
///
/// When it is full the new block is dropped whole and counted, and the next block that fits carries the gap, so that
/// nothing is analysed across it. A second queue carries the blocks' headers; when that one is full the ring is full.
class SampleRing final
{
public:
    /// @param channels        1 .. 32
    /// @param capacityFrames  at least one block of the pusher
    SampleRing(int channels, std::size_t capacityFrames);

    /// [rt] Wait-free. Copies `frames` frames, or drops and counts them all when there is no room.
    void push(const float* interleaved, std::size_t frames) noexcept;

    /// [rt] Wait-free. `frames` frames were lost before they got here (overflow of the device, outage).
    void addLoss(std::uint64_t frames) noexcept;

    /// [dsp] Wait-free but for the vector's allocation. The oldest block, or none.
    [[nodiscard]] std::optional<RingBlock> pop();

    [[nodiscard]] int channels() const noexcept { return m_channels; }

    /// Any thread, wait-free: frames lost so far, and frames that passed or were lost.
    [[nodiscard]] std::uint64_t framesLost() const noexcept;
    [[nodiscard]] std::uint64_t framesSeen() const noexcept;

private:
    struct Header
    {
        std::uint64_t firstFrame = 0;
        std::uint64_t lostBefore = 0;
        std::uint32_t frames = 0;
    };

    // constant after construction
    int m_channels;
    // [rt] writes, [dsp] reads, through the queues alone
    boost::lockfree::spsc_queue<float> m_samples;
    boost::lockfree::spsc_queue<Header> m_headers;
    // [rt] only
    std::uint64_t m_nextFrame = 0;
    std::uint64_t m_pendingLoss = 0;
    // atomic: written [rt], read anywhere
    std::atomic<std::uint64_t> m_framesLost{0};
    std::atomic<std::uint64_t> m_framesSeen{0};
};

} // namespace sinewright::audio
