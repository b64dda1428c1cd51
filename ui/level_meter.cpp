// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/level_meter.h"

#include "core/units.h"
#include "ui/figure_text.h"

#include <QPainter>

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr qint64 kHoldPeakMs = 1500;
constexpr qint64 kHoldOverMs = 2000;
constexpr qint64 kTextEveryMs = 240;
constexpr double kBottomDbfs = -60.0;
constexpr double kTextWidth = 96.0;
constexpr double kBarHeight = 7.0;
constexpr int kTypeSize = 12;
constexpr int kScaleType = 11;

std::optional<double> decibels(double value)
{
    return value > 0.0 ? std::optional(value) : std::nullopt;
}

} // namespace

void MeterModel::feed(double peakFs, double rmsFs, bool isOverloaded, qint64 nowMs)
{
    const auto peak = decibels(peakFs);
    const std::optional<double> peakDbfs =
        peak ? std::optional(core::decibelsFromRatio(*peak)) : std::nullopt;
    if (!m_peakDbfs || (peakDbfs && *peakDbfs >= *m_peakDbfs) ||
        nowMs - m_peakAtMs >= kHoldPeakMs) {
        m_peakDbfs = peakDbfs;
        m_peakAtMs = nowMs;
    }
    const auto rms = decibels(rmsFs);
    m_rmsDbfs = rms ? std::optional(core::dbfsFromRms(*rms)) : std::nullopt;
    if (isOverloaded) {
        m_isOver = true;
        m_overAtMs = nowMs;
    } else if (nowMs - m_overAtMs >= kHoldOverMs) {
        m_isOver = false;
    }
}

void MeterModel::clear()
{
    *this = MeterModel();
}

LevelMeter::LevelMeter(QWidget* parent) : QWidget(parent), m_theme(&ui::theme(ThemeName::Paper))
{
    setObjectName(u"levelMeter"_s);
    setAccessibleName(tr("Input level"));
    setToolTip(tr("Input level in dBFS: the bar is the rms, the tick the peak. Aim for peaks 3 to "
                  "12 dB below full scale."));
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Fixed);
    clear();
}

QSize LevelMeter::sizeHint() const
{
    return {340, 40};
}

QSize LevelMeter::minimumSizeHint() const
{
    return {240, 40};
}

void LevelMeter::setTheme(const Theme& theme)
{
    m_theme = &theme;
    update();
}

void LevelMeter::feed(double peakFs, double rmsFs, bool isOverloaded, qint64 nowMs)
{
    const bool wasOver = m_model.isOver();
    m_model.feed(peakFs, rmsFs, isOverloaded, nowMs);
    if (nowMs - m_shownAtMs >= kTextEveryMs || wasOver != m_model.isOver()) {
        m_shownAtMs = nowMs;
        m_peakText = joined(decibelFigure(m_model.peakDbfs(), 1, u"dBFS"_s));
        m_rmsText = joined(decibelFigure(m_model.rmsDbfs(), 1, u"dBFS"_s));
        setAccessibleDescription(m_model.isOver()
                                     ? tr("Overload. Peak %1, rms %2.").arg(m_peakText, m_rmsText)
                                     : tr("Peak %1, rms %2.").arg(m_peakText, m_rmsText));
    }
    update();
}

void LevelMeter::clear()
{
    m_model.clear();
    m_shownAtMs = 0;
    m_peakText = kAbsent;
    m_rmsText = kAbsent;
    update();
}

void LevelMeter::paintEvent(QPaintEvent* /*event*/)
{
    QPainter painter(this);
    const QRectF bar(0.5, 8.5, width() - kTextWidth - 18.0, kBarHeight);
    paintScale(painter, bar);
    paintText(painter, QRectF(width() - kTextWidth, 0.0, kTextWidth, height()));
}

void LevelMeter::paintScale(QPainter& painter, const QRectF& bar) const
{
    const auto at = [&bar](double dbfs) {
        return bar.left() +
               bar.width() * (std::clamp(dbfs, kBottomDbfs, 0.0) - kBottomDbfs) / -kBottomDbfs;
    };
    if (m_model.rmsDbfs()) {
        painter.fillRect(
            QRectF(QPointF(bar.left(), bar.top()), QPointF(at(*m_model.rmsDbfs()), bar.bottom())),
            m_theme->slate);
    }
    painter.setPen(QPen(m_theme->hairline, 1.0));
    painter.drawLine(bar.bottomLeft() + QPointF(0.0, 1.0), bar.bottomRight() + QPointF(0.0, 1.0));
    if (m_model.peakDbfs()) {
        const double x = at(*m_model.peakDbfs());
        painter.fillRect(QRectF(x - 1.0, bar.top() - 4.0, 2.0, bar.height() + 4.0),
                         m_model.isOver() ? m_theme->alert : m_theme->ink);
    }
    painter.setFont(figureFont(kScaleType));
    const QFontMetricsF metrics(painter.font());
    for (const double mark : {-60.0, -40.0, -20.0, -12.0, -6.0, 0.0}) {
        const double x = std::round(at(mark)) + 0.5;
        painter.setPen(QPen(m_theme->hairline, 1.0));
        painter.drawLine(QPointF(x, bar.bottom() + 1.0), QPointF(x, bar.bottom() + 4.0));
        const QString text = numberText(mark, 0);
        const double half = metrics.horizontalAdvance(text) / 2.0;
        painter.setPen(m_theme->inkSoft);
        painter.drawText(QPointF(std::max(0.0, x - half), bar.bottom() + 4.0 + kScaleType), text);
    }
}

void LevelMeter::paintText(QPainter& painter, const QRectF& area) const
{
    painter.setFont(figureFont(kTypeSize));
    const double first = area.top() + 4.0 + kTypeSize;
    const double second = first + kTypeSize + 5.0;
    const auto row =
        [&](double baseline, const QString& label, const QString& text, const QColor& colour) {
            painter.setPen(m_theme->inkSoft);
            painter.drawText(QPointF(area.left(), baseline), label);
            painter.setPen(colour);
            const double x = area.right() - QFontMetricsF(painter.font()).horizontalAdvance(text);
            painter.drawText(QPointF(x, baseline), text);
        };
    if (m_model.isOver()) {
        QFont strong = painter.font();
        strong.setBold(true);
        painter.setFont(strong);
        row(first, QString(), tr("overload"), m_theme->alert);
        painter.setFont(figureFont(kTypeSize));
    } else {
        row(first, tr("peak"), m_peakText, m_theme->ink);
    }
    row(second, tr("rms"), m_rmsText, m_theme->ink);
}

} // namespace sinewright::ui
