// SPDX-License-Identifier: GPL-3.0-or-later
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <QTemporaryDir>
#include <QTest>

#include <cmath>

#include "tests/app/bench_window.h"
#include "tests/app/program.h"
#include "tests/app/test_takes.h"
#include "tests/support/virtual_card.h"

using namespace sinewright;
using namespace sinewright::tests;
using namespace Qt::StringLiterals;

namespace {

constexpr int kPatienceMs = 20000;
constexpr double kToleranceDb = 0.1; // what is asked for; a float path adds next to nothing

} // namespace

/// A known signal played into a virtual card and read back through PortAudio, by the command and by the window.
class TestRealCapture : public QObject
{
    Q_OBJECT

    VirtualCard m_card;
    QTemporaryDir m_folder;
    KnownTone m_truth;

private slots:
    void initTestCase()
    {
        if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
            QSKIP(qPrintable(u"no virtual card without "_s + missing));
        }
        m_card.useInThisProcess();
        QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
        std::vector<double> other =
            KnownTone{.frequencyHz = 2500.0, .secondDbc = -60.0}.samples(60.0);
        QVERIFY(writeTake(m_folder.filePath(u"played.wav"_s),
                          96000,
                          2,
                          SF_FORMAT_WAV | SF_FORMAT_FLOAT,
                          interleave(m_truth.samples(60.0), other)));
    }

    void init()
    {
        QTest::failOnWarning(QRegularExpression(u".?"_s));
        if (!m_card.isPlaying()) {
            QVERIFY2(m_card.play(m_folder.filePath(u"played.wav"_s)),
                     qPrintable(m_card.whatFailed()));
        }
    }

    void measureCommand_readsTheTruth_data()
    {
        QTest::addColumn<QStringList>("options");
        QTest::addColumn<double>("frequencyHz");
        QTest::addColumn<double>("secondDbc");
        QTest::newRow("first channel") << QStringList() << 1000.0 << -80.0;
        QTest::newRow("second channel") << QStringList{u"--channel"_s, u"2"_s} << 2500.0 << -60.0;
    }

    void measureCommand_readsTheTruth()
    {
        QFETCH(QStringList, options);
        QFETCH(double, frequencyHz);
        QFETCH(double, secondDbc);
        const KnownTone truth{.frequencyHz = frequencyHz, .secondDbc = secondDbc};
        const Ran ran = runProgram(QStringList{u"measure"_s,
                                               u"card:pulse"_s,
                                               u"--rate"_s,
                                               u"96000"_s,
                                               u"--seconds"_s,
                                               u"2"_s,
                                               u"--json"_s} +
                                   options);
        QCOMPARE(ran.complaint, QByteArray());
        QCOMPARE(ran.exitCode, 0);
        const QJsonObject reading = QJsonDocument::fromJson(ran.output).object();
        QCOMPARE(reading[u"source"_s][u"kind"_s].toString(), u"card"_s);
        QCOMPARE(reading[u"source"_s][u"sampleRateHz"_s].toDouble(), 96000.0);
        QCOMPARE(reading[u"source"_s][u"lengthS"_s].toDouble(), 2.0);
        QCOMPARE_LE(std::abs(reading[u"frequencyHz"_s].toDouble() - frequencyHz), 1e-3);
        QCOMPARE_LE(std::abs(reading[u"thdDb"_s].toDouble() - truth.thdDb()), kToleranceDb);
        qInfo("THD %.4f dB, truth %.4f dB", reading[u"thdDb"_s].toDouble(), truth.thdDb());
    }

    void liveWindow_readsTheTruth()
    {
        BenchWindow bench(app::makeSource, audio::listCards);
        QVERIFY(bench.start({.kind = ui::SourceKind::Card, .name = u"pulse"_s, .rateHz = 96000.0}));
        const auto isSteady = [&bench] {
            const auto frame = bench.window().shownFrame();
            return frame && frame->full && frame->full->status == core::ReadingStatus::Ok &&
                   frame->full->warnings.empty();
        };
        QTRY_VERIFY_WITH_TIMEOUT(isSteady(), kPatienceMs);
        const core::Reading reading = *bench.window().shownFrame()->full;
        const double thdDb = core::decibelsFromRatio(reading.thdRatio.value_or(1.0));
        QCOMPARE_LE(std::abs(thdDb - m_truth.thdDb()), kToleranceDb);
        QCOMPARE_LE(std::abs(reading.frequencyHz.value_or(0.0) - 1000.0), 1e-3);
        qInfo("THD %.4f dB, truth %.4f dB", thdDb, m_truth.thdDb());
        // And what stands on the page is that.
        const double shownPercent = 100.0 * std::pow(10.0, m_truth.thdDb() / 20.0);
        QTRY_VERIFY(std::abs(bench.figure("THD").value_or(0.0) / shownPercent - 1.0) < 0.02);
    }

    void cardsCommand_listsTheCard()
    {
        const Ran table = runProgram({u"cards"_s});
        QCOMPARE(table.exitCode, 0);
        QCOMPARE(table.complaint, QByteArray());
        QVERIFY2(
            QString::fromUtf8(table.output).contains(QRegularExpression(u"ALSA +pulse\\b.*96"_s)),
            table.output);
        const Ran json = runProgram({u"cards"_s, u"--json"_s});
        const QJsonArray cards = QJsonDocument::fromJson(json.output)[u"cards"_s].toArray();
        QVERIFY(std::any_of(cards.begin(), cards.end(), [](const QJsonValue& card) {
            return card[u"name"_s].toString() == u"pulse" &&
                   card[u"ratesHz"_s].toArray().contains(96000.0);
        }));
    }

    void cardThatIsNotThere_isExitThreeInOneLine()
    {
        const Ran ran = runProgram({u"measure"_s, u"card:no such input"_s});
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 3);
        QVERIFY(ran.complaint.contains("no such input"));
    }

    void channelTheCardHasNot_isExitThreeInOneLine()
    {
        const Ran ran = runProgram({u"measure"_s, u"card:pulse"_s, u"--channel"_s, u"900"_s});
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 3);
    }
};

QTEST_MAIN(TestRealCapture)
#include "tst_real_capture.moc"
