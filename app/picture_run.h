// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/bench_session.h"
#include "app/command_line.h"
#include "app/outcome.h"
#include "app/settings.h"
#include "app/window_wiring.h"
#include "ui/main_window.h"

#include <QEventLoop>
#include <QTimer>

#include <string>

namespace sinewright::app {

/// What threads have used so far, to be compared with a later look.
struct LoadMark
{
    double atS = 0.0;       ///< on the steady clock
    double analysisS = 0.0; ///< processor time of [dsp]
    double drawingS = 0.0;  ///< of [gui]
    double totalS = 0.0;    ///< of the whole process
};

/// The window off screen for a while, and a picture of it.
///
/// [gui] It runs its own event loop; the QApplication is there before.
class PictureRun final : public QObject
{
    Q_OBJECT
public:
    PictureRun(const PictureOptions& options, const QString& settingsFile);

    /// Returns when the picture is written, or it cannot be.
    [[nodiscard]] Outcome run();

private:
    void look();
    void turnTrimmer(double shownS);
    [[nodiscard]] LoadMark loadNow() const;
    [[nodiscard]] std::string loadReport(const LoadMark& from, const LoadMark& to) const;
    [[nodiscard]] Outcome picture();

    // constant after construction
    PictureOptions m_options;
    // [gui] only
    BenchSession m_session;
    Settings m_settings;
    ui::MainWindow m_window;
    WindowWiring m_wiring;
    QEventLoop m_loop;
    QTimer m_looking;
    LoadMark m_loadFrom;
    bool m_isWarm = false;
    double m_startedS = 0.0;
};

} // namespace sinewright::app
