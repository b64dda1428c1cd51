// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/bench_session.h"
#include "app/settings.h"
#include "core/measure/reading.h"
#include "ui/bench_state.h"
#include "ui/main_window.h"

#include <QDateTime>
#include <QImage>
#include <QList>
#include <QObject>
#include <QStringList>

#include <vector>

namespace sinewright::app {

/// Joins the window and the session: what the user wants goes to the session and into the settings, how the session
/// stands goes to the window.
///
/// [gui] Session, settings and window outlive it.
class WindowWiring final : public QObject
{
    Q_OBJECT
public:
    WindowWiring(ui::MainWindow& window,
                 BenchSession& session,
                 Settings& settings,
                 QObject* parent = nullptr);

    /// Shows what is remembered, and starts with this source.
    void start(const SourceSpec& source);

    /// Turns the virtual trimmer, and shows where it stands.
    void turnTrimmer(double ohm);

    /// A part of the window as it stands, with its caption.
    [[nodiscard]] QImage
    picture(QWidget* subject, const QString& title, const QDateTime& when) const;

private:
    void openChoice(const ui::SourceChoice& choice);
    void open(const SourceSpec& spec);
    void showStatus();
    void showSources();
    void noteCards(const std::vector<audio::CardInfo>& cards);
    void takePicture(const ui::PictureRequest& request);
    [[nodiscard]] QString pictureFolder();

    ui::MainWindow& m_window;
    BenchSession& m_session;
    Settings& m_settings;
    std::vector<audio::CardInfo> m_cards; ///< as last listed
    QStringList m_shownIds;               ///< of the picker's entries
};

/// What the window calls this source.
[[nodiscard]] ui::SourceChoice choiceFromSpec(const SourceSpec& spec);

/// The source that the user chose; the demo should the choice make no sense.
[[nodiscard]] SourceSpec specFromChoice(const ui::SourceChoice& choice);

/// The picker's list: demo, every interface, and the take that is open, if one is.
///
/// Interfaces of the same name are told apart by their host API.
[[nodiscard]] QList<ui::SourceChoice> sourceChoices(const std::vector<audio::CardInfo>& cards,
                                                    const SourceSpec& current);

/// The session's status in the window's words.
[[nodiscard]] ui::BenchState benchState(const SessionStatus& status, double trimmerOhm);

} // namespace sinewright::app
