// SPDX-License-Identifier: GPL-3.0-or-later
#include <QDir>
#include <QElapsedTimer>
#include <QFile>
#include <QImage>
#include <QTest>

#include <cmath>

#include "tests/app/bench_window.h"
#include "tests/app/test_takes.h"
#include "tests/support/virtual_card.h"

using namespace sinewright;
using namespace sinewright::tests;
using namespace Qt::StringLiterals;
using Condition = app::SessionStatus::Condition;

namespace {

constexpr int kPatienceMs = 20000;

core::Result<std::vector<audio::CardInfo>> oneCard()
{
    return std::vector<audio::CardInfo>{{.hostApi = "ALSA",
                                         .name = "bench input",
                                         .inputChannels = 2,
                                         .defaultRateHz = 48000.0,
                                         .ratesHz = {48000.0}}};
}

/// The demo is real, any card is scripted.
app::SourceFactory demoOr(std::shared_ptr<Script> card)
{
    return [card](const app::SourceSpec& spec,
                  const std::shared_ptr<const audio::DemoTrimmer>& trimmer)
               -> std::unique_ptr<audio::Source> {
        if (spec.kind == ui::SourceKind::Card) {
            return std::make_unique<ScriptedSource>(card);
        }
        return app::makeSource(spec, trimmer);
    };
}

} // namespace

/// The window, the session and the demo as they run at the bench.
class TestWindowEndToEnd : public QObject
{
    Q_OBJECT

private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".?"_s)); }

    void trimmerIntoClipping_raisesThdInTrendAndFigures()
    {
        BenchWindow bench;
        QVERIFY(bench.start({.rateHz = 48000.0}));
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        QTRY_VERIFY(bench.figure("THD"));
        const double thdBefore = *bench.figure("THD");
        const double levelBefore = bench.figure("Level").value_or(0.0);
        QCOMPARE_LT(thdBefore, 0.2); // [%] a trimmed lamp oscillator is near 0.1: common practice
        QTRY_VERIFY(bench.newestTrendThd() > 0.0);
        QCOMPARE_LT(bench.newestTrendThd(), 0.5);

        auto& trimmer = bench.part<ui::Trimmer>();
        trimmer.setFocus();
        const double ohmBefore = trimmer.ohm();
        constexpr int kCoarseTurns = 10; // 5 ohm each: the rails are reached after half of them
        for (int i = 0; i < kCoarseTurns; ++i) {
            QTest::keyClick(&trimmer, Qt::Key_PageUp);
        }
        QVERIFY(trimmer.ohm() > ohmBefore);
        QCOMPARE_LE(std::abs(bench.session().trimmerOhm() - trimmer.ohm()), 1e-9);
        // The rails cut the tops: whole percents of THD, at a level that has risen.
        QTRY_VERIFY_WITH_TIMEOUT(bench.figure("THD").value_or(0.0) > 10.0 * thdBefore, kPatienceMs);
        QTRY_VERIFY_WITH_TIMEOUT(bench.newestTrendThd() > 10.0 * thdBefore, kPatienceMs);
        QTRY_VERIFY_WITH_TIMEOUT(bench.figure("Level").value_or(-99.0) > levelBefore + 0.3,
                                 kPatienceMs);
        // The best so far is still the one from before.
        QCOMPARE_LE(bench.figure("Best so far").value_or(99.0), 1.1 * thdBefore);
    }

    void anotherSource_isChosenInThePicker()
    {
        const auto script = std::make_shared<Script>();
        BenchWindow bench(demoOr(script), oneCard);
        QVERIFY(bench.start({.rateHz = 48000.0}));
        QTRY_VERIFY(bench.sources().contains(u"bench input (ALSA)"_s));
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        QVERIFY(bench.part<ui::Trimmer>().isVisible());
        bench.choose(u"bench input (ALSA)"_s);
        QTRY_VERIFY_WITH_TIMEOUT(std::abs(bench.figure("Frequency").value_or(0.0) - 1000.0) < 0.01,
                                 kPatienceMs);
        QVERIFY(!bench.part<ui::Trimmer>().isVisible());
        QVERIFY2(bench.part<ui::BottomLine>().text().contains(u"bench input"_s),
                 qPrintable(bench.part<ui::BottomLine>().text()));
        QCOMPARE(bench.settings().values().source.name, u"bench input"_s);
        bench.choose(u"Demo oscillator"_s);
        QTRY_VERIFY_WITH_TIMEOUT(std::abs(bench.figure("Frequency").value_or(0.0) - 1183.0) < 5.0,
                                 kPatienceMs);
        QVERIFY(bench.part<ui::Trimmer>().isVisible());
    }

    void badFile_isSaidAndTheWindowGoesOn()
    {
        BenchWindow bench;
        const QString file = QDir(bench.folder()).filePath(u"diary.wav"_s);
        QFile out(file);
        QVERIFY(out.open(QIODevice::WriteOnly) && out.write("no samples here, only words\n") > 0);
        out.close();
        QVERIFY(bench.start({.rateHz = 48000.0}));
        QTRY_VERIFY(bench.window().shownFrame());
        emit bench.window().sourceChosen(
            {.kind = ui::SourceKind::Take, .id = file, .label = u"diary.wav"_s});
        QTRY_VERIFY(bench.session().status().condition == Condition::Failed);
        const QString message = bench.session().status().message;
        QVERIFY2(message.contains(u"diary.wav"_s), qPrintable(message));
        QTRY_VERIFY2(bench.part<ui::AdviceLabel>().accessibleName().contains(u"diary.wav"_s) ||
                         bench.part<ui::AdviceLabel>().text().contains(u"diary.wav"_s),
                     qPrintable(bench.part<ui::AdviceLabel>().text()));
        bench.choose(u"Demo oscillator"_s);
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
    }

    void scriptedDeviceVanishing_isSaidAndSoIsItsReturn()
    {
        const auto script = std::make_shared<Script>();
        BenchWindow bench(demoOr(script), oneCard);
        QVERIFY(bench.start({.kind = ui::SourceKind::Card, .name = u"bench input"_s}));
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        script->condition = audio::SourceCondition::Lost;
        QTRY_VERIFY(bench.session().status().condition == Condition::Lost);
        QTRY_VERIFY2(bench.part<ui::AdviceLabel>().text().contains(u"gone"_s),
                     qPrintable(bench.part<ui::AdviceLabel>().text()));
        script->framesToLose = 4800;
        script->condition = audio::SourceCondition::Running;
        QTRY_VERIFY(bench.session().status().condition == Condition::Running);
        QTRY_COMPARE(bench.window().shownFrame()->gaps, std::uint64_t{1});
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
    }

    /// Through PortAudio, with the sound server killed under the running stream.
    void realDeviceVanishing_isNoticedWithinASecondAndComesBack()
    {
        if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
            QSKIP(qPrintable(u"no virtual card without "_s + missing));
        }
        VirtualCard card;
        card.useInThisProcess();
        QVERIFY2(card.start(), qPrintable(card.whatFailed()));
        const QTemporaryDir folder;
        const QString file = folder.filePath(u"tone.wav"_s);
        QVERIFY(
            writeTake(file, 96000, 1, SF_FORMAT_WAV | SF_FORMAT_FLOAT, KnownTone().samples(30.0)));
        QVERIFY2(card.play(file), qPrintable(card.whatFailed()));

        BenchWindow bench(app::makeSource, audio::listCards);
        QVERIFY(bench.start({.kind = ui::SourceKind::Card, .name = u"pulse"_s, .rateHz = 96000.0}));
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        QElapsedTimer sinceKilled;
        card.kill();
        sinceKilled.start();
        QTRY_VERIFY(bench.session().status().condition == Condition::Lost);
        qInfo("loss of the device said after %lld ms",
              static_cast<long long>(sinceKilled.elapsed()));
        QCOMPARE_LE(sinceKilled.elapsed(), qint64{1000});
        QTRY_VERIFY(!bench.session().status().message.isEmpty());

        QVERIFY2(card.start(), qPrintable(card.whatFailed()));
        QVERIFY2(card.play(file), qPrintable(card.whatFailed()));
        QTRY_VERIFY_WITH_TIMEOUT(bench.session().status().condition == Condition::Running,
                                 kPatienceMs);
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        QCOMPARE_GT(bench.session().status().framesLost, quint64{0});
        QCOMPARE_GE(bench.window().shownFrame()->gaps, std::uint64_t{1});
    }

    void volts_appearOnceFullScaleIsKnown()
    {
        const auto script = std::make_shared<Script>();
        BenchWindow bench(demoOr(script), oneCard);
        QVERIFY(bench.start({.kind = ui::SourceKind::Card, .name = u"bench input"_s}));
        QTRY_VERIFY_WITH_TIMEOUT(bench.hasFullReading(), kPatienceMs);
        core::MeasureSettings settings;
        settings.fullScaleVrms = 4.0;
        emit bench.window().measureSettingsChosen(settings);
        QTRY_VERIFY_WITH_TIMEOUT(bench.window().shownFrame()->full->levelVrms, kPatienceMs);
        QVERIFY(bench.settings().values().measure == settings);
    }

    void pictureKey_savesPicturesThatNeverReplaceEachOther()
    {
        BenchWindow bench;
        bench.settings().setPictureFolder(bench.folder());
        QVERIFY(bench.start({.rateHz = 48000.0}));
        QTRY_VERIFY(bench.window().shownFrame());
        bench.press(Qt::Key_P);
        bench.press(Qt::Key_P);
        QVERIFY2(bench.part<ui::BottomLine>().notice().contains(u"sinewright-"_s),
                 qPrintable(bench.part<ui::BottomLine>().notice()));
        const QStringList names = QDir(bench.folder()).entryList({u"sinewright-*-trim.png"_s});
        QCOMPARE(names.size(), 2);
        const QImage picture(QDir(bench.folder()).filePath(names.first()));
        // The page, and below it the caption.
        QCOMPARE_GE(picture.width(), 800);
        QCOMPARE_GE(picture.height(), 500);
    }

    void pictureThatCannotBeSaved_isSaid()
    {
        BenchWindow bench;
        // Something that is a folder for nobody, root included.
        bench.settings().setPictureFolder(u"/proc/self"_s);
        QVERIFY(bench.start({.rateHz = 48000.0}));
        QTRY_VERIFY(bench.window().shownFrame());
        bench.press(Qt::Key_P);
        QVERIFY2(bench.part<ui::BottomLine>().notice().contains(u"cannot be written"_s),
                 qPrintable(bench.part<ui::BottomLine>().notice()));
    }

    void themePageAndBest_areTheUsersToChange()
    {
        const auto script = std::make_shared<Script>();
        BenchWindow bench(demoOr(script), oneCard);
        QVERIFY(bench.start({.kind = ui::SourceKind::Card, .name = u"bench input"_s}));
        const auto best = [&bench] {
            return bench.window().shownFrame()->trend->best;
        };
        QTRY_VERIFY_WITH_TIMEOUT(bench.window().shownFrame() && best(), kPatienceMs);
        const double resetAtS = bench.window().shownFrame()->timeS;
        bench.press(Qt::Key_R);
        QTRY_VERIFY_WITH_TIMEOUT(best() && best()->timeS > resetAtS, kPatienceMs);
        bench.press(Qt::Key_T, Qt::ControlModifier);
        QVERIFY(bench.settings().values().view.theme == ui::ThemeName::Dusk);
        bench.press(Qt::Key_4, Qt::ControlModifier);
        QVERIFY(bench.settings().values().view.page == ui::Page::Network);
    }
};

QTEST_MAIN(TestWindowEndToEnd)
#include "tst_window_end_to_end.moc"
