// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/bench_session.h"

#include "app/device_worker.h"

#include <algorithm>
#include <utility>

namespace sinewright::app {

using namespace Qt::StringLiterals;

BenchSession::BenchSession(SourceFactory makeSource, CardLister listCards, QObject* parent)
    : QObject(parent)
    , m_device(std::make_shared<DeviceLink>())
    , m_worker(std::make_unique<DeviceWorker>(
          std::move(makeSource), std::move(listCards), m_trimmer, m_device))
{
    m_thread.setObjectName(u"dev"_s);
    m_worker->moveToThread(&m_thread);
    connect(this, &BenchSession::orderGiven, m_worker.get(), &DeviceWorker::obey);
    connect(this, &BenchSession::cardsWanted, m_worker.get(), &DeviceWorker::listCards);
    connect(m_worker.get(), &DeviceWorker::statusChanged, this, &BenchSession::takeStatus);
    connect(m_worker.get(), &DeviceWorker::cardsListed, this, &BenchSession::takeCards);
    // QThread's own waiting is out of the thread sanitizer's sight.
    connect(
        &m_thread,
        &QThread::finished,
        &m_thread,
        [device = m_device.get()] { device->ended.release(); },
        Qt::DirectConnection);
    m_thread.start();
}

BenchSession::~BenchSession()
{
    m_device->orders.put({.isLast = true});
    emit orderGiven();
    m_device->ended.acquire();
    m_thread.wait();
}

void BenchSession::open(const SourceSpec& spec)
{
    ++m_newestSerial;
    m_link = std::make_shared<AnalysisLink>();
    m_frame.reset();
    m_device->orders.put(
        {.serial = m_newestSerial, .source = spec, .settings = m_settings, .link = m_link});
    emit orderGiven();
    noteStatus({.source = spec, .serial = m_newestSerial});
}

void BenchSession::wantCards()
{
    emit cardsWanted();
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

void BenchSession::takeStatus()
{
    const auto status = m_device->statuses.take();
    // One with another serial is of a source that was left since.
    if (status && status->serial == m_newestSerial) {
        noteStatus(*status);
    }
}

void BenchSession::noteStatus(const SessionStatus& status)
{
    m_status = status;
    emit statusChanged(status);
}

void BenchSession::takeCards()
{
    if (const auto cards = m_device->cards.take()) {
        emit cardsListed(*cards);
    }
}

} // namespace sinewright::app
