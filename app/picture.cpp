// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/picture.h"

#include "app/reading_report.h"
#include "app/words.h"
#include "ui/figure_text.h"
#include "ui/theme.h"

#include <qcustomplot.h>

#include <QDir>
#include <QFile>
#include <QList>
#include <QPainter>
#include <QPalette>
#include <QSaveFile>

#include <algorithm>
#include <utility>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr int kLettersForAgain = 26;
const char* const kPng = "PNG";

// Of the strip under a picture [logical pixels].
constexpr int kCaptionPixels = 12;
constexpr int kLinePitch = 18;
constexpr int kPadding = 8;

core::Error writeError(const QString& file, const QString& why)
{
    return {core::ErrorCode::WriteFailed,
            u"%1: cannot be written: %2; choose another folder or make room"_s.arg(file, why).toStdString()};
}

QString settingsText(const core::MeasureSettings& settings, double rateHz)
{
    return u"band %1\u2013%2 Hz \u00B7 harmonics 2\u2013%3 \u00B7 weighting %4"_s
        .arg(ui::numberText(settings.band.lowHz, 0),
             ui::numberText(std::min(settings.band.highHz, rateHz / 2.0), 0))
        .arg(settings.harmonicCount)
        .arg(QLatin1StringView(wordOf(kWeightingWords, settings.weighting)));
}

/// The full reading where there is one: it is the figure to be written down.
const core::Reading& bestKnown(const core::Frame& frame)
{
    return frame.full ? *frame.full : frame.quick;
}

/// Plots keep what they drew in a buffer of the screen's resolution; for a picture of a higher one they draw anew.
class PlotsAtScale final {
public:
    PlotsAtScale(QWidget& subject, int scale)
        : m_plots(subject.findChildren<QCustomPlot*>())
    {
        if (auto* const plot = qobject_cast<QCustomPlot*>(&subject)) {
            m_plots.append(plot);
        }
        for (QCustomPlot* const plot : std::as_const(m_plots)) {
            m_ratios.append(plot->bufferDevicePixelRatio());
            redraw(*plot, scale);
        }
    }
    ~PlotsAtScale()
    {
        for (qsizetype i = 0; i < m_plots.size(); ++i) {
            redraw(*m_plots.at(i), m_ratios.at(i));
        }
    }
    PlotsAtScale(const PlotsAtScale&) = delete;
    PlotsAtScale& operator=(const PlotsAtScale&) = delete;

private:
    static void redraw(QCustomPlot& plot, double ratio)
    {
        if (plot.bufferDevicePixelRatio() != ratio) {
            plot.setBufferDevicePixelRatio(ratio);
            plot.replot(QCustomPlot::rpImmediateRefresh);
        }
    }

    QList<QCustomPlot*> m_plots;
    QList<double> m_ratios;
};

void paintCaption(QPainter& painter, const QRect& strip, const QStringList& caption, const QPalette& palette)
{
    painter.fillRect(strip, palette.color(QPalette::Window));
    painter.setPen(palette.color(QPalette::Mid));
    painter.drawLine(strip.topLeft(), strip.topRight());
    painter.setPen(palette.color(QPalette::WindowText));
    painter.setFont(ui::figureFont(kCaptionPixels));
    QRect line(strip.left() + kPadding, strip.top() + kPadding, strip.width() - 2 * kPadding, kLinePitch);
    for (const QString& text : caption) {
        painter.drawText(line, Qt::AlignLeft | Qt::AlignVCenter | Qt::TextSingleLine, text);
        line.translate(0, kLinePitch);
    }
}

} // namespace

QStringList pictureCaption(const PictureFacts& facts)
{
    const SessionStatus& session = facts.session;
    const QStringList origin{facts.when.toString(u"yyyy-MM-dd HH:mm:ss"_s),
                             u"%1, channel %2"_s.arg(sourceLabel(session.source)).arg(session.source.channel),
                             ui::rateText(session.rateHz),
                             settingsText(facts.settings, session.rateHz)};
    const QString figures =
        facts.frame ? QString::fromStdString(readingAsLine(bestKnown(*facts.frame))) : u"no signal yet"_s;
    return {origin.join(u" \u00B7 "_s), figures};
}

int captionHeight(qsizetype lines)
{
    return 2 * kPadding + kLinePitch * static_cast<int>(lines);
}

QImage pictureOf(QWidget& subject, const QStringList& caption, int scale)
{
    const PlotsAtScale plots(subject, scale);
    const QSize size(subject.width(), subject.height() + captionHeight(caption.size()));
    QImage image(size * scale, QImage::Format_RGB32);
    image.setDevicePixelRatio(scale);
    const QPalette palette = subject.palette();
    image.fill(palette.color(QPalette::Window));
    QPainter painter(&image);
    subject.render(&painter, QPoint(), QRegion(), QWidget::DrawWindowBackground | QWidget::DrawChildren);
    paintCaption(painter, QRect(0, subject.height(), size.width(), size.height() - subject.height()), caption, palette);
    return image;
}

QString pictureName(const QDateTime& when, const QString& subjectName, int again)
{
    const QString letter = again > 0 ? QString(QChar(u'a' + again - 1)) : QString();
    return u"sinewright-%1%2-%3.png"_s.arg(when.toString(u"yyyyMMdd-HHmmss"_s), letter, subjectName);
}

core::Result<QString>
savePicture(const QImage& image, const QString& folder, const QDateTime& when, const QString& subjectName)
{
    for (int again = 0; again <= kLettersForAgain; ++again) {
        const QString path = QDir(folder).filePath(pictureName(when, subjectName, again));
        QFile file(path);
        if (!file.open(QIODevice::WriteOnly | QIODevice::NewOnly)) {
            if (file.exists()) {
                continue;
            }
            return tl::unexpected(writeError(path, file.errorString()));
        }
        if (!image.save(&file, kPng) || !file.flush()) {
            const QString why = file.errorString();
            file.remove();
            return tl::unexpected(writeError(path, why));
        }
        return path;
    }
    return tl::unexpected(writeError(folder, u"too many pictures in one second"_s));
}

core::Result<void> writePicture(const QImage& image, const QString& path)
{
    QSaveFile file(path);
    // A device such as /dev/full cannot be replaced, only written to.
    file.setDirectWriteFallback(true);
    if (!file.open(QIODevice::WriteOnly)) {
        return tl::unexpected(writeError(path, file.errorString()));
    }
    if (!image.save(&file, kPng) || !file.commit()) {
        return tl::unexpected(writeError(path, file.errorString()));
    }
    return {};
}

} // namespace sinewright::app
