// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/card.h"
#include "audio/sample_ring.h"

#include <QElapsedTimer>
#include <QFile>
#include <QTest>

#include <algorithm>
#include <cmath>
#include <memory>
#include <numbers>
#include <vector>

#include "tests/support/virtual_card.h"
#include <unistd.h>

using namespace sinewright;
using audio::CardChoice;
using audio::SourceCondition;
using core::ErrorCode;
using tests::VirtualCard;

namespace {

constexpr int kRateHz = 96000;
constexpr std::size_t kFrames = 6 * kRateHz;

/// None of its samples is zero, so that where it begins is seen.
std::vector<float> tone(double hz, double amplitude)
{
    std::vector<float> samples(kFrames);
    for (std::size_t i = 0; i < kFrames; ++i) {
        const double phase = 2.0 * std::numbers::pi * hz * static_cast<double>(i) / kRateHz;
        samples[i] = static_cast<float>(amplitude * std::cos(phase + 0.5));
    }
    return samples;
}

CardChoice choiceOf(const char* name, double rateHz = kRateHz)
{
    CardChoice choice;
    choice.name = name;
    choice.rateHz = rateHz;
    return choice;
}

/// Catches what the process writes to its standard error while it lives.
class StderrCatcher final
{
public:
    explicit StderrCatcher(const QString& file) : m_file(file), m_saved(::dup(STDERR_FILENO))
    {
        if (m_file.open(QIODevice::ReadWrite | QIODevice::Truncate)) {
            ::dup2(m_file.handle(), STDERR_FILENO);
        }
    }
    ~StderrCatcher()
    {
        ::dup2(m_saved, STDERR_FILENO);
        ::close(m_saved);
    }
    StderrCatcher(const StderrCatcher&) = delete;
    StderrCatcher& operator=(const StderrCatcher&) = delete;
    StderrCatcher(StderrCatcher&&) = delete;
    StderrCatcher& operator=(StderrCatcher&&) = delete;

    QByteArray caught()
    {
        m_file.seek(0);
        return m_file.readAll();
    }

private:
    QFile m_file;
    int m_saved;
};

} // namespace

class TestCardCapture final : public QObject
{
    Q_OBJECT

private slots:
    void initTestCase();
    void init() { QTest::failOnWarning(QRegularExpression(QStringLiteral(".*"))); }
    void list_showsTheCardAndItsRates();
    void choiceThatCannotBeMet_isRefusedInOneLine_data();
    void choiceThatCannotBeMet_isRefusedInOneLine();
    void playedTone_comesBackSampleForSample();
    void nothingPlayed_isCalledSilent();
    void defaultChoice_opensTwoChannelsAtTheCardsRate();
    void librariesBelow_printNothing();

private:
    VirtualCard m_card;
};

void TestCardCapture::initTestCase()
{
    if (const QString missing = VirtualCard::missingProgram(); !missing.isEmpty()) {
        QSKIP(qPrintable(QStringLiteral("no virtual card without ") + missing));
    }
    m_card.useInThisProcess();
    QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
}

void TestCardCapture::list_showsTheCardAndItsRates()
{
    const auto cards = audio::listCards();
    QVERIFY2(cards.has_value(), cards ? "" : cards.error().detail.c_str());
    const auto pulse = std::ranges::find(*cards, "pulse", &audio::CardInfo::name);
    QVERIFY(pulse != cards->end());
    QCOMPARE(pulse->hostApi, std::string("ALSA"));
    QCOMPARE_GE(pulse->inputChannels, 2);
    for (const double rateHz : {44100.0, 48000.0, 88200.0, 96000.0, 176400.0, 192000.0}) {
        QVERIFY(std::ranges::find(pulse->ratesHz, rateHz) != pulse->ratesHz.end());
    }
    QCOMPARE(std::ranges::count_if(*cards, &audio::CardInfo::isDefault), 1);
}

void TestCardCapture::choiceThatCannotBeMet_isRefusedInOneLine_data()
{
    QTest::addColumn<QString>("hostApi");
    QTest::addColumn<QString>("name");
    QTest::addColumn<double>("rateHz");
    QTest::addColumn<int>("channels");
    QTest::addColumn<int>("code");
    QTest::addColumn<QStringList>("says");
    const auto row = [](const char* tag,
                        const char* api,
                        const char* name,
                        double rateHz,
                        int channels,
                        ErrorCode code,
                        const QStringList& says) {
        QTest::newRow(tag) << QString::fromLatin1(api) << QString::fromLatin1(name) << rateHz
                           << channels << static_cast<int>(code) << says;
    };
    const QString pulse = QStringLiteral("'pulse (ALSA)'");
    const QString standard = QStringLiteral("'default (ALSA)'");
    row("unknown name",
        "",
        "no such card",
        0.0,
        0,
        ErrorCode::NotFound,
        {QStringLiteral("'no such card'"), pulse, standard});
    row("part of two names", "", "ul", 0.0, 0, ErrorCode::InvalidArgument, {pulse, standard});
    row("unknown host API",
        "bell wire",
        "pulse",
        0.0,
        0,
        ErrorCode::NotFound,
        {QStringLiteral("'bell wire'"), pulse});
    row("too many channels",
        "",
        "pulse",
        0.0,
        33,
        ErrorCode::InvalidArgument,
        {pulse, QStringLiteral("1 to 32")});
    row("impossible rate",
        "",
        "pulse",
        3e6,
        0,
        ErrorCode::DeviceFailed,
        {pulse, QStringLiteral("3000000 Hz")});
}

void TestCardCapture::choiceThatCannotBeMet_isRefusedInOneLine()
{
    QFETCH(const QString, hostApi);
    QFETCH(const QString, name);
    QFETCH(const double, rateHz);
    QFETCH(const int, channels);
    QFETCH(const int, code);
    QFETCH(const QStringList, says);
    const auto source = audio::makeCardSource(
        CardChoice{hostApi.toStdString(), name.toStdString(), rateHz, channels});
    const auto opened = source->open();
    QVERIFY(!opened);
    const QString detail = QString::fromStdString(opened.error().detail);
    QCOMPARE(static_cast<int>(opened.error().code), code);
    for (const QString& part : says) {
        QVERIFY2(detail.contains(part), qPrintable(detail));
    }
    QVERIFY(!detail.contains(QLatin1Char('\n')));
    QCOMPARE(source->status().condition, SourceCondition::Idle);
}

void TestCardCapture::playedTone_comesBackSampleForSample()
{
    const auto left = tone(997.1, 0.9);
    const auto right = tone(1234.5, 1e-4);
    const QString file = m_card.folder() + QStringLiteral("/tone.wav");
    QVERIFY(tests::writeFloatWav(file, kRateHz, {left, right}));

    const auto source = audio::makeCardSource(choiceOf("Pulse")); // case does not matter
    const auto format = source->open();
    QVERIFY2(format.has_value(), format ? "" : format.error().detail.c_str());
    QCOMPARE(format->rate.hz, double(kRateHz));
    QCOMPARE(format->channels, 2);
    audio::SampleRing ring(2, 60 * kRateHz);
    QVERIFY(source->start(ring).has_value());
    QTRY_VERIFY_WITH_TIMEOUT(ring.framesSeen() > 0, 10'000);
    QVERIFY2(m_card.play(file), qPrintable(m_card.whatFailed()));
    QTRY_VERIFY_WITH_TIMEOUT(!m_card.isPlaying(), 30'000);
    const std::uint64_t atEnd = ring.framesSeen();
    QTRY_VERIFY_WITH_TIMEOUT(ring.framesSeen() > atEnd + kRateHz, 10'000); // what is on its way
    source->stop();
    QCOMPARE(source->status().condition, SourceCondition::Idle);
    QCOMPARE(ring.framesLost(), 0U);

    std::vector<float> got;
    while (const auto block = ring.pop()) {
        QCOMPARE(block->firstFrame, got.size() / 2);
        got.insert(got.end(), block->interleaved.begin(), block->interleaved.end());
    }
    // The head of the tone may be missing: the server had already handed on silence for the time when the player came,
    // up to two seconds. From the first sample that is heard to the last one played nothing may be missing or changed,
    // for float goes in and float comes out.
    const auto first = std::ranges::find_if(got, [](float s) { return s != 0.0F; });
    QVERIFY(first != got.end());
    const auto begin = static_cast<std::size_t>(first - got.begin());
    QCOMPARE(begin % 2, 0U);
    std::vector<float> played;
    for (std::size_t i = 0; i < kFrames; ++i) {
        played.push_back(left[i]);
        played.push_back(right[i]);
    }
    constexpr std::ptrdiff_t kMatch = 32; // samples that tell where in the tone we are
    const auto from = std::search(played.begin(), played.end(), first, first + kMatch);
    const auto heard = static_cast<std::size_t>(played.end() - from);
    QCOMPARE_GE(heard, std::size_t{2 * 3 * kRateHz});
    QCOMPARE_LE(heard, got.size() - begin);
    std::size_t wrong = 0;
    for (std::size_t i = 0; i < heard; ++i) {
        wrong += got[begin + i] == *(from + static_cast<std::ptrdiff_t>(i)) ? 0U : 1U;
    }
    QCOMPARE(wrong, 0U);
    qInfo("%zu frames compared, all equal", heard / 2);
}

void TestCardCapture::nothingPlayed_isCalledSilent()
{
    const auto source = audio::makeCardSource(choiceOf("pulse"));
    QVERIFY(source->open().has_value());
    audio::SampleRing ring(2, 60 * kRateHz);
    QVERIFY(source->start(ring).has_value());
    QCOMPARE(source->status().condition, SourceCondition::Running);
    const auto condition = [&] {
        source->tend();
        return source->status().condition;
    };
    QTRY_COMPARE_WITH_TIMEOUT(condition(), SourceCondition::Silent, 10'000);
    QCOMPARE_GE(ring.framesSeen(), std::uint64_t{kRateHz}); // a second of it, and no less
    QVERIFY(source->status().message.find("'pulse (ALSA)'") != std::string::npos);

    const QString file = m_card.folder() + QStringLiteral("/again.wav");
    QVERIFY(tests::writeFloatWav(file, kRateHz, {tone(997.0, 0.5), tone(997.0, 0.5)}));
    QVERIFY2(m_card.play(file), qPrintable(m_card.whatFailed()));
    QTRY_COMPARE_WITH_TIMEOUT(condition(), SourceCondition::Running, 10'000);
    QCOMPARE(source->status().message, std::string());
    m_card.stopPlaying();
}

void TestCardCapture::defaultChoice_opensTwoChannelsAtTheCardsRate()
{
    const auto source = audio::makeCardSource({});
    const auto format = source->open();
    QVERIFY(format.has_value());
    QCOMPARE(format->channels, 2);
    QCOMPARE(format->rate.hz, 44100.0); // what the ALSA plug-in names as its own
    source->stop();
    audio::SampleRing ring(2, kRateHz);
    QVERIFY(source->start(ring).has_value()); // opens it again
    QTRY_VERIFY_WITH_TIMEOUT(ring.framesSeen() > 0, 10'000);
}

void TestCardCapture::librariesBelow_printNothing()
{
    QByteArray printed;
    {
        StderrCatcher catcher(m_card.folder() + QStringLiteral("/stderr"));
        const auto cards = audio::listCards();
        const auto refused = audio::makeCardSource(choiceOf("pulse", 3e6))->open();
        m_card.kill();
        const auto without = audio::listCards();
        const auto gone = audio::makeCardSource(choiceOf("pulse"))->open();
        printed = catcher.caught();
        QVERIFY(cards.has_value() && !refused && !gone);
        QCOMPARE(gone.error().code,
                 without && without->empty() ? ErrorCode::DeviceFailed : ErrorCode::NotFound);
    }
    QCOMPARE(printed, QByteArray());
    QVERIFY2(m_card.start(), qPrintable(m_card.whatFailed()));
}

QTEST_GUILESS_MAIN(TestCardCapture)
#include "tst_card_capture.moc"
