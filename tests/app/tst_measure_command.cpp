// SPDX-License-Identifier: GPL-3.0-or-later
#include <QFile>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <QTemporaryDir>
#include <QTest>

#include <algorithm>
#include <limits>
#include <random>

#include "tests/app/program.h"
#include "tests/app/test_takes.h"

using namespace sinewright::tests;
using namespace Qt::StringLiterals;

namespace {

constexpr int kWav24 = SF_FORMAT_WAV | SF_FORMAT_PCM_24;
constexpr int kWavFloat = SF_FORMAT_WAV | SF_FORMAT_FLOAT;
constexpr int kFlac24 = SF_FORMAT_FLAC | SF_FORMAT_PCM_24;

const QStringList kKeys{u"schema"_s,      u"source"_s,      u"settings"_s,       u"status"_s,
                        u"warnings"_s,    u"frequencyHz"_s, u"frequencyStdHz"_s, u"levelDbfs"_s,
                        u"levelVrms"_s,   u"dcFs"_s,        u"thdPercent"_s,     u"thdDb"_s,
                        u"thdRPercent"_s, u"thdnPercent"_s, u"thdnDb"_s,         u"sinadDb"_s,
                        u"snrDb"_s,       u"noiseDbfs"_s,   u"harmonics"_s,      u"mainsHumDbc"_s};

QStringList sorted(QStringList list)
{
    list.sort();
    return list;
}

/// The one object of a run; empty when stdout holds anything else.
QJsonObject objectOf(const Ran& ran)
{
    return ran.output.count('\n') == 1 ? QJsonDocument::fromJson(ran.output).object()
                                       : QJsonObject();
}

double harmonicDbc(const QJsonObject& reading, int order)
{
    const QJsonArray harmonics = reading[u"harmonics"_s].toArray();
    for (const QJsonValue& harmonic : harmonics) {
        if (harmonic[u"order"_s].toInt() == order) {
            return harmonic[u"dbc"_s].toDouble();
        }
    }
    return std::numeric_limits<double>::quiet_NaN();
}

} // namespace

/// Runs the built program on takes with a known truth and on takes that are none.
class TestMeasureCommand : public QObject
{
    Q_OBJECT

    QTemporaryDir m_folder;

    [[nodiscard]] QString path(const char* name) const
    {
        return m_folder.filePath(QString::fromLatin1(name));
    }

    static Ran measureJson(const QString& source, const QStringList& options = {})
    {
        return runProgram(QStringList{u"measure"_s, source, u"--json"_s} + options);
    }

    [[nodiscard]] bool writeBytes(const char* name, const QByteArray& bytes) const
    {
        QFile file(path(name));
        return file.open(QIODevice::WriteOnly) && file.write(bytes) == bytes.size();
    }

    [[nodiscard]] QByteArray bytesOf(const char* name) const
    {
        QFile file(path(name));
        return file.open(QIODevice::ReadOnly) ? file.readAll() : QByteArray();
    }

private slots:
    void initTestCase()
    {
        QVERIFY(m_folder.isValid());
        // A user without rights must reach the folder to be refused at the file.
        QVERIFY(QFile::setPermissions(m_folder.path(), QFile::Permissions(0x7755)));
        const KnownTone tone;
        const std::vector<double> tenSeconds = tone.samples(10.0);
        QVERIFY(writeTake(path("tone.wav"), 96000, 1, kWav24, tenSeconds));
        const std::vector<double> left = tone.samples(2.0);
        std::vector<double> right =
            KnownTone{.frequencyHz = 440.0, .secondDbc = -60.0}.samples(2.0);
        QVERIFY(writeTake(path("stereo.flac"), 96000, 2, kFlac24, interleave(left, right)));
        QVERIFY(writeTake(path("float.wav"), 96000, 1, kWavFloat, left));
        makeBadTakes(left);
    }

    /// 24-bit takes: rounding adds noise 146 dB below full scale, which moves a line at -96 dBFS by 0.01 dB at the most.
    void knownTone_isReadWithinTheBar_data()
    {
        QTest::addColumn<QString>("file");
        QTest::newRow("24-bit 96 kHz WAV, 10 s") << path("tone.wav");
        QTest::newRow("24-bit 96 kHz FLAC, 2 s, channel 1") << path("stereo.flac");
        QTest::newRow("float 96 kHz WAV, 2 s") << path("float.wav");
    }

    void knownTone_isReadWithinTheBar()
    {
        QFETCH(QString, file);
        const KnownTone truth;
        const Ran ran = measureJson(file);
        QCOMPARE(ran.complaint, QByteArray());
        QCOMPARE(ran.exitCode, 0);
        const QJsonObject reading = objectOf(ran);
        QCOMPARE(reading[u"status"_s].toString(), u"ok"_s);
        QCOMPARE_LE(std::abs(reading[u"frequencyHz"_s].toDouble() - truth.frequencyHz), 1e-3);
        QCOMPARE_LE(std::abs(harmonicDbc(reading, 2) - truth.secondDbc), 0.05);
        QCOMPARE_LE(std::abs(harmonicDbc(reading, 3) - truth.thirdDbc), 0.05);
        QCOMPARE_LE(std::abs(reading[u"thdDb"_s].toDouble() - truth.thdDb()), 0.05);
        QCOMPARE_LE(
            std::abs(reading[u"levelDbfs"_s].toDouble() - 20.0 * std::log10(truth.amplitudeFs)),
            0.0005);
    }

    void json_hasExactlyTheKeysOfTheContract()
    {
        const Ran ran = measureJson(path("stereo.flac"),
                                    {u"--channel"_s,
                                     u"2"_s,
                                     u"--start"_s,
                                     u"0.5"_s,
                                     u"--seconds"_s,
                                     u"1"_s,
                                     u"--band"_s,
                                     u"10:90000"_s,
                                     u"--harmonics"_s,
                                     u"4"_s});
        QCOMPARE(ran.exitCode, 0);
        const QJsonObject reading = objectOf(ran);
        QCOMPARE(reading.keys(), sorted(kKeys));
        qsizetype at = 0;
        for (const QString& key : kKeys) {
            const qsizetype next = ran.output.indexOf("\"" + key.toLatin1() + "\":", at);
            QVERIFY2(next >= at, qPrintable(key));
            at = next;
            if (key == u"source" || key == u"settings") {
                at = ran.output.indexOf('}', at);
            }
        }
        QCOMPARE(reading[u"schema"_s].toString(), u"sinewright.reading/1"_s);
        const QJsonObject source = reading[u"source"_s].toObject();
        QCOMPARE(source.keys(),
                 sorted({u"kind"_s,
                         u"name"_s,
                         u"sampleRateHz"_s,
                         u"channel"_s,
                         u"startS"_s,
                         u"lengthS"_s}));
        QCOMPARE(source[u"kind"_s].toString(), u"take"_s);
        QCOMPARE(source[u"name"_s].toString(), path("stereo.flac"));
        QCOMPARE(source[u"sampleRateHz"_s].toDouble(), 96000.0);
        QCOMPARE(source[u"channel"_s].toInt(), 2);
        QCOMPARE(source[u"startS"_s].toDouble(), 0.5);
        QCOMPARE(source[u"lengthS"_s].toDouble(), 1.0);
        const QJsonObject settings = reading[u"settings"_s].toObject();
        QCOMPARE(settings.keys(),
                 sorted({u"bandHz"_s, u"harmonicCount"_s, u"weighting"_s, u"fullScaleVrms"_s}));
        QCOMPARE(settings[u"bandHz"_s].toArray(),
                 (QJsonArray{10.0, 48000.0})); // limited to half the rate
        QCOMPARE(settings[u"harmonicCount"_s].toInt(), 4);
        QCOMPARE(settings[u"weighting"_s].toString(), u"none"_s);
        QVERIFY(settings[u"fullScaleVrms"_s].isNull());
        QVERIFY(reading[u"levelVrms"_s].isNull());
        const QJsonArray harmonics = reading[u"harmonics"_s].toArray();
        QCOMPARE(harmonics.size(), 3);
        QCOMPARE(harmonics[0].toObject().keys(),
                 sorted({u"order"_s,
                         u"frequencyHz"_s,
                         u"dbc"_s,
                         u"percent"_s,
                         u"phaseDeg"_s,
                         u"inBand"_s}));
        QCOMPARE_LE(std::abs(reading[u"frequencyHz"_s].toDouble() - 440.0), 1e-3);
    }

    void json_percentAndDecibelsAreTheSameFigure()
    {
        const QJsonObject reading = objectOf(measureJson(path("tone.wav")));
        const auto decibels = [&reading](const QString& percentKey) {
            return 20.0 * std::log10(reading[percentKey].toDouble() / 100.0);
        };
        QCOMPARE_LE(std::abs(decibels(u"thdPercent"_s) - reading[u"thdDb"_s].toDouble()), 1e-9);
        QCOMPARE_LE(std::abs(decibels(u"thdnPercent"_s) - reading[u"thdnDb"_s].toDouble()), 1e-9);
    }

    void fullScale_givesVolts()
    {
        const QJsonObject reading =
            objectOf(measureJson(path("tone.wav"), {u"--full-scale"_s, u"4"_s}));
        // Half of full scale of 4 V rms; the level is good to 0.0005 dB, 6e-5 of it.
        QCOMPARE_LE(std::abs(reading[u"levelVrms"_s].toDouble() - 2.0), 2.0 * 6e-5);
        QCOMPARE(reading[u"settings"_s].toObject()[u"fullScaleVrms"_s].toDouble(), 4.0);
    }

    /// White noise in 20 Hz to 20 kHz: A takes from it, 468 with its 12 dB at 6.3 kHz adds to it.
    void weightings_changeTheNoise()
    {
        const auto noise = [this](const char* weighting) {
            return objectOf(
                measureJson(path("noisy.wav"), {u"--weighting"_s, QString::fromLatin1(weighting)}));
        };
        QCOMPARE(noise("a")[u"settings"_s].toObject()[u"weighting"_s].toString(), u"a"_s);
        QVERIFY(noise("a")[u"noiseDbfs"_s].toDouble() < noise("none")[u"noiseDbfs"_s].toDouble());
        QVERIFY(noise("468")[u"noiseDbfs"_s].toDouble() > noise("none")[u"noiseDbfs"_s].toDouble());
    }

    void table_isPlainAndSaysTheSame()
    {
        const Ran ran = runProgram({u"measure"_s, path("tone.wav")});
        QCOMPARE(ran.exitCode, 0);
        QCOMPARE(ran.complaint, QByteArray());
        const QString table = QString::fromUtf8(ran.output);
        QVERIFY(
            std::all_of(table.begin(), table.end(), [](QChar c) { return c.unicode() < 0x80; }));
        QVERIFY(table.startsWith(u"tone.wav, channel 1, 96 kHz, 10.000 s from 0.000 s\n"_s));
        QVERIFY2(table.contains(QRegularExpression(u"frequency +1000\\.000 Hz"_s)),
                 qPrintable(table));
        QVERIFY2(table.contains(QRegularExpression(u"level +-6\\.02\\d dBFS"_s)),
                 qPrintable(table));
        QVERIFY2(table.contains(QRegularExpression(u"THD +0\\.0105 % +-79\\.59 dB"_s)),
                 qPrintable(table));
        QVERIFY2(table.contains(QRegularExpression(u" 2 +2000\\.00 Hz +-80\\.0\\d dBc"_s)),
                 qPrintable(table));
        QVERIFY2(table.contains(QRegularExpression(u" 3 +3000\\.00 Hz +-90\\.0\\d dBc"_s)),
                 qPrintable(table));
        QVERIFY(!table.contains(u"nan"_s) && !table.contains(u"inf"_s));
    }

    void demo_isMeasuredWithoutADisplay()
    {
        const Ran ran = measureJson(u"demo"_s, {u"--rate"_s, u"48000"_s, u"--seconds"_s, u"2"_s});
        QCOMPARE(ran.exitCode, 0);
        const QJsonObject reading = objectOf(ran);
        QCOMPARE(reading[u"source"_s][u"kind"_s].toString(), u"demo"_s);
        QCOMPARE(reading[u"source"_s][u"sampleRateHz"_s].toDouble(), 48000.0);
        QCOMPARE(reading[u"source"_s][u"lengthS"_s].toDouble(), 2.0);
        QVERIFY(reading[u"thdPercent"_s].toDouble() > 0.0);
        // Seeded: the same words give the same figures to the last digit.
        QCOMPARE(measureJson(u"demo"_s, {u"--rate"_s, u"48000"_s, u"--seconds"_s, u"2"_s}).output,
                 ran.output);
    }

    void unusableSignal_isExitOneWithNullFigures_data()
    {
        QTest::addColumn<QString>("file");
        QTest::addColumn<QString>("status");
        QTest::newRow("silence") << path("silence.wav") << u"no-tone"_s;
        QTest::newRow("white noise, seed 7") << path("noise.wav") << u"no-tone"_s;
        QTest::newRow("40 samples") << path("short.wav") << u"too-short"_s;
    }

    void unusableSignal_isExitOneWithNullFigures()
    {
        QFETCH(QString, file);
        QFETCH(QString, status);
        const Ran ran = measureJson(file);
        QCOMPARE(ran.exitCode, 1);
        QCOMPARE(ran.complaint, QByteArray());
        const QJsonObject reading = objectOf(ran);
        QCOMPARE(reading.keys(), sorted(kKeys));
        QCOMPARE(reading[u"status"_s].toString(), status);
        for (const char* key :
             {"frequencyHz", "levelDbfs", "thdPercent", "thdDb", "thdnDb", "sinadDb", "snrDb"}) {
            QVERIFY2(reading[QString::fromLatin1(key)].isNull(), key);
        }
        const Ran table = runProgram({u"measure"_s, file});
        QCOMPARE(table.exitCode, 1);
        QVERIFY(table.output.contains("No reading: "));
    }

    void clippedTone_isExitOneAndOverload()
    {
        const Ran ran = measureJson(path("clipped.wav"));
        QCOMPARE(ran.exitCode, 1);
        QCOMPARE(objectOf(ran)[u"status"_s].toString(), u"overload"_s);
        QVERIFY(objectOf(ran)[u"warnings"_s].toArray().contains(u"input-overload"_s));
    }

    void badSources_areExitThreeInOneLine_data()
    {
        QTest::addColumn<QStringList>("words");
        QTest::addColumn<QString>("mentions");
        const auto file = [this](const char* tag, const char* name, const char* mentions) {
            QTest::newRow(tag) << QStringList{path(name)} << QString::fromLatin1(mentions);
        };
        file("missing file", "missing.wav", "missing.wav");
        file("empty file", "empty.wav", "empty.wav");
        file("header without samples", "nosamples.wav", "nosamples.wav");
        file("truncated WAV", "truncated.wav", "truncated.wav");
        file("truncated FLAC", "truncated.flac", "truncated.flac");
        file("text called WAV", "text.wav", "text.wav");
        file("samples that are not numbers", "nan.wav", "nan.wav");
        QTest::newRow("a folder") << QStringList{m_folder.path()} << m_folder.path();
        QTest::newRow("channel the take has not")
            << QStringList{path("stereo.flac"), u"--channel"_s, u"3"_s} << u"channel 3"_s;
        QTest::newRow("start behind the end")
            << QStringList{path("stereo.flac"), u"--start"_s, u"99"_s} << u"stereo.flac"_s;
        QTest::newRow("channel the demo has not")
            << QStringList{u"demo"_s, u"--channel"_s, u"2"_s} << u"channel 2"_s;
    }

    void badSources_areExitThreeInOneLine()
    {
        QFETCH(QStringList, words);
        QFETCH(QString, mentions);
        const Ran ran = runProgram(QStringList{u"measure"_s, u"--json"_s} + words);
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 3);
        QVERIFY2(QString::fromUtf8(ran.complaint).contains(mentions), ran.complaint.constData());
    }

    void fileWithoutPermission_isExitThree()
    {
        QVERIFY(QFile::setPermissions(path("secret.wav"), QFile::Permissions()));
        const Ran ran = runProgram({u"measure"_s, path("secret.wav")}, {.asPlainUser = true});
        QVERIFY2(ran.isOneComplaint(), ran.complaint);
        QCOMPARE(ran.exitCode, 3);
        QVERIFY2(ran.complaint.contains("secret.wav") && ran.complaint.contains("permission"),
                 ran.complaint.constData());
    }

    void wrongUsage_isExitTwoInOneLine_data()
    {
        QTest::addColumn<QStringList>("words");
        QTest::newRow("unknown command") << QStringList{u"listen"_s};
        QTest::newRow("unknown option") << QStringList{u"measure"_s, path("tone.wav"), u"--loud"_s};
        QTest::newRow("no source") << QStringList{u"measure"_s};
        QTest::newRow("band above half the rate")
            << QStringList{u"measure"_s, path("tone.wav"), u"--band"_s, u"50000:60000"_s};
        QTest::newRow("longer than a reading can be")
            << QStringList{u"measure"_s, path("tone.wav"), u"--seconds"_s, u"600"_s};
    }

    void wrongUsage_isExitTwoInOneLine()
    {
        QFETCH(QStringList, words);
        const Ran ran = runProgram(words);
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 2);
    }

    void outputThatCannotBeWritten_isExitFour_data()
    {
        QTest::addColumn<QStringList>("words");
        QTest::newRow("measure") << QStringList{u"measure"_s, path("float.wav")};
        QTest::newRow("measure --json")
            << QStringList{u"measure"_s, path("float.wav"), u"--json"_s};
        QTest::newRow("help") << QStringList{u"--help"_s};
    }

    void outputThatCannotBeWritten_isExitFour()
    {
        QFETCH(QStringList, words);
        const Ran ran = runProgram(words, {.outputFile = u"/dev/full"_s});
        QCOMPARE(ran.exitCode, 4);
        QVERIFY2(ran.isOneComplaint(), ran.complaint);
    }

    void helpAndVersion_areExitZero()
    {
        for (const QStringList& words : {QStringList{u"--help"_s},
                                         {u"measure"_s, u"--help"_s},
                                         {u"cards"_s, u"--help"_s},
                                         {u"--version"_s}}) {
            const Ran ran = runProgram(words);
            QCOMPARE(ran.exitCode, 0);
            QCOMPARE(ran.complaint, QByteArray());
            QVERIFY(!ran.output.isEmpty());
        }
    }

private:
    void makeBadTakes(const std::vector<double>& tone)
    {
        constexpr int kRate = 96000;
        QVERIFY(writeBytes("empty.wav", {}));
        QVERIFY(writeBytes("text.wav", "Dear diary, today I trimmed the oscillator again.\n"));
        QVERIFY(writeTake(path("nosamples.wav"), kRate, 1, kWav24, {}));
        const QByteArray wav = bytesOf("float.wav");
        QVERIFY(writeBytes("truncated.wav", wav.left(wav.size() / 2)));
        const QByteArray flac = bytesOf("stereo.flac");
        QVERIFY(writeBytes("truncated.flac", flac.left(flac.size() / 2)));
        std::vector<double> holed = tone;
        holed[1000] = std::numeric_limits<double>::quiet_NaN();
        QVERIFY(writeTake(path("nan.wav"), kRate, 1, kWavFloat, holed));
        QVERIFY(writeTake(path("secret.wav"), kRate, 1, kWav24, tone));
        QVERIFY(writeTake(path("silence.wav"), kRate, 1, kWav24, std::vector<double>(kRate)));
        QVERIFY(writeTake(path("short.wav"), kRate, 1, kWav24, {tone.begin(), tone.begin() + 40}));
        std::vector<double> clipped = KnownTone{.amplitudeFs = 1.2}.samples(1.0);
        for (double& sample : clipped) {
            sample = std::clamp(sample, -1.0, 1.0 - 1.0 / (1 << 23));
        }
        QVERIFY(writeTake(path("clipped.wav"), kRate, 1, kWav24, clipped));
        std::vector<double> noise(kRate);
        std::mt19937 random(7); // NOLINT(cert-msc51-cpp): the same noise every time
        std::uniform_real_distribution<double> spread(-0.1, 0.1);
        std::generate(noise.begin(), noise.end(), [&] { return spread(random); });
        QVERIFY(writeTake(path("noise.wav"), kRate, 1, kWav24, noise));
        for (std::size_t i = 0; i < noise.size(); ++i) {
            noise[i] = tone[i] + 0.01 * noise[i];
        }
        QVERIFY(writeTake(path("noisy.wav"), kRate, 1, kWav24, noise));
    }
};

QTEST_GUILESS_MAIN(TestMeasureCommand)
#include "tst_measure_command.moc"
