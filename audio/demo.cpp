// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/demo.h"

#include "audio/demo_pace.h"
#include "audio/sample_ring.h"
#include "audio/status_board.h"
#include "audio/virtual_bench.h"

#include <algorithm>
#include <cassert>
#include <chrono>
#include <cmath>
#include <span>
#include <stop_token>
#include <thread>
#include <utility>

namespace sinewright::audio {

namespace {

static_assert(std::atomic<double>::is_always_lock_free); // DemoTrimmer promises it

/// As an interface with a small buffer: the trimmer answers within a block.
constexpr double kBlockSeconds = 0.005;

constexpr double kLowestRateHz = 44.1e3;
constexpr double kHighestRateHz = 768e3; // still several times faster than life

std::size_t blockFrames(core::SampleRate rate)
{
    return static_cast<std::size_t>(std::ceil(rate.hz * kBlockSeconds));
}

/// [dev] calls, and one thread of its own that makes the samples and pushes.
class DemoSource final : public Source
{
public:
    DemoSource(const DemoSettings& settings, std::shared_ptr<const DemoTrimmer> trimmer)
        : m_settings(settings)
        , m_trimmer(std::move(trimmer))
    {
        assert(m_trimmer);
    }
    ~DemoSource() override { stopMaking(); }
    DemoSource(const DemoSource&) = delete;
    DemoSource& operator=(const DemoSource&) = delete;

    core::Result<StreamFormat> open() override
    {
        const double rateHz = m_settings.rate.hz;
        if (!(rateHz >= kLowestRateHz && rateHz <= kHighestRateHz)) {
            return core::failure(core::ErrorCode::InvalidArgument,
                                 "the demo has no such rate: ask for one from 44100 to 768000 Hz");
        }
        return StreamFormat{m_settings.rate, 1};
    }

    core::Result<void> start(SampleRing& ring) override
    {
        assert(ring.channels() == 1);
        assert(!m_maker.joinable());
        m_board.write(SourceCondition::Running);
        m_maker =
            std::jthread([this, &ring](const std::stop_token& stopped) { make(stopped, ring); });
        return {};
    }

    void stop() override
    {
        stopMaking();
        m_board.write(SourceCondition::Idle);
    }

    [[nodiscard]] SourceStatus status() const override { return m_board.read(); }

private:
    void stopMaking()
    {
        if (m_maker.joinable()) {
            m_maker.request_stop();
            m_maker.join();
        }
    }

    [[nodiscard]] double knobOhm() const { return m_trimmer->ohm.load(std::memory_order_relaxed); }

    void make(const std::stop_token& stopped, SampleRing& ring) const
    {
        using Clock = std::chrono::steady_clock;
        using Seconds = std::chrono::duration<double>;
        VirtualBench bench(m_settings, knobOhm());
        DemoPace pace(m_settings.rate.hz);
        std::vector<double> samples(blockFrames(m_settings.rate));
        std::vector<float> block(samples.size());
        const Clock::time_point begin = Clock::now();
        while (!stopped.stop_requested()) {
            const Seconds due(pace.dueS(samples.size()));
            std::this_thread::sleep_until(begin + std::chrono::duration_cast<Clock::duration>(due));
            ring.addLoss(pace.giveUp(Seconds(Clock::now() - begin).count()));
            bench.render(knobOhm(), samples);
            std::transform(samples.begin(), samples.end(), block.begin(), [](double sample) {
                return static_cast<float>(sample);
            });
            ring.push(block.data(), block.size());
            pace.pass(block.size());
        }
    }

    // constant after construction
    DemoSettings m_settings;
    std::shared_ptr<const DemoTrimmer> m_trimmer;
    // [dev], but for the board
    StatusBoard m_board;
    std::jthread m_maker;
};

} // namespace

std::unique_ptr<Source> makeDemoSource(const DemoSettings& settings,
                                       std::shared_ptr<const DemoTrimmer> trimmer)
{
    return std::make_unique<DemoSource>(settings, std::move(trimmer));
}

std::vector<double> renderDemo(const DemoSettings& settings, double settleS, std::size_t frames)
{
    assert(settleS >= 0.0);
    VirtualBench bench(settings, settings.trimmerOhm);
    std::vector<double> thrownAway(blockFrames(settings.rate));
    const auto settleFrames = static_cast<std::size_t>(settleS * settings.rate.hz);
    for (std::size_t done = 0; done < settleFrames; done += thrownAway.size()) {
        bench.render(settings.trimmerOhm, thrownAway);
    }
    std::vector<double> samples(frames);
    if (frames > 0) {
        bench.render(settings.trimmerOhm, samples);
    }
    return samples;
}

} // namespace sinewright::audio
