// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/settings.h"

#include <QFile>
#include <QSettings>
#include <QSignalSpy>
#include <QStandardPaths>
#include <QTemporaryDir>
#include <QTest>

using namespace sinewright;
using namespace sinewright::app;
using namespace Qt::StringLiterals;

class TestSettings : public QObject
{
    Q_OBJECT

private:
    QTemporaryDir m_folder;

    [[nodiscard]] QString file() const { return m_folder.filePath(u"settings.ini"_s); }

    void writeText(const QByteArray& text) const
    {
        QFile out(file());
        QVERIFY(out.open(QIODevice::WriteOnly));
        out.write(text);
    }

    static Remembered unusualValues()
    {
        Remembered values;
        values.view.theme = ui::ThemeName::Dusk;
        values.view.page = ui::Page::Network;
        values.view.pictureScale = 2;
        values.view.geometry = QByteArray("\x00\x01\xff,;\"geometry", 14);
        values.source = SourceSpec{.kind = ui::SourceKind::Card,
                                   .name = u"usb, left = 1"_s,
                                   .hostApi = u"ALSA"_s,
                                   .rateHz = 88200.0,
                                   .channel = 2};
        values.measure.band = {.lowHz = 0.1, .highHz = 22050.3};
        values.measure.harmonicCount = 5;
        values.measure.weighting = core::Weighting::Itu468;
        values.measure.fullScaleVrms = 1.0 / 3.0;
        values.pictureFolder = u"/home/a, b/\u00FC"_s;
        return values;
    }

    static void give(Settings& settings, const Remembered& values)
    {
        settings.setView(values.view);
        settings.setSource(values.source);
        settings.setMeasure(values.measure);
        settings.setPictureFolder(values.pictureFolder);
    }

    static void compare(const Remembered& actual, const Remembered& expected)
    {
        QVERIFY(actual.view.theme == expected.view.theme);
        QVERIFY(actual.view.page == expected.view.page);
        QCOMPARE(actual.view.pictureScale, expected.view.pictureScale);
        QCOMPARE(actual.view.geometry, expected.view.geometry);
        QVERIFY(actual.source == expected.source);
        QVERIFY(actual.measure == expected.measure); // to the last bit
        QCOMPARE(actual.pictureFolder, expected.pictureFolder);
    }

private slots:
    void initTestCase()
    {
        QStandardPaths::setTestModeEnabled(true);
        QVERIFY(m_folder.isValid());
    }

    void init()
    {
        QTest::failOnWarning(QRegularExpression(u".?"_s));
        QFile::remove(file());
    }

    void noFile_givesDefaults()
    {
        const Settings settings(file());
        compare(settings.values(), Remembered());
        QVERIFY(settings.values().source.kind == ui::SourceKind::Demo);
    }

    void values_comeBackFromTheFile()
    {
        const Remembered values = unusualValues();
        {
            Settings settings(file());
            give(settings, values);
        }
        const Settings again(file());
        compare(again.values(), values);
    }

    void changes_areWrittenAMomentLaterAndAllAtOnce()
    {
        Settings settings(file());
        give(settings, unusualValues());
        QVERIFY(!QFile::exists(file()));
        QTRY_VERIFY(QFile::exists(file()));
        compare(Settings(file()).values(), unusualValues());
    }

    void nothingChanged_nothingWritten()
    {
        {
            const Settings settings(file());
        }
        QVERIFY(!QFile::exists(file()));
    }

    void valuesOutOfRange_areClampedOrBecomeDefaults_data()
    {
        QTest::addColumn<QByteArray>("line");
        QTest::addColumn<QByteArray>("section");
        QTest::addColumn<std::function<bool(const Remembered&)>>("holds");
        const auto row = [](const char* tag,
                            const char* section,
                            const char* line,
                            std::function<bool(const Remembered&)> holds) {
            QTest::newRow(tag) << QByteArray(line) << QByteArray(section) << std::move(holds);
        };
        row("harmonics too many", "measure", "harmonicCount=99", [](const Remembered& r) {
            return r.measure.harmonicCount == 32;
        });
        row("harmonics no number", "measure", "harmonicCount=ten", [](const Remembered& r) {
            return r.measure.harmonicCount == 10;
        });
        row("band upside down", "measure", "bandLowHz=30000", [](const Remembered& r) {
            return r.measure.band == core::Band();
        });
        row("band not a number", "measure", "bandLowHz=nan", [](const Remembered& r) {
            return r.measure.band == core::Band();
        });
        row("full scale negative", "measure", "fullScaleVrms=-1", [](const Remembered& r) {
            return !r.measure.fullScaleVrms;
        });
        row("full scale infinite", "measure", "fullScaleVrms=inf", [](const Remembered& r) {
            return !r.measure.fullScaleVrms;
        });
        row("weighting unknown", "measure", "weighting=z", [](const Remembered& r) {
            return r.measure.weighting == core::Weighting::None;
        });
        row("theme unknown", "view", "theme=neon", [](const Remembered& r) {
            return r.view.theme == ui::ThemeName::Paper;
        });
        row("page unknown", "view", "page=7", [](const Remembered& r) {
            return r.view.page == ui::Page::Trim;
        });
        row("picture scale too big", "view", "pictureScale=9", [](const Remembered& r) {
            return r.view.pictureScale == 2;
        });
        row("channel zero", "source", "channel=0", [](const Remembered& r) {
            return r.source.channel == 1;
        });
        row("demo rate too low", "source", "rateHz=8000", [](const Remembered& r) {
            return r.source.rateHz == 44100.0;
        });
        row("source empty", "source", "name=", [](const Remembered& r) {
            return r.source == SourceSpec();
        });
    }

    void valuesOutOfRange_areClampedOrBecomeDefaults()
    {
        QFETCH(QByteArray, line);
        QFETCH(QByteArray, section);
        QFETCH(std::function<bool(const Remembered&)>, holds);
        writeText("[General]\nversion=1\n[" + section + "]\n" + line + "\n");
        QVERIFY(holds(Settings(file()).values()));
    }

    void numbers_areReadAsTextWhateverTheLanguage()
    {
        writeText("[General]\nversion=1\n[measure]\nfullScaleVrms=\"2.5\"\n");
        QCOMPARE(Settings(file()).values().measure.fullScaleVrms.value_or(0.0), 2.5);
    }

    void fileOfAnotherVersion_isNotRead()
    {
        writeText("[General]\nversion=99\n[view]\ntheme=dusk\n");
        compare(Settings(file()).values(), Remembered());
    }

    void garbage_givesDefaults()
    {
        writeText(QByteArray("\x00\xff[[[==\n\n=\n", 12));
        compare(Settings(file()).values(), Remembered());
    }

    void unwritableFile_isReported()
    {
        // A path below a file cannot be made by anybody, root included.
        writeText("x");
        Settings settings(file() + u"/below/settings.ini"_s);
        settings.setPictureFolder(u"/somewhere"_s);
        QVERIFY(!settings.write());
    }

    void withoutAFileName_theUsersConfigurationFolderIsUsed()
    {
        const QString usual = Settings().file();
        QVERIFY2(
            usual.startsWith(QStandardPaths::writableLocation(QStandardPaths::AppConfigLocation)),
            qPrintable(usual));
        QVERIFY(usual.endsWith(u"/sinewright.ini"_s));
    }
};

QTEST_GUILESS_MAIN(TestSettings)
#include "tst_settings.moc"
