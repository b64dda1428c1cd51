// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/session_status.h"
#include "audio/sample_ring.h"
#include "audio/source.h"

#include <QSemaphore>

#include <atomic>
#include <cmath>
#include <cstdint>
#include <memory>
#include <numbers>
#include <string>
#include <vector>

namespace sinewright::tests {

/// What a scripted source does; the test changes it while the source runs.
struct Script
{
    // constant once the source is made
    double rateHz = 48000.0;
    int channels = 2;
    double frequencyHz = 1000.0;
    double secondHarmonic = 1e-3; ///< over the fundamental
    std::string refusal;          ///< not empty: open() fails with this
    bool opensSlowly = false;     ///< open() waits for `mayOpen`
    // shared
    QSemaphore isOpening;
    QSemaphore mayOpen;
    std::atomic<audio::SourceCondition> condition{audio::SourceCondition::Running};
    std::atomic<std::uint64_t> framesToLose{0}; ///< before the next block; taken once
    std::atomic<int> opened{0};
    std::atomic<int> stopped{0};
};

/// A source without a clock of its own: each time it is tended it pushes half a second of a tone, so that a test runs
/// faster than life and the same way every time. Channel 1 carries the tone, channel 2 half of it an octave higher.
class ScriptedSource final : public audio::Source
{
public:
    explicit ScriptedSource(std::shared_ptr<Script> script) : m_script(std::move(script)) {}

    core::Result<audio::StreamFormat> open() override
    {
        ++m_script->opened;
        m_script->isOpening.release();
        if (m_script->opensSlowly) {
            m_script->mayOpen.acquire();
        }
        if (!m_script->refusal.empty()) {
            return core::failure(core::ErrorCode::DeviceFailed, m_script->refusal);
        }
        return audio::StreamFormat{core::SampleRate{m_script->rateHz}, m_script->channels};
    }

    core::Result<void> start(audio::SampleRing& ring) override
    {
        m_ring = &ring;
        return {};
    }

    void stop() override
    {
        m_ring = nullptr;
        ++m_script->stopped;
    }

    void tend() override
    {
        if (m_script->condition == audio::SourceCondition::Running) {
            pushHalfASecond();
        }
    }

    audio::SourceStatus status() const override
    {
        const auto condition = m_script->condition.load();
        return {condition,
                condition == audio::SourceCondition::Lost ? "bench input: gone; plug it in again"
                                                          : ""};
    }

private:
    void pushHalfASecond()
    {
        constexpr std::size_t kBlock = 480;
        const auto frames = static_cast<std::size_t>(m_script->rateHz / 2.0);
        if (const auto lost = m_script->framesToLose.exchange(0); lost > 0) {
            m_ring->addLoss(lost);
        }
        std::vector<float> block;
        for (std::size_t done = 0; done < frames; done += kBlock) {
            block.clear();
            for (std::size_t i = 0; i < kBlock; ++i) {
                pushFrame(block);
            }
            m_ring->push(block.data(), kBlock);
        }
    }

    void pushFrame(std::vector<float>& block)
    {
        const double angle = 2.0 * std::numbers::pi * m_script->frequencyHz *
                             static_cast<double>(m_frame++) / m_script->rateHz;
        const double tone =
            0.5 * (std::sin(angle) + m_script->secondHarmonic * std::sin(2 * angle));
        const double octave = 0.25 * std::sin(2.0 * angle);
        for (int channel = 0; channel < m_script->channels; ++channel) {
            block.push_back(static_cast<float>(channel == 0 ? tone : octave));
        }
    }

    std::shared_ptr<Script> m_script;
    audio::SampleRing* m_ring = nullptr;
    std::uint64_t m_frame = 0;
};

/// A factory that makes a scripted source whatever is asked for.
inline app::SourceFactory scriptedFactory(std::shared_ptr<Script> script)
{
    return [script](const app::SourceSpec&, const std::shared_ptr<const audio::DemoTrimmer>&) {
        return std::make_unique<ScriptedSource>(script);
    };
}

/// No interfaces.
inline core::Result<std::vector<audio::CardInfo>> noCards()
{
    return std::vector<audio::CardInfo>();
}

} // namespace sinewright::tests
