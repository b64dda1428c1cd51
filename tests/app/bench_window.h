// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/bench_session.h"
#include "app/settings.h"
#include "app/window_wiring.h"
#include "ui/advice_label.h"
#include "ui/bottom_line.h"
#include "ui/figures_column.h"
#include "ui/main_window.h"
#include "ui/source_bar.h"
#include "ui/trend_plot.h"
#include "ui/trimmer.h"

#include <QTemporaryDir>
#include <QTest>

#include <algorithm>
#include <optional>

#include "tests/app/scripted_source.h"

namespace sinewright::tests {

/// The real window on a real session, with throw-away settings; what the user sees can be asked for.
class BenchWindow final
{
public:
    explicit BenchWindow(app::SourceFactory makeSource = app::makeSource,
                         app::CardLister listCards = noCards)
        : m_session(std::move(makeSource), std::move(listCards))
        , m_settings(m_folder.filePath(QStringLiteral("settings.ini")))
        , m_window([this] { return m_session.newestFrame(); })
        , m_wiring(m_window, m_session, m_settings)
    {}

    [[nodiscard]] bool start(const app::SourceSpec& source)
    {
        m_wiring.start(source);
        m_window.show();
        m_window.activateWindow();
        return QTest::qWaitForWindowActive(&m_window);
    }

    /// As if chosen in the picker.
    void choose(const QString& id)
    {
        QComboBox& picker = part<ui::SourceBar>().picker();
        for (int i = 0; i < picker.count(); ++i) {
            if (picker.itemText(i) == id) {
                picker.setCurrentIndex(i);
                emit picker.activated(i);
                return;
            }
        }
        qFatal("no such source in the picker: %s", qPrintable(id));
    }

    [[nodiscard]] QStringList sources()
    {
        QStringList texts;
        const QComboBox& picker = part<ui::SourceBar>().picker();
        for (int i = 0; i < picker.count(); ++i) {
            texts.append(picker.itemText(i));
        }
        return texts;
    }

    void press(Qt::Key key, Qt::KeyboardModifiers modifiers = Qt::NoModifier)
    {
        QTest::keyClick(&m_window, key, modifiers);
    }

    /// The digits of a large figure as they stand in the column at the right; empty while there are none.
    [[nodiscard]] std::optional<double> figure(const char* label)
    {
        for (const ui::FiguresColumn::Block& block : part<ui::FiguresColumn>().blocks()) {
            if (block.label.compare(QLatin1StringView(label), Qt::CaseInsensitive) == 0) {
                QString digits = block.figure.value;
                bool isNumber = false;
                const double value = digits.replace(QChar(0x2212), u'-').toDouble(&isNumber);
                return isNumber ? std::optional(value) : std::nullopt;
            }
        }
        return std::nullopt;
    }

    /// THD [%] at the right end of the trim trend.
    [[nodiscard]] double newestTrendThd()
    {
        const auto& line = part<ui::TrendPlot>().model().thd();
        return line.empty() ? 0.0 : line.back().y();
    }

    [[nodiscard]] bool hasFullReading()
    {
        const auto frame = m_window.shownFrame();
        return frame && frame->full && frame->full->thdRatio;
    }

    /// A part of the window by its kind: the one in view, where there are several.
    template <typename T>
    [[nodiscard]] T& part()
    {
        const QList<T*> found = m_window.findChildren<T*>();
        if (found.isEmpty()) {
            qFatal("the window has no such part");
        }
        const auto seen = std::find_if(
            found.begin(), found.end(), [](const T* each) { return each->isVisible(); });
        return seen != found.end() ? **seen : *found.first();
    }

    app::BenchSession& session() { return m_session; }
    app::Settings& settings() { return m_settings; }
    ui::MainWindow& window() { return m_window; }
    [[nodiscard]] QString folder() const { return m_folder.path(); }

private:
    QTemporaryDir m_folder;
    app::BenchSession m_session;
    app::Settings m_settings;
    ui::MainWindow m_window;
    app::WindowWiring m_wiring;
};

} // namespace sinewright::tests
