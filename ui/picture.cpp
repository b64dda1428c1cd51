// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/picture.h"

#include "ui/figure_text.h"
#include "ui/reading_choice.h"
#include "ui/theme.h"

#include <qcustomplot.h>

#include <QCoreApplication>
#include <QPainter>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

struct Words
{
    Q_DECLARE_TR_FUNCTIONS(sinewright::ui::Picture)
};

constexpr int kMargin = 16; ///< around the widget and the caption
constexpr int kTitlePixels = 17;
constexpr int kTextPixels = 13;
constexpr double kLeading = 1.5;

/// A plot keeps its drawing in a buffer of the screen's resolution: this gives it the picture's for as long as the
/// picture is taken.
class FinePlots final
{
public:
    FinePlots(QWidget& subject, int scale) : m_plots(subject.findChildren<QCustomPlot*>())
    {
        if (auto* plot = qobject_cast<QCustomPlot*>(&subject)) {
            m_plots << plot;
        }
        for (QCustomPlot* plot : std::as_const(m_plots)) {
            m_ratios << plot->bufferDevicePixelRatio();
            redraw(*plot, scale);
        }
    }
    ~FinePlots()
    {
        for (qsizetype i = 0; i < m_plots.size(); ++i) {
            redraw(*m_plots[i], m_ratios[i]);
        }
    }
    FinePlots(const FinePlots&) = delete;
    FinePlots& operator=(const FinePlots&) = delete;

private:
    static void redraw(QCustomPlot& plot, double ratio)
    {
        plot.setBufferDevicePixelRatio(ratio);
        plot.replot(QCustomPlot::rpQueuedRefresh);
    }
    QList<QCustomPlot*> m_plots;
    QList<double> m_ratios;
};

QString joinedLine(QStringList parts)
{
    parts.removeAll(QString());
    return parts.join(u"  ·  "_s);
}

QString figuresLine(const core::Frame& frame)
{
    const ShownReading shown = shownReading(frame);
    const core::Reading& reading = *shown.reading;
    const int digits = shown.isFull ? kFullDigits : kQuickDigits;
    QStringList parts{statusText(reading.status),
                      Words::tr("THD %1").arg(joined(percentFigure(reading.thdRatio, digits))),
                      Words::tr("THD+N %1").arg(joined(percentFigure(reading.thdnRatio, digits))),
                      joined(frequencyFigure(reading.frequencyHz, reading.frequencyStdHz)),
                      joined(decibelFigure(reading.levelDbfs, 2, u"dBFS"_s)),
                      reading.levelVrms ? joined(voltFigure(reading.levelVrms)) : QString(),
                      Words::tr("SNR %1").arg(joined(decibelFigure(reading.snrDb, 1, u"dB"_s)))};
    for (const core::Warning warning : reading.warnings) {
        parts << warningText(warning);
    }
    parts << (shown.isFull ? Words::tr("full reading") : Words::tr("quick reading"));
    return joinedLine(parts);
}

QString settingsLine(const core::MeasureSettings& settings)
{
    const QString weighting = settings.weighting == core::Weighting::A ? Words::tr("A-weighted")
                              : settings.weighting == core::Weighting::Itu468
                                  ? Words::tr("468-weighted, rms detector")
                                  : Words::tr("not weighted");
    const QString fullScale =
        settings.fullScaleVrms
            ? Words::tr("full scale %1 rms").arg(joined(voltFigure(settings.fullScaleVrms)))
            : Words::tr("volts not calibrated");
    return joinedLine({Words::tr("band %1 to %2")
                           .arg(numberText(settings.band.lowHz, 0),
                                joined({numberText(settings.band.highHz, 0), u"Hz"_s})),
                       Words::tr("harmonics 2 to %1").arg(settings.harmonicCount),
                       weighting,
                       fullScale});
}

} // namespace

PictureCaption captionFor(const QString& title,
                          const core::Frame* frame,
                          const BenchState& bench,
                          const core::MeasureSettings& settings,
                          const QDateTime& when)
{
    PictureCaption caption;
    caption.title = title;
    caption.when =
        when.toOffsetFromUtc(when.offsetFromUtc()).toString(Qt::ISODate).replace(u'T', u' ');
    caption.source =
        joinedLine({bench.source.label,
                    bench.rateHz > 0.0 ? rateText(bench.rateHz) : QString(),
                    Words::tr("channel %1 of %2").arg(bench.channel).arg(bench.channels)});
    caption.settings = settingsLine(settings);
    caption.figures = frame != nullptr ? figuresLine(*frame) : Words::tr("nothing measured yet");
    return caption;
}

QImage composePicture(QWidget* subject, const PictureCaption& caption, int scale)
{
    const QPalette palette = subject->palette();
    // What fills its window reaches the picture's edges; a page or a plot gets a margin of paper.
    const int edge = subject->size() == subject->window()->size() ? 0 : kMargin;
    const int width = subject->width() + 2 * edge;
    const int textWidth = width - 2 * kMargin;
    const QFont titleFont = sentenceFont(kTitlePixels);
    const QFont textFont = figureFont(kTextPixels);
    const int titleHeight = static_cast<int>(kTitlePixels * kLeading);
    QStringList lines{caption.figures, caption.source, caption.settings};
    lines.removeAll(QString());
    const QFontMetrics metrics(textFont);
    int stripHeight = kMargin + titleHeight;
    QList<QRect> places;
    for (const QString& line : std::as_const(lines)) {
        const int height =
            metrics.boundingRect(QRect(0, 0, textWidth, 10000), Qt::TextWordWrap, line).height() +
            4;
        places << QRect(kMargin, subject->height() + edge + stripHeight, textWidth, height);
        stripHeight += height;
    }
    QImage image(width * scale,
                 (subject->height() + edge + stripHeight + kMargin) * scale,
                 QImage::Format_RGB32);
    image.setDevicePixelRatio(scale);
    image.fill(palette.color(QPalette::Window));
    QPainter painter(&image);
    {
        const FinePlots fine(*subject, scale);
        subject->render(&painter, QPoint(edge, edge), QRegion(), QWidget::DrawChildren);
    }
    const int top = subject->height() + edge;
    painter.setPen(palette.color(QPalette::PlaceholderText));
    painter.drawLine(QPointF(kMargin, top + kMargin / 2.0),
                     QPointF(width - kMargin, top + kMargin / 2.0));
    painter.setPen(palette.color(QPalette::WindowText));
    painter.setFont(titleFont);
    const QRect titlePlace(kMargin, top + kMargin - 2, textWidth, titleHeight);
    painter.drawText(titlePlace, Qt::AlignLeft | Qt::AlignVCenter, caption.title);
    painter.setFont(textFont);
    painter.setPen(palette.color(QPalette::PlaceholderText));
    painter.drawText(titlePlace, Qt::AlignRight | Qt::AlignVCenter, caption.when);
    for (qsizetype i = 0; i < lines.size(); ++i) {
        painter.setPen(palette.color(i == 0 ? QPalette::WindowText : QPalette::PlaceholderText));
        painter.drawText(places[i], Qt::AlignLeft | Qt::AlignTop | Qt::TextWordWrap, lines[i]);
    }
    painter.end();
    image.setDevicePixelRatio(1.0);
    return image;
}

} // namespace sinewright::ui
