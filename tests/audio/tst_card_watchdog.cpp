// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card.h"
#include "audio/sample_ring.h"

#include <QElapsedTimer>
#include <QRegularExpression>
#include <QTest>

#include <algorithm>
#include <cmath>
#include <memory>
#include <optional>

#include "tests/support/figure.h"
#include "tests/support/virtual_card.h"

using namespace sinewright;
using audio::SourceCondition;
using tests::VirtualCard;

namespace {

constexpr double kRateHz = VirtualCard::kRateHz;
constexpr std::uint64_t kSecond = 96'000; // in frames
constexpr int kTendEveryMs = 200;         // as often as a bench session does

/// A source as a bench session drives it: tended five times a second, its samples taken out at once.
class Bench final
{
public:
    Bench() : m_source(audio::makeCardSource({{}, "pulse", kRateHz, 2})) {}
    ~Bench() { m_source->stop(); }
    Bench(const Bench&) = delete;
    Bench& operator=(const Bench&) = delete;
    Bench(Bench&&) = delete;
    Bench& operator=(Bench&&) = delete;

    bool start() { return m_source->open().has_value() && m_source->start(m_ring).has_value(); }

    /// Runs until `isDone`, at most `patienceMs`.
    template <typename Condition>
    bool runUntil(Condition isDone, int patienceMs)
    {
        QElapsedTimer timer;
        timer.start();
        while (!timer.hasExpired(patienceMs)) {
            QElapsedTimer call;
            call.start();
            m_source->tend();
            m_slowestTendMs = std::max(m_slowestTendMs, call.elapsed());
            drain();
            if (isDone()) {
                return true;
            }
            QTest::qWait(kTendEveryMs);
        }
        return false;
    }

    [[nodiscard]] SourceCondition condition() const { return m_source->status().condition; }
    [[nodiscard]] bool isDelivering() const
    {
        return condition() == SourceCondition::Running || condition() == SourceCondition::Silent;
    }
    [[nodiscard]] std::uint64_t framesGot() const { return m_framesGot; }
    [[nodiscard]] std::uint64_t gapFrames() const { return m_gapFrames; }
    [[nodiscard]] bool areNumbersInOrder() const { return m_areNumbersInOrder; }
    [[nodiscard]] qint64 slowestTendMs() const { return m_slowestTendMs; }
    audio::Source& source() { return *m_source; }
    audio::SampleRing& ring() { return m_ring; }

private:
    void drain()
    {
        while (const auto block = m_ring.pop()) {
            m_areNumbersInOrder =
                m_areNumbersInOrder &&
                block->firstFrame == m_framesGot + m_gapFrames + block->lostBefore;
            m_gapFrames += block->lostBefore;
            m_framesGot += block->interleaved.size() / 2;
        }
    }

    audio::SampleRing m_ring{2, static_cast<std::size_t>(5 * kRateHz)};
    std::unique_ptr<audio::Source> m_source;
    std::uint64_t m_framesGot = 0;
    std::uint64_t m_gapFrames = 0;
    bool m_areNumbersInOrder = true;
    qint64 m_slowestTendMs = 0;
};

} // namespace

class TestCardWatchdog final : public QObject
{
    Q_OBJECT

private slots:
    void initTestCase();
    void init();
    void killedServer_isNoticedAndCaptureResumes();
    void frozenServer_holdsNobodyUp();
    void serverFrozenForGood_doesNotKeepTheSourceFromEnding();
    void lostCard_canBeStoppedAndStartedAgain();

private:
    VirtualCard m_card;
};

void TestCardWatchdog::initTestCase()
{
    if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
        QSKIP(qPrintable(QStringLiteral("no virtual card without ") + missing));
    }
    m_card.useInThisProcess();
}

void TestCardWatchdog::init()
{
    QTest::failOnWarning(QRegularExpression(QStringLiteral(".*")));
    m_card.thaw();
    m_card.kill();
    QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
}

void TestCardWatchdog::killedServer_isNoticedAndCaptureResumes()
{
    Bench bench;
    QVERIFY(bench.start());
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > 2 * kSecond; }, 15'000));
    QVERIFY(bench.isDelivering());
    QCOMPARE(bench.ring().framesLost(), 0U);

    QElapsedTimer outage;
    outage.start();
    m_card.kill();
    QElapsedTimer sinceKill;
    sinceKill.start();
    QVERIFY(bench.runUntil([&] { return bench.condition() == SourceCondition::Lost; }, 5'000));
    const qint64 noticedMs = sinceKill.elapsed();
    QCOMPARE_LE(noticedMs, 1000);
    QVERIFY(bench.source().status().message.find("'pulse (ALSA)'") != std::string::npos);
    const std::uint64_t gotBefore = bench.framesGot();
    // Still away: nothing comes, nothing else happens.
    QVERIFY(!bench.runUntil([&] { return bench.condition() != SourceCondition::Lost; }, 2'500));
    QCOMPARE(bench.framesGot(), gotBefore);

    QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
    QElapsedTimer sinceBack;
    sinceBack.start();
    QVERIFY(bench.runUntil([&] { return bench.isDelivering(); }, 15'000));
    const qint64 resumedMs = sinceBack.elapsed();
    const qint64 outageMs = outage.elapsed();
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > gotBefore + 2 * kSecond; }, 15'000));

    // One gap as long as the outage was. It is an estimate from the clock: a tending interval, a block and the server's
    // own start-up lie between what is timed here and there.
    const double gapSeconds = static_cast<double>(bench.gapFrames()) / kRateHz;
    QCOMPARE(bench.gapFrames(), bench.ring().framesLost());
    QCOMPARE_LE(std::abs(gapSeconds - static_cast<double>(outageMs) / 1000.0), 0.5);
    QVERIFY(bench.areNumbersInOrder());
    QCOMPARE_LE(bench.slowestTendMs(), 100);
    using namespace Qt::StringLiterals;
    qInfo().noquote() << tests::figureLine(
        u"dead card, noticed"_s, u"%1 ms"_s.arg(noticedMs), u"1000 ms"_s, noticedMs <= 1000);
    qInfo().noquote() << tests::figureLine(u"card back, samples again by themselves"_s,
                                           u"after %1 ms"_s.arg(resumedMs),
                                           u"they come"_s,
                                           true);
    qInfo().noquote() << tests::figureLine(
        u"outage marked as a gap"_s,
        u"%1 s of %2 s"_s.arg(gapSeconds, 0, 'f', 2).arg(double(outageMs) / 1000.0, 0, 'f', 2),
        u"within 0.5 s"_s,
        true);
}

void TestCardWatchdog::frozenServer_holdsNobodyUp()
{
    Bench bench;
    QVERIFY(bench.start());
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > kSecond; }, 15'000));
    QElapsedTimer sinceFrozen;
    sinceFrozen.start();
    m_card.freeze();
    QVERIFY(bench.runUntil([&] { return bench.condition() == SourceCondition::Lost; }, 5'000));
    QCOMPARE_LE(sinceFrozen.elapsed(), 1000);
    const std::uint64_t gotBefore = bench.framesGot();
    QVERIFY(!bench.runUntil([&] { return bench.condition() != SourceCondition::Lost; }, 2'500));
    QCOMPARE_LE(bench.slowestTendMs(), 100); // while the device thread hangs in PortAudio

    m_card.thaw();
    QVERIFY(bench.runUntil([&] { return bench.isDelivering(); }, 15'000));
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > gotBefore + kSecond; }, 15'000));
    QCOMPARE_GE(static_cast<double>(bench.gapFrames()), 2.5 * kRateHz);
    QVERIFY(bench.areNumbersInOrder());
}

void TestCardWatchdog::serverFrozenForGood_doesNotKeepTheSourceFromEnding()
{
    QElapsedTimer ending;
    {
        Bench bench;
        QVERIFY(bench.start());
        QVERIFY(bench.runUntil([&] { return bench.framesGot() > kSecond; }, 15'000));
        m_card.freeze();
        QVERIFY(bench.runUntil([&] { return bench.condition() == SourceCondition::Lost; }, 5'000));
        ending.start();
    }
    // Nothing to wait for once the stream was given up; a stream that is thought alive is waited for two seconds.
    QCOMPARE_LE(ending.elapsed(), 3'000);

    {
        m_card.thaw();
        m_card.kill();
        QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
        Bench bench;
        QVERIFY(bench.start());
        QVERIFY(bench.runUntil([&] { return bench.framesGot() > kSecond; }, 15'000));
        m_card.freeze();
        ending.start();
        bench.source().stop();
        QCOMPARE_LE(ending.elapsed(), 3'000);
        QCOMPARE(bench.condition(), SourceCondition::Idle);
    }
}

void TestCardWatchdog::lostCard_canBeStoppedAndStartedAgain()
{
    Bench bench;
    QVERIFY(bench.start());
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > 0; }, 15'000));
    m_card.kill();
    QVERIFY(bench.runUntil([&] { return bench.condition() == SourceCondition::Lost; }, 5'000));
    bench.source().stop();
    QCOMPARE(bench.condition(), SourceCondition::Idle);
    QVERIFY(!bench.start()); // no server
    QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
    const std::uint64_t gotBefore = bench.framesGot();
    QVERIFY(bench.start());
    QVERIFY(bench.runUntil([&] { return bench.framesGot() > gotBefore; }, 15'000));
    QCOMPARE(bench.ring().framesLost(), 0U); // a stop is no gap
}

QTEST_GUILESS_MAIN(TestCardWatchdog)
#include "tst_card_watchdog.moc"
