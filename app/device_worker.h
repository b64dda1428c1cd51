// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/analysis_thread.h"
#include "app/session_status.h"
#include "audio/sample_ring.h"
#include "core/measure/reading.h"

#include <QObject>
#include <QTimer>

#include <atomic>
#include <memory>
#include <vector>

namespace sinewright::app {

/// An order to change over to another source.
struct OpenOrder
{
    quint64 serial = 0;
    SourceSpec source{};
    core::MeasureSettings settings{};
    std::shared_ptr<AnalysisLink> link{};
};

/// [dev] Opens, starts, tends and stops the source, and owns the ring and the [dsp] thread that go with it.
///
/// All its functions run on the thread it lives on; the session calls them through queued invocations, so that the
/// seconds that opening a device may take are nobody else's.
class DeviceWorker final : public QObject
{
    Q_OBJECT
public:
    /// @param newestSerial  serial of the last order given; older ones that still wait are skipped.
    DeviceWorker(SourceFactory makeSource,
                 CardLister listCards,
                 std::shared_ptr<const audio::DemoTrimmer> trimmer,
                 std::shared_ptr<const std::atomic<quint64>> newestSerial);
    ~DeviceWorker() override;

    void open(const OpenOrder& order);
    void close();
    void listCards();

signals:
    void statusChanged(const sinewright::app::SessionStatus& status);
    void cardsListed(const std::vector<sinewright::audio::CardInfo>& cards);

private:
    [[nodiscard]] core::Result<void> bringUp(const OpenOrder& order);
    void tend();
    void publish(const SessionStatus& status);

    // constant after construction
    SourceFactory m_makeSource;
    CardLister m_listCards;
    std::shared_ptr<const audio::DemoTrimmer> m_trimmer;
    std::shared_ptr<const std::atomic<quint64>> m_newestSerial;
    // [dev] only; taken down in the order of close()
    std::unique_ptr<audio::Source> m_source;
    std::unique_ptr<audio::SampleRing> m_ring;
    std::unique_ptr<AnalysisThread> m_analysis;
    SessionStatus m_status;
    QTimer m_tending;
};

} // namespace sinewright::app
