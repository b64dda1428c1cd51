// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/window_parts.h"

#include "ui/actions.h"
#include "ui/advice_label.h"
#include "ui/arms_length_view.h"
#include "ui/bottom_line.h"
#include "ui/hookup_page.h"
#include "ui/later_pages.h"
#include "ui/plot.h"
#include "ui/prose.h"
#include "ui/rail.h"
#include "ui/source_bar.h"
#include "ui/trim_page.h"
#include "ui/trimmer.h"

#include <QHBoxLayout>
#include <QMainWindow>
#include <QStackedWidget>
#include <QVBoxLayout>

namespace sinewright::ui {

namespace {

constexpr int kMargin = 22;
constexpr int kTrimAdvice = 27; ///< type sizes of the advice line
constexpr int kOtherAdvice = 18;
constexpr int kLeastAdvice = 15;

} // namespace

WindowParts::WindowParts(QMainWindow& window, const Actions& actions)
    : views(new QStackedWidget(&window))
    , bench(new QWidget(views))
    , sheet(new QWidget(bench))
    , sources(new SourceBar(bench))
    , advice(new AdviceLabel(sheet))
    , pages(new QStackedWidget(sheet))
    , hookUp(new HookUpPage(pages))
    , trim(new TrimPage(pages))
    , record(new RecordPage(pages))
    , arms(new ArmsLengthView(views))
    , bottom(new BottomLine(bench))
    , rail(new Rail(
          QList<QAction*>(actions.pages.begin(), actions.pages.end()),
          {actions.freeze, actions.armsLength, actions.savePage, actions.dusk, actions.keys},
          bench))
{
    pages->addWidget(hookUp);
    pages->addWidget(trim);
    pages->addWidget(new WarmUpPage(pages));
    pages->addWidget(new NetworkPage(pages));
    pages->addWidget(record);
    layOut(window);
}

void WindowParts::layOut(QMainWindow& window) const
{
    auto* onSheet = new QVBoxLayout(sheet);
    onSheet->setContentsMargins(0, 0, 0, 0);
    onSheet->setSpacing(10);
    onSheet->addWidget(advice);
    onSheet->addWidget(pages, 1);

    auto* column = new QVBoxLayout;
    column->setContentsMargins(kMargin, 12, kMargin, 0);
    column->setSpacing(8);
    column->addWidget(sources);
    column->addWidget(hairRule(bench));
    column->addWidget(sheet, 1);
    column->addWidget(hairRule(bench));
    column->addWidget(bottom);

    auto* row = new QHBoxLayout(bench);
    row->setContentsMargins(0, 0, 0, 0);
    row->setSpacing(0);
    row->addWidget(rail);
    row->addLayout(column, 1);

    views->addWidget(bench);
    views->addWidget(arms);
    window.setCentralWidget(views);
}

QList<BenchPage*> WindowParts::allPages() const
{
    QList<BenchPage*> result{arms};
    for (int i = 0; i < pages->count(); ++i) {
        result << qobject_cast<BenchPage*>(pages->widget(i));
    }
    return result;
}

void WindowParts::setTheme(const Theme& theme) const
{
    rail->setTheme(theme);
    sources->setTheme(theme);
    advice->setTheme(theme);
    for (BenchPage* each : allPages()) {
        each->setTheme(theme);
    }
}

void WindowParts::setBench(const BenchState& state) const
{
    sources->setBenchState(state);
    bottom->setBenchState(state);
    if (isStale(state)) {
        sources->meter().clear();
    }
    for (BenchPage* each : allPages()) {
        each->showBench(state);
    }
}

void WindowParts::setAdvice(const QString& sentence, bool isAlert) const
{
    advice->setSentence(sentence, isAlert);
    arms->setAdvice(sentence, isAlert);
}

void WindowParts::showPage(int index) const
{
    pages->setCurrentIndex(index);
    advice->setTypeSizes(
        pages->currentWidget() == trim ? kTrimAdvice : kOtherAdvice, kLeastAdvice, 1);
    focusPage();
}

void WindowParts::showArmsLength(bool isOn) const
{
    views->setCurrentWidget(isOn ? static_cast<QWidget*>(arms) : bench);
}

bool WindowParts::isAtArmsLength() const
{
    return views->currentWidget() == arms;
}

BenchPage* WindowParts::page() const
{
    return isAtArmsLength() ? arms : qobject_cast<BenchPage*>(pages->currentWidget());
}

void WindowParts::focusPage() const
{
    QWidget& trimmer = trim->trimmer();
    (page() == trim && trimmer.isVisibleTo(trim) ? &trimmer : page())->setFocus();
}

double WindowParts::lastDrawMs() const
{
    double sum = 0.0;
    for (const Plot* plot : page()->plots()) {
        sum += plot->replotTime(true);
    }
    return sum;
}

} // namespace sinewright::ui
