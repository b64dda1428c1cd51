// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/device_worker.h"

#include <chrono>
#include <cmath>
#include <string>
#include <utility>

namespace sinewright::app {

namespace {

using Condition = SessionStatus::Condition;

constexpr std::chrono::milliseconds kTendEvery{200};

/// So much the ring holds while a busy machine keeps the analyser waiting [s].
constexpr double kRingS = 2.0;

Condition conditionOf(audio::SourceCondition condition)
{
    switch (condition) {
    case audio::SourceCondition::Idle:
        return Condition::Starting;
    case audio::SourceCondition::Running:
        return Condition::Running;
    case audio::SourceCondition::Silent:
        return Condition::Silent;
    case audio::SourceCondition::Lost:
        return Condition::Lost;
    case audio::SourceCondition::Ended:
        break;
    }
    return Condition::Ended;
}

} // namespace

DeviceWorker::DeviceWorker(SourceFactory makeSource,
                           CardLister listCards,
                           std::shared_ptr<const audio::DemoTrimmer> trimmer,
                           std::shared_ptr<const std::atomic<quint64>> newestSerial)
    : m_makeSource(std::move(makeSource))
    , m_listCards(std::move(listCards))
    , m_trimmer(std::move(trimmer))
    , m_newestSerial(std::move(newestSerial))
    , m_tending(this) // a child moves along to the worker's thread
{
    m_tending.setInterval(kTendEvery);
    connect(&m_tending, &QTimer::timeout, this, &DeviceWorker::tend);
}

DeviceWorker::~DeviceWorker()
{
    close();
}

void DeviceWorker::open(const OpenOrder& order)
{
    if (order.serial != m_newestSerial->load()) {
        return;
    }
    close();
    m_status = SessionStatus{.source = order.source, .serial = order.serial};
    if (const auto up = bringUp(order); !up) {
        close();
        SessionStatus failed = m_status;
        failed.condition = Condition::Failed;
        failed.message = QString::fromStdString(up.error().detail);
        publish(failed);
        return;
    }
    m_tending.start();
    tend();
}

core::Result<void> DeviceWorker::bringUp(const OpenOrder& order)
{
    m_source = m_makeSource(order.source, m_trimmer);
    const auto format = m_source->open();
    if (!format) {
        return tl::unexpected<core::Error>(format.error());
    }
    m_status.rateHz = format->rate.hz;
    m_status.channels = format->channels;
    if (order.source.channel > format->channels) {
        return core::failure(core::ErrorCode::NotFound,
                             sourceLabel(order.source).toStdString() + ": there is no channel " +
                                 std::to_string(order.source.channel) + ", only " +
                                 std::to_string(format->channels) + "; choose another channel");
    }
    const auto capacity = static_cast<std::size_t>(std::lround(kRingS * format->rate.hz));
    m_ring = std::make_unique<audio::SampleRing>(format->channels, capacity);
    core::AnalyserConfig config;
    config.rate = format->rate;
    config.settings = order.settings;
    m_analysis =
        std::make_unique<AnalysisThread>(*m_ring, order.source.channel, config, order.link);
    return m_source->start(*m_ring);
}

void DeviceWorker::close()
{
    m_tending.stop();
    if (m_source) {
        m_source->stop();
    }
    m_analysis.reset();
    m_source.reset();
    m_ring.reset();
}

void DeviceWorker::tend()
{
    m_source->tend();
    const audio::SourceStatus source = m_source->status();
    SessionStatus status = m_status;
    status.condition = conditionOf(source.condition);
    status.message = QString::fromStdString(source.message);
    status.framesLost = m_ring->framesLost();
    publish(status);
}

void DeviceWorker::publish(const SessionStatus& status)
{
    if (status == m_status) {
        return;
    }
    m_status = status;
    emit statusChanged(status);
}

void DeviceWorker::listCards()
{
    const auto cards = m_listCards();
    emit cardsListed(cards ? *cards : std::vector<audio::CardInfo>());
}

} // namespace sinewright::app
