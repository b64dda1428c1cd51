// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/sample_ring.h"

#include <algorithm>
#include <cassert>
#include <limits>

namespace sinewright::audio {

namespace {

// What makes push() wait-free: no library lock hides behind any of these.
static_assert(std::atomic<std::uint64_t>::is_always_lock_free);
static_assert(std::atomic<std::size_t>::is_always_lock_free);

/// Blocks shorter than this are not expected from any device; shorter ones may fill the header queue first, which
/// counts as a full ring.
constexpr std::size_t kShortestBlockFrames = 16;

/// So that a small ring still takes a few blocks of any length.
constexpr std::size_t kFewestHeaders = 16;

std::size_t headerCount(std::size_t capacityFrames)
{
    return std::max(kFewestHeaders, capacityFrames / kShortestBlockFrames);
}

std::size_t sampleCount(int channels, std::size_t capacityFrames)
{
    assert(channels >= 1 && channels <= kMostChannels);
    assert(capacityFrames >= 1);
    return capacityFrames * static_cast<std::size_t>(channels);
}

} // namespace

SampleRing::SampleRing(int channels, std::size_t capacityFrames)
    : m_channels(channels)
    , m_samples(sampleCount(channels, capacityFrames))
    , m_headers(headerCount(capacityFrames))
{}

void SampleRing::push(const float* interleaved, std::size_t frames) noexcept
{
    assert(frames <= std::numeric_limits<std::uint32_t>::max());
    if (frames == 0) {
        return;
    }
    const std::size_t samples = frames * static_cast<std::size_t>(m_channels);
    if (m_samples.write_available() < samples || m_headers.write_available() == 0) {
        addLoss(frames);
        return;
    }
    // Samples before their header: whoever sees a header finds all of its samples.
    m_samples.push(interleaved, samples);
    m_headers.push(Header{m_nextFrame, m_pendingLoss, static_cast<std::uint32_t>(frames)});
    m_pendingLoss = 0;
    m_nextFrame += frames;
    m_framesSeen.store(m_nextFrame, std::memory_order_release);
}

void SampleRing::addLoss(std::uint64_t frames) noexcept
{
    m_pendingLoss += frames;
    m_nextFrame += frames;
    m_framesLost.store(m_framesLost.load(std::memory_order_relaxed) + frames,
                       std::memory_order_relaxed);
    m_framesSeen.store(m_nextFrame, std::memory_order_release);
}

std::optional<RingBlock> SampleRing::pop()
{
    Header header;
    if (!m_headers.pop(header)) {
        return std::nullopt;
    }
    RingBlock block;
    block.firstFrame = header.firstFrame;
    block.lostBefore = header.lostBefore;
    block.interleaved.resize(header.frames * static_cast<std::size_t>(m_channels));
    [[maybe_unused]] const std::size_t popped =
        m_samples.pop(block.interleaved.data(), block.interleaved.size());
    assert(popped == block.interleaved.size());
    return block;
}

std::uint64_t SampleRing::framesLost() const noexcept
{
    return m_framesLost.load(std::memory_order_relaxed);
}

std::uint64_t SampleRing::framesSeen() const noexcept
{
    return m_framesSeen.load(std::memory_order_acquire);
}

} // namespace sinewright::audio
