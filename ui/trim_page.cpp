// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/trim_page.h"

#include "ui/bars_plot.h"
#include "ui/cycle_plot.h"
#include "ui/figures_column.h"
#include "ui/prose.h"
#include "ui/spectrum_plot.h"
#include "ui/trend_plot.h"
#include "ui/trimmer.h"

#include <QHBoxLayout>
#include <QVBoxLayout>

namespace sinewright::ui {

TrimPage::TrimPage(QWidget* parent)
    : BenchPage(parent)
    , m_trend(new TrendPlot(this))
    , m_spectrum(new SpectrumPlot(this))
    , m_bars(new BarsPlot(this))
    , m_cycle(new CyclePlot(this))
    , m_figures(new FiguresColumn(this))
    , m_trimmer(new Trimmer(this))
    , m_trimmerRule(hairRule(this))
{
    setAccessibleName(tr("Trim"));
    auto* lower = new QHBoxLayout;
    lower->setSpacing(20);
    lower->addWidget(m_spectrum, 8);
    lower->addWidget(m_bars, 7);
    lower->addWidget(m_cycle, 6);

    auto* left = new QVBoxLayout;
    left->setSpacing(8);
    left->addWidget(m_trend, 10);
    left->addWidget(m_trimmer);
    left->addWidget(m_trimmerRule);
    left->addLayout(lower, 10);

    auto* row = new QHBoxLayout(this);
    row->setContentsMargins(0, 0, 0, 0);
    row->setSpacing(24);
    row->addLayout(left, 1);
    row->addWidget(m_figures);
    m_trimmer->hide();
}

void TrimPage::showFrame(const std::shared_ptr<const core::Frame>& frame)
{
    m_trend->setFrame(frame);
    m_spectrum->setFrame(frame);
    m_bars->setFrame(frame);
    m_cycle->setFrame(frame);
    m_figures->setFrame(frame);
}

void TrimPage::hurry()
{
    m_figures->hurry();
}

void TrimPage::showBench(const BenchState& state)
{
    const bool isDemo = state.source.kind == SourceKind::Demo && state.trimmerOhm.has_value();
    if (isDemo) {
        m_trimmer->setTravel(state.trimmerLowestOhm, state.trimmerHighestOhm);
        m_trimmer->setOhm(*state.trimmerOhm);
    }
    m_figures->setStale(isStale(state));
    const bool hadFocus = m_trimmer->hasFocus();
    m_trimmer->setVisible(isDemo);
    if (hadFocus && !isDemo) {
        setFocus();
    }
}

void TrimPage::setTheme(const Theme& theme)
{
    for (Plot* plot : plots()) {
        plot->setTheme(theme);
    }
    m_figures->setTheme(theme);
    m_trimmer->setTheme(theme);
}

QList<Plot*> TrimPage::plots() const
{
    return {m_trend, m_spectrum, m_bars, m_cycle};
}

void TrimPage::setSpectrumUnit(LevelUnit unit)
{
    m_spectrum->setUnit(unit);
}

} // namespace sinewright::ui
