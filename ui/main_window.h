// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/bench_state.h"
#include "ui/theme.h"

#include <QMainWindow>

#include <functional>
#include <memory>

namespace sinewright::ui {

enum class Page { HookUp, Trim, WarmUp, Network, Record };

/// A picture the user asked for: what, how large, and the figures to set under it.
struct PictureRequest
{
    QWidget* subject = nullptr; ///< the page, or the plot under the pointer
    QString subjectName;        ///< plain word for the file name: "trim", "spectrum", ...
    QString title;              ///< the same for the caption, in the user's language
};

/// What of the window is remembered between runs.
struct ViewSettings
{
    ThemeName theme = ThemeName::Paper;
    Page page = Page::Trim;
    int pictureScale = 1; ///< 1 or 2
    QByteArray geometry;
};

/// The window: rail, pages, source bar and bottom line. It pulls the newest frame at display rate, draws what is
/// visible, and says what the user wants through signals. It computes no figure and knows no audio.
class MainWindow final : public QMainWindow
{
    Q_OBJECT
public:
    /// The newest frame, or null; called by the display timer.
    using FrameFeed = std::function<std::shared_ptr<const core::Frame>()>;

    explicit MainWindow(FrameFeed feed, QWidget* parent = nullptr);
    ~MainWindow() override;
    Q_DISABLE_COPY_MOVE(MainWindow)

    void setSources(const QList<SourceChoice>& choices);
    void setBenchState(const BenchState& state);
    void setMeasureSettings(const core::MeasureSettings& settings);
    void setViewSettings(const ViewSettings& settings);
    [[nodiscard]] ViewSettings viewSettings() const;

    /// The frame that is shown now: the frozen one while frozen; null at the start.
    [[nodiscard]] std::shared_ptr<const core::Frame> shownFrame() const;

    /// The whole page area, for a picture of the window that nobody asked for with a key.
    [[nodiscard]] QWidget* sheet() const;

    /// One sentence in the bottom line, for ten seconds: "Picture saved as ...".
    void showNotice(const QString& sentence);

signals:
    void sourceChosen(const sinewright::ui::SourceChoice& choice);
    void sourcesWanted(); ///< the picker is about to open: the list may be stale
    void trimmerMoved(double ohm);
    void measureSettingsChosen(const sinewright::core::MeasureSettings& settings);
    void bestResetWanted();
    void pictureWanted(const sinewright::ui::PictureRequest& request);
    void viewSettingsChanged();

protected:
    void showEvent(QShowEvent* event) override;

private:
    class Impl;
    std::unique_ptr<Impl> m_impl;
};

} // namespace sinewright::ui
