// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/main_window.h"

#include "ui/actions.h"
#include "ui/bottom_line.h"
#include "ui/figures_dialog.h"
#include "ui/frame_display.h"
#include "ui/hookup_page.h"
#include "ui/keys_dialog.h"
#include "ui/later_pages.h"
#include "ui/plot.h"
#include "ui/source_bar.h"
#include "ui/trim_page.h"
#include "ui/trimmer.h"
#include "ui/window_parts.h"

#include <QCursor>
#include <QStackedWidget>

#include <algorithm>
#include <array>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

constexpr std::array kPageWords{"hook-up", "trim", "warm-up", "network", "record"};

} // namespace

/// What the keys do, and who tells whom.
class MainWindow::Impl final : public QObject
{
public:
    Impl(MainWindow& window, FrameFeed feed);

    void setBench(const BenchState& state);
    void applyView(const ViewSettings& settings);

    Actions& actions() { return m_actions; }
    WindowParts& parts() { return m_parts; }
    FrameDisplay& display() { return m_display; }

private:
    void connectPageActions();
    void connectReadingActions();
    void connectViewActions();
    void connectParts();
    void setPage(int index);
    void setDusk(bool isDusk);
    void setArmsLength(bool isOn);
    void toggleSpectrumUnit();
    void savePage();
    void savePlot();
    void showKeys();
    void announceView();

    MainWindow& m_window;
    Actions m_actions;
    WindowParts m_parts;
    FrameDisplay m_display;
    LevelUnit m_spectrumUnit = LevelUnit::Dbc;
    bool m_isQuiet = false; ///< settings are being restored: nothing to announce
    bool m_wasMaximised = false;
};

MainWindow::Impl::Impl(MainWindow& window, FrameFeed feed)
    : m_window(window)
    , m_parts(window, m_actions)
    , m_display(window, m_parts, std::move(feed))
{
    window.addActions(m_actions.all());
    connectPageActions();
    connectReadingActions();
    connectViewActions();
    connectParts();
}

void MainWindow::Impl::connectPageActions()
{
    for (int i = 0; i < Actions::kPages; ++i) {
        connect(m_actions.pages[static_cast<std::size_t>(i)], &QAction::triggered, this, [this, i] {
            setPage(i);
        });
    }
    connect(m_actions.openTake, &QAction::triggered, m_parts.sources, &SourceBar::openTake);
    connect(m_actions.chooseSource, &QAction::triggered, this, [this] {
        m_parts.sources->picker().setFocus(Qt::ShortcutFocusReason);
        m_parts.sources->picker().showPopup();
    });
}

void MainWindow::Impl::connectReadingActions()
{
    connect(m_actions.freeze, &QAction::toggled, this, [this](bool isFrozen) {
        m_display.setFrozen(isFrozen);
        m_window.showNotice(isFrozen ? MainWindow::tr("Frozen. Press F to go on.")
                                     : MainWindow::tr("Live again."));
    });
    connect(m_actions.resetBest, &QAction::triggered, &m_window, &MainWindow::bestResetWanted);
    connect(m_actions.spectrumUnit, &QAction::triggered, this, &Impl::toggleSpectrumUnit);
    connect(m_actions.figureTable, &QAction::triggered, this, [this] {
        m_display.figures().setFrame(m_display.shown().get());
        auto* dialog = new FiguresDialog(m_display.figures(), &m_window);
        dialog->show();
    });
}

void MainWindow::Impl::connectViewActions()
{
    connect(m_actions.armsLength, &QAction::toggled, this, &Impl::setArmsLength);
    connect(m_actions.leaveArmsLength, &QAction::triggered, this, [this] {
        m_actions.armsLength->setChecked(false);
    });
    connect(m_actions.dusk, &QAction::toggled, this, &Impl::setDusk);
    connect(m_actions.savePage, &QAction::triggered, this, &Impl::savePage);
    connect(m_actions.savePlot, &QAction::triggered, this, &Impl::savePlot);
    connect(m_actions.pictureScale, &QAction::toggled, this, [this](bool isFine) {
        m_parts.record->setPictureScale(isFine ? 2 : 1);
        announceView();
    });
    connect(m_actions.keys, &QAction::triggered, this, &Impl::showKeys);
    connect(m_actions.quit, &QAction::triggered, &m_window, &QWidget::close);
}

void MainWindow::Impl::connectParts()
{
    connect(m_parts.sources, &SourceBar::sourceChosen, &m_window, &MainWindow::sourceChosen);
    connect(m_parts.sources, &SourceBar::sourcesWanted, &m_window, &MainWindow::sourcesWanted);
    connect(&m_parts.trim->trimmer(), &Trimmer::moved, &m_window, &MainWindow::trimmerMoved);
    connect(m_parts.hookUp,
            &HookUpPage::measureSettingsChosen,
            &m_window,
            &MainWindow::measureSettingsChosen);
    connect(m_parts.record, &RecordPage::pictureScaleChosen, this, [this](int scale) {
        m_actions.pictureScale->setChecked(scale == 2);
    });
    connect(m_parts.record, &RecordPage::pictureOfTrimWanted, this, [this] {
        m_actions.pages[static_cast<std::size_t>(Page::Trim)]->trigger();
        savePage();
    });
}

void MainWindow::Impl::setPage(int index)
{
    m_actions.pages[static_cast<std::size_t>(index)]->setChecked(true);
    m_parts.showPage(index);
    m_display.showNow();
    announceView();
}

void MainWindow::Impl::setDusk(bool isDusk)
{
    const ThemeName name = isDusk ? ThemeName::Dusk : ThemeName::Paper;
    applyTheme(name);
    m_parts.setTheme(theme(name));
    announceView();
}

void MainWindow::Impl::setArmsLength(bool isOn)
{
    m_actions.leaveArmsLength->setEnabled(isOn);
    m_parts.showArmsLength(isOn);
    if (isOn) {
        m_wasMaximised = m_window.isMaximized();
        m_window.showFullScreen();
    } else if (m_wasMaximised) {
        m_window.showMaximized();
    } else {
        m_window.showNormal();
    }
    m_parts.focusPage();
    m_display.showNow();
}

void MainWindow::Impl::toggleSpectrumUnit()
{
    m_spectrumUnit = m_spectrumUnit == LevelUnit::Dbc ? LevelUnit::Dbfs : LevelUnit::Dbc;
    m_parts.trim->setSpectrumUnit(m_spectrumUnit);
}

void MainWindow::Impl::savePage()
{
    m_parts.page()->hurry();
    m_display.showNow();
    if (m_parts.isAtArmsLength()) {
        emit m_window.pictureWanted(
            {m_parts.page(), u"arms-length"_s, m_parts.page()->accessibleName()});
        return;
    }
    const auto index = static_cast<std::size_t>(m_parts.pages->currentIndex());
    emit m_window.pictureWanted({m_parts.sheet,
                                 QString::fromLatin1(kPageWords.at(index)),
                                 m_parts.page()->accessibleName()});
}

void MainWindow::Impl::savePlot()
{
    const QList<Plot*> plots = m_parts.page()->plots();
    const QWidget* pointed = m_window.childAt(m_window.mapFromGlobal(QCursor::pos()));
    const auto at = std::find(plots.begin(), plots.end(), pointed);
    if (at == plots.end()) {
        m_window.showNotice(MainWindow::tr(
            "Point at a plot first: the picture is taken of the one under the pointer."));
        return;
    }
    emit m_window.pictureWanted({*at, (*at)->plainName(), (*at)->accessibleName()});
}

void MainWindow::Impl::showKeys()
{
    constexpr int kAfterSource = 2;
    QList<ActionGroup> groups = m_actions.groups();
    groups.insert(kAfterSource,
                  {MainWindow::tr("Virtual trimmer, while it has the focus"),
                   m_parts.trim->trimmer().keyActions()});
    auto* dialog = new KeysDialog(groups, &m_window);
    dialog->show();
}

void MainWindow::Impl::setBench(const BenchState& state)
{
    m_parts.setBench(state);
    m_display.setBench(state);
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
    setDusk(settings.theme == ThemeName::Dusk); // also when the action stands there already
    m_actions.dusk->setChecked(settings.theme == ThemeName::Dusk);
    m_actions.pictureScale->setChecked(settings.pictureScale == 2);
    setPage(static_cast<int>(settings.page));
    if (!settings.geometry.isEmpty()) {
        m_window.restoreGeometry(settings.geometry);
    }
    m_isQuiet = false;
}

MainWindow::MainWindow(FrameFeed feed, QWidget* parent)
    : QMainWindow(parent)
    , m_impl(std::make_unique<Impl>(*this, std::move(feed)))
{
    setWindowTitle(u"Sinewright"_s);
    setMinimumSize(960, 600);
    resize(1280, 800);
    m_impl->applyView({});
    setMeasureSettings({});
}

MainWindow::~MainWindow() = default;

void MainWindow::setSources(const QList<SourceChoice>& choices)
{
    m_impl->parts().sources->setSources(choices);
}

void MainWindow::setBenchState(const BenchState& state)
{
    m_impl->setBench(state);
}

void MainWindow::setMeasureSettings(const core::MeasureSettings& settings)
{
    m_impl->parts().hookUp->setMeasureSettings(settings);
}

void MainWindow::setViewSettings(const ViewSettings& settings)
{
    m_impl->applyView(settings);
}

ViewSettings MainWindow::viewSettings() const
{
    const Actions& actions = m_impl->actions();
    ViewSettings settings;
    settings.theme = actions.dusk->isChecked() ? ThemeName::Dusk : ThemeName::Paper;
    settings.page = static_cast<Page>(m_impl->parts().pages->currentIndex());
    settings.pictureScale = actions.pictureScale->isChecked() ? 2 : 1;
    settings.geometry = saveGeometry();
    return settings;
}

std::shared_ptr<const core::Frame> MainWindow::shownFrame() const
{
    return m_impl->display().shown();
}

QWidget* MainWindow::sheet() const
{
    return m_impl->parts().views;
}

void MainWindow::showNotice(const QString& sentence)
{
    m_impl->parts().bottom->showNotice(sentence);
}

void MainWindow::showEvent(QShowEvent* event)
{
    QMainWindow::showEvent(event);
    m_impl->display().start();
    m_impl->parts().focusPage();
}

} // namespace sinewright::ui
