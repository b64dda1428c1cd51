// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/frame_display.h"

#include "ui/bottom_line.h"
#include "ui/reading_choice.h"
#include "ui/source_bar.h"
#include "ui/window_parts.h"

#include <QScreen>

#include <algorithm>

namespace sinewright::ui {

namespace {

constexpr int kSlowestPollMs = 33;
constexpr int kFastestPollMs = 16;
constexpr double kMsPerS = 1000.0;
constexpr qint64 kTableEveryMs = 250;

} // namespace

FrameDisplay::FrameDisplay(QWidget& window, WindowParts& parts, MainWindow::FrameFeed feed)
    : m_window(window)
    , m_parts(parts)
    , m_feed(std::move(feed))
{
    m_clock.start();
    m_poll.setTimerType(Qt::PreciseTimer);
    connect(&m_poll, &QTimer::timeout, this, &FrameDisplay::poll);
}

void FrameDisplay::start()
{
    const double rate = m_window.screen() != nullptr ? m_window.screen()->refreshRate() : 0.0;
    m_poll.start(rate > 0.0
                     ? std::clamp(static_cast<int>(kMsPerS / rate), kFastestPollMs, kSlowestPollMs)
                     : kSlowestPollMs);
}

void FrameDisplay::setBench(const BenchState& state)
{
    m_bench = state;
    updateAdvice();
}

void FrameDisplay::setFrozen(bool isFrozen)
{
    m_isFrozen = isFrozen;
    m_shown = m_newest;
    showNow();
}

void FrameDisplay::showNow()
{
    m_isDrawPending = true;
    drawPending();
    updateAdvice();
}

void FrameDisplay::poll()
{
    if (!m_window.isVisible() || m_window.isMinimized()) {
        return;
    }
    std::shared_ptr<const core::Frame> frame = m_feed();
    if (frame == m_newest) {
        drawPending(); // the newest frame may have been passed over, and no other came
        updateAdvice();
        return;
    }
    m_newest = std::move(frame);
    takeLevel();
    if (m_isFrozen) {
        return;
    }
    m_shown = m_newest;
    m_isDrawPending = true;
    if (m_pace.isDue(m_parts.lastDrawMs())) {
        drawPending();
    }
    if (m_clock.elapsed() - m_tableAtMs >= kTableEveryMs) {
        m_tableAtMs = m_clock.elapsed();
        m_figures.setFrame(m_shown.get());
    }
    updateAdvice();
}

void FrameDisplay::takeLevel()
{
    LevelMeter& meter = m_parts.sources->meter();
    if (m_newest && !isStale(m_bench)) {
        meter.feed(m_newest->peakFs, m_newest->rmsFs, isOverloaded(*m_newest), m_clock.elapsed());
        m_parts.bottom->setFramesLost(m_newest->framesLost);
    } else {
        meter.clear();
    }
}

void FrameDisplay::drawPending()
{
    if (m_isDrawPending) {
        m_isDrawPending = false;
        m_parts.page()->showFrame(m_shown);
    }
}

void FrameDisplay::updateAdvice()
{
    if (m_advice.update(m_bench, m_shown.get(), m_isFrozen, m_clock.elapsed())) {
        m_parts.setAdvice(m_advice.text(), m_advice.isAlert());
    }
}

} // namespace sinewright::ui
