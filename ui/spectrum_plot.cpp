// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/spectrum_plot.h"

#include "ui/figure_text.h"

#include <algorithm>
#include <cmath>
#include <limits>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr double kStepDb = 20.0;
constexpr double kRoomiestDecades = 4.0;
constexpr double kPixelsPerDecade = 76.0; ///< room that the numbers 1, 2, 5 want
constexpr double kStemWidth = 2.0;
constexpr double kNumberGap = 3.0;
constexpr double kKilo = 1000.0;

QString frequencyLabel(double hz)
{
    return hz >= kKilo ? numberText(hz / kKilo, 0) + u'k' : numberText(hz, 0);
}

} // namespace

SpectrumPlot::SpectrumPlot(QWidget* parent)
    : Plot(u"spectrum"_s, tr("Spectrum"), u"dBFS"_s, parent)
    , m_frequencies(QSharedPointer<StepTicker>::create(frequencyLabel, kRoomiestDecades))
    , m_lowest(addGraph())
    , m_highest(addGraph())
{
    xAxis->setScaleType(QCPAxis::stLogarithmic);
    xAxis->setTicker(m_frequencies);
    yAxis->setTicker(QSharedPointer<NumberTicker>::create(kStepDb));
    m_highest->setChannelFillGraph(m_lowest);
    m_highest->setAntialiasedFill(false); // its edge lies under the trace, and it costs a third
    for (QCPGraph* graph : {m_lowest, m_highest}) {
        graph->setAdaptiveSampling(false); // the model made one point a column
        graph->setAntialiased(false);
    }
    new Overprint(this, u"main"_s, [this](QCPPainter& painter) { paintStems(painter); });
    restyle();
    present();
}

void SpectrumPlot::setFrame(std::shared_ptr<const core::Frame> frame)
{
    m_model.setColumns(columns());
    m_model.setFrame(std::move(frame));
    present();
    draw();
}

void SpectrumPlot::setUnit(LevelUnit unit)
{
    m_model.setUnit(unit);
    present();
    draw();
}

void SpectrumPlot::present()
{
    fill(*m_lowest, m_model.lowest());
    fill(*m_highest, m_model.highest());
    xAxis->setRange(m_model.frequencyRange().low, m_model.frequencyRange().high);
    yAxis->setRange(m_model.levelRange().low, m_model.levelRange().high);
    m_frequencies->setRoomiestDecades(columns() / kPixelsPerDecade);
    setUnitText(m_model.shownUnit() == LevelUnit::Dbc ? u"dBc"_s : u"dBFS"_s);
    setNote(m_model.isEmpty() ? tr("The spectrum appears with the first samples.") : QString());
    if (m_model.stems().size() > 1) {
        const auto strongest =
            std::max_element(m_model.stems().begin() + 1,
                             m_model.stems().end(),
                             [](const Stem& a, const Stem& b) { return a.levelDb < b.levelDb; });
        describe(tr("Spectrum. Fundamental %1; strongest harmonic: number %2.")
                     .arg(roundFrequencyText(m_model.stems().front().frequencyHz))
                     .arg(strongest->order));
    }
}

void SpectrumPlot::restyle()
{
    m_lowest->setPen(Qt::NoPen);
    m_highest->setPen(QPen(colours().inkSoft, 1.0));
    m_highest->setBrush(colours().wash);
}

void SpectrumPlot::resizeEvent(QResizeEvent* event)
{
    Plot::resizeEvent(event);
    m_model.setColumns(columns());
    present();
}

void SpectrumPlot::paintStems(QCPPainter& painter) const
{
    const QRect inside = axisRect()->rect();
    painter.setFont(figureFont(typeSize()));
    const QFontMetricsF metrics(painter.font());
    struct Placed
    {
        const Stem* stem = nullptr;
        QPointF top;
    };
    std::vector<Placed> placed;
    for (const Stem& stem : m_model.stems()) {
        const QPointF top(xAxis->coordToPixel(stem.frequencyHz),
                          std::max<double>(yAxis->coordToPixel(stem.levelDb), inside.top()));
        if (top.x() <= inside.right() && top.y() < inside.bottom()) {
            placed.push_back({&stem, top});
            painter.setPen(QPen(stem.order == 1 ? colours().ink : colours().slate,
                                kStemWidth,
                                stem.inBand ? Qt::SolidLine : Qt::DotLine,
                                Qt::FlatCap));
            painter.drawLine(QPointF(top.x(), inside.bottom()), top);
        }
    }
    // A number is left out where a taller stem or its number would run through it.
    for (const Placed& own : placed) {
        const QString number = QString::number(own.stem->order);
        const double half = metrics.horizontalAdvance(number) / 2.0;
        const bool isCrossed = std::any_of(placed.begin(), placed.end(), [&](const Placed& other) {
            return other.stem != own.stem && other.top.y() < own.top.y() + metrics.capHeight() &&
                   (other.top.y() < own.top.y() || other.stem->order < own.stem->order) &&
                   std::abs(other.top.x() - own.top.x()) < half + kStemWidth;
        });
        if (!isCrossed) {
            painter.setPen(own.stem->order == 1 ? colours().ink : colours().slate);
            painter.drawText(QPointF(own.top.x() - half, own.top.y() - kNumberGap), number);
        }
    }
}

} // namespace sinewright::ui
