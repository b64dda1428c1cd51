// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/bars_plot.h"

#include "ui/figure_text.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kStepDb = 20.0;
constexpr double kBarShare = 0.5; ///< of the place that an order has
constexpr double kWidestBar = 18.0;
constexpr double kNumberGap = 3.0;
constexpr int kDefaultHighestOrder = 10;

} // namespace

BarsPlot::BarsPlot(QWidget* parent)
    : Plot(u"harmonics"_s, tr("Harmonics"), u"dBc"_s, parent)
    , m_orders(QSharedPointer<NumberTicker>::create(1.0))
{
    setSideMargins(34, 8);
    yAxis->setTicker(QSharedPointer<NumberTicker>::create(kStepDb));
    xAxis->setTicker(m_orders);
    xAxis->grid()->setVisible(false);
    xAxis->setTickLength(0, 0);
    new Overprint(this, u"main"_s, [this](QCPPainter& painter) { paintBars(painter); });
    restyle();
    present();
}

void BarsPlot::setFrame(const std::shared_ptr<const core::Frame>& frame)
{
    m_model.setFrame(frame);
    present();
    draw();
}

void BarsPlot::present()
{
    const int highest = m_model.isEmpty() ? kDefaultHighestOrder : m_model.bars().back().order;
    xAxis->setRange(1.4, highest + 0.6);
    const double everyOrder = columns() / (highest + 0.2 - 1.0) >= 2.0 * typeSize() ? 1.0 : 5.0;
    m_orders->setStep(everyOrder);
    yAxis->setRange(m_model.range().low, m_model.range().high);
    setNote(m_model.isEmpty() ? tr("No tone, no harmonics.") : QString());
}

void BarsPlot::restyle() {}

void BarsPlot::paintBars(QCPPainter& painter) const
{
    const QRect inside = axisRect()->rect();
    painter.setAntialiasing(false);
    painter.setFont(figureFont(typeSize() - 1));
    const QFontMetricsF metrics(painter.font());
    const double place = xAxis->coordToPixel(3.0) - xAxis->coordToPixel(2.0);
    const double width = std::round(std::min(place * kBarShare, kWidestBar));
    const bool hasRoomForDecimal = metrics.horizontalAdvance(u"\u2212100.0"_s) + 2.0 <= place;
    const bool hasRoomForNumber = metrics.horizontalAdvance(u"\u2212100"_s) + 2.0 <= place;
    for (const HarmonicBar& bar : m_model.bars()) {
        if (!bar.dbc || *bar.dbc <= m_model.range().low) {
            continue;
        }
        const double x = xAxis->coordToPixel(bar.order);
        const double top =
            std::round(yAxis->coordToPixel(std::min(*bar.dbc, m_model.range().high)));
        const QRectF box(std::round(x - width / 2.0), top, width, inside.bottom() - top);
        if (bar.inBand) {
            painter.fillRect(box, colours().slate);
        } else {
            painter.setPen(QPen(colours().slate, 1.0, Qt::DotLine));
            painter.drawRect(box);
        }
        if (hasRoomForNumber) {
            const QString number = numberText(*bar.dbc, hasRoomForDecimal ? 1 : 0);
            painter.setPen(colours().ink);
            painter.drawText(QPointF(x - metrics.horizontalAdvance(number) / 2.0, top - kNumberGap),
                             number);
        }
    }
}

} // namespace sinewright::ui
