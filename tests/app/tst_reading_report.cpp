// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/json_writer.h"
#include "app/reading_report.h"

#include <QJsonDocument>
#include <QJsonObject>
#include <QLocale>
#include <QTest>

#include <limits>

using namespace sinewright;
using namespace sinewright::app;
using namespace Qt::StringLiterals;

namespace {

constexpr double kNan = std::numeric_limits<double>::quiet_NaN();
constexpr double kInfinity = std::numeric_limits<double>::infinity();

core::Reading fullReading()
{
    core::Reading reading;
    reading.status = core::ReadingStatus::Ok;
    reading.lengthS = 4.0;
    reading.frequencyHz = 1000.0 / 3.0;
    reading.frequencyStdHz = 2e-6;
    reading.levelDbfs = -3.01;
    reading.dcFs = -1e-5;
    reading.thdRatio = 1e-4;
    reading.thdRRatio = 1e-4;
    reading.thdnRatio = 2e-4;
    reading.sinadDb = 73.98;
    reading.snrDb = 75.0;
    reading.noiseDbfs = -78.0;
    reading.harmonics = {
        {.order = 2, .frequencyHz = 2000.0 / 3.0, .ratio = 1e-4, .phaseDeg = -90.0, .inBand = true},
        {.order = 3, .frequencyHz = 1000.0, .ratio = 0.0, .phaseDeg = 0.0, .inBand = false}};
    return reading;
}

MeasuredReading measured(core::Reading reading)
{
    return {.source = {},
            .rate = core::SampleRate{48000.0},
            .settings = {},
            .reading = std::move(reading)};
}

QJsonObject jsonOf(const MeasuredReading& reading)
{
    return QJsonDocument::fromJson(QByteArray::fromStdString(readingAsJson(reading))).object();
}

} // namespace

class TestReadingReport : public QObject
{
    Q_OBJECT

private slots:
    void cleanup() { QLocale::setDefault(QLocale::c()); }

    void numbers_readBackToTheLastBit_data()
    {
        QTest::addColumn<double>("value");
        for (const double value :
             {0.1, 1.0 / 3.0, -0.0, 5e-324, 1.7976931348623157e308, 123456789.0, 1e21, -2.5e-7}) {
            QTest::addRow("%.17g", value) << value;
        }
    }

    void numbers_readBackToTheLastBit()
    {
        QFETCH(double, value);
        JsonWriter json;
        json.beginArray().number(value).endArray();
        bool isNumber = false;
        const QString text = QString::fromStdString(json.line());
        QCOMPARE(text.mid(1, text.size() - 2).toDouble(&isNumber), value);
        QVERIFY(isNumber);
    }

    void whatIsNoNumber_isNull()
    {
        JsonWriter json;
        json.beginArray()
            .number(kNan)
            .number(kInfinity)
            .number(-kInfinity)
            .number(std::nullopt)
            .endArray();
        QCOMPARE(json.line(), std::string("[null,null,null,null]"));
    }

    void text_isEscaped()
    {
        JsonWriter json;
        json.beginObject().key("a\"b").text("line\nbreak, \\ and \xC3\xBC").endObject();
        QCOMPARE(QJsonDocument::fromJson(QByteArray::fromStdString(json.line()))
                     .object()[u"a\"b"_s]
                     .toString(),
                 u"line\nbreak, \\ and \u00FC"_s);
        QVERIFY(json.line().find('\n') == std::string::npos);
    }

    void ratioOfZero_hasNoDecibels()
    {
        const QJsonObject third = jsonOf(measured(fullReading()))[u"harmonics"_s][1].toObject();
        QVERIFY(third[u"dbc"_s].isNull());
        QCOMPARE(third[u"percent"_s].toDouble(), 0.0);
        QCOMPARE(third[u"inBand"_s].toBool(true), false);
    }

    void figuresThatAreNotThere_areNull()
    {
        core::Reading reading;
        reading.status = core::ReadingStatus::NoTone;
        const QJsonObject json = jsonOf(measured(reading));
        QCOMPARE(json[u"status"_s].toString(), u"no-tone"_s);
        for (const char* key : {"frequencyHz",
                                "frequencyStdHz",
                                "levelDbfs",
                                "levelVrms",
                                "dcFs",
                                "thdPercent",
                                "thdDb",
                                "thdRPercent",
                                "thdnPercent",
                                "thdnDb",
                                "sinadDb",
                                "snrDb",
                                "noiseDbfs",
                                "mainsHumDbc"}) {
            QVERIFY2(json[QString::fromLatin1(key)].isNull(), key);
        }
    }

    void everyWarning_hasItsWordAndItsSentence_data()
    {
        QTest::addColumn<int>("warning");
        QTest::addColumn<QString>("word");
        const auto row = [](core::Warning warning, const char* word) {
            QTest::newRow(word) << static_cast<int>(warning) << QString::fromLatin1(word);
        };
        row(core::Warning::InputOverload, "input-overload");
        row(core::Warning::HarmonicsAboveBand, "harmonics-above-band");
        row(core::Warning::UnsteadyLevel, "unsteady-level");
        row(core::Warning::UnsteadyFrequency, "unsteady-frequency");
        row(core::Warning::MainsHum, "mains-hum");
        row(core::Warning::DcOffset, "dc-offset");
        row(core::Warning::CardLimited, "card-limited");
    }

    void everyWarning_hasItsWordAndItsSentence()
    {
        QFETCH(int, warning);
        QFETCH(QString, word);
        core::Reading reading = fullReading();
        reading.warnings = {static_cast<core::Warning>(warning)};
        QCOMPARE(jsonOf(measured(reading))[u"warnings"_s][0].toString(), word);
        const QString table = QString::fromStdString(readingAsTable(measured(reading)));
        QVERIFY2(table.contains(QRegularExpression(u"\\nNote: [A-Z][^\\n]+\\.\\n$"_s)),
                 qPrintable(table));
    }

    void reports_doNotFollowTheUsersLanguage()
    {
        const std::string json = readingAsJson(measured(fullReading()));
        QLocale::setDefault(QLocale(QLocale::German));
        QCOMPARE(readingAsJson(measured(fullReading())), json);
    }

    void table_showsDashesForWhatIsNotThere()
    {
        core::Reading reading = fullReading();
        reading.snrDb.reset();
        const QString table = QString::fromStdString(readingAsTable(measured(reading)));
        QVERIFY2(table.contains(QRegularExpression(u"SNR +- dB\\n"_s)), qPrintable(table));
        QVERIFY2(table.contains(QRegularExpression(u" 3 +1000\\.00 Hz +- dBc.*above the band"_s)),
                 qPrintable(table));
        QVERIFY2(table.contains(u"frequency         333.333 Hz"_s), qPrintable(table));
    }

    void line_saysWhyThereIsNoReading()
    {
        core::Reading reading;
        reading.status = core::ReadingStatus::TooShort;
        QVERIFY(readingAsLine(reading).starts_with("No reading: "));
        QCOMPARE(readingAsLine(fullReading()),
                 std::string("333.333 Hz, -3.01 dBFS, THD 0.0100 %, THD+N 0.0200 %"));
    }
};

QTEST_APPLESS_MAIN(TestReadingReport)
#include "tst_reading_report.moc"
