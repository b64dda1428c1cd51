// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/analysis_thread.h"
#include "app/session_status.h"
#include "audio/demo.h"
#include "core/measure/frame.h"
#include "core/measure/reading.h"

#include <QObject>
#include <QThread>

#include <atomic>
#include <memory>
#include <vector>

namespace sinewright::app {

class DeviceWorker;

/// One session at the bench: a source, its analysis, and the newest frame of it.
///
/// [gui] All its functions are called there and return at once. The work is done on [dev] (the source) and [dsp] (the
/// analysis); what happens rarely comes back as a signal, frames are asked for. Only the destructor waits.
class BenchSession final : public QObject
{
    Q_OBJECT
public:
    explicit BenchSession(SourceFactory makeSource = app::makeSource,
                          CardLister listCards = audio::listCards,
                          QObject* parent = nullptr);
    ~BenchSession() override;

    /// Changes over to another source; the answer is a statusChanged(). From here on newestFrame() gives frames of this
    /// source alone.
    void open(const SourceSpec& spec);

    /// Has the interfaces listed; the answer is a cardsListed().
    void wantCards();

    /// The newest frame, the same one until there is a newer; null at the start.
    [[nodiscard]] std::shared_ptr<const core::Frame> newestFrame();

    /// Reaches the analyser before its next reading, and every later source.
    void setMeasureSettings(const core::MeasureSettings& settings);

    /// Forgets the best so far.
    void resetBest();

    /// The demo's virtual trimmer [ohm]; kept within its travel, and when the source changes.
    void setTrimmer(double ohm);
    [[nodiscard]] double trimmerOhm() const { return m_trimmer->ohm.load(); }

    [[nodiscard]] const SessionStatus& status() const { return m_status; }

    /// Processor time that the analysis of this source has used so far [s].
    [[nodiscard]] double analysisSeconds() const { return m_link->busyS.load(); }

signals:
    void statusChanged(const sinewright::app::SessionStatus& status);
    void cardsListed(const std::vector<sinewright::audio::CardInfo>& cards);

private:
    void noteStatus(const SessionStatus& status);

    // atomic: written [gui], read on the demo's thread
    std::shared_ptr<audio::DemoTrimmer> m_trimmer = std::make_shared<audio::DemoTrimmer>();
    // atomic: written [gui], read [dev]
    std::shared_ptr<std::atomic<quint64>> m_newestSerial =
        std::make_shared<std::atomic<quint64>>(0);
    // shared with [dsp] through its own means; a new one for every source
    std::shared_ptr<AnalysisLink> m_link = std::make_shared<AnalysisLink>();
    // [gui] only
    SessionStatus m_status;
    core::MeasureSettings m_settings;
    std::shared_ptr<const core::Frame> m_frame;
    DeviceWorker* m_worker; // lives on m_device, which deletes it when it ends
    QThread m_device;
};

} // namespace sinewright::app
