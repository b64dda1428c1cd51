// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/picture.h"

#include <QDir>
#include <QFileInfo>
#include <QImage>
#include <QTemporaryDir>
#include <QTest>

#include <set>

#include "tests/app/program.h"

using namespace sinewright;
using namespace sinewright::tests;
using namespace Qt::StringLiterals;

namespace {

/// A picture of a second of the demo at its cheapest.
QStringList pictureWords(const QString& file, const QStringList& more = {})
{
    return QStringList{u"--picture"_s,
                       file,
                       u"--rate"_s,
                       u"48000"_s,
                       u"--source"_s,
                       u"demo"_s,
                       u"--after"_s,
                       u"1"_s} +
           more;
}

} // namespace

/// The unattended picture by the built program, and the names of pictures.
class TestPictureCommand : public QObject
{
    Q_OBJECT

    QTemporaryDir m_folder;

    [[nodiscard]] QString path(const char* name) const
    {
        return m_folder.filePath(QString::fromLatin1(name));
    }

private slots:
    void initTestCase()
    {
        QVERIFY(m_folder.isValid());
        // As on a machine without a display: the program finds its way off screen by itself.
        for (const char* name : {"DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"}) {
            qunsetenv(name);
        }
        qputenv("XDG_CONFIG_HOME", QFile::encodeName(path("config")));
    }

    void picture_showsTheWindowAndPrintsAReading_data()
    {
        QTest::addColumn<QStringList>("options");
        QTest::addColumn<QSize>("least");
        QTest::addColumn<bool>("isDark");
        QTest::newRow("as it is") << QStringList() << QSize(1280, 800) << false;
        QTest::newRow("dusk, twice as fine")
            << QStringList{u"--theme"_s, u"dusk"_s, u"--scale"_s, u"2"_s} << QSize(2560, 1600)
            << true;
        QTest::newRow("larger, another page")
            << QStringList{u"--size"_s, u"1920x1080"_s, u"--page"_s, u"hook-up"_s}
            << QSize(1920, 1080) << false;
    }

    void picture_showsTheWindowAndPrintsAReading()
    {
        QFETCH(QStringList, options);
        QFETCH(QSize, least);
        QFETCH(bool, isDark);
        const QString file = path("window.png");
        const Ran ran = runProgram(pictureWords(file, options));
        QCOMPARE(ran.complaint, QByteArray());
        QCOMPARE(ran.exitCode, 0);
        QVERIFY2(
            QString::fromUtf8(ran.output)
                .contains(QRegularExpression(
                    u"^1183\\.\\d+ Hz, -\\d\\.\\d+ dBFS, THD 0\\.\\d+ %, THD\\+N 0\\.\\d+ %\\n$"_s)),
            ran.output);
        const QImage picture(file);
        QCOMPARE_GE(picture.width(), least.width());
        QCOMPARE_GT(picture.height(), least.height()); // the caption comes below
        QCOMPARE(picture.pixelColor(2, picture.height() / 2).lightness() < 128, isDark);
        std::set<QRgb> colours;
        constexpr int kEveryRow = 10;
        for (int y = 0; y < picture.height(); y += kEveryRow) {
            for (int x = 0; x < picture.width(); ++x) {
                colours.insert(picture.pixel(x, y));
            }
        }
        QCOMPARE_GT(colours.size(), std::size_t{8}); // something is drawn there
    }

    void settingsOfTheUser_areLeftAlone()
    {
        QCOMPARE(runProgram(pictureWords(path("alone.png"), {u"--theme"_s, u"dusk"_s})).exitCode,
                 0);
        QVERIFY(!QFileInfo::exists(path("config/sinewright")));
    }

    void load_isReportedInOneLine()
    {
        const Ran ran = runProgram(pictureWords(path("load.png"), {u"--report-load"_s}));
        QCOMPARE(ran.exitCode, 0);
        QVERIFY2(
            QString::fromUtf8(ran.output)
                .contains(QRegularExpression(
                    u"\\nload of one core over [\\d.]+ s: analysis [\\d.]+ %, drawing [\\d.]+ %, total [\\d.]+ %\\n$"_s)),
            ran.output);
    }

    void trimmerStops_areGoneThrough()
    {
        const auto levelAfter = [this](const QString& stops) {
            const Ran ran = runProgram(
                pictureWords(path("stops.png"), {u"--trimmer"_s, stops, u"--after"_s, u"4"_s}));
            return QString::fromUtf8(ran.output)
                .section(u", "_s, 1, 1)
                .section(u' ', 0, 0)
                .toDouble();
        };
        // The level follows the trimmer.
        QVERIFY(levelAfter(u"350,330"_s) < levelAfter(u"330,350"_s) - 0.3);
    }

    void pictureThatCannotBeWritten_isExitFour_data()
    {
        QTest::addColumn<QString>("file");
        QTest::newRow("no such folder") << path("none/window.png");
        QTest::newRow("a folder") << m_folder.path();
        QTest::newRow("a full device") << u"/dev/full"_s;
    }

    void pictureThatCannotBeWritten_isExitFour()
    {
        QFETCH(QString, file);
        QStringList words = pictureWords(file);
        if (!file.startsWith(u"/dev/"_s)) {
            words += {u"--after"_s,
                      u"600"_s}; // refused at once: this long would run into the time limit
        }
        const Ran ran = runProgram(words);
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 4);
        QVERIFY(ran.complaint.contains(QFile::encodeName(file)));
        // A device is written to, never replaced.
        QVERIFY(!QFileInfo(u"/dev/full"_s).isFile());
    }

    void sourceThatCannotBeOpened_isExitThree()
    {
        const Ran ran =
            runProgram({u"--picture"_s, path("none.png"), u"--source"_s, path("missing.wav")});
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 3);
        QVERIFY(!QFileInfo::exists(path("none.png")));
    }

    void windowWithoutADisplay_isExitFourAndSaysWhatNeedsNone()
    {
        const Ran ran = runProgram({});
        QVERIFY2(ran.isOneComplaint(), ran.complaint + ran.output);
        QCOMPARE(ran.exitCode, 4);
        QVERIFY(ran.complaint.contains("--picture"));
    }

    void names_sortByTime()
    {
        const QDateTime when(QDate(2026, 12, 1), QTime(14, 30, 15));
        QCOMPARE(app::pictureName(when, u"trim"_s, 0), u"sinewright-20261201-143015-trim.png"_s);
        const QStringList inOrder{app::pictureName(when, u"trim"_s, 0),
                                  app::pictureName(when, u"trim"_s, 1),
                                  app::pictureName(when, u"spectrum"_s, 2),
                                  app::pictureName(when.addSecs(1), u"trim"_s, 0)};
        QStringList sorted = inOrder;
        sorted.sort();
        QCOMPARE(sorted, inOrder);
    }

    void names_runOutAfterTheAlphabetRatherThanReplaceAPicture()
    {
        const QDateTime when(QDate(2026, 12, 1), QTime(14, 30, 15));
        const QImage image(8, 8, QImage::Format_RGB32);
        QSet<QString> names;
        for (int i = 0; i < 27; ++i) {
            const auto saved = app::savePicture(image, m_folder.path(), when, u"trim"_s);
            QVERIFY(saved);
            names.insert(*saved);
        }
        QCOMPARE(names.size(), 27);
        const auto oneTooMany = app::savePicture(image, m_folder.path(), when, u"trim"_s);
        QVERIFY(!oneTooMany);
        QVERIFY(oneTooMany.error().code == core::ErrorCode::WriteFailed);
    }
};

QTEST_GUILESS_MAIN(TestPictureCommand)
#include "tst_picture_command.moc"
