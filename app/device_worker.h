// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/analysis_thread.h"
#include "app/mailbox.h"
#include "app/session_status.h"
#include "audio/sample_ring.h"
#include "core/measure/reading.h"

#include <QObject>
#include <QTimer>

#include <memory>
#include <semaphore>
#include <vector>

namespace sinewright::app {

/// An order to change over to another source, or to end.
struct OpenOrder
{
    quint64 serial = 0;
    SourceSpec source{};
    core::MeasureSettings settings{};
    std::shared_ptr<AnalysisLink> link{};
    bool isLast = false; ///< open nothing: close what is open, and end the thread
};

/// What [gui] and [dev] hand each other. Nobody waits here; whoever puts something in emits a signal without arguments,
/// which tells the other to look. (Arguments of a queued signal travel inside Qt, where the thread sanitizer is blind.)
struct DeviceLink
{
    Mailbox<OpenOrder>
        orders; ///< [gui] to [dev]: of several that wait only the last is worth a device
    Mailbox<SessionStatus> statuses;             ///< [dev] to [gui]
    Mailbox<std::vector<audio::CardInfo>> cards; ///< [dev] to [gui]
    std::binary_semaphore ended{0}; ///< released by [dev] when nothing runs there any more
};

/// [dev] Opens, starts, tends and stops the source, and owns the ring and the [dsp] thread that go with it.
///
/// All its functions run on the thread it lives on; the session calls them through queued connections, so that the
/// seconds that opening a device may take are nobody else's.
class DeviceWorker final : public QObject
{
    Q_OBJECT
public:
    DeviceWorker(SourceFactory makeSource,
                 CardLister listCards,
                 std::shared_ptr<const audio::DemoTrimmer> trimmer,
                 std::shared_ptr<DeviceLink> link);
    ~DeviceWorker() override;
    Q_DISABLE_COPY_MOVE(DeviceWorker)

    /// Carries out the newest order, if there is one that was not yet.
    void obey();
    void listCards();

signals:
    void statusChanged();
    void cardsListed();

private:
    void open(const OpenOrder& order);
    void close();
    [[nodiscard]] core::Result<void> bringUp(const OpenOrder& order);
    void tend();
    void publish(const SessionStatus& status);

    // constant after construction
    SourceFactory m_makeSource;
    CardLister m_listCards;
    std::shared_ptr<const audio::DemoTrimmer> m_trimmer;
    std::shared_ptr<DeviceLink> m_link;
    // [dev] only; taken down in the order of close()
    std::unique_ptr<audio::Source> m_source;
    std::unique_ptr<audio::SampleRing> m_ring;
    std::unique_ptr<AnalysisThread> m_analysis;
    SessionStatus m_status;
    QTimer m_tending;
};

} // namespace sinewright::app
