// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figures_column.h"

#include <QPainter>

#include <algorithm>
#include <cmath>

#include "ui/advice.h"
#include "ui/reading_choice.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kWidth = 188;
constexpr int kLabelPixels = 11;
constexpr int kUnderPixels = 12;
constexpr int kThdPixels = 46;
constexpr int kFigurePixels = 27;
constexpr double kLineHeight = 19.0;
constexpr qint64 kShowEveryMs = 240;

} // namespace

FiguresColumn::FiguresColumn(QWidget* parent) : QWidget(parent), m_theme(&ui::theme(ThemeName::Paper))
{
    setObjectName(u"figures"_s);
    setAccessibleName(tr("Running figures"));
    setToolTip(tr("The running figures. Steady tone: from full readings; while it moves: from quick ones."));
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

void FiguresColumn::rebuild()
{
    static const core::Reading kNothing;
    const ShownReading shown = m_frame ? shownReading(*m_frame) : ShownReading{&kNothing, false};
    const core::Reading& reading = *shown.reading;
    const int digits = shown.isFull ? kFullDigits : kQuickDigits;
    const QString kind = !m_frame ? QString() : shown.isFull ? tr("full reading") : tr("quick reading");

    FigureText level = reading.levelVrms ? voltFigure(reading.levelVrms) : decibelFigure(reading.levelDbfs, 2, u"dBFS"_s);
    const QString levelUnder = reading.levelVrms ? joined(decibelFigure(reading.levelDbfs, 2, u"dBFS"_s)) : QString();
    const core::BestReading* best = m_frame && m_frame->trend && m_frame->trend->best ? &*m_frame->trend->best : nullptr;
    QString bestUnder;
    std::optional<double> bestThd;
    if (best != nullptr) {
        bestThd = best->thdRatio;
        bestUnder = tr("%1, at %2")
                        .arg(ageText(m_frame->timeS - best->timeS),
                             joined(best->levelVrms ? voltFigure(best->levelVrms)
                                                    : decibelFigure(best->levelDbfs, 2, u"dBFS"_s)));
    }
    m_blocks = {
        {tr("THD"), kind, percentFigure(reading.thdRatio, digits), joined(ratioDecibelFigure(reading.thdRatio, 1, u"dB"_s)), false},
        {tr("THD+N"), {}, percentFigure(reading.thdnRatio, digits), joined(ratioDecibelFigure(reading.thdnRatio, 1, u"dB"_s)), false},
        {tr("Frequency"), {}, frequencyFigure(reading.frequencyHz, reading.frequencyStdHz), {}, false},
        {tr("Level"), {}, level, levelUnder, false},
        {tr("Best so far"), {}, percentFigure(bestThd), bestUnder, true},
    };
    m_lines = {
        {tr("SINAD"), decibelFigure(reading.sinadDb, 1, u"dB"_s)},
        {tr("SNR"), decibelFigure(reading.snrDb, 1, u"dB"_s)},
        {tr("noise"), decibelFigure(reading.noiseDbfs, 1, u"dBFS"_s)},
        {tr("mains hum"), decibelFigure(reading.mainsHumDbc, 1, u"dBc"_s)},
    };
    QStringList remarks;
    for (const core::Warning warning : reading.warnings) {
        remarks << warningText(warning);
    }
    m_remarks = remarks.join(u", "_s);
    setAccessibleDescription(tr("THD %1, THD+N %2, frequency %3, level %4.")
                                 .arg(joined(m_blocks[0].figure), joined(m_blocks[1].figure),
                                      joined(m_blocks[2].figure), joined(m_blocks[3].figure)));
}

void FiguresColumn::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    double used = 0.0;
    for (const Block& block : m_blocks) {
        used += block.label == m_blocks.front().label ? 88.0 : block.under.isEmpty() ? 50.0 : 66.0;
    }
    used += kLineHeight * (static_cast<double>(m_lines.size()) + 2.0);
    const double gap = std::clamp((height() - used) / 7.0, 4.0, 16.0);
    double y = 0.0;
    for (const Block& block : m_blocks) {
        y = paintBlock(painter, block, y, &block == m_blocks.data() ? kThdPixels : kFigurePixels) + gap;
        paintRule(painter, y);
        y += gap;
    }
    for (const Line& line : m_lines) {
        paintLine(painter, line, y + kUnderPixels);
        y += kLineHeight;
    }
    if (!m_remarks.isEmpty()) {
        y += gap / 2.0;
        QFont font = sentenceFont(13);
        font.setItalic(true);
        painter.setFont(font);
        painter.setPen(m_theme->ink);
        painter.drawText(QRectF(0.0, y, width(), height() - y), Qt::AlignLeft | Qt::TextWordWrap, m_remarks);
    }
}

double FiguresColumn::paintBlock(QPainter& painter, const Block& block, double y, int figurePixels) const
{
    painter.setFont(labelFont(kLabelPixels));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, y + kLabelPixels), block.label);
    if (!block.remark.isEmpty()) {
        painter.setFont(figureFont(kUnderPixels));
        painter.drawText(QRectF(0.0, y - 2.0, width(), kUnderPixels + 6.0), Qt::AlignRight | Qt::AlignTop, block.remark);
    }
    painter.setFont(displayFont(figurePixels));
    painter.setPen(block.isBest ? m_theme->verdigris : &block == m_blocks.data() ? m_theme->copper : m_theme->ink);
    const double capHeight = QFontMetricsF(painter.font()).capHeight();
    const double baseline = y + kLabelPixels + 9.0 + capHeight;
    painter.drawText(QPointF(-1.0, baseline), block.figure.value);
    const double x = QFontMetricsF(painter.font()).horizontalAdvance(block.figure.value);
    painter.setFont(figureFont(std::max(13, figurePixels / 2)));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(x + 5.0, baseline), block.figure.unit);
    if (block.under.isEmpty()) {
        return baseline + 2.0;
    }
    painter.setFont(figureFont(kUnderPixels));
    painter.drawText(QPointF(0.0, baseline + kUnderPixels + 6.0), block.under);
    return baseline + kUnderPixels + 8.0;
}

void FiguresColumn::paintLine(QPainter& painter, const Line& line, double baseline) const
{
    painter.setFont(figureFont(kUnderPixels + 1));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, baseline), line.label);
    const QFontMetricsF metrics(painter.font());
    const double unitWidth = metrics.horizontalAdvance(u"dBFS"_s);
    painter.drawText(QPointF(width() - unitWidth, baseline), line.figure.unit);
    painter.setPen(m_theme->ink);
    painter.drawText(QPointF(width() - unitWidth - 5.0 - metrics.horizontalAdvance(line.figure.value), baseline),
                     line.figure.value);
}

void FiguresColumn::paintRule(QPainter& painter, double y) const
{
    painter.setPen(QPen(m_theme->hairline, 1.0));
    const double line = std::round(y) + 0.5;
    painter.drawLine(QPointF(0.0, line), QPointF(width(), line));
}

} // namespace sinewright::ui
