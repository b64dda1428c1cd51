// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figures_column.h"

#include "ui/advice.h"
#include "ui/reading_choice.h"

#include <QPainter>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kWidth = 188;
constexpr int kLabelPixels = 11;
constexpr int kUnderPixels = 12;
constexpr int kThdPixels = 46;
constexpr int kFigurePixels = 27;
constexpr double kLineHeight = 19.0;
constexpr double kLabelBaseline = 13.0; ///< that of the plots' titles beside it
constexpr double kLabelGap = 8.0;
constexpr double kThdBlockHeight = 76.0; ///< of a block without the gaps around it
constexpr double kBlockHeight = 62.0;
constexpr double kPlainBlockHeight = 44.0;
constexpr double kLargestGap = 16.0;
constexpr double kPlainHeight = 600.0; ///< of the column; a higher one has larger type
constexpr double kLargestScale = 1.4;
constexpr qint64 kShowEveryMs = 240;

/// What kind of reading the figures come from, or why there are none.
QString kindOf(const ShownReading& shown, bool isStale)
{
    if (isStale) {
        return FiguresColumn::tr("last reading");
    }
    if (shown.reading->status != core::ReadingStatus::Ok) {
        return statusText(shown.reading->status);
    }
    return shown.isFull ? FiguresColumn::tr("full reading") : FiguresColumn::tr("quick reading");
}

QString underText(std::optional<double> ratio)
{
    return ratio ? joined(ratioDecibelFigure(ratio, 1, u"dB"_s)) : QString();
}

} // namespace

FiguresColumn::FiguresColumn(QWidget* parent)
    : QWidget(parent)
    , m_theme(&ui::theme(ThemeName::Paper))
{
    setObjectName(u"figures"_s);
    setAccessibleName(tr("Running figures"));
    setToolTip(tr(
        "The running figures. Steady tone: from full readings; while it moves: from quick ones."));
    setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Expanding);
    rebuild();
}

QSize FiguresColumn::sizeHint() const
{
    return {kWidth, 480};
}

void FiguresColumn::setTheme(const Theme& theme)
{
    m_theme = &theme;
    update();
}

void FiguresColumn::setFrame(const std::shared_ptr<const core::Frame>& frame)
{
    const bool isFirst = !m_frame || !frame;
    m_frame = frame;
    if (!isFirst && m_sinceShown.isValid() && !m_sinceShown.hasExpired(kShowEveryMs)) {
        return;
    }
    m_sinceShown.start();
    rebuild();
    update();
}

void FiguresColumn::setStale(bool isStale)
{
    if (isStale != m_isStale) {
        m_isStale = isStale;
        rebuild();
        update();
    }
}

void FiguresColumn::rebuild()
{
    static const core::Reading kNothing;
    const ShownReading shown = m_frame ? shownReading(*m_frame) : ShownReading{&kNothing, false};
    const core::Reading& reading = *shown.reading;
    const int digits = shown.isFull ? kFullDigits : kQuickDigits;
    const QString kind = m_frame ? kindOf(shown, m_isStale) : QString();

    FigureText level = reading.levelVrms ? voltFigure(reading.levelVrms)
                                         : decibelFigure(reading.levelDbfs, 2, u"dBFS"_s);
    const QString levelUnder =
        reading.levelVrms ? joined(decibelFigure(reading.levelDbfs, 2, u"dBFS"_s)) : QString();
    const core::BestReading* best =
        m_frame && m_frame->trend && m_frame->trend->best ? &*m_frame->trend->best : nullptr;
    QString bestUnder;
    std::optional<double> bestThd;
    if (best != nullptr) {
        bestThd = best->thdRatio;
        bestUnder =
            tr("%1, at %2")
                .arg(ageText(m_frame->timeS - best->timeS),
                     joined(best->levelVrms ? voltFigure(best->levelVrms)
                                            : decibelFigure(best->levelDbfs, 2, u"dBFS"_s)));
    }
    m_blocks = {
        {tr("THD"),
         kind,
         percentFigure(reading.thdRatio, digits),
         underText(reading.thdRatio),
         false},
        {tr("THD+N"),
         {},
         percentFigure(reading.thdnRatio, digits),
         underText(reading.thdnRatio),
         false},
        {tr("Frequency"),
         {},
         frequencyFigure(reading.frequencyHz, reading.frequencyStdHz),
         {},
         false},
        {tr("Level"), {}, level, levelUnder, false},
        {tr("Best so far"), {}, percentFigure(bestThd), bestUnder, true},
    };
    FigureText hum = decibelFigure(reading.mainsHumDbc, 1, u"dBc"_s);
    if (!reading.mainsHumDbc && reading.status == core::ReadingStatus::Ok) {
        hum = {tr("none seen"), {}}; // looked for and not found, unlike a figure that cannot be had
    }
    m_lines = {
        {tr("SINAD"), decibelFigure(reading.sinadDb, 1, u"dB"_s)},
        {tr("SNR"), decibelFigure(reading.snrDb, 1, u"dB"_s)},
        {tr("noise"), decibelFigure(reading.noiseDbfs, 1, u"dBFS"_s)},
        {tr("mains hum"), hum},
    };
    QStringList remarks;
    for (const core::Warning warning : reading.warnings) {
        remarks << warningText(warning);
    }
    m_remarks = remarks.join(u", "_s);
    setAccessibleDescription(tr("THD %1, THD+N %2, frequency %3, level %4.")
                                 .arg(joined(m_blocks[0].figure),
                                      joined(m_blocks[1].figure),
                                      joined(m_blocks[2].figure),
                                      joined(m_blocks[3].figure)));
}

int FiguresColumn::px(double pixels) const
{
    return static_cast<int>(
        std::lround(pixels * std::clamp(height() / kPlainHeight, 1.0, kLargestScale)));
}

void FiguresColumn::resizeEvent(QResizeEvent* event)
{
    QWidget::resizeEvent(event);
    setFixedWidth(px(kWidth));
}

void FiguresColumn::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    double used = px(kLineHeight) * (static_cast<double>(m_lines.size()) + 1.5);
    for (std::size_t i = 0; i < m_blocks.size(); ++i) {
        used += px(i == 0                        ? kThdBlockHeight
                   : m_blocks[i].under.isEmpty() ? kPlainBlockHeight
                                                 : kBlockHeight);
    }
    const double gaps = 2.0 * static_cast<double>(m_blocks.size()) + 1.0;
    const double gap =
        std::clamp((height() - used) / gaps, 3.0, static_cast<double>(px(kLargestGap)));
    double y = 0.0;
    for (const Block& block : m_blocks) {
        y = paintBlock(
                painter, block, y, px(&block == m_blocks.data() ? kThdPixels : kFigurePixels)) +
            gap;
        paintRule(painter, y);
        y += gap;
    }
    for (const Line& line : m_lines) {
        paintLine(painter, line, y + px(kUnderPixels));
        y += px(kLineHeight);
    }
    if (!m_remarks.isEmpty()) {
        QFont font = sentenceFont(px(kUnderPixels + 1));
        font.setItalic(true);
        painter.setFont(font);
        painter.setPen(m_theme->ink);
        painter.drawText(QRectF(0.0, y + gap / 2.0, width(), height() - y),
                         Qt::AlignLeft | Qt::TextWordWrap,
                         m_remarks);
    }
}

double
FiguresColumn::paintBlock(QPainter& painter, const Block& block, double y, int figurePixels) const
{
    const double labelBaseline = y + px(kLabelBaseline);
    painter.setFont(labelFont(px(kLabelPixels)));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, labelBaseline), block.label);
    if (!block.remark.isEmpty()) {
        painter.setFont(figureFont(px(kUnderPixels)));
        const double x = width() - QFontMetricsF(painter.font()).horizontalAdvance(block.remark);
        painter.drawText(QPointF(x, labelBaseline), block.remark);
    }
    painter.setFont(displayFont(figurePixels));
    const bool isAbsent = block.figure.value == kAbsent;
    painter.setPen(isAbsent                                  ? m_theme->inkSoft
                   : block.isBest                            ? m_theme->verdigris
                   : &block == m_blocks.data() && !m_isStale ? m_theme->copper
                                                             : m_theme->ink);
    const QFontMetricsF metrics(painter.font());
    const double baseline = std::round(labelBaseline + px(kLabelGap) + metrics.capHeight());
    painter.drawText(QPointF(-1.0, baseline), block.figure.value);
    painter.setFont(figureFont(std::max(px(kUnderPixels + 1), figurePixels / 2)));
    painter.setPen(m_theme->inkSoft);
    if (!isAbsent) {
        painter.drawText(QPointF(metrics.horizontalAdvance(block.figure.value) + px(5.0), baseline),
                         block.figure.unit);
    }
    if (block.under.isEmpty()) {
        return baseline + 2.0;
    }
    painter.setFont(figureFont(px(kUnderPixels)));
    painter.drawText(QPointF(0.0, baseline + px(kUnderPixels + 6)), block.under);
    return baseline + px(kUnderPixels + 8);
}

void FiguresColumn::paintLine(QPainter& painter, const Line& line, double baseline) const
{
    painter.setFont(figureFont(px(kUnderPixels + 1)));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, baseline), line.label);
    const QFontMetricsF metrics(painter.font());
    const bool isWord = line.figure.unit.isEmpty() || line.figure.value == kAbsent;
    const double unitWidth = isWord ? -px(5.0) : metrics.horizontalAdvance(u"dBFS"_s);
    if (line.figure.value != kAbsent) {
        painter.drawText(QPointF(width() - unitWidth, baseline), line.figure.unit);
    }
    painter.setPen(m_theme->ink);
    painter.drawText(
        QPointF(width() - unitWidth - px(5.0) - metrics.horizontalAdvance(line.figure.value),
                baseline),
        line.figure.value);
}

void FiguresColumn::paintRule(QPainter& painter, double y) const
{
    painter.setPen(QPen(m_theme->hairline, 1.0));
    const double line = std::round(y) + 0.5;
    painter.drawLine(QPointF(0.0, line), QPointF(width(), line));
}

} // namespace sinewright::ui
