// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/advice_label.h"
#include "ui/arms_length_view.h"
#include "ui/figures_column.h"
#include "ui/main_window.h"
#include "ui/plot.h"
#include "ui/trimmer.h"

#include <qcustomplot.h>

#include <QAbstractSpinBox>
#include <QComboBox>
#include <QDialog>
#include <QDoubleSpinBox>
#include <QLabel>
#include <QPushButton>
#include <QSignalSpy>
#include <QTest>
#include <QWheelEvent>

#include "tests/support/fake_frames.h"

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

BenchState demoState()
{
    BenchState state;
    state.condition = BenchState::Condition::Running;
    state.source = {SourceKind::Demo, u"demo"_s, u"Demo oscillator"_s, 0.0, 1};
    state.rateHz = 96000.0;
    state.trimmerOhm = 355.0;
    state.trimmerLowestOhm = 226.0;
    state.trimmerHighestOhm = 480.0;
    return state;
}

/// A window with a feed that the test fills.
struct Bench
{
    tests::FakeBench fake;
    std::shared_ptr<const core::Frame> frame;
    int polls = 0;
    MainWindow window{[this] {
        ++polls;
        return frame;
    }};

    Bench()
    {
        window.setSources(
            {demoState().source, {SourceKind::Card, u"card:line in"_s, u"Line in"_s, 0.0, 1}});
        window.setBenchState(demoState());
        window.resize(1280, 800);
    }

    [[nodiscard]] bool open()
    {
        window.show();
        window.activateWindow();
        return QTest::qWaitForWindowActive(&window);
    }

    /// Hands over a frame and waits until the window has asked for it more than once.
    [[nodiscard]] bool give(std::shared_ptr<const core::Frame> next)
    {
        frame = std::move(next);
        const int before = polls;
        return QTest::qWaitFor([&] { return polls >= before + 3; });
    }

    template <typename Type>
    [[nodiscard]] Type* part(const QString& name) const
    {
        return window.findChild<Type*>(name);
    }
};

/// What stands under "Level".
QString levelOf(const FiguresColumn& column)
{
    for (const FiguresColumn::Block& block : column.blocks()) {
        if (block.label == MainWindow::tr("Level")) {
            return joined(block.figure);
        }
    }
    return {};
}

/// Lets so much time go by: to see that something does not happen there is no other way.
void letPass(int ms)
{
    QTimer timer;
    timer.setSingleShot(true);
    QSignalSpy spy(&timer, &QTimer::timeout);
    timer.start(ms);
    spy.wait(20 * ms);
}

} // namespace

class TestMainWindow final : public QObject
{
    Q_OBJECT
private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u"^(?!This plugin).*"_s)); }

    void pageKeys_changeThePage()
    {
        Bench bench;
        QVERIFY(bench.open());
        const QSignalSpy changed(&bench.window, &MainWindow::viewSettingsChanged);
        const std::pair<Qt::Key, Page> keys[] = {{Qt::Key_1, Page::HookUp},
                                                 {Qt::Key_3, Page::WarmUp},
                                                 {Qt::Key_4, Page::Network},
                                                 {Qt::Key_5, Page::Record},
                                                 {Qt::Key_2, Page::Trim}};
        for (const auto& [key, page] : keys) {
            QTest::keyClick(&bench.window, key, Qt::ControlModifier);
            QCOMPARE(bench.window.viewSettings().page, page);
        }
        QCOMPARE(changed.count(), 5);
    }

    void themeKey_changesThemeAndSaysSo()
    {
        Bench bench;
        QVERIFY(bench.open());
        const QSignalSpy changed(&bench.window, &MainWindow::viewSettingsChanged);
        QTest::keyClick(&bench.window, Qt::Key_T, Qt::ControlModifier);
        QCOMPARE(bench.window.viewSettings().theme, ThemeName::Dusk);
        QCOMPARE(qApp->palette().color(QPalette::Window), theme(ThemeName::Dusk).page);
        QTest::keyClick(&bench.window, Qt::Key_T, Qt::ControlModifier);
        QCOMPARE(bench.window.viewSettings().theme, ThemeName::Paper);
        QCOMPARE_GE(changed.count(), 2);
    }

    void restoredSettings_areShownAndNotAnnounced()
    {
        Bench bench;
        const QSignalSpy changed(&bench.window, &MainWindow::viewSettingsChanged);
        ViewSettings settings;
        settings.theme = ThemeName::Dusk;
        settings.page = Page::Record;
        settings.pictureScale = 2;
        bench.window.setViewSettings(settings);
        QCOMPARE(bench.window.viewSettings().theme, ThemeName::Dusk);
        QCOMPARE(bench.window.viewSettings().page, Page::Record);
        QCOMPARE(bench.window.viewSettings().pictureScale, 2);
        QCOMPARE(changed.count(), 0);
        bench.window.setViewSettings({});
    }

    void freeze_holdsTheShownFrame()
    {
        Bench bench;
        QVERIFY(bench.open());
        const auto first = bench.fake.next(2.5);
        QVERIFY(bench.give(first));
        QCOMPARE(bench.window.shownFrame(), first);
        QTest::keyClick(&bench.window, Qt::Key_F);
        const auto second = bench.fake.next(2.6);
        QVERIFY(bench.give(second));
        QCOMPARE(bench.window.shownFrame(), first);
        QVERIFY(bench.part<QLabel>(u"advice"_s)->text().startsWith(u"Frozen"_s));
        QTest::keyClick(&bench.window, Qt::Key_F);
        QCOMPARE(bench.window.shownFrame(), second);
    }

    void resetKey_asksForANewBest()
    {
        Bench bench;
        QVERIFY(bench.open());
        const QSignalSpy wanted(&bench.window, &MainWindow::bestResetWanted);
        QTest::keyClick(&bench.window, Qt::Key_R);
        QCOMPARE(wanted.count(), 1);
    }

    void trimmerKeys_moveFinelyCoarselyAndToTheEnds()
    {
        Bench bench;
        QVERIFY(bench.open());
        auto* trimmer = bench.part<Trimmer>(u"trimmer"_s);
        QVERIFY(trimmer->isVisible());
        QTRY_VERIFY(
            trimmer
                ->hasFocus()); // Trim is the page at the start: the hand is on the trimmer at once
        QSignalSpy moved(&bench.window, &MainWindow::trimmerMoved);
        const std::pair<Qt::Key, double> keys[] = {{Qt::Key_Up, 355.2},
                                                   {Qt::Key_Down, 355.0},
                                                   {Qt::Key_PageUp, 360.0},
                                                   {Qt::Key_PageDown, 355.0},
                                                   {Qt::Key_End, 480.0},
                                                   {Qt::Key_Home, 226.0}};
        for (const auto& [key, ohm] : keys) {
            QTest::keyClick(trimmer, key);
            QVERIFY(!moved.isEmpty());
            QCOMPARE_LE(std::abs(moved.takeLast().at(0).toDouble() - ohm), 1e-9);
        }
        QTest::keyClick(trimmer, Qt::Key_Home);
        QVERIFY(moved.isEmpty()); // already there: nothing to say
    }

    void trimmerWheelAndMouse_moveIt()
    {
        Bench bench;
        QVERIFY(bench.open());
        auto* trimmer = bench.part<Trimmer>(u"trimmer"_s);
        QSignalSpy moved(&bench.window, &MainWindow::trimmerMoved);
        const QPointF middle(trimmer->width() / 2.0, 10.0);
        QWheelEvent wheel(middle,
                          trimmer->mapToGlobal(middle),
                          {},
                          QPoint(0, 120),
                          Qt::NoButton,
                          Qt::NoModifier,
                          Qt::NoScrollPhase,
                          false);
        QCoreApplication::sendEvent(trimmer, &wheel);
        QCOMPARE_LE(std::abs(moved.takeLast().at(0).toDouble() - 356.0), 1e-9);
        QTest::mouseClick(trimmer, Qt::LeftButton, {}, QPoint(120, 12));
        QCOMPARE_LT(moved.takeLast().at(0).toDouble(), 240.0); // near the lower end of the ruler
        QCOMPARE_LE(std::abs(trimmer->ohm() - 226.0), 4.0);
    }

    void trimmer_isForTheDemoOnly()
    {
        Bench bench;
        QVERIFY(bench.open());
        BenchState card = demoState();
        card.source = {SourceKind::Card, u"card:line in"_s, u"Line in"_s, 0.0, 1};
        card.trimmerOhm.reset();
        bench.window.setBenchState(card);
        QVERIFY(!bench.part<Trimmer>(u"trimmer"_s)->isVisible());
        bench.window.setBenchState(demoState());
        QVERIFY(bench.part<Trimmer>(u"trimmer"_s)->isVisible());
    }

    void armsLength_showsThdAThirdOfTheWindowHigh()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.trimFor(30.0)));
        QTest::keyClick(&bench.window, Qt::Key_F11);
        QVERIFY(bench.window.isFullScreen());
        bench.window.resize(1920, 1080); // the test's screen is a small square
        auto* great = bench.part<GreatFigure>(u"greatFigure"_s);
        QTRY_VERIFY(great->isVisible());
        QTRY_VERIFY(great->figure().value.startsWith(u"0."_s));
        QTRY_COMPARE_LE(std::abs(great->digitHeight() - bench.window.height() / 3.0),
                        4.0); // whole pixels of type
        // The sentence is as large as it can be in one line.
        const auto* view = great->parentWidget();
        const auto* sentence = view->findChild<AdviceLabel*>(u"advice"_s);
        QTRY_COMPARE_GE(sentence->typeSize(), bench.window.height() / 30);
        QVERIFY(!bench.part<QWidget>(u"figures"_s)->isVisible());
        QVERIFY(!bench.part<QWidget>(u"rail"_s)->isVisible());
        QTest::keyClick(&bench.window, Qt::Key_Escape);
        QVERIFY(!bench.window.isFullScreen());
        QVERIFY(bench.part<QWidget>(u"figures"_s)->isVisible());
    }

    void keyList_namesEveryKeyOfEveryAction()
    {
        Bench bench;
        QVERIFY(bench.open());
        QTest::keyClick(&bench.window, Qt::Key_F1);
        auto* dialog = bench.window.findChild<QDialog*>();
        QVERIFY(dialog != nullptr);
        QStringList listed;
        for (const QLabel* label : dialog->findChildren<QLabel*>(u"key"_s)) {
            listed << label->text();
        }
        QSet<QString> expected;
        QList<QAction*> actions = bench.window.actions();
        actions += bench.part<Trimmer>(u"trimmer"_s)->actions();
        for (const QAction* action : std::as_const(actions)) {
            QVERIFY2(!action->shortcut().isEmpty(), qPrintable(action->text()));
            expected << action->shortcut().toString(QKeySequence::NativeText);
        }
        QCOMPARE_GE(expected.size(), 25);
        QCOMPARE(QSet<QString>(listed.begin(), listed.end()), expected);
        QCOMPARE(listed.size(), expected.size()); // no key means two things
    }

    void pictureOfPlot_isTheOneUnderThePointer_data()
    {
        QTest::addColumn<QString>("name");
        for (const char* name : {"trend", "spectrum", "harmonics", "residual"}) {
            QTest::newRow(name) << QString::fromLatin1(name);
        }
    }
    void pictureOfPlot_isTheOneUnderThePointer()
    {
        QFETCH(const QString, name);
        Bench bench;
        QVERIFY(bench.open());
        qRegisterMetaType<PictureRequest>();
        QSignalSpy wanted(&bench.window, &MainWindow::pictureWanted);
        QWidget* page = bench.window.findChild<Trimmer*>()->parentWidget();
        auto* plot = page->findChild<Plot*>(name);
        QVERIFY(plot != nullptr);
        QTest::mouseMove(&bench.window, QPoint(5, 5));
        QTest::mouseMove(&bench.window, plot->mapTo(&bench.window, plot->rect().center()));
        QTest::keyClick(&bench.window, Qt::Key_P, Qt::ShiftModifier);
        QCOMPARE(wanted.count(), 1);
        const auto request = wanted.at(0).at(0).value<PictureRequest>();
        QCOMPARE(request.subject, plot);
        QCOMPARE(request.subjectName, name);
        QVERIFY(!request.title.isEmpty());
    }

    void pictureOfPage_namesThePage()
    {
        Bench bench;
        QVERIFY(bench.open());
        qRegisterMetaType<PictureRequest>();
        QSignalSpy wanted(&bench.window, &MainWindow::pictureWanted);
        QTest::keyClick(&bench.window, Qt::Key_P);
        QCOMPARE(wanted.count(), 1);
        QCOMPARE(wanted.at(0).at(0).value<PictureRequest>().subjectName, u"trim"_s);
        QTest::keyClick(&bench.window, Qt::Key_5, Qt::ControlModifier);
        bench.part<QPushButton>(u"saveTrimPicture"_s)->click();
        QCOMPARE(wanted.count(), 2);
        QCOMPARE(wanted.at(1).at(0).value<PictureRequest>().subjectName, u"trim"_s);
        QCOMPARE(bench.window.viewSettings().page, Page::Trim);
    }

    void pictureOfPage_showsTheFrameOfItsCaption()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.next(1.5)));
        // Digits are not renewed for a new frame right away, but they are for a picture.
        QVERIFY(bench.give(bench.fake.next(2.5)));
        FiguresColumn expected;
        expected.setFrame(bench.frame);
        const auto* column = bench.window.findChild<FiguresColumn*>();
        QString pictured;
        connect(
            &bench.window, &MainWindow::pictureWanted, this, [&] { pictured = levelOf(*column); });
        QTest::keyClick(&bench.window, Qt::Key_P);
        QCOMPARE(bench.window.shownFrame(), bench.frame);
        QCOMPARE(pictured, levelOf(expected));
    }

    void hiddenWindow_neitherPollsNorDraws()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.next(2.5)));
        auto* trend =
            bench.window.findChild<Trimmer*>()->parentWidget()->findChild<Plot*>(u"trend"_s);
        QCOMPARE_GT(trend->drawCount(), 0);
        bench.window.hide();
        const int draws = trend->drawCount();
        const int polls = bench.polls;
        bench.frame = bench.fake.next(2.5);
        letPass(200);
        QCOMPARE(trend->drawCount(), draws);
        QCOMPARE(bench.polls, polls);
    }

    void hiddenPage_isNotDrawn()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.next(2.5)));
        auto* trend =
            bench.window.findChild<Trimmer*>()->parentWidget()->findChild<Plot*>(u"trend"_s);
        QTest::keyClick(&bench.window, Qt::Key_4, Qt::ControlModifier);
        const int draws = trend->drawCount();
        QVERIFY(bench.give(bench.fake.next(2.5)));
        QCOMPARE(trend->drawCount(), draws);
        QTest::keyClick(&bench.window, Qt::Key_2, Qt::ControlModifier);
        QCOMPARE_GT(trend->drawCount(), draws);
    }

    void sameFrame_isDrawnOnce()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.next(2.5)));
        auto* trend =
            bench.window.findChild<Trimmer*>()->parentWidget()->findChild<Plot*>(u"trend"_s);
        const int draws = trend->drawCount();
        QVERIFY(bench.give(bench.frame));
        QCOMPARE(trend->drawCount(), draws);
    }

    void picker_saysWhatWasChosenAndStaysWithWhatIsOpen()
    {
        Bench bench;
        QVERIFY(bench.open());
        qRegisterMetaType<SourceChoice>();
        QSignalSpy chosen(&bench.window, &MainWindow::sourceChosen);
        const QSignalSpy wanted(&bench.window, &MainWindow::sourcesWanted);
        auto* picker = bench.part<QComboBox>(u"sourcePicker"_s);
        picker->showPopup();
        picker->hidePopup();
        QCOMPARE(wanted.count(), 1);
        emit picker->activated(1);
        QCOMPARE(chosen.count(), 1);
        QCOMPARE(chosen.at(0).at(0).value<SourceChoice>().id, u"card:line in"_s);
        BenchState take = demoState();
        take.source = {SourceKind::Take, u"/tmp/x.wav"_s, u"x.wav"_s, 0.0, 1};
        bench.window.setBenchState(take);
        QCOMPARE(picker->currentText(), u"x.wav"_s);
        QVERIFY(!bench.part<QComboBox>(u"ratePicker"_s)->isEnabled()); // a take has the rate it has
    }

    void rateAndChannel_areAskedForWithTheSameSource()
    {
        Bench bench;
        QVERIFY(bench.open());
        qRegisterMetaType<SourceChoice>();
        BenchState card = demoState();
        card.source = {SourceKind::Card, u"card:line in"_s, u"Line in"_s, 0.0, 1};
        card.channels = 2;
        bench.window.setBenchState(card);
        QSignalSpy chosen(&bench.window, &MainWindow::sourceChosen);
        auto* rate = bench.part<QComboBox>(u"ratePicker"_s);
        rate->setCurrentIndex(rate->findData(192000.0));
        emit rate->activated(rate->currentIndex());
        auto choice = chosen.takeLast().at(0).value<SourceChoice>();
        QCOMPARE(choice.id, u"card:line in"_s);
        QCOMPARE(choice.rateHz, 192000.0);
        auto* channel = bench.part<QComboBox>(u"channelPicker"_s);
        channel->setCurrentIndex(1);
        emit channel->activated(1);
        choice = chosen.takeLast().at(0).value<SourceChoice>();
        QCOMPARE(choice.channel, 2);
    }

    void fullScale_isChosenOnHookUpAndABandOfNothingIsNot()
    {
        Bench bench;
        QVERIFY(bench.open());
        core::MeasureSettings got;
        int count = 0;
        connect(&bench.window,
                &MainWindow::measureSettingsChosen,
                this,
                [&](const core::MeasureSettings& settings) {
                    got = settings;
                    ++count;
                });
        bench.part<QDoubleSpinBox>(u"fullScale"_s)->setValue(4.0);
        QCOMPARE(count, 1);
        QCOMPARE(*got.fullScaleVrms, 4.0);
        bench.part<QDoubleSpinBox>(u"fullScale"_s)->setValue(0.0);
        QVERIFY(!got.fullScaleVrms);
        bench.part<QDoubleSpinBox>(u"bandLow"_s)->setValue(30000.0);
        QCOMPARE(count, 2);
        QCOMPARE(bench.part<QDoubleSpinBox>(u"bandLow"_s)->value(), 20.0);
    }

    void lostSource_isSaidInLargeTypeAndBelow()
    {
        Bench bench;
        QVERIFY(bench.open());
        QVERIFY(bench.give(bench.fake.next(2.5)));
        BenchState lost = demoState();
        lost.condition = BenchState::Condition::Lost;
        lost.message = u"The interface went away: plug it in again."_s;
        lost.framesLost = 123;
        bench.window.setBenchState(lost);
        QCOMPARE(bench.part<QLabel>(u"advice"_s)->text(), lost.message);
        QString below;
        for (const QLabel* label : bench.part<QWidget>(u"bottomLine"_s)->findChildren<QLabel*>()) {
            below += label->text();
        }
        QVERIFY(below.contains(u"123"_s));
        QVERIFY(below.contains(u"lost"_s));
    }

    void everyControl_hasANameAndATip()
    {
        Bench bench;
        QVERIFY(bench.open());
        int seen = 0;
        for (const QWidget* widget : bench.window.findChildren<QWidget*>()) {
            const bool isControl = qobject_cast<const QAbstractButton*>(widget) ||
                                   qobject_cast<const QComboBox*>(widget) ||
                                   qobject_cast<const QAbstractSpinBox*>(widget) ||
                                   qobject_cast<const QSlider*>(widget);
            if (isControl && widget->isVisibleTo(&bench.window)) {
                ++seen;
                const auto* button = qobject_cast<const QAbstractButton*>(widget);
                QVERIFY2(!widget->accessibleName().isEmpty() ||
                             (button && !button->text().isEmpty()),
                         widget->metaObject()->className());
                QVERIFY2(!widget->toolTip().isEmpty(), widget->metaObject()->className());
            }
            if (qobject_cast<const QCustomPlot*>(widget)) {
                QVERIFY(!widget->accessibleName().isEmpty());
            }
        }
        QCOMPARE_GT(seen, 10);
    }

    void smallestWindow_clipsNoPart()
    {
        Bench bench;
        QVERIFY(bench.open());
        bench.window.resize(1024, 640);
        QTRY_COMPARE(bench.window.size(), QSize(1024, 640));
        for (const QString& name : {u"trend"_s,
                                    u"spectrum"_s,
                                    u"harmonics"_s,
                                    u"residual"_s,
                                    u"figures"_s,
                                    u"levelMeter"_s,
                                    u"trimmer"_s}) {
            const auto* part =
                bench.window.findChild<Trimmer*>()->parentWidget()->findChild<QWidget*>(name);
            if (part == nullptr) {
                part = bench.part<QWidget>(name);
            }
            const QRect place(part->mapTo(&bench.window, QPoint(0, 0)), part->size());
            QVERIFY2(bench.window.rect().contains(place), qPrintable(name));
        }
    }
};

} // namespace sinewright::ui

QTEST_MAIN(sinewright::ui::TestMainWindow)
#include "tst_main_window.moc"
