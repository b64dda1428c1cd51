// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/bench_session.h"

#include <QSignalSpy>
#include <QTemporaryDir>
#include <QTest>

#include <cmath>
#include <map>
#include <numbers>
#include <set>

#include "tests/app/scripted_source.h"
#include "tests/support/virtual_card.h"

using namespace sinewright;
using namespace sinewright::app;
using namespace sinewright::tests;
using namespace Qt::StringLiterals;
using Condition = SessionStatus::Condition;

namespace {

/// Full readings need two seconds of signal; the scripted source gives that in less than one, the demo in more.
constexpr int kPatienceMs = 15000;

SourceSpec namedCard(const char* name)
{
    return {.kind = ui::SourceKind::Card, .name = QString::fromLatin1(name)};
}

/// The conditions a session went through, repetitions left out.
std::vector<Condition> conditionsOf(const QSignalSpy& spy)
{
    std::vector<Condition> conditions;
    for (const auto& arguments : spy) {
        const auto condition = arguments.first().value<SessionStatus>().condition;
        if (conditions.empty() || conditions.back() != condition) {
            conditions.push_back(condition);
        }
    }
    return conditions;
}

bool hasFullReading(BenchSession& session)
{
    const auto frame = session.newestFrame();
    return frame && frame->full && frame->full->thdRatio;
}

} // namespace

class TestBenchSession : public QObject
{
    Q_OBJECT

private slots:
    void init() { QTest::failOnWarning(QRegularExpression(u".?"_s)); }

    void atTheStart_thereIsNoFrame()
    {
        BenchSession session(scriptedFactory(std::make_shared<Script>()), noCards);
        QVERIFY(!session.newestFrame());
        QVERIFY(session.status().condition == Condition::Starting);
    }

    void demo_givesFramesWithReadings()
    {
        BenchSession session(app::makeSource, noCards);
        session.open({.rateHz = 48000.0});
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        const auto frame = session.newestFrame();
        QCOMPARE(frame->rate.hz, 48000.0);
        QVERIFY(frame->full->status == core::ReadingStatus::Ok);
        QVERIFY(!frame->trend->points.empty());
        QVERIFY(session.status().condition == Condition::Running);
        QVERIFY(session.analysisSeconds() > 0.0);
    }

    void reading_isThatOfTheChosenChannel()
    {
        const auto script = std::make_shared<Script>();
        BenchSession session(scriptedFactory(script), noCards);
        session.open({.kind = ui::SourceKind::Card, .channel = 2});
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        const core::Reading reading = *session.newestFrame()->full;
        // Channel 2 is a pure octave at half the level; the float samples put the floor near -150 dB.
        QCOMPARE_LE(std::abs(reading.frequencyHz.value_or(0.0) - 2000.0), 1e-3);
        QCOMPARE_LE(std::abs(reading.levelDbfs.value_or(0.0) - 20.0 * std::log10(0.25)), 1e-3);
    }

    void open_returnsWhileTheDeviceIsStillOpening()
    {
        const auto script = std::make_shared<Script>();
        script->opensSlowly = true;
        BenchSession session(scriptedFactory(script), noCards);
        session.open(namedCard("slow"));
        QVERIFY(script->isOpening.tryAcquire(1, kPatienceMs));
        // [dev] is inside open() and stays there until told otherwise; here life goes on.
        QVERIFY(session.status().condition == Condition::Starting);
        script->mayOpen.release();
        QTRY_VERIFY(session.status().condition == Condition::Running);
    }

    void ordersThatWereOvertaken_areSkipped()
    {
        const auto slow = std::make_shared<Script>();
        slow->opensSlowly = true;
        const auto quick = std::make_shared<Script>();
        quick->frequencyHz = 3000.0;
        BenchSession session(
            [slow, quick](const SourceSpec& spec,
                          const std::shared_ptr<const audio::DemoTrimmer>&) {
                return std::make_unique<ScriptedSource>(spec.name == u"quick" ? quick : slow);
            },
            noCards);
        QSignalSpy spy(&session, &BenchSession::statusChanged);
        session.open(namedCard("slow"));
        QVERIFY(slow->isOpening.tryAcquire(1, kPatienceMs));
        session.open(namedCard("slow again"));
        session.open(namedCard("quick"));
        slow->mayOpen.release(2);
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        QCOMPARE(session.status().source.name, u"quick"_s);
        QCOMPARE(slow->opened.load(), 1);
        QCOMPARE_LE(std::abs(session.newestFrame()->full->frequencyHz.value_or(0.0) - 3000.0),
                    1e-3);
        for (const auto& arguments : std::as_const(spy)) {
            const auto status = arguments.first().value<SessionStatus>();
            QVERIFY(status.source.name == u"quick" || status.condition == Condition::Starting);
        }
    }

    void afterASwitch_noFrameOfTheOldSourceComes()
    {
        const auto first = std::make_shared<Script>();
        const auto second = std::make_shared<Script>();
        second->frequencyHz = 5000.0;
        BenchSession session(
            [first, second](const SourceSpec& spec,
                            const std::shared_ptr<const audio::DemoTrimmer>&) {
                return std::make_unique<ScriptedSource>(spec.name == u"first" ? first : second);
            },
            noCards);
        for (int turn = 0; turn < 3; ++turn) {
            session.open(namedCard("first"));
            QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
            session.open(namedCard("second"));
            QVERIFY(!session.newestFrame());
            QTRY_VERIFY_WITH_TIMEOUT(session.newestFrame(), kPatienceMs);
            const auto frame = session.newestFrame();
            QVERIFY(!frame->quick.frequencyHz ||
                    std::abs(*frame->quick.frequencyHz - 5000.0) < 1.0);
        }
        QCOMPARE(first->opened.load(), 3);
        QCOMPARE(first->stopped.load(), 3);
    }

    void sourceThatCannotBeOpened_saysWhyAndTheNextOneWorks()
    {
        const auto script = std::make_shared<Script>();
        script->refusal = "bench input: in use by another program; close it";
        BenchSession session(scriptedFactory(script), noCards);
        session.open(namedCard("busy"));
        QTRY_VERIFY(session.status().condition == Condition::Failed);
        QCOMPARE(session.status().message, QString::fromStdString(script->refusal));
        script->refusal.clear();
        session.open(namedCard("free"));
        QTRY_VERIFY(session.status().condition == Condition::Running);
        QCOMPARE(session.status().message, QString());
    }

    void channelThatIsNotThere_isAFailureThatNamesWhatThereIs()
    {
        BenchSession session(scriptedFactory(std::make_shared<Script>()), noCards);
        session.open({.kind = ui::SourceKind::Card, .name = u"usb"_s, .channel = 5});
        QTRY_VERIFY(session.status().condition == Condition::Failed);
        QVERIFY2(session.status().message.contains(u"no channel 5, only 2"_s),
                 qPrintable(session.status().message));
    }

    void takeThatEnds_keepsItsLastFrame()
    {
        const QTemporaryDir folder;
        const QString file = folder.filePath(u"short.wav"_s);
        constexpr int kRate = 48000;
        std::vector<float> tone(kRate / 2);
        for (std::size_t i = 0; i < tone.size(); ++i) {
            tone[i] = static_cast<float>(
                0.5 * std::sin(2.0 * std::numbers::pi * 1000.0 * static_cast<double>(i) / kRate));
        }
        QVERIFY(writeFloatWav(file, kRate, {tone}));
        BenchSession session(app::makeSource, noCards);
        QSignalSpy spy(&session, &BenchSession::statusChanged);
        session.open({.kind = ui::SourceKind::Take, .name = file});
        QTRY_VERIFY_WITH_TIMEOUT(session.status().condition == Condition::Ended, kPatienceMs);
        QTRY_VERIFY(session.newestFrame() && session.newestFrame()->timeS > 0.4);
        QVERIFY(session.newestFrame()->quick.frequencyHz);
        QCOMPARE(conditionsOf(spy).back(), Condition::Ended);
    }

    void lostDevice_isSaidAndSoIsItsReturn()
    {
        const auto script = std::make_shared<Script>();
        BenchSession session(scriptedFactory(script), noCards);
        QSignalSpy spy(&session, &BenchSession::statusChanged);
        session.open(namedCard("usb"));
        QTRY_VERIFY(session.status().condition == Condition::Running);
        script->condition = audio::SourceCondition::Lost;
        QTRY_VERIFY(session.status().condition == Condition::Lost);
        QVERIFY(session.status().message.contains(u"plug it in again"_s));
        script->condition = audio::SourceCondition::Silent;
        QTRY_VERIFY(session.status().condition == Condition::Silent);
        script->condition = audio::SourceCondition::Running;
        QTRY_VERIFY(session.status().condition == Condition::Running);
        QCOMPARE(conditionsOf(spy),
                 (std::vector{Condition::Starting,
                              Condition::Running,
                              Condition::Lost,
                              Condition::Silent,
                              Condition::Running}));
    }

    void lostSamples_areCountedInStatusAndFrame()
    {
        const auto script = std::make_shared<Script>();
        BenchSession session(scriptedFactory(script), noCards);
        session.open(namedCard("usb"));
        QTRY_VERIFY(session.newestFrame());
        QCOMPARE(session.newestFrame()->framesLost, std::uint64_t{0});
        script->framesToLose = 1234;
        QTRY_COMPARE(session.status().framesLost, quint64{1234});
        QTRY_COMPARE(session.newestFrame()->framesLost, std::uint64_t{1234});
        QCOMPARE(session.newestFrame()->gaps, std::uint64_t{1});
    }

    void resetBest_forgetsTheBestSoFar()
    {
        BenchSession session(scriptedFactory(std::make_shared<Script>()), noCards);
        session.open(namedCard("usb"));
        const auto best = [&session] {
            return session.newestFrame()->trend->best;
        };
        QTRY_VERIFY_WITH_TIMEOUT(session.newestFrame() && best(), kPatienceMs);
        const double resetAtS = session.newestFrame()->timeS;
        session.resetBest();
        // The next best lies wholly behind the moment of the reset.
        QTRY_VERIFY_WITH_TIMEOUT(best() && best()->timeS > resetAtS, kPatienceMs);
    }

    void measureSettings_reachTheAnalyserAndEveryLaterSource()
    {
        BenchSession session(scriptedFactory(std::make_shared<Script>()), noCards);
        session.open(namedCard("usb"));
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        QVERIFY(!session.newestFrame()->full->levelVrms);
        core::MeasureSettings settings;
        settings.harmonicCount = 3;
        settings.fullScaleVrms = 4.0;
        session.setMeasureSettings(settings);
        QTRY_VERIFY_WITH_TIMEOUT(session.newestFrame()->full->levelVrms, kPatienceMs);
        QCOMPARE_LE(std::abs(*session.newestFrame()->full->levelVrms - 2.0), 1e-3);
        QCOMPARE(session.newestFrame()->full->harmonics.size(), std::size_t{2});
        session.open(namedCard("another"));
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        QVERIFY(session.newestFrame()->full->levelVrms);
    }

    void trimmer_staysWithinItsTravel()
    {
        BenchSession session(scriptedFactory(std::make_shared<Script>()), noCards);
        session.setTrimmer(1.0);
        QCOMPARE(session.trimmerOhm(), audio::kDemoTrimmerLowestOhm);
        session.setTrimmer(1e6);
        QCOMPARE(session.trimmerOhm(), audio::kDemoTrimmerHighestOhm);
    }

    void trimmer_movesTheLevelOfTheDemo()
    {
        BenchSession session(app::makeSource, noCards);
        session.setTrimmer(330.0);
        session.open({.rateHz = 48000.0});
        QTRY_VERIFY_WITH_TIMEOUT(hasFullReading(session), kPatienceMs);
        const double before = session.newestFrame()->quick.levelDbfs.value_or(0.0);
        session.setTrimmer(350.0);
        QTRY_VERIFY_WITH_TIMEOUT(
            session.newestFrame()->quick.levelDbfs.value_or(-99.0) > before + 0.3, kPatienceMs);
    }

    void cards_areListedAwayFromTheWindowsThread()
    {
        std::atomic<QThread*> listedOn{nullptr};
        BenchSession session(scriptedFactory(std::make_shared<Script>()),
                             [&listedOn]() -> core::Result<std::vector<audio::CardInfo>> {
                                 listedOn = QThread::currentThread();
                                 return std::vector<audio::CardInfo>{
                                     {.hostApi = "ALSA", .name = "usb", .ratesHz = {}}};
                             });
        QSignalSpy spy(&session, &BenchSession::cardsListed);
        session.wantCards();
        QTRY_COMPARE(spy.count(), 1);
        QVERIFY(listedOn.load() != QThread::currentThread());
        const auto cards = spy.first().first().value<std::vector<audio::CardInfo>>();
        QCOMPARE(cards.size(), std::size_t{1});
        QCOMPARE(cards.front().name, std::string("usb"));
    }

    void session_canBeDroppedAtAnyMoment()
    {
        for (int turn = 0; turn < 5; ++turn) {
            const auto script = std::make_shared<Script>();
            {
                BenchSession session(scriptedFactory(script), noCards);
                session.open(namedCard("usb"));
                if (turn > 1) {
                    QTRY_VERIFY(session.newestFrame());
                }
            }
            QCOMPARE(script->stopped.load(), script->opened.load());
        }
    }
};

QTEST_GUILESS_MAIN(TestBenchSession)
#include "tst_bench_session.moc"
