// SPDX-License-Identifier: GPL-3.0-or-later
//
// Pictures of the window in its states, from invented frames, for the eyes of whoever works on it; and what drawing
// costs. Not a test: nothing here can fail.
//
//     window_pictures FOLDER          pictures
//     window_pictures --cost SECONDS  CPU time per second of 20 frames a second at 1280x800
#include "ui/main_window.h"
#include "ui/picture.h"

#include <qcustomplot.h>

#include <QApplication>
#include <QDialog>
#include <QDir>
#include <QElapsedTimer>
#include <QTest>

#include <cstdio>
#include <ctime>

#include "tests/support/fake_frames.h"

namespace {

using namespace sinewright;
using namespace Qt::StringLiterals;

ui::BenchState demoState()
{
    ui::BenchState state;
    state.condition = ui::BenchState::Condition::Running;
    state.source = {ui::SourceKind::Demo, u"demo"_s, u"Demo oscillator"_s, 0.0, 1};
    state.rateHz = 96000.0;
    state.trimmerOhm = 368.4;
    state.trimmerLowestOhm = 226.0;
    state.trimmerHighestOhm = 480.0;
    return state;
}

class Studio final
{
public:
    explicit Studio(QDir folder) : m_folder(std::move(folder)), m_window([this] { return m_frame; })
    {
        m_window.setSources(
            {demoState().source, {ui::SourceKind::Card, u"card:line in"_s, u"Line in"_s, 0.0, 1}});
        m_window.setBenchState(demoState());
        m_window.show();
    }

    void show(std::shared_ptr<const core::Frame> frame, ui::BenchState state)
    {
        m_window.setBenchState(state);
        m_frame = std::move(frame);
        QTest::qWait(900); // long enough for a sentence to be taken as lasting
    }

    void view(ui::Page page, ui::ThemeName theme, QSize size)
    {
        m_window.resize(size);
        ui::ViewSettings settings;
        settings.page = page;
        settings.theme = theme;
        m_window.setViewSettings(settings);
        QTest::qWait(300);
    }

    void shoot(const QString& name, QWidget* subject = nullptr)
    {
        QTest::qWait(300);
        (subject != nullptr ? subject : &m_window)
            ->grab()
            .save(m_folder.filePath(name + u".png"_s));
    }

    void press(Qt::Key key)
    {
        m_window.activateWindow();
        static_cast<void>(QTest::qWaitForWindowActive(&m_window));
        QTest::keyClick(&m_window, key);
    }

    ui::MainWindow& window() { return m_window; }

private:
    QDir m_folder;
    std::shared_ptr<const core::Frame> m_frame;
    ui::MainWindow m_window;
};

void shootStates(Studio& studio, tests::FakeBench& bench)
{
    using Condition = ui::BenchState::Condition;
    const QSize usual(1280, 800);
    studio.view(ui::Page::Trim, ui::ThemeName::Paper, usual);
    ui::BenchState state = demoState();
    state.condition = Condition::Starting;
    studio.show(nullptr, state);
    studio.shoot(u"empty"_s);
    studio.show(bench.nextWithoutTone(), demoState());
    studio.shoot(u"no-tone"_s);
    state = demoState();
    state.source = {ui::SourceKind::Card, u"card:line in"_s, u"Line in"_s, 0.0, 1};
    state.trimmerOhm.reset();
    state.channels = 2;
    state.condition = Condition::Lost;
    state.framesLost = 4096;
    state.message =
        u"The interface stopped delivering: check its cable; listening goes on by itself when it is back."_s;
    auto frame = bench.trimFor(180.0);
    studio.show(frame, state);
    studio.shoot(u"lost"_s);
    state.condition = Condition::Running;
    state.message.clear();
    auto over = std::make_shared<core::Frame>(*frame);
    over->peakFs = 1.0;
    over->quick.status = core::ReadingStatus::Overload;
    over->quick.warnings = {core::Warning::InputOverload};
    studio.show(over, state);
    studio.shoot(u"overload"_s);
}

void shootViews(Studio& studio, const std::shared_ptr<const core::Frame>& frame)
{
    studio.show(frame, demoState());
    const std::pair<QString, ui::ThemeName> themes[] = {{u"paper"_s, ui::ThemeName::Paper},
                                                        {u"dusk"_s, ui::ThemeName::Dusk}};
    for (const auto& [name, theme] : themes) {
        for (const QSize size : {QSize(1280, 800), QSize(1920, 1080), QSize(1024, 640)}) {
            studio.view(ui::Page::Trim, theme, size);
            studio.shoot(u"trim-%1-%2x%3"_s.arg(name).arg(size.width()).arg(size.height()));
        }
        const std::pair<QString, ui::Page> pages[] = {{u"hook-up"_s, ui::Page::HookUp},
                                                      {u"warm-up"_s, ui::Page::WarmUp},
                                                      {u"network"_s, ui::Page::Network},
                                                      {u"record"_s, ui::Page::Record}};
        for (const auto& [word, page] : pages) {
            studio.view(page, theme, QSize(1280, 800));
            studio.shoot(word + u'-' + name);
        }
        studio.view(ui::Page::Trim, theme, QSize(1280, 800));
        for (const auto& [word, key] :
             {std::pair(u"keys-"_s, Qt::Key_F1), std::pair(u"figures-"_s, Qt::Key_T)}) {
            studio.press(key);
            if (auto* dialog = studio.window().findChild<QDialog*>()) {
                studio.shoot(word + name, dialog);
                dialog->close();
                QTest::qWait(50);
            }
        }
        studio.press(Qt::Key_F11);
        QTest::qWait(100);
        studio.window().resize(1280, 800);
        studio.shoot(u"arms-length-"_s + name);
        studio.press(Qt::Key_F11);
    }
}

void measureCost(double seconds)
{
    std::vector<std::shared_ptr<const core::Frame>> frames;
    tests::FakeBench bench;
    static_cast<void>(bench.trimFor(180.0));
    for (int i = 0; i < 40; ++i) {
        frames.push_back(bench.next(2.5));
    }
    std::size_t at = 0;
    QElapsedTimer wall;
    ui::MainWindow window([&] {
        at = static_cast<std::size_t>(static_cast<double>(wall.elapsed()) * 0.02) % frames.size();
        return frames[at];
    });
    window.setBenchState(demoState());
    wall.start();
    window.show();
    QTest::qWait(1500);
    const std::clock_t before = std::clock();
    QElapsedTimer span;
    span.start();
    QTest::qWait(static_cast<int>(seconds * 1000.0));
    const double cpu = static_cast<double>(std::clock() - before) / CLOCKS_PER_SEC;
    for (const QCustomPlot* plot : window.findChildren<QCustomPlot*>()) {
        if (plot->isVisible()) {
            std::printf("%-10s %5.2f ms a replot\n",
                        qPrintable(plot->objectName()),
                        plot->replotTime(true));
        }
    }
    std::printf("drawing at %dx%d: %.1f %% of one core\n",
                window.width(),
                window.height(),
                100.0 * cpu / (static_cast<double>(span.elapsed()) / 1000.0));
}

} // namespace

int main(int argc, char** argv)
{
    const QApplication application(argc, argv);
    const QStringList arguments = QCoreApplication::arguments();
    if (arguments.value(1) == "--cost"_L1) {
        measureCost(arguments.value(2, u"10"_s).toDouble());
        return 0;
    }
    const QDir folder(arguments.value(1, u"."_s));
    QDir().mkpath(folder.path());
    tests::FakeBench bench;
    Studio studio(folder);
    shootStates(studio, bench);
    const auto frame = bench.trimFor(180.0);
    shootViews(studio, frame);
    ui::composePicture(
        &studio.window(),
        ui::captionFor(u"Trim"_s, frame.get(), demoState(), {}, QDateTime::currentDateTime()),
        2)
        .save(folder.filePath(u"picture-2x.png"_s));
    return 0;
}
