// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/mailbox.h"
#include "audio/sample_ring.h"
#include "core/measure/analyser.h"
#include "core/measure/frame.h"
#include "core/measure/reading.h"

#include <atomic>
#include <cstdint>
#include <memory>
#include <stop_token>
#include <thread>
#include <vector>

namespace sinewright::app {

/// What [gui] and [dsp] have in common while one source is analysed. Nobody waits here.
struct AnalysisLink
{
    Mailbox<std::shared_ptr<const core::Frame>> frames; ///< [dsp] to [gui]
    Mailbox<core::MeasureSettings> settings;            ///< [gui] to [dsp]
    std::atomic<std::uint32_t> bestResets{0};           ///< counted up by [gui], looked at by [dsp]
    std::atomic<double> busyS{0.0}; ///< [s] processor time of [dsp], written there
};

/// [dsp] Takes blocks out of the ring, picks the channel, feeds the analyser, and posts the newest frame.
///
/// Its floating-point mode is the default one whatever the libraries of the process have set (denormal numbers kept,
/// rounding to nearest), so that a stretch measured here and on the command line gives the same figures.
///
/// @thread  made and destroyed on [dev]; the destructor joins, in some milliseconds.
class AnalysisThread final
{
public:
    /// @param ring     outlives this; nobody pushes any more when this is destroyed, or what is pushed stays there.
    /// @param channel  1 .. ring.channels()
    AnalysisThread(audio::SampleRing& ring,
                   int channel,
                   const core::AnalyserConfig& config,
                   std::shared_ptr<AnalysisLink> link);

private:
    void run(const std::stop_token& stop);
    void obey();
    bool analyseWhatIsThere();

    // constant after construction
    audio::SampleRing& m_ring;
    int m_channel;
    std::shared_ptr<AnalysisLink> m_link;
    // [dsp] only, once it runs
    core::Analyser m_analyser;
    std::vector<double> m_samples;
    std::uint32_t m_bestResetsSeen = 0;
    // last, so that it is joined before anything it uses goes
    std::jthread m_thread;
};

} // namespace sinewright::app
