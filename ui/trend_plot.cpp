// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/trend_plot.h"

#include "ui/advice.h"
#include "ui/figure_text.h"
#include "ui/tickers.h"

#include <algorithm>
#include <cmath>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kRightMargin = 40;
constexpr double kRoomiestDecades = 3.0;
constexpr double kNowRadius = 4.0;
constexpr double kBestRadius = 5.0;
constexpr double kMinuteS = 60.0;

QString percentLabel(double percent)
{
    const int decimals = std::max(0, -static_cast<int>(std::floor(std::log10(percent) + 1e-9)));
    return numberText(percent, decimals);
}

QString timeLabel(double seconds, bool hasSeconds)
{
    if (seconds == 0.0) {
        return TrendPlot::tr("now");
    }
    const double minutes = seconds / kMinuteS;
    if (minutes == std::round(minutes)) {
        return TrendPlot::tr("%1 min").arg(numberText(minutes, 0));
    }
    return hasSeconds ? TrendPlot::tr("%1 s").arg(numberText(seconds, 0)) : QString();
}

} // namespace

TrendPlot::TrendPlot(QWidget* parent)
    : Plot(u"trend"_s, tr("Trim trend"), QString(), parent)
    , m_level(addGraph(xAxis, yAxis2))
    , m_thdn(addGraph(xAxis, yAxis))
    , m_thd(addGraph(xAxis, yAxis))
{
    setSideMargins(40, kRightMargin);
    yAxis2->setVisible(true);
    yAxis->setScaleType(QCPAxis::stLogarithmic);
    yAxis->setTicker(QSharedPointer<StepTicker>::create(percentLabel, kRoomiestDecades));
    yAxis2->setTicker(QSharedPointer<NumberTicker>::create(0.0, 6));
    yAxis2->grid()->setVisible(false);

    for (QCPGraph* graph : {m_level, m_thdn, m_thd}) {
        graph->setAdaptiveSampling(false); // the model made one pair of points a column
    }
    new Overprint(this, u"main"_s, [this](QCPPainter& painter) {
        paintBest(painter);
        paintNow(painter);
    });
    restyle();
    present();
}

void TrendPlot::setFrame(std::shared_ptr<const core::Frame> frame)
{
    m_model.setColumns(columns());
    m_model.setFrame(std::move(frame));
    present();
    draw();
}

void TrendPlot::setSpan(double seconds)
{
    if (seconds == m_spanS) {
        return;
    }
    m_spanS = seconds;
    auto time = QSharedPointer<QCPAxisTickerText>::create();
    const int ticks = seconds > kMinuteS ? static_cast<int>(seconds / kMinuteS) * 2 : 4;
    for (int tick = 0; tick <= ticks; ++tick) {
        const double at = -seconds * tick / ticks;
        time->addTick(at, timeLabel(at, seconds <= kMinuteS));
    }
    xAxis->setTicker(time);
    xAxis->setRange(-seconds, 0.0);
}

void TrendPlot::present()
{
    setSpan(m_model.spanS());
    fill(*m_thd, m_model.thd());
    fill(*m_thdn, m_model.thdn());
    fill(*m_level, m_model.levelDashes());
    const AxisRange percent = m_model.percentRange();
    yAxis->setRange(percent.low, percent.high);
    yAxis2->setRange(m_model.levelRange().low, m_model.levelRange().high);
    setNote(m_model.isEmpty()
                ? tr("The trend of the last three minutes grows here as readings come in.")
                : QString());
    if (m_model.best()) {
        describe(tr("Trim trend of the last three minutes. Best so far %1 %, %2.")
                     .arg(percentLabel(m_model.best()->percent), ageText(m_model.best()->agoS)));
    }
}

void TrendPlot::restyle()
{
    const Theme& t = colours();
    m_thd->setPen(QPen(t.copper, 2.0, Qt::SolidLine, Qt::SquareCap));
    m_thdn->setPen(QPen(t.ink, 1.0));
    m_level->setPen(QPen(t.slate, 1.2));
    QPen level = m_level->pen();
    level.setDashPattern(
        {TrendModel::kDashOn / level.widthF(), TrendModel::kDashOff / level.widthF()});
    level.setCapStyle(Qt::FlatCap);
    QPen best(t.verdigris, 1.2);
    best.setDashPattern({8.0, 3.0});
    setKeys({{tr("THD %"), m_thd->pen()},
             {tr("THD+N %"), m_thdn->pen()},
             {tr("level dBFS, right"), level},
             {tr("best so far"), best}});
}

void TrendPlot::resizeEvent(QResizeEvent* event)
{
    Plot::resizeEvent(event);
    m_model.setColumns(columns());
}

void TrendPlot::paintBest(QCPPainter& painter) const
{
    if (!m_model.best()) {
        return;
    }
    const double y = std::round(yAxis->coordToPixel(m_model.best()->percent));
    const QRect inside = axisRect()->rect();
    QPen rule(colours().verdigris, 1.2);
    rule.setDashPattern({8.0, 3.0});
    painter.setPen(rule);
    painter.drawLine(QPointF(inside.left(), y), QPointF(inside.right(), y));
    if (m_model.best()->agoS <= m_spanS) {
        const double x = xAxis->coordToPixel(-m_model.best()->agoS);
        painter.setPen(QPen(colours().page, 1.5));
        painter.setBrush(colours().verdigris);
        painter.drawPolygon(QPolygonF({QPointF(x - kBestRadius, y),
                                       QPointF(x, y - kBestRadius),
                                       QPointF(x + kBestRadius, y),
                                       QPointF(x, y + kBestRadius)}));
        painter.setBrush(Qt::NoBrush);
    }
}

void TrendPlot::paintNow(QCPPainter& painter) const
{
    if (m_model.thd().empty() || std::isnan(m_model.thd().back().y())) {
        return;
    }
    const QPointF last = m_model.thd().back();
    painter.setPen(QPen(colours().page, 1.5));
    painter.setBrush(colours().copper);
    painter.drawEllipse(QPointF(xAxis->coordToPixel(last.x()), yAxis->coordToPixel(last.y())),
                        kNowRadius,
                        kNowRadius);
    painter.setBrush(Qt::NoBrush);
}

} // namespace sinewright::ui
