// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/cycle_plot.h"

#include "ui/figure_text.h"
#include "ui/tickers.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kTurnDeg = 360.0;
constexpr int kQuarters = 4;
constexpr double kCycleEnd = 1.15; ///< the averaged cycle keeps a little clear of the axes

} // namespace

CyclePlot::CyclePlot(QWidget* parent)
    : Plot(u"residual"_s, tr("Cycle residual"), u"%"_s, parent)
    , m_cycle(addGraph(xAxis, yAxis2))
    , m_residual(addGraph(xAxis, yAxis))
{
    setSideMargins(40, 16);
    xAxis->setRange(0.0, kTurnDeg);
    auto degrees = QSharedPointer<QCPAxisTickerText>::create();
    for (int quarter = 0; quarter <= kQuarters; ++quarter) {
        const double at = kTurnDeg * quarter / kQuarters;
        degrees->addTick(at, numberText(at, 0) + u'°');
    }
    xAxis->setTicker(degrees);
    yAxis->setTicker(QSharedPointer<NumberTicker>::create(0.0, 4));
    yAxis2->setRange(-kCycleEnd, kCycleEnd);
    for (QCPGraph* graph : {m_cycle, m_residual}) {
        graph->setAdaptiveSampling(false);
    }
    restyle();
    present();
}

void CyclePlot::setFrame(const std::shared_ptr<const core::Frame>& frame)
{
    m_model.setFrame(frame);
    present();
    draw();
}

void CyclePlot::present()
{
    fill(*m_cycle, m_model.cycle());
    fill(*m_residual, m_model.residual());
    yAxis->setRange(-m_model.residualEnd(), m_model.residualEnd());
    setNote(m_model.isEmpty() ? tr("No tone, no cycle to look at.") : QString());
    if (!m_model.isEmpty()) {
        describe(tr("Cycle residual over one cycle, on an axis of plus and minus %1 percent of the "
                    "fundamental.")
                     .arg(m_model.residualEnd()));
    }
}

void CyclePlot::restyle()
{
    m_cycle->setPen(QPen(colours().hairline, 3.0));
    m_residual->setPen(QPen(colours().copper, 1.5));
    yAxis->grid()->setZeroLinePen(QPen(colours().hairline, 1.0));
}

} // namespace sinewright::ui
