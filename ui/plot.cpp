// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/plot.h"

#include <cmath>
#include <limits>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kTypeSize = 12;
constexpr int kLeftMargin = 40;
constexpr int kRightMargin = 8;
constexpr int kTickLength = 4;
constexpr int kTickLabelPadding = 4;
constexpr int kKeySample = 18; ///< length of the line sample before a key
constexpr int kKeyGap = 6;
constexpr int kKeySpacing = 16;
constexpr qint64 kDescribeEveryMs = 1000;

} // namespace

Overprint::Overprint(QCustomPlot* plot, const QString& layer, Paint paint)
    : QCPLayerable(plot, layer)
    , m_paint(std::move(paint))
{}

void Overprint::applyDefaultAntialiasingHint(QCPPainter* painter) const
{
    painter->setAntialiasing(true);
}

void Overprint::draw(QCPPainter* painter)
{
    m_paint(*painter);
}

Plot::Plot(QString plainName, QString title, QString unit, QWidget* parent)
    : QCustomPlot(parent)
    , m_plainName(std::move(plainName))
    , m_title(std::move(title))
    , m_unit(std::move(unit))
    , m_theme(&ui::theme(ThemeName::Paper))
    , m_typeSize(kTypeSize)
    , m_leftMargin(kLeftMargin)
    , m_rightMargin(kRightMargin)
{
    setObjectName(m_plainName);
    setAccessibleName(m_title);
    setPlottingHint(QCP::phFastPolylines, true);
    setPlottingHint(QCP::phCacheLabels, true);
    setNotAntialiasedElements(QCP::aeAxes | QCP::aeGrid);
    setMinimumSize(120, 90);
    plotLayout()->setMargins(QMargins());
    axisRect()->setAutoMargins(QCP::msNone);
    // Titles and notes are painted last, over everything else.
    new Overprint(this, u"overlay"_s, [this](QCPPainter& painter) {
        paintTitle(painter);
        paintNote(painter);
    });
    applyMargins();
}

void Plot::setTheme(const Theme& theme)
{
    m_theme = &theme;
    setBackground(QBrush(theme.page));
    for (QCPAxis* axis : axisRect()->axes()) {
        styleAxis(*axis, theme, m_typeSize);
    }
    restyle();
    replot(rpQueuedReplot);
}

int Plot::columns() const
{
    return std::max(1, width() - m_leftMargin - m_rightMargin);
}

void Plot::draw()
{
    if (!isVisible() || visibleRegion().isEmpty()) {
        return;
    }
    ++m_drawCount;
    replot(rpQueuedReplot);
}

void Plot::setTypeSize(int pixels)
{
    m_typeSize = pixels;
    applyMargins();
    setTheme(*m_theme);
}

void Plot::setSideMargins(int left, int right)
{
    m_leftMargin = left;
    m_rightMargin = right;
    applyMargins();
}

void Plot::applyMargins()
{
    axisRect()->setMargins(
        QMargins(m_leftMargin, 2 * m_typeSize, m_rightMargin, 2 * m_typeSize - 2));
}

void Plot::styleAxis(QCPAxis& axis, const Theme& theme, int typeSize)
{
    const QPen hair(theme.hairline, 1.0);
    axis.setBasePen(hair);
    axis.setTickPen(hair);
    axis.setSubTickPen(Qt::NoPen);
    axis.setTickLength(0, kTickLength);
    axis.setTickLabelPadding(kTickLabelPadding);
    axis.setTickLabelFont(figureFont(typeSize));
    axis.setTickLabelColor(theme.inkSoft);
    axis.grid()->setPen(QPen(theme.grid, 1.0));
    axis.grid()->setZeroLinePen(Qt::NoPen);
    axis.grid()->setSubGridVisible(false);
}

void Plot::describe(const QString& description)
{
    if (!m_sinceDescribed.isValid() || m_sinceDescribed.hasExpired(kDescribeEveryMs)) {
        m_sinceDescribed.start();
        if (description != accessibleDescription()) {
            setAccessibleDescription(description);
        }
    }
}

void Plot::fill(QCPGraph& graph, const std::vector<QPointF>& points)
{
    QVector<QCPGraphData> data;
    data.reserve(static_cast<qsizetype>(points.size()));
    for (const QPointF& point : points) {
        data.append(QCPGraphData(point.x(), point.y()));
    }
    graph.data()->set(data, true);
}

void Plot::paintTitle(QCPPainter& painter) const
{
    const int baseline = m_typeSize + 1;
    painter.setFont(labelFont(m_typeSize - 1));
    painter.setPen(m_theme->inkSoft);
    painter.drawText(QPointF(0.0, baseline), m_title);
    const double unitX = QFontMetricsF(painter.font()).horizontalAdvance(m_title) + kKeyGap;
    painter.setFont(figureFont(m_typeSize));
    painter.drawText(QPointF(unitX, baseline), m_unit);
    const QFontMetricsF metrics(painter.font());
    double x = width() - m_rightMargin;
    for (auto key = m_keys.rbegin(); key != m_keys.rend(); ++key) {
        x -= metrics.horizontalAdvance(key->text);
        painter.setPen(key->pen.color());
        painter.drawText(QPointF(x, baseline), key->text);
        x -= kKeyGap + kKeySample;
        QPen sample = key->pen;
        painter.setPen(sample);
        const double y = baseline - metrics.xHeight() / 2.0;
        painter.drawLine(QPointF(x, y), QPointF(x + kKeySample, y));
        x -= kKeySpacing;
    }
}

void Plot::paintNote(QCPPainter& painter) const
{
    if (m_note.isEmpty()) {
        return;
    }
    QFont font = sentenceFont(m_typeSize + 3);
    font.setItalic(true);
    painter.setFont(font);
    painter.setPen(m_theme->inkSoft);
    constexpr int kFlags = Qt::AlignCenter | Qt::TextWordWrap;
    const QRect place = axisRect()->rect().adjusted(12, 8, -12, -8);
    const QRect text = QFontMetrics(font).boundingRect(place, kFlags, m_note);
    painter.fillRect(text.adjusted(-8, -2, 8, 2), m_theme->page);
    painter.drawText(place, kFlags, m_note);
}

} // namespace sinewright::ui
