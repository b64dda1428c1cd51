// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/advice.h"
#include "ui/figures_model.h"
#include "ui/main_window.h"
#include "ui/pace.h"

#include <QElapsedTimer>
#include <QTimer>

namespace sinewright::ui {

class WindowParts;

/// Asks for the newest frame at display rate and hands it to what is seen: nothing while the window is not, nothing
/// twice, every other frame when drawing is slow, and while frozen only the level meter goes on.
class FrameDisplay final : public QObject
{
    Q_OBJECT
public:
    FrameDisplay(QWidget& window, WindowParts& parts, MainWindow::FrameFeed feed);

    void start();
    void setBench(const BenchState& state);
    void setFrozen(bool isFrozen);
    /// Draws the shown frame again: another page is seen.
    void showNow();
    [[nodiscard]] const std::shared_ptr<const core::Frame>& shown() const { return m_shown; }
    [[nodiscard]] FiguresModel& figures() { return m_figures; }

private:
    void poll();
    void takeLevel();
    void drawPending();
    void updateAdvice();

    QWidget& m_window;
    WindowParts& m_parts;
    MainWindow::FrameFeed m_feed;
    QTimer m_poll;
    QElapsedTimer m_clock;
    Pace m_pace;
    AdviceLine m_advice;
    FiguresModel m_figures;
    BenchState m_bench;
    std::shared_ptr<const core::Frame> m_newest;
    std::shared_ptr<const core::Frame> m_shown;
    bool m_isFrozen = false;
    bool m_isDrawPending = false;
    qint64 m_tableAtMs = 0;
};

} // namespace sinewright::ui
