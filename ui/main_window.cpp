// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/main_window.h"

#include "ui/actions.h"
#include "ui/advice.h"
#include "ui/advice_label.h"
#include "ui/arms_length_view.h"
#include "ui/bottom_line.h"
#include "ui/figures_model.h"
#include "ui/hookup_page.h"
#include "ui/keys_dialog.h"
#include "ui/later_pages.h"
#include "ui/pace.h"
#include "ui/plot.h"
#include "ui/prose.h"
#include "ui/rail.h"
#include "ui/reading_choice.h"
#include "ui/source_bar.h"
#include "ui/trim_page.h"
#include "ui/trimmer.h"

#include <QCursor>
#include <QDialog>
#include <QElapsedTimer>
#include <QHBoxLayout>
#include <QHeaderView>
#include <QScreen>
#include <QStackedWidget>
#include <QTableView>
#include <QTimer>
#include <QVBoxLayout>

#include <algorithm>
#include <array>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr int kMargin = 22;
constexpr int kSlowestPollMs = 33;
constexpr int kFastestPollMs = 16;
constexpr qint64 kTableEveryMs = 250;
constexpr int kTrimAdvice = 27; ///< type sizes of the advice line
constexpr int kOtherAdvice = 18;
constexpr int kLeastAdvice = 15;
constexpr std::array kPageWords{"hook-up", "trim", "warm-up", "network", "record"};

} // namespace

/// The window's parts and what holds them together.
class MainWindow::Impl final : public QObject
{
    Q_OBJECT
public:
    Impl(MainWindow& window, FrameFeed source);

    void setBench(const BenchState& state);
    void applyView(const ViewSettings& settings);
    void poll();
    void drawPending();
    void showNow();
    void startPolling();
    void focusPage();

    MainWindow& m_window;
    FrameFeed m_feed;
    Actions m_actions;
    QStackedWidget* m_views;
    QWidget* m_bench; ///< rail, source bar, sheet and bottom line
    QWidget* m_sheet; ///< advice line and page
    SourceBar* m_sources;
    AdviceLabel* m_adviceLabel;
    QStackedWidget* m_pages;
    HookUpPage* m_hookUp;
    TrimPage* m_trim;
    RecordPage* m_record;
    ArmsLengthView* m_arms;
    Rail* m_rail;
    BottomLine* m_bottom;
    FiguresModel m_figures;

    QTimer m_poll;
    QElapsedTimer m_clock;
    Pace m_pace;
    AdviceLine m_advice;
    BenchState m_state;
    std::shared_ptr<const core::Frame> m_newest;
    std::shared_ptr<const core::Frame> m_shown;
    LevelUnit m_spectrumUnit = LevelUnit::Dbc;
    bool m_isQuiet = false; ///< settings are being restored: nothing to announce
    bool m_wasMaximised = false;
    bool m_isDrawPending = false;
    qint64 m_tableAtMs = 0;

private:
    void build();
    void connectActions();
    void connectParts();
    void setPage(int index);
    void setDusk(bool isDusk);
    void setFrozen(bool isFrozen);
    void setArmsLength(bool isOn);
    void savePage();
    void savePlot();
    void showTable();
    void updateAdvice();
    void announceView();
    [[nodiscard]] BenchPage* page() const;
    [[nodiscard]] double lastDrawMs() const;
};

MainWindow::Impl::Impl(MainWindow& window, FrameFeed source)
    : m_window(window)
    , m_feed(std::move(source))
    , m_views(new QStackedWidget(&window))
    , m_bench(new QWidget(m_views))
    , m_sheet(new QWidget(m_bench))
    , m_sources(new SourceBar(m_bench))
    , m_adviceLabel(new AdviceLabel(m_sheet))
    , m_pages(new QStackedWidget(m_sheet))
    , m_hookUp(new HookUpPage(m_pages))
    , m_trim(new TrimPage(m_pages))
    , m_record(new RecordPage(m_pages))
    , m_arms(new ArmsLengthView(m_views))
    , m_rail(nullptr)
    , m_bottom(new BottomLine(m_bench))
{
    m_clock.start();
    build();
    connectActions();
    connectParts();
    m_poll.setTimerType(Qt::PreciseTimer);
    connect(&m_poll, &QTimer::timeout, this, &Impl::poll);
}

void MainWindow::Impl::build()
{
    const Actions& a = m_actions;
    m_rail = new Rail(QList<QAction*>(a.pages.begin(), a.pages.end()),
                      {a.freeze, a.armsLength, a.savePage, a.dusk, a.keys},
                      m_bench);
    for (QWidget* page : {static_cast<QWidget*>(m_hookUp),
                          static_cast<QWidget*>(m_trim),
                          static_cast<QWidget*>(new WarmUpPage(m_pages)),
                          static_cast<QWidget*>(new NetworkPage(m_pages)),
                          static_cast<QWidget*>(m_record)}) {
        m_pages->addWidget(page);
    }
    auto* sheet = new QVBoxLayout(m_sheet);
    sheet->setContentsMargins(0, 0, 0, 0);
    sheet->setSpacing(10);
    sheet->addWidget(m_adviceLabel);
    sheet->addWidget(m_pages, 1);

    auto* column = new QVBoxLayout;
    column->setContentsMargins(kMargin, 12, kMargin, 0);
    column->setSpacing(8);
    column->addWidget(m_sources);
    column->addWidget(hairRule(m_bench));
    column->addWidget(m_sheet, 1);
    column->addWidget(hairRule(m_bench));
    column->addWidget(m_bottom);
    auto* row = new QHBoxLayout(m_bench);
    row->setContentsMargins(0, 0, 0, 0);
    row->setSpacing(0);
    row->addWidget(m_rail);
    row->addLayout(column, 1);

    m_views->addWidget(m_bench);
    m_views->addWidget(m_arms);
    m_window.setCentralWidget(m_views);
}

void MainWindow::Impl::connectActions()
{
    Actions& a = m_actions;
    m_window.addActions(a.all());
    for (int i = 0; i < Actions::kPages; ++i) {
        connect(a.pages[static_cast<std::size_t>(i)], &QAction::triggered, this, [this, i] {
            setPage(i);
        });
    }
    connect(a.openTake, &QAction::triggered, m_sources, &SourceBar::openTake);
    connect(a.chooseSource, &QAction::triggered, this, [this] {
        m_sources->picker().setFocus(Qt::ShortcutFocusReason);
        m_sources->picker().showPopup();
    });
    connect(a.freeze, &QAction::toggled, this, &Impl::setFrozen);
    connect(a.resetBest, &QAction::triggered, &m_window, &MainWindow::bestResetWanted);
    connect(a.spectrumUnit, &QAction::triggered, this, [this] {
        m_spectrumUnit = m_spectrumUnit == LevelUnit::Dbc ? LevelUnit::Dbfs : LevelUnit::Dbc;
        m_trim->setSpectrumUnit(m_spectrumUnit);
    });
    connect(a.figureTable, &QAction::triggered, this, &Impl::showTable);
    connect(a.armsLength, &QAction::toggled, this, &Impl::setArmsLength);
    connect(a.leaveArmsLength, &QAction::triggered, this, [this] {
        m_actions.armsLength->setChecked(false);
    });
    connect(a.dusk, &QAction::toggled, this, &Impl::setDusk);
    connect(a.savePage, &QAction::triggered, this, &Impl::savePage);
    connect(a.savePlot, &QAction::triggered, this, &Impl::savePlot);
    connect(a.pictureScale, &QAction::toggled, this, [this](bool isFine) {
        m_record->setPictureScale(isFine ? 2 : 1);
        announceView();
    });
    connect(a.keys, &QAction::triggered, this, [this] {
        QList<ActionGroup> groups = m_actions.groups();
        groups.insert(
            2, {tr("Virtual trimmer, while it has the focus"), m_trim->trimmer().keyActions()});
        auto* dialog = new KeysDialog(groups, &m_window);
        dialog->show();
    });
    connect(a.quit, &QAction::triggered, &m_window, &QWidget::close);
}

void MainWindow::Impl::connectParts()
{
    connect(m_sources, &SourceBar::sourceChosen, &m_window, &MainWindow::sourceChosen);
    connect(m_sources, &SourceBar::sourcesWanted, &m_window, &MainWindow::sourcesWanted);
    connect(&m_trim->trimmer(), &Trimmer::moved, &m_window, &MainWindow::trimmerMoved);
    connect(m_hookUp,
            &HookUpPage::measureSettingsChosen,
            &m_window,
            &MainWindow::measureSettingsChosen);
    connect(m_record, &RecordPage::pictureScaleChosen, this, [this](int scale) {
        m_actions.pictureScale->setChecked(scale == 2);
    });
    connect(m_record, &RecordPage::pictureOfTrimWanted, this, [this] {
        m_actions.pages[static_cast<std::size_t>(Page::Trim)]->trigger();
        savePage();
    });
}

void MainWindow::Impl::setPage(int index)
{
    m_pages->setCurrentIndex(index);
    m_actions.pages[static_cast<std::size_t>(index)]->setChecked(true);
    m_adviceLabel->setTypeSizes(
        index == static_cast<int>(Page::Trim) ? kTrimAdvice : kOtherAdvice, kLeastAdvice, 1);
    focusPage();
    showNow();
    announceView();
}

void MainWindow::Impl::focusPage()
{
    QWidget& trimmer = m_trim->trimmer();
    (page() == m_trim && trimmer.isVisibleTo(m_trim) ? &trimmer : page())->setFocus();
}

void MainWindow::Impl::setDusk(bool isDusk)
{
    const ThemeName name = isDusk ? ThemeName::Dusk : ThemeName::Paper;
    applyTheme(name);
    const Theme& colours = theme(name);
    m_rail->setTheme(colours);
    m_sources->setTheme(colours);
    m_adviceLabel->setTheme(colours);
    m_arms->setTheme(colours);
    for (int i = 0; i < m_pages->count(); ++i) {
        qobject_cast<BenchPage*>(m_pages->widget(i))->setTheme(colours);
    }
    announceView();
}

void MainWindow::Impl::setFrozen(bool isFrozen)
{
    m_shown = m_newest;
    m_window.showNotice(isFrozen ? tr("Frozen. Press F to go on.") : tr("Live again."));
    showNow();
}

void MainWindow::Impl::setArmsLength(bool isOn)
{
    m_actions.leaveArmsLength->setEnabled(isOn);
    m_views->setCurrentWidget(isOn ? static_cast<QWidget*>(m_arms) : m_bench);
    if (isOn) {
        m_wasMaximised = m_window.isMaximized();
        m_window.showFullScreen();
    } else if (m_wasMaximised) {
        m_window.showMaximized();
    } else {
        m_window.showNormal();
    }
    focusPage();
    showNow();
}

void MainWindow::Impl::savePage()
{
    if (m_views->currentWidget() == m_arms) {
        emit m_window.pictureWanted({m_arms, u"arms-length"_s, tr("Arm's length view")});
        return;
    }
    emit m_window.pictureWanted(
        {m_sheet,
         QString::fromLatin1(kPageWords.at(static_cast<std::size_t>(m_pages->currentIndex()))),
         page()->accessibleName()});
}

void MainWindow::Impl::savePlot()
{
    const QList<Plot*> plots = page()->plots();
    const QWidget* pointed = m_window.childAt(m_window.mapFromGlobal(QCursor::pos()));
    const auto at = std::find(plots.begin(), plots.end(), pointed);
    if (at == plots.end()) {
        m_window.showNotice(
            tr("Point at a plot first: the picture is taken of the one under the pointer."));
        return;
    }
    emit m_window.pictureWanted({*at, (*at)->plainName(), (*at)->accessibleName()});
}

void MainWindow::Impl::showTable()
{
    auto* dialog = new QDialog(&m_window);
    dialog->setAttribute(Qt::WA_DeleteOnClose);
    dialog->setWindowTitle(tr("Figures"));
    dialog->resize(620, 560);
    auto* column = new QVBoxLayout(dialog);
    column->setContentsMargins(18, 14, 18, 14);
    column->addWidget(titleLabel(tr("Figures"), dialog));
    auto* table = new QTableView(dialog);
    table->setObjectName(u"figureTable"_s);
    table->setAccessibleName(tr("All figures of the reading"));
    table->setModel(&m_figures);
    table->setSelectionBehavior(QAbstractItemView::SelectRows);
    table->setShowGrid(false);
    table->setFont(figureFont(15));
    table->verticalHeader()->hide();
    table->horizontalHeader()->setStretchLastSection(true);
    table->horizontalHeader()->setHighlightSections(false);
    m_figures.setFrame(m_shown.get());
    table->resizeColumnsToContents();
    column->addWidget(table, 1);
    table->selectRow(0);
    dialog->show();
    table->setFocus();
}

BenchPage* MainWindow::Impl::page() const
{
    return m_views->currentWidget() == m_arms ? m_arms
                                              : qobject_cast<BenchPage*>(m_pages->currentWidget());
}

double MainWindow::Impl::lastDrawMs() const
{
    double sum = 0.0;
    for (const Plot* plot : page()->plots()) {
        sum += plot->replotTime(true);
    }
    return sum;
}

void MainWindow::Impl::startPolling()
{
    const double rate = m_window.screen() != nullptr ? m_window.screen()->refreshRate() : 0.0;
    m_poll.start(rate > 0.0
                     ? std::clamp(static_cast<int>(1000.0 / rate), kFastestPollMs, kSlowestPollMs)
                     : kSlowestPollMs);
}

void MainWindow::Impl::poll()
{
    if (!m_window.isVisible() || m_window.isMinimized()) {
        return;
    }
    std::shared_ptr<const core::Frame> frame = m_feed();
    if (frame == m_newest) {
        drawPending(); // the newest frame may have been passed over, and no other came
        updateAdvice();
        return;
    }
    m_newest = std::move(frame);
    if (m_newest) {
        m_sources->meter().feed(
            m_newest->peakFs, m_newest->rmsFs, isOverloaded(*m_newest), m_clock.elapsed());
        m_bottom->setFramesLost(m_newest->framesLost);
    } else {
        m_sources->meter().clear();
    }
    if (m_actions.freeze->isChecked()) {
        return;
    }
    m_shown = m_newest;
    m_isDrawPending = true;
    if (m_pace.isDue(lastDrawMs())) {
        drawPending();
    }
    if (m_clock.elapsed() - m_tableAtMs >= kTableEveryMs) {
        m_tableAtMs = m_clock.elapsed();
        m_figures.setFrame(m_shown.get());
    }
    updateAdvice();
}

void MainWindow::Impl::drawPending()
{
    if (m_isDrawPending) {
        m_isDrawPending = false;
        page()->showFrame(m_shown);
    }
}

void MainWindow::Impl::showNow()
{
    m_isDrawPending = true;
    drawPending();
    updateAdvice();
}

void MainWindow::Impl::updateAdvice()
{
    if (m_advice.update(m_state, m_shown.get(), m_actions.freeze->isChecked(), m_clock.elapsed())) {
        m_adviceLabel->setSentence(m_advice.text(), m_advice.isAlert());
        m_arms->setAdvice(m_advice.text(), m_advice.isAlert());
    }
}

void MainWindow::Impl::setBench(const BenchState& state)
{
    m_state = state;
    m_sources->setBenchState(state);
    m_bottom->setBenchState(state);
    if (isStale(state)) {
        m_sources->meter().clear();
    }
    for (int i = 0; i < m_pages->count(); ++i) {
        qobject_cast<BenchPage*>(m_pages->widget(i))->showBench(state);
    }
    updateAdvice();
}

void MainWindow::Impl::announceView()
{
    if (!m_isQuiet) {
        emit m_window.viewSettingsChanged();
    }
}

void MainWindow::Impl::applyView(const ViewSettings& settings)
{
    m_isQuiet = true;
    setDusk(settings.theme == ThemeName::Dusk);
    m_actions.dusk->setChecked(settings.theme == ThemeName::Dusk);
    m_actions.pictureScale->setChecked(settings.pictureScale == 2);
    setPage(static_cast<int>(settings.page));
    if (!settings.geometry.isEmpty()) {
        m_window.restoreGeometry(settings.geometry);
    }
    m_isQuiet = false;
}

MainWindow::MainWindow(FrameFeed feed, QWidget* parent) : QMainWindow(parent)
{
    m_impl = std::make_unique<Impl>(*this, std::move(feed));
    setWindowTitle(u"Sinewright"_s);
    setMinimumSize(960, 600);
    resize(1280, 800);
    m_impl->applyView({});
    setMeasureSettings({});
}

MainWindow::~MainWindow() = default;

void MainWindow::setSources(const QList<SourceChoice>& choices)
{
    m_impl->m_sources->setSources(choices);
}

void MainWindow::setBenchState(const BenchState& state)
{
    m_impl->setBench(state);
}

void MainWindow::setMeasureSettings(const core::MeasureSettings& settings)
{
    m_impl->m_hookUp->setMeasureSettings(settings);
}

void MainWindow::setViewSettings(const ViewSettings& settings)
{
    m_impl->applyView(settings);
}

ViewSettings MainWindow::viewSettings() const
{
    ViewSettings settings;
    settings.theme = m_impl->m_actions.dusk->isChecked() ? ThemeName::Dusk : ThemeName::Paper;
    settings.page = static_cast<Page>(m_impl->m_pages->currentIndex());
    settings.pictureScale = m_impl->m_actions.pictureScale->isChecked() ? 2 : 1;
    settings.geometry = saveGeometry();
    return settings;
}

std::shared_ptr<const core::Frame> MainWindow::shownFrame() const
{
    return m_impl->m_shown;
}

QWidget* MainWindow::sheet() const
{
    return m_impl->m_views;
}

void MainWindow::showNotice(const QString& sentence)
{
    m_impl->m_bottom->showNotice(sentence);
}

void MainWindow::showEvent(QShowEvent* event)
{
    QMainWindow::showEvent(event);
    m_impl->startPolling();
    m_impl->focusPage();
}

} // namespace sinewright::ui

#include "main_window.moc"
