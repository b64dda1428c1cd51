// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/analysis_thread.h"

#include "app/capture.h"
#include "app/processor_time.h"

#include <cassert>
#include <cfenv>
#include <chrono>
#include <utility>

namespace sinewright::app {

namespace {

/// A tenth of the time between two quick readings: soon enough for the eye, rarely enough to sleep well.
constexpr std::chrono::milliseconds kNap{5};

} // namespace

AnalysisThread::AnalysisThread(audio::SampleRing& ring,
                               int channel,
                               const core::AnalyserConfig& config,
                               std::shared_ptr<AnalysisLink> link)
    : m_ring(ring)
    , m_channel(channel)
    , m_link(std::move(link))
    , m_analyser(config)
    , m_thread([this](const std::stop_token& stop) { run(stop); })
{
    assert(channel >= 1 && channel <= ring.channels());
}

void AnalysisThread::run(const std::stop_token& stop)
{
    std::fesetenv(FE_DFL_ENV);
    while (!stop.stop_requested()) {
        obey();
        if (!analyseWhatIsThere()) {
            std::this_thread::sleep_for(kNap);
        }
        m_link->busyS.store(threadSeconds(), std::memory_order_relaxed);
    }
}

void AnalysisThread::obey()
{
    if (const auto settings = m_link->settings.take()) {
        m_analyser.setSettings(*settings);
    }
    if (const auto resets = m_link->bestResets.load(std::memory_order_relaxed);
        resets != m_bestResetsSeen) {
        m_bestResetsSeen = resets;
        m_analyser.resetBest();
    }
}

bool AnalysisThread::analyseWhatIsThere()
{
    const auto block = m_ring.pop();
    if (!block) {
        return false;
    }
    m_samples.clear();
    appendChannel(block->interleaved, m_ring.channels(), m_channel, m_samples);
    auto frames = m_analyser.feed(
        {.firstFrame = block->firstFrame, .lostBefore = block->lostBefore, .samples = m_samples});
    if (!frames.empty()) {
        m_link->frames.put(std::move(frames.back()));
    }
    return true;
}

} // namespace sinewright::app
