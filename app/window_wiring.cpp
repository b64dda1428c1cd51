// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/window_wiring.h"

#include "app/picture.h"
#include "ui/picture.h"

#include <QFileDialog>
#include <QFileInfo>
#include <QStandardPaths>

#include <algorithm>
#include <utility>

namespace sinewright::app {

using namespace Qt::StringLiterals;
using ui::SourceKind;

ui::SourceChoice choiceFromSpec(const SourceSpec& spec)
{
    ui::SourceChoice choice;
    choice.kind = spec.kind;
    choice.id = textFromSource(spec);
    choice.rateHz = spec.rateHz;
    choice.channel = spec.channel;
    switch (spec.kind) {
    case SourceKind::Demo:
        choice.label = WindowWiring::tr("Demo oscillator");
        break;
    case SourceKind::Card:
        choice.label = spec.name.isEmpty() ? WindowWiring::tr("Default input") : spec.name;
        break;
    case SourceKind::Take:
        choice.label = sourceLabel(spec);
        break;
    }
    return choice;
}

SourceSpec specFromChoice(const ui::SourceChoice& choice)
{
    SourceSpec spec = sourceFromText(choice.id).value_or(SourceSpec());
    if (choice.kind == SourceKind::Take) {
        // A file may be called anything, "demo" too.
        spec = SourceSpec{.kind = SourceKind::Take, .name = choice.id};
    } else {
        spec.rateHz = choice.rateHz;
    }
    spec.channel = std::max(1, choice.channel);
    return spec;
}

QList<ui::SourceChoice> sourceChoices(const std::vector<audio::CardInfo>& cards,
                                      const SourceSpec& current)
{
    QList<ui::SourceChoice> choices{choiceFromSpec(SourceSpec())};
    for (const audio::CardInfo& card : cards) {
        const auto isNamesake = [&card](const audio::CardInfo& other) {
            return other.name == card.name;
        };
        const bool isAlone = std::count_if(cards.begin(), cards.end(), isNamesake) == 1;
        SourceSpec spec{.kind = SourceKind::Card, .name = QString::fromStdString(card.name)};
        if (!isAlone) {
            spec.hostApi = QString::fromStdString(card.hostApi);
        }
        ui::SourceChoice choice = choiceFromSpec(spec);
        //: %1 name of an audio interface, %2 of the system it is reached through
        choice.label =
            WindowWiring::tr("%1 (%2)").arg(spec.name, QString::fromStdString(card.hostApi));
        choices.append(choice);
    }
    // What runs is in the list even when it was named on the command line, by a part of its name or as a file.
    const QString currentId = textFromSource(current);
    const auto isCurrent = [&currentId](const ui::SourceChoice& choice) {
        return choice.id == currentId;
    };
    if (std::none_of(choices.begin(), choices.end(), isCurrent)) {
        choices.append(choiceFromSpec(current));
    }
    return choices;
}

ui::BenchState benchState(const SessionStatus& status, double trimmerOhm)
{
    ui::BenchState state;
    state.condition = status.condition;
    state.source = choiceFromSpec(status.source);
    state.rateHz = status.rateHz;
    state.channel = status.source.channel;
    state.channels = std::max(1, status.channels);
    state.message = status.message;
    state.framesLost = status.framesLost;
    if (status.source.kind == SourceKind::Demo) {
        state.trimmerOhm = trimmerOhm;
        state.trimmerLowestOhm = audio::kDemoTrimmerLowestOhm;
        state.trimmerHighestOhm = audio::kDemoTrimmerHighestOhm;
    }
    return state;
}

WindowWiring::WindowWiring(ui::MainWindow& window,
                           BenchSession& session,
                           Settings& settings,
                           QObject* parent)
    : QObject(parent)
    , m_window(window)
    , m_session(session)
    , m_settings(settings)
{
    using ui::MainWindow;
    connect(&window, &MainWindow::sourceChosen, this, &WindowWiring::openChoice);
    connect(&window, &MainWindow::sourcesWanted, &session, &BenchSession::wantCards);
    connect(&window, &MainWindow::bestResetWanted, &session, &BenchSession::resetBest);
    connect(&window, &MainWindow::pictureWanted, this, &WindowWiring::takePicture);
    connect(&window, &MainWindow::trimmerMoved, this, &WindowWiring::turnTrimmer);
    connect(&window,
            &MainWindow::measureSettingsChosen,
            this,
            [this](const core::MeasureSettings& measure) {
                m_session.setMeasureSettings(measure);
                m_settings.setMeasure(measure);
                m_window.setMeasureSettings(measure);
            });
    connect(&window, &MainWindow::viewSettingsChanged, this, [this] {
        m_settings.setView(m_window.viewSettings());
    });
    connect(&session, &BenchSession::statusChanged, this, &WindowWiring::showStatus);
    connect(&session, &BenchSession::cardsListed, this, &WindowWiring::noteCards);
}

void WindowWiring::start(const SourceSpec& source)
{
    m_window.setViewSettings(m_settings.values().view);
    m_window.setMeasureSettings(m_settings.values().measure);
    m_session.setMeasureSettings(m_settings.values().measure);
    open(source);
    m_session.wantCards();
}

void WindowWiring::openChoice(const ui::SourceChoice& choice)
{
    open(specFromChoice(choice));
}

void WindowWiring::open(const SourceSpec& spec)
{
    m_session.open(spec);
    m_settings.setSource(spec);
    showSources();
}

void WindowWiring::turnTrimmer(double ohm)
{
    m_session.setTrimmer(ohm);
    showStatus();
}

void WindowWiring::showStatus()
{
    m_window.setBenchState(benchState(m_session.status(), m_session.trimmerOhm()));
}

void WindowWiring::showSources()
{
    const QList<ui::SourceChoice> choices = sourceChoices(m_cards, m_session.status().source);
    QStringList ids;
    for (const ui::SourceChoice& choice : choices) {
        ids.append(choice.id);
    }
    // The picker may be open just now: it is left alone as long as nothing has changed.
    if (ids != m_shownIds) {
        m_shownIds = ids;
        m_window.setSources(choices);
    }
}

void WindowWiring::noteCards(const std::vector<audio::CardInfo>& cards)
{
    m_cards = cards;
    showSources();
}

QString WindowWiring::pictureFolder()
{
    const QString remembered = m_settings.values().pictureFolder;
    if (!remembered.isEmpty() && QFileInfo(remembered).isDir()) {
        return remembered;
    }
    const QString usual = QStandardPaths::writableLocation(QStandardPaths::PicturesLocation);
    const QString chosen =
        QFileDialog::getExistingDirectory(&m_window, tr("Folder for pictures of the bench"), usual);
    if (!chosen.isEmpty()) {
        m_settings.setPictureFolder(chosen);
    }
    return chosen;
}

QImage WindowWiring::picture(QWidget* subject, const QString& title, const QDateTime& when) const
{
    const auto frame = m_window.shownFrame();
    const ui::BenchState state = benchState(m_session.status(), m_session.trimmerOhm());
    return ui::composePicture(
        subject,
        ui::captionFor(title, frame.get(), state, m_settings.values().measure, when),
        m_window.viewSettings().pictureScale);
}

void WindowWiring::takePicture(const ui::PictureRequest& request)
{
    const QDateTime when = QDateTime::currentDateTime();
    // Taken before a folder is asked for: the bench does not wait.
    const QImage image = picture(request.subject, request.title, when);
    const QString folder = pictureFolder();
    if (folder.isEmpty()) {
        m_window.showNotice(tr("No folder chosen, no picture saved."));
        return;
    }
    const auto path = savePicture(image, folder, when, request.subjectName);
    m_window.showNotice(path ? tr("Picture saved as %1").arg(*path)
                             : QString::fromStdString(path.error().detail));
}

} // namespace sinewright::app
