// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card_choice.h"

#include <QTest>

#include <vector>

using namespace sinewright;
using audio::CardChoice;
using audio::CardInput;
using audio::chooseChannels;
using audio::chooseInput;
using core::ErrorCode;

namespace {

CardInput input(int device, const char* api, const char* name, int channels)
{
    CardInput made;
    made.device = device;
    made.hostApi = api;
    made.name = name;
    made.channels = channels;
    made.defaultRateHz = 48000.0;
    return made;
}

/// Invented devices.
std::vector<CardInput> fiveInputs()
{
    std::vector<CardInput> inputs = {input(0, "Alpha", "Bench", 2),
                                     input(2, "Alpha", "Bench Two", 8),
                                     input(3, "Alpha", "Microphone", 1),
                                     input(5, "Beta", "Bench", 2),
                                     input(7, "Beta", "system", 40)};
    inputs[2].isDefault = true;
    inputs[4].isDefaultOfHostApi = true;
    return inputs;
}

} // namespace

class TestCardChoice final : public QObject
{
    Q_OBJECT

private slots:
    void name_findsOneInput_data();
    void name_findsOneInput();
    void name_thatFindsNoneOrMany_isRefused_data();
    void name_thatFindsNoneOrMany_isRefused();
    void nothingThere_saysSo();
    void channels_areTwoUnlessAskedOtherwise_data();
    void channels_areTwoUnlessAskedOtherwise();
};

void TestCardChoice::name_findsOneInput_data()
{
    QTest::addColumn<QString>("hostApi");
    QTest::addColumn<QString>("name");
    QTest::addColumn<int>("device");
    const auto row = [](const char* tag, const char* api, const char* name, int device) {
        QTest::newRow(tag) << QString::fromLatin1(api) << QString::fromLatin1(name) << device;
    };
    row("nothing asked: the system's default", "", "", 3);
    row("host API alone: its default", "Beta", "", 7);
    row("exact name in a host API wins over a part", "Alpha", "Bench", 0);
    row("host API in part, case ignored", "bet", "bench", 5);
    row("name with host API, as it is listed", "", "Bench (Beta)", 5);
    row("the same, case ignored", "", "bench (beta)", 5);
    row("part, case ignored", "", "MICRO", 3);
    row("part that only one has", "", "two", 2);
}

void TestCardChoice::name_findsOneInput()
{
    QFETCH(const QString, hostApi);
    QFETCH(const QString, name);
    QFETCH(const int, device);
    const auto inputs = fiveInputs();
    const auto found =
        chooseInput(inputs, CardChoice{hostApi.toStdString(), name.toStdString(), 0.0, 0});
    QVERIFY2(found.has_value(), found ? "" : found.error().detail.c_str());
    QCOMPARE(found->device, device);
}

void TestCardChoice::name_thatFindsNoneOrMany_isRefused_data()
{
    QTest::addColumn<QString>("hostApi");
    QTest::addColumn<QString>("name");
    QTest::addColumn<int>("code");
    QTest::addColumn<QString>("lists");
    QTest::newRow("no such name")
        << QString() << QStringLiteral("valve") << static_cast<int>(ErrorCode::NotFound)
        << QStringLiteral("'Bench (Alpha)', 'Bench Two (Alpha)', 'Microphone (Alpha)', "
                          "'Bench (Beta)', 'system (Beta)'");
    QTest::newRow("not in this host API") << QStringLiteral("Beta") << QStringLiteral("Microphone")
                                          << static_cast<int>(ErrorCode::NotFound)
                                          << QStringLiteral("'Bench (Beta)', 'system (Beta)'");
    QTest::newRow("no such host API")
        << QStringLiteral("Gamma") << QString() << static_cast<int>(ErrorCode::NotFound)
        << QStringLiteral("'Bench (Alpha)'");
    QTest::newRow("same name in two host APIs")
        << QString() << QStringLiteral("Bench") << static_cast<int>(ErrorCode::InvalidArgument)
        << QStringLiteral("2 inputs: give more of the name of one of 'Bench (Alpha)', "
                          "'Bench (Beta)'");
    QTest::newRow("part of many") << QString() << QStringLiteral("nch")
                                  << static_cast<int>(ErrorCode::InvalidArgument)
                                  << QStringLiteral("3 inputs");
}

void TestCardChoice::name_thatFindsNoneOrMany_isRefused()
{
    QFETCH(const QString, hostApi);
    QFETCH(const QString, name);
    QFETCH(const int, code);
    QFETCH(const QString, lists);
    const auto inputs = fiveInputs();
    const auto found =
        chooseInput(inputs, CardChoice{hostApi.toStdString(), name.toStdString(), 0.0, 0});
    QVERIFY(!found);
    QCOMPARE(static_cast<int>(found.error().code), code);
    const QString detail = QString::fromStdString(found.error().detail);
    QVERIFY2(detail.contains(lists), qPrintable(detail));
}

void TestCardChoice::nothingThere_saysSo()
{
    const auto found = chooseInput({}, CardChoice{});
    QVERIFY(!found);
    QCOMPARE(found.error().code, ErrorCode::DeviceFailed);
}

void TestCardChoice::channels_areTwoUnlessAskedOtherwise_data()
{
    QTest::addColumn<int>("has");
    QTest::addColumn<int>("asked");
    QTest::addColumn<int>("opened"); // 0: refused
    QTest::newRow("two where there are two") << 8 << 0 << 2;
    QTest::newRow("one where there is one") << 1 << 0 << 1;
    QTest::newRow("as asked") << 8 << 8 << 8;
    QTest::newRow("more than there are") << 2 << 3 << 0;
    QTest::newRow("more than a ring takes") << 40 << 33 << 0;
    QTest::newRow("less than none") << 2 << -1 << 0;
}

void TestCardChoice::channels_areTwoUnlessAskedOtherwise()
{
    QFETCH(const int, has);
    QFETCH(const int, asked);
    QFETCH(const int, opened);
    const auto channels =
        chooseChannels(input(0, "Alpha", "Bench", has), CardChoice{"", "", 0.0, asked});
    QCOMPARE(channels.value_or(0), opened);
    if (!channels) {
        QCOMPARE(channels.error().code, ErrorCode::InvalidArgument);
    }
}

QTEST_APPLESS_MAIN(TestCardChoice)
#include "tst_card_choice.moc"
