// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/capture.h"

#include "audio/sample_ring.h"

#include <chrono>
#include <cmath>
#include <optional>
#include <thread>

namespace sinewright::app {

namespace {

using Clock = std::chrono::steady_clock;

constexpr std::chrono::milliseconds kNap{5};
constexpr std::chrono::milliseconds kTendEvery{200};
constexpr double kRingS = 2.0;

std::size_t framesOf(double seconds, core::SampleRate rate)
{
    return static_cast<std::size_t>(std::lround(seconds * rate.hz));
}

/// Collects blocks until there are enough in one piece.
class Collector final
{
public:
    Collector(audio::SampleRing& ring, int channel, std::size_t settleFrames, std::size_t frames)
        : m_ring(ring)
        , m_channel(channel)
        , m_settleFrames(settleFrames)
        , m_frames(frames)
    {}

    /// Takes what is in the ring; true when something was.
    bool takeWhatIsThere()
    {
        bool came = false;
        while (const auto block = m_ring.pop()) {
            came = true;
            // Losses before the first sample that counts do no harm.
            if (block->lostBefore > 0 && m_samples.size() > m_settleFrames) {
                ++m_interruptions;
                m_samples.clear();
            }
            appendChannel(block->interleaved, m_ring.channels(), m_channel, m_samples);
        }
        return came;
    }

    [[nodiscard]] bool isDone() const { return m_samples.size() >= m_settleFrames + m_frames; }
    [[nodiscard]] int interruptions() const { return m_interruptions; }

    [[nodiscard]] std::vector<double> stretch() const
    {
        const auto first = m_samples.begin() + static_cast<std::ptrdiff_t>(m_settleFrames);
        return {first, first + static_cast<std::ptrdiff_t>(m_frames)};
    }

private:
    audio::SampleRing& m_ring;
    int m_channel;
    std::size_t m_settleFrames;
    std::size_t m_frames;
    std::vector<double> m_samples;
    int m_interruptions = 0;
};

/// Runs a started source until the collector is done, the source is silent for too long, or it lost samples too often.
std::optional<CaptureFailure> collect(audio::Source& source, Collector& collector)
{
    const auto patience = std::chrono::duration<double>(kCapturePatienceS);
    auto lastSign = Clock::now();
    auto nextTending = lastSign + kTendEvery;
    while (!collector.isDone()) {
        const auto now = Clock::now();
        if (collector.takeWhatIsThere()) {
            lastSign = now;
        }
        if (collector.interruptions() >= kCaptureTries) {
            return CaptureFailure{
                true,
                "samples were lost in each of " + std::to_string(kCaptureTries) +
                    " tries; close what keeps the machine busy, or ask for fewer --seconds"};
        }
        if (now - lastSign > patience) {
            const std::string why = source.status().message;
            return CaptureFailure{false, why.empty() ? "the interface delivers no samples" : why};
        }
        if (now >= nextTending) {
            source.tend();
            nextTending = now + kTendEvery;
        }
        std::this_thread::sleep_for(kNap);
    }
    return std::nullopt;
}

} // namespace

void appendChannel(const std::vector<float>& interleaved,
                   int channels,
                   int channel,
                   std::vector<double>& samples)
{
    const auto stride = static_cast<std::size_t>(channels);
    samples.reserve(samples.size() + interleaved.size() / stride);
    for (auto i = static_cast<std::size_t>(channel - 1); i < interleaved.size(); i += stride) {
        samples.push_back(static_cast<double>(interleaved[i]));
    }
}

tl::expected<std::vector<double>, CaptureFailure> captureStretch(audio::Source& source,
                                                                 const audio::StreamFormat& format,
                                                                 int channel,
                                                                 double seconds)
{
    audio::SampleRing ring(format.channels, framesOf(kRingS, format.rate));
    Collector collector(
        ring, channel, framesOf(kCaptureSettleS, format.rate), framesOf(seconds, format.rate));
    if (const auto started = source.start(ring); !started) {
        return tl::unexpected(CaptureFailure{false, started.error().detail});
    }
    auto failed = collect(source, collector);
    source.stop();
    if (failed) {
        return tl::unexpected(std::move(*failed));
    }
    return collector.stretch();
}

} // namespace sinewright::app
