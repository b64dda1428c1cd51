// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/bench_session.h"

#include "app/device_worker.h"

#include <QMetaObject>

#include <algorithm>
#include <utility>

namespace sinewright::app {

using namespace Qt::StringLiterals;

BenchSession::BenchSession(SourceFactory makeSource, CardLister listCards, QObject* parent)
    : QObject(parent)
    , m_worker(
          new DeviceWorker(std::move(makeSource), std::move(listCards), m_trimmer, m_newestSerial))
{
    m_device.setObjectName(u"dev"_s);
    m_worker->moveToThread(&m_device);
    connect(&m_device, &QThread::finished, m_worker, &QObject::deleteLater);
    connect(m_worker, &DeviceWorker::statusChanged, this, &BenchSession::noteStatus);
    connect(m_worker, &DeviceWorker::cardsListed, this, &BenchSession::cardsListed);
    m_device.start();
}

BenchSession::~BenchSession()
{
    // An order that still waits is not worth opening a device for.
    ++*m_newestSerial;
    m_device.quit();
    m_device.wait();
}

void BenchSession::open(const SourceSpec& spec)
{
    const quint64 serial = ++*m_newestSerial;
    m_link = std::make_shared<AnalysisLink>();
    m_frame.reset();
    QMetaObject::invokeMethod(
        m_worker,
        [worker = m_worker,
         order =
             OpenOrder{.serial = serial, .source = spec, .settings = m_settings, .link = m_link}] {
            worker->open(order);
        },
        Qt::QueuedConnection);
    noteStatus(SessionStatus{.source = spec, .serial = serial});
}

void BenchSession::wantCards()
{
    QMetaObject::invokeMethod(m_worker, &DeviceWorker::listCards, Qt::QueuedConnection);
}

std::shared_ptr<const core::Frame> BenchSession::newestFrame()
{
    if (auto frame = m_link->frames.take()) {
        m_frame = std::move(*frame);
    }
    return m_frame;
}

void BenchSession::setMeasureSettings(const core::MeasureSettings& settings)
{
    m_settings = settings;
    m_link->settings.put(settings);
}

void BenchSession::resetBest()
{
    ++m_link->bestResets;
}

void BenchSession::setTrimmer(double ohm)
{
    m_trimmer->ohm.store(
        std::clamp(ohm, audio::kDemoTrimmerLowestOhm, audio::kDemoTrimmerHighestOhm));
}

void BenchSession::noteStatus(const SessionStatus& status)
{
    if (status.serial != m_newestSerial->load()) {
        return; // of a source that was left since
    }
    m_status = status;
    emit statusChanged(status);
}

} // namespace sinewright::app
