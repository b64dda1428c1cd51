// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/trim/trend.h"

#include <QTest>

#include <cmath>

using namespace sinewright;
using core::Reading;
using core::ReadingStatus;
using core::Trend;
using core::Warning;

class TestTrend : public QObject
{
    Q_OBJECT

private slots:
    void points_keepFiguresAndMoments();
    void points_holdTheLastThreeMinutes();
    void points_nearerThanNeededAreLeftOut();
    void gap_isMarkedOnTheNextPointKept();
    void readingWithoutTone_isAHole();
    void best_isTheLowestSteadyFullReading();
    void best_skipsWhatCannotBeTrusted_data();
    void best_skipsWhatCannotBeTrusted();
    void reset_startsAnewFromThere();
};

namespace {

Reading reading(double startS, double lengthS, double thdRatio)
{
    Reading made;
    made.status = ReadingStatus::Ok;
    made.startS = startS;
    made.lengthS = lengthS;
    made.thdRatio = thdRatio;
    made.thdnRatio = 2.0 * thdRatio;
    made.levelDbfs = -6.0;
    made.levelVrms = 2.0;
    made.frequencyHz = 997.0;
    return made;
}

} // namespace

void TestTrend::points_keepFiguresAndMoments()
{
    Trend trend;
    trend.addQuick(reading(1.0, 0.1, 0.001), false);
    const auto snapshot = trend.snapshot();
    QCOMPARE(snapshot.points.size(), std::size_t{1});
    QCOMPARE_LE(std::abs(snapshot.points[0].timeS - 1.05), 1e-12);
    QCOMPARE(snapshot.points[0].thdRatio, 0.001);
    QCOMPARE(snapshot.points[0].thdnRatio, 0.002);
    QCOMPARE(snapshot.points[0].levelDbfs, -6.0);
    QVERIFY(!snapshot.points[0].afterGap);
    QVERIFY(!snapshot.best); // quick readings do not count for it
}

void TestTrend::points_holdTheLastThreeMinutes()
{
    Trend trend;
    for (int n = 0; n < 20 * 400; ++n) {
        trend.addQuick(reading(0.05 * n, 0.1, 0.001), false);
    }
    const auto points = trend.snapshot().points;
    QCOMPARE_LE(points.back().timeS - points.front().timeS, Trend::kSpanS);
    QCOMPARE_GE(points.back().timeS - points.front().timeS, Trend::kSpanS - 0.1);
    QCOMPARE_LE(points.size(), std::size_t{4500});
    for (std::size_t n = 1; n < points.size(); ++n) {
        QVERIFY(points[n].timeS > points[n - 1].timeS);
    }
}

void TestTrend::points_nearerThanNeededAreLeftOut()
{
    Trend trend;
    for (int n = 0; n < 1000; ++n) {
        trend.addQuick(reading(0.001 * n, 0.1, 0.001), false);
    }
    const auto count = trend.snapshot().points.size();
    QCOMPARE_LE(count, std::size_t{26});
    QCOMPARE_GE(count, std::size_t{10}); // at least ten a second stay
}

void TestTrend::gap_isMarkedOnTheNextPointKept()
{
    Trend trend;
    trend.addQuick(reading(0.0, 0.1, 0.001), false);
    trend.addQuick(reading(0.5, 0.1, 0.001), true);
    trend.addQuick(reading(0.55, 0.1, 0.001), false);
    // A longer stretch, whose middle lies further back, is left out; its mark is not.
    trend.addQuick(reading(0.2, 0.5, 0.001), true);
    trend.addQuick(reading(0.9, 0.1, 0.001), false);
    const auto points = trend.snapshot().points;
    QCOMPARE(points.size(), std::size_t{4});
    QVERIFY(!points[0].afterGap && points[1].afterGap && !points[2].afterGap && points[3].afterGap);
}

void TestTrend::readingWithoutTone_isAHole()
{
    Trend trend;
    Reading none;
    none.status = ReadingStatus::NoTone;
    none.startS = 2.0;
    trend.addQuick(none, false);
    const auto points = trend.snapshot().points;
    QCOMPARE(points.size(), std::size_t{1});
    QVERIFY(!points[0].thdRatio && !points[0].thdnRatio && !points[0].levelDbfs);
}

void TestTrend::best_isTheLowestSteadyFullReading()
{
    Trend trend;
    trend.addFull(reading(0.0, 2.0, 0.003));
    trend.addFull(reading(1.0, 2.0, 0.001));
    trend.addFull(reading(2.0, 2.0, 0.002));
    const auto best = trend.snapshot().best;
    QVERIFY(best.has_value());
    QCOMPARE(best->thdRatio, 0.001);
    QCOMPARE(best->timeS, 2.0);
    QCOMPARE(best->thdnRatio, 0.002);
    QCOMPARE(best->levelVrms, 2.0);
    QCOMPARE(best->frequencyHz, 997.0);
}

void TestTrend::best_skipsWhatCannotBeTrusted_data()
{
    QTest::addColumn<int>("status");
    QTest::addColumn<int>("warning");
    QTest::addColumn<bool>("hasThd");
    QTest::addColumn<bool>("isTaken");
    const auto row =
        [](const char* tag, ReadingStatus status, int warning, bool hasThd, bool isTaken) {
            QTest::newRow(tag) << static_cast<int>(status) << warning << hasThd << isTaken;
        };
    row("good", ReadingStatus::Ok, -1, true, true);
    row("mains hum does not matter",
        ReadingStatus::Ok,
        static_cast<int>(Warning::MainsHum),
        true,
        true);
    row("overload", ReadingStatus::Overload, static_cast<int>(Warning::InputOverload), true, false);
    row("level on the move",
        ReadingStatus::Ok,
        static_cast<int>(Warning::UnsteadyLevel),
        true,
        false);
    row("frequency on the move",
        ReadingStatus::Ok,
        static_cast<int>(Warning::UnsteadyFrequency),
        true,
        false);
    row("no harmonic in the band",
        ReadingStatus::Ok,
        static_cast<int>(Warning::HarmonicsAboveBand),
        false,
        false);
    row("no tone", ReadingStatus::NoTone, -1, false, false);
}

void TestTrend::best_skipsWhatCannotBeTrusted()
{
    QFETCH(int, status);
    QFETCH(int, warning);
    QFETCH(bool, hasThd);
    QFETCH(bool, isTaken);
    Reading made = reading(0.0, 2.0, 0.001);
    made.status = static_cast<ReadingStatus>(status);
    if (warning >= 0) {
        made.warnings.push_back(static_cast<Warning>(warning));
    }
    if (!hasThd) {
        made.thdRatio.reset();
    }
    Trend trend;
    trend.addFull(made);
    QCOMPARE(trend.snapshot().best.has_value(), isTaken);
}

void TestTrend::reset_startsAnewFromThere()
{
    Trend trend;
    trend.addFull(reading(0.0, 2.0, 0.001));
    trend.resetBest(5.0);
    QVERIFY(!trend.snapshot().best);
    trend.addFull(reading(4.0, 2.0, 0.0005)); // began before the reset
    QVERIFY(!trend.snapshot().best);
    trend.addFull(reading(5.0, 2.0, 0.004));
    QCOMPARE(trend.snapshot().best->thdRatio, 0.004);
}

QTEST_APPLESS_MAIN(TestTrend)
#include "tst_trend.moc"
