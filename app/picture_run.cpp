// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/picture_run.h"

#include "app/picture.h"
#include "app/processor_time.h"
#include "app/reading_report.h"
#include "app/words.h"
#include "ui/reading_choice.h"

#include <QDateTime>
#include <QGuiApplication>

#include <algorithm>
#include <chrono>
#include <cmath>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

using Condition = SessionStatus::Condition;

constexpr std::chrono::milliseconds kLookEvery{50};

/// The load is counted from here on: fonts, plans and first layouts are behind [s of signal].
constexpr double kWarmS = 2.0;

/// A source that gives no frame for so long has failed [s].
constexpr double kPatienceS = 15.0;

/// "Trim" of the page that the command line calls "trim".
QString pageTitle(ui::Page page)
{
    QString word = QString::fromLatin1(wordOf(kPageWords, page));
    word[0] = word[0].toUpper();
    return word;
}

} // namespace

PictureRun::PictureRun(const PictureOptions& options, const QString& settingsFile)
    : m_options(options)
    , m_settings(settingsFile)
    , m_window([this] { return m_session.newestFrame(); })
    , m_wiring(m_window, m_session, m_settings)
{
    ui::ViewSettings view;
    view.theme = options.theme;
    view.page = options.page;
    view.pictureScale = options.scale;
    m_settings.setView(view);
    connect(&m_looking, &QTimer::timeout, this, &PictureRun::look);
}

Outcome PictureRun::run()
{
    turnTrimmer(0.0);
    m_wiring.start(m_options.source);
    m_window.resize(m_options.size);
    m_window.show();
    m_startedS = steadySeconds();
    m_looking.start(kLookEvery);
    m_loop.exec();
    return picture();
}

/// Ends the loop when enough was shown, or nothing more will come.
void PictureRun::look()
{
    const auto frame = m_session.newestFrame();
    const double shownS = frame ? frame->timeS : 0.0;
    turnTrimmer(shownS);
    if (!m_isWarm && shownS >= std::min(kWarmS, m_options.afterS / 2.0)) {
        m_isWarm = true;
        m_loadFrom = loadNow();
    }
    const Condition condition = m_session.status().condition;
    const bool isOver = condition == Condition::Failed || condition == Condition::Ended;
    const bool isLate = steadySeconds() - m_startedS > m_options.afterS + kPatienceS;
    if (shownS >= m_options.afterS || isOver || isLate) {
        m_loop.quit();
    }
}

void PictureRun::turnTrimmer(double shownS)
{
    if (m_options.trimmerOhm.empty()) {
        return;
    }
    const auto stops = m_options.trimmerOhm.size();
    const double passed =
        std::clamp(shownS / m_options.afterS, 0.0, 1.0) * static_cast<double>(stops);
    const double ohm = m_options.trimmerOhm[std::min(static_cast<std::size_t>(passed), stops - 1)];
    if (ohm != m_session.trimmerOhm()) {
        m_wiring.turnTrimmer(ohm);
    }
}

LoadMark PictureRun::loadNow() const
{
    return {.atS = steadySeconds(),
            .analysisS = m_session.analysisSeconds(),
            .drawingS = threadSeconds(),
            .totalS = processSeconds()};
}

std::string PictureRun::loadReport(const LoadMark& from, const LoadMark& to) const
{
    const double span = to.atS - from.atS;
    const auto percent = [span](double before, double after) {
        constexpr double kPercent = 100.0;
        return span > 0.0 ? kPercent * (after - before) / span : 0.0;
    };
    return u"load of one core over %1 s: analysis %2 %, drawing %3 %, total %4 %\n"_s
        .arg(span, 0, 'f', 1)
        .arg(percent(from.analysisS, to.analysisS), 0, 'f', 1)
        .arg(percent(from.drawingS, to.drawingS), 0, 'f', 1)
        .arg(percent(from.totalS, to.totalS), 0, 'f', 1)
        .toStdString();
}

Outcome PictureRun::picture()
{
    const LoadMark loadTo = loadNow();
    m_looking.stop();
    const SessionStatus status = m_session.status();
    const auto frame = m_session.newestFrame();
    if (status.condition == Condition::Failed || !frame) {
        const QString why = status.message.isEmpty() ? u"it gave no signal"_s : status.message;
        return complaint(ExitStatus::NoSource, why.toStdString());
    }
    // The display timer has had the frame by now or gets it in the next turn.
    QGuiApplication::processEvents();
    const QImage image =
        m_wiring.picture(m_window.sheet(), pageTitle(m_options.page), QDateTime::currentDateTime());
    if (const auto written = writePicture(image, m_options.file); !written) {
        return complaint(ExitStatus::NotWritten, written.error().detail);
    }
    const core::Reading& reading = *ui::shownReading(*frame).reading;
    Outcome outcome;
    outcome.output = readingAsLine(reading) + '\n';
    if (m_options.reportsLoad) {
        outcome.output += loadReport(m_loadFrom, loadTo);
    }
    outcome.status =
        reading.status == core::ReadingStatus::Ok ? ExitStatus::Good : ExitStatus::Unusable;
    return outcome;
}

} // namespace sinewright::app
