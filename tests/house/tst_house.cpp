// SPDX-License-Identifier: GPL-3.0-or-later
#include <QDirIterator>
#include <QFile>
#include <QRegularExpression>
#include <QTest>

using namespace Qt::StringLiterals;

namespace {

QString textOf(const QString& path)
{
    QFile file(path);
    return file.open(QIODevice::ReadOnly) ? QString::fromUtf8(file.readAll()) : QString();
}

QStringList sourcesBelow(const QString& folder)
{
    QStringList paths;
    QDirIterator it(QStringLiteral(SINEWRIGHT_SOURCE_DIR "/") + folder,
                    {u"*.h"_s, u"*.cpp"_s},
                    QDir::Files,
                    QDirIterator::Subdirectories);
    while (it.hasNext()) {
        paths += it.next();
    }
    return paths;
}

} // namespace

/// Rules of the house that the compiler does not see.
class TestHouse final : public QObject
{
    Q_OBJECT
private slots:
    void folders_includeOnlyAlongTheArrows_data();
    void folders_includeOnlyAlongTheArrows();
    void sources_startWithTheLicenceLine_data();
    void sources_startWithTheLicenceLine();
};

void TestHouse::folders_includeOnlyAlongTheArrows_data()
{
    QTest::addColumn<QString>("folder");
    QTest::addColumn<QString>("forbidden");

    QTest::newRow("core: no Qt, no libraries of the edge, no threads, no clock")
        << u"core"_s
        << uR"(#include\s+(<Q|<(portaudio|sndfile|qcustomplot|thread|chrono|fstream|filesystem)|"(audio|ui|app)/))"_s;
    QTest::newRow("audio: no Qt, no window")
        << u"audio"_s << uR"(#include\s+(<Q|<qcustomplot|"(ui|app)/))"_s;
    QTest::newRow("ui: no audio, no app, no database")
        << u"ui"_s << uR"(#include\s+(<QSql|<(portaudio|sndfile)|"(audio|app)/))"_s;
}

void TestHouse::folders_includeOnlyAlongTheArrows()
{
    QFETCH(QString, folder);
    QFETCH(QString, forbidden);

    const QStringList paths = sourcesBelow(folder);
    QVERIFY(!paths.isEmpty());
    const QRegularExpression pattern(forbidden);
    for (const QString& path : paths) {
        const auto match = pattern.match(textOf(path));
        QVERIFY2(!match.hasMatch(), qPrintable(path + u": "_s + match.captured()));
    }
}

void TestHouse::sources_startWithTheLicenceLine_data()
{
    QTest::addColumn<QString>("folder");
    for (const char* folder : {"core", "audio", "ui", "app", "tests"}) {
        QTest::newRow(folder) << QString::fromLatin1(folder);
    }
}

void TestHouse::sources_startWithTheLicenceLine()
{
    QFETCH(QString, folder);

    const QStringList paths = sourcesBelow(folder);
    QVERIFY(!paths.isEmpty());
    for (const QString& path : paths) {
        QVERIFY2(textOf(path).startsWith(u"// SPDX-License-Identifier: GPL-3.0-or-later\n"_s),
                 qPrintable(path));
    }
}

QTEST_GUILESS_MAIN(TestHouse)
#include "tst_house.moc"
