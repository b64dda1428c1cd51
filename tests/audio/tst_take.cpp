// SPDX-License-Identifier: GPL-3.0-or-later
#include "audio/sample_ring.h"
#include "audio/take.h"

#include <QElapsedTimer>
#include <QFile>
#include <QTemporaryDir>
#include <QTest>

#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

#include <sndfile.h>
#include <sys/stat.h>
#include <unistd.h>

using namespace sinewright;
using audio::readTake;
using audio::takeInfo;
using core::ErrorCode;

namespace {

constexpr int kRateHz = 48000;
constexpr uid_t kNobody = 65534; // Debian's "nobody"

/// Three quarters of full scale, a different frequency in each channel.
double sineAt(std::size_t frame, int channel)
{
    const double turns = (440.0 + 110.0 * channel) * static_cast<double>(frame) / kRateHz;
    return 0.75 * std::sin(2.0 * std::numbers::pi * turns);
}

std::vector<double> sines(std::size_t frames, int channels)
{
    std::vector<double> samples;
    samples.reserve(frames * static_cast<std::size_t>(channels));
    for (std::size_t i = 0; i < frames; ++i) {
        for (int c = 1; c <= channels; ++c) {
            samples.push_back(sineAt(i, c));
        }
    }
    return samples;
}

int bitsOf(int format)
{
    switch (format & SF_FORMAT_SUBMASK) {
    case SF_FORMAT_PCM_16:
        return 16;
    case SF_FORMAT_PCM_24:
        return 24;
    default:
        return 0; // float
    }
}

/// Integer takes are written as integers, full scale being 2^(bits - 1) steps: libsndfile itself would scale by one step
/// less, which is not what an interface does.
bool writeTake(const QString& path, int format, int channels, const std::vector<double>& samples)
{
    SF_INFO layout{};
    layout.samplerate = kRateHz;
    layout.channels = channels;
    layout.format = format;
    SNDFILE* const file = sf_open(QFile::encodeName(path).constData(), SFM_WRITE, &layout);
    if (file == nullptr) {
        return false;
    }
    const auto count = static_cast<sf_count_t>(samples.size());
    sf_count_t written = 0;
    if (const int bits = bitsOf(format); bits > 0) {
        std::vector<int> steps;
        for (const double sample : samples) {
            const auto step = static_cast<int>(std::lround(std::ldexp(sample, bits - 1)));
            steps.push_back(step * (1 << (32 - bits))); // the upper bits count
        }
        written = sf_write_int(file, steps.data(), count);
    } else {
        written = sf_write_double(file, samples.data(), count);
    }
    return sf_close(file) == 0 && written == count;
}

bool writeBytes(const QString& path, const QByteArray& bytes)
{
    QFile file(path);
    return file.open(QIODevice::WriteOnly) && file.write(bytes) == bytes.size();
}

QByteArray bytesOf(const QString& path)
{
    QFile file(path);
    return file.open(QIODevice::ReadOnly) ? file.readAll() : QByteArray();
}

std::filesystem::path fsPath(const QString& path)
{
    return std::filesystem::path(QFile::encodeName(path).toStdString());
}

/// For as long as it lives the process has the file rights of a user who owns nothing. Root passes every permission
/// check, so that as root a refusal is only seen this way; another user needs no help.
class PlainUser final
{
public:
    PlainUser() : m_wasRoot(::geteuid() == 0 && ::seteuid(kNobody) == 0) {}
    ~PlainUser()
    {
        if (m_wasRoot && ::seteuid(0) != 0) {
            qFatal("cannot become root again");
        }
    }
    PlainUser(const PlainUser&) = delete;
    PlainUser& operator=(const PlainUser&) = delete;
    PlainUser(PlainUser&&) = delete;
    PlainUser& operator=(PlainUser&&) = delete;

private:
    bool m_wasRoot;
};

} // namespace

class TestTake final : public QObject
{
    Q_OBJECT

private slots:
    void init();
    void formats_giveBackWhatWasWritten_data();
    void formats_giveBackWhatWasWritten();
    void integerTakes_areReadWithoutAnyLoss();
    void stretch_isCutWhereAsked();
    void badFile_isRefusedInOneLine_data();
    void badFile_isRefusedInOneLine();
    void sampleThatIsNoNumber_isRefusedOnlyWhereItStands();
    void requestOutsideTheTake_isRefused();
    void forbiddenFile_saysSo();
    void openEndedHeader_isNotCalledDamaged();
    void soundCutInTheMiddle_isNoticedByOneByte_data();
    void soundCutInTheMiddle_isNoticedByOneByte();
    void source_playsAtItsOwnPaceToTheEnd();
    void source_stopsAtASampleThatIsNoNumber();
    void source_playsAgainAfterAStop();

private:
    [[nodiscard]] QString path(const QString& name) const { return m_dir.filePath(name); }

    QTemporaryDir m_dir;
};

void TestTake::init()
{
    QTest::failOnWarning(QRegularExpression(QStringLiteral(".*")));
    QVERIFY(m_dir.isValid());
}

void TestTake::formats_giveBackWhatWasWritten_data()
{
    QTest::addColumn<int>("format");
    QTest::addColumn<int>("channels");
    QTest::addColumn<int>("bits");
    QTest::addColumn<bool>("isFloat");
    // Writing rounds to the nearest step: half a step of the format, and float's 24 bits of mantissa below 1.
    QTest::addColumn<double>("tolerance");
    const struct
    {
        const char* name;
        int format;
        bool hasFloat;
    } kinds[] = {{"WAV", SF_FORMAT_WAV, true},
                 {"WAV, extensible header", SF_FORMAT_WAVEX, true},
                 {"RF64", SF_FORMAT_RF64, true},
                 {"FLAC", SF_FORMAT_FLAC, false},
                 {"AIFF", SF_FORMAT_AIFF, true},
                 {"CAF", SF_FORMAT_CAF, true}};
    const auto half = [](int bits) {
        return std::ldexp(0.5, 1 - bits) * 1.001;
    };
    for (const auto& kind : kinds) {
        const auto row = [&](const char* what, int encoding, int channels, int bits, bool isFloat) {
            const double tolerance = isFloat ? (bits == 32 ? half(24) : 0.0) : half(bits);
            QTest::addRow("%s, %s", kind.name, what)
                << (kind.format | encoding) << channels << bits << isFloat << tolerance;
        };
        row("16 bit stereo", SF_FORMAT_PCM_16, 2, 16, false);
        row("24 bit mono", SF_FORMAT_PCM_24, 1, 24, false);
        if (kind.hasFloat) {
            row("float stereo", SF_FORMAT_FLOAT, 2, 32, true);
            row("double mono", SF_FORMAT_DOUBLE, 1, 64, true);
            row("24 bit, 32 channels", SF_FORMAT_PCM_24, 32, 24, false);
        }
    }
}

void TestTake::formats_giveBackWhatWasWritten()
{
    QFETCH(const int, format);
    QFETCH(const int, channels);
    QFETCH(const int, bits);
    QFETCH(const bool, isFloat);
    QFETCH(const double, tolerance);
    const std::size_t frames = 10'000;
    const QString file = path(QStringLiteral("take"));
    QVERIFY(writeTake(file, format, channels, sines(frames, channels)));

    const auto info = takeInfo(fsPath(file));
    QVERIFY2(info.has_value(), info ? "" : info.error().detail.c_str());
    QCOMPARE(info->rate.hz, double(kRateHz));
    QCOMPARE(info->channels, channels);
    QCOMPARE(info->frames, frames);
    QCOMPARE(info->bitsPerSample, bits);
    QCOMPARE(info->isFloat, isFloat);
    for (const int channel : {1, channels}) {
        const auto samples = readTake(fsPath(file), channel, 0, frames);
        QVERIFY(samples.has_value());
        QCOMPARE(samples->size(), frames);
        double worst = 0.0;
        for (std::size_t i = 0; i < frames; ++i) {
            worst = std::max(worst, std::abs((*samples)[i] - sineAt(i, channel)));
        }
        QCOMPARE_LE(worst, tolerance);
    }
}

void TestTake::integerTakes_areReadWithoutAnyLoss()
{
    // Steps of a 24-bit scale survive exactly: 2^-23 a step, full scale at the negative end.
    const std::vector<double> steps = {
        -1.0, 0.0, std::ldexp(1.0, -23), std::ldexp(-3.0, -23), 1.0 - std::ldexp(1.0, -23), 0.5};
    for (const int kind : {SF_FORMAT_WAV, SF_FORMAT_FLAC, SF_FORMAT_AIFF, SF_FORMAT_CAF}) {
        const QString file = path(QStringLiteral("steps"));
        QVERIFY(writeTake(file, kind | SF_FORMAT_PCM_24, 1, steps));
        const auto samples = readTake(fsPath(file), 1, 0, steps.size());
        QVERIFY(samples.has_value());
        QVERIFY(*samples == steps);
    }
}

void TestTake::stretch_isCutWhereAsked()
{
    const std::size_t frames = 9000;
    for (const int format : {SF_FORMAT_WAV | SF_FORMAT_DOUBLE, SF_FORMAT_FLAC | SF_FORMAT_PCM_24}) {
        const QString file = path(QStringLiteral("stretch"));
        QVERIFY(writeTake(file, format, 2, sines(frames, 2)));
        const auto whole = readTake(fsPath(file), 2, 0, std::numeric_limits<std::uint64_t>::max());
        QVERIFY(whole.has_value());
        QCOMPARE(whole->size(), frames); // fewer than asked for when the take ends before
        const auto part = readTake(fsPath(file), 2, 4321, 100);
        QVERIFY(part.has_value());
        QVERIFY(*part == std::vector<double>(whole->begin() + 4321, whole->begin() + 4421));
        const auto last = readTake(fsPath(file), 2, frames - 1, 100);
        QVERIFY(last.has_value());
        QCOMPARE(last->size(), 1U);
    }
}

void TestTake::badFile_isRefusedInOneLine_data()
{
    QTest::addColumn<QString>("name");
    QTest::addColumn<int>("code");
    QTest::addColumn<QString>("says");
    const auto row = [this](const char* tag,
                            const QString& name,
                            const QByteArray& bytes,
                            ErrorCode code,
                            const char* says) {
        if (!bytes.isNull()) {
            QVERIFY(writeBytes(path(name), bytes));
        }
        QTest::newRow(tag) << name << static_cast<int>(code) << QString::fromLatin1(says);
    };
    const auto S = [](const char* text) {
        return QString::fromLatin1(text);
    };
    row("no such file", S("gone.wav"), {}, ErrorCode::NotFound, "does not exist");
    row("file used as a folder", S("t.wav/x.wav"), {}, ErrorCode::NotFound, "does not exist");
    row("empty", S("empty.wav"), QByteArray(""), ErrorCode::Empty, "empty");
    row("text named .wav",
        S("t.wav"),
        QByteArrayLiteral("Trimmed at noon, lamp warm.\n"),
        ErrorCode::UnsupportedFormat,
        "not a sound file");
    QVERIFY(QDir(m_dir.path()).mkpath(S("folder.wav")));
    row("folder", S("folder.wav"), {}, ErrorCode::UnsupportedFormat, "folder");
    QCOMPARE(::mkfifo(QFile::encodeName(path(S("pipe.wav"))).constData(), 0600), 0);
    row("pipe", S("pipe.wav"), {}, ErrorCode::UnsupportedFormat, "pipe");

    const std::vector<double> signal = sines(5000, 2);
    const struct
    {
        const char* tag;
        int format;
    } kinds[] = {{"WAV", SF_FORMAT_WAV | SF_FORMAT_PCM_24},
                 {"WAV float", SF_FORMAT_WAV | SF_FORMAT_FLOAT},
                 {"RF64", SF_FORMAT_RF64 | SF_FORMAT_PCM_24},
                 {"FLAC", SF_FORMAT_FLAC | SF_FORMAT_PCM_16},
                 {"AIFF", SF_FORMAT_AIFF | SF_FORMAT_PCM_24},
                 {"CAF", SF_FORMAT_CAF | SF_FORMAT_PCM_24}};
    for (const auto& kind : kinds) {
        const QString name = S(kind.tag) + S(".cut");
        QVERIFY(writeTake(path(name), kind.format, 2, signal));
        const QByteArray whole = bytesOf(path(name));
        const QByteArray tag = QByteArray(kind.tag) + ", second half missing";
        row(tag.constData(), name, whole.first(whole.size() / 2), ErrorCode::Damaged, "again");
    }
    QVERIFY(writeTake(path(S("header.wav")), SF_FORMAT_WAV | SF_FORMAT_PCM_16, 2, {}));
    row("header without samples", S("header.wav"), {}, ErrorCode::Empty, "no samples");
    QVERIFY(writeTake(path(S("start.wav")), SF_FORMAT_WAV | SF_FORMAT_PCM_16, 2, signal));
    row("cut within the header",
        S("start.wav"),
        bytesOf(path(S("start.wav"))).first(24),
        ErrorCode::Damaged,
        "header");
    QVERIFY(writeTake(path(S("wide.wav")), SF_FORMAT_WAV | SF_FORMAT_PCM_16, 33, sines(100, 33)));
    row("33 channels", S("wide.wav"), {}, ErrorCode::UnsupportedFormat, "33 channels");
}

void TestTake::badFile_isRefusedInOneLine()
{
    QFETCH(const QString, name);
    QFETCH(const int, code);
    QFETCH(const QString, says);
    const auto info = takeInfo(fsPath(path(name)));
    QVERIFY(!info);
    const QString detail = QString::fromStdString(info.error().detail);
    QCOMPARE(static_cast<int>(info.error().code), code);
    QVERIFY2(detail.contains(says), qPrintable(detail));
    QVERIFY2(detail.contains(path(name)), qPrintable(detail));       // which file
    QVERIFY2(detail.contains(QLatin1Char(':')), qPrintable(detail)); // what to try
    QVERIFY2(!detail.contains(QLatin1Char('\n')), qPrintable(detail));

    const auto samples = readTake(fsPath(path(name)), 1, 0, 10);
    QVERIFY(!samples);
    QCOMPARE(QString::fromStdString(samples.error().detail), detail);
    const auto opened = audio::makeTakeSource(fsPath(path(name)))->open();
    QVERIFY(!opened);
    QCOMPARE(QString::fromStdString(opened.error().detail), detail);
}

void TestTake::sampleThatIsNoNumber_isRefusedOnlyWhereItStands()
{
    const double bad[] = {std::numeric_limits<double>::quiet_NaN(),
                          std::numeric_limits<double>::infinity(),
                          -std::numeric_limits<double>::infinity()};
    for (const double value : bad) {
        std::vector<double> signal = sines(6000, 2);
        signal[2 * 5000 + 1] = value;
        const QString file = path(QStringLiteral("bad.wav"));
        QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_FLOAT, 2, signal));
        QVERIFY(takeInfo(fsPath(file)).has_value());
        QVERIFY(readTake(fsPath(file), 1, 0, 6000).has_value());
        QVERIFY(readTake(fsPath(file), 2, 0, 5000).has_value());
        const auto samples = readTake(fsPath(file), 2, 0, 6000);
        QVERIFY(!samples);
        QCOMPARE(samples.error().code, ErrorCode::Damaged);
        QVERIFY(samples.error().detail.find("frame 5000, channel 2") != std::string::npos);
    }
}

void TestTake::requestOutsideTheTake_isRefused()
{
    const QString file = path(QStringLiteral("small.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_PCM_16, 2, sines(1000, 2)));
    for (const int channel : {-1, 0, 3}) {
        const auto samples = readTake(fsPath(file), channel, 0, 10);
        QVERIFY(!samples);
        QCOMPARE(samples.error().code, ErrorCode::InvalidArgument);
        QVERIFY(samples.error().detail.find("choose one from 1 to 2") != std::string::npos);
    }
    for (const std::uint64_t start : {std::uint64_t{1000}, ~std::uint64_t{0}}) {
        const auto samples = readTake(fsPath(file), 1, start, 10);
        QVERIFY(!samples);
        QCOMPARE(samples.error().code, ErrorCode::InvalidArgument);
        QVERIFY(samples.error().detail.find("1000 frames") != std::string::npos);
    }
}

void TestTake::forbiddenFile_saysSo()
{
    const QString file = path(QStringLiteral("locked.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_PCM_16, 1, sines(1000, 1)));
    QCOMPARE(::chmod(QFile::encodeName(m_dir.path()).constData(), 0755), 0);
    QCOMPARE(::chmod(QFile::encodeName(file).constData(), 0), 0);
    const auto byFile = [&] {
        const PlainUser user;
        return takeInfo(fsPath(file));
    }();
    QVERIFY(!byFile);
    QCOMPARE(byFile.error().code, ErrorCode::NoPermission);
    QVERIFY(byFile.error().detail.find("permission") != std::string::npos);

    QCOMPARE(::chmod(QFile::encodeName(file).constData(), 0644), 0);
    const auto readable = [&] {
        const PlainUser user;
        return takeInfo(fsPath(file));
    }();
    QVERIFY(readable.has_value()); // so the refusal above came from the file's mode
    QCOMPARE(::chmod(QFile::encodeName(m_dir.path()).constData(), 0), 0);
    const auto byFolder = [&] {
        const PlainUser user;
        return takeInfo(fsPath(file));
    }();
    QCOMPARE(::chmod(QFile::encodeName(m_dir.path()).constData(), 0700), 0);
    QVERIFY(!byFolder);
    QCOMPARE(byFolder.error().code, ErrorCode::NoPermission);
}

void TestTake::openEndedHeader_isNotCalledDamaged()
{
    // A program that writes into a pipe cannot go back to fill in the sizes: common practice is all ones.
    const QString file = path(QStringLiteral("piped.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_PCM_16, 1, sines(1000, 1)));
    QByteArray bytes = bytesOf(file);
    QCOMPARE(bytes.sliced(36, 4), QByteArrayLiteral("data"));
    bytes.replace(4, 4, QByteArray(4, '\xff')).replace(40, 4, QByteArray(4, '\xff'));
    QVERIFY(writeBytes(file, bytes));
    const auto samples = readTake(fsPath(file), 1, 0, 5000);
    QVERIFY2(samples.has_value(), samples ? "" : samples.error().detail.c_str());
    QCOMPARE(samples->size(), 1000U);
}

void TestTake::soundCutInTheMiddle_isNoticedByOneByte_data()
{
    QTest::addColumn<int>("format");
    QTest::newRow("WAV") << (SF_FORMAT_WAV | SF_FORMAT_PCM_24);
    QTest::newRow("WAV, big-endian") << (SF_FORMAT_WAV | SF_FORMAT_PCM_24 | SF_ENDIAN_BIG);
    QTest::newRow("RF64") << (SF_FORMAT_RF64 | SF_FORMAT_PCM_24);
    QTest::newRow("AIFF") << (SF_FORMAT_AIFF | SF_FORMAT_PCM_24);
}

void TestTake::soundCutInTheMiddle_isNoticedByOneByte()
{
    QFETCH(const int, format);
    const QString file = path(QStringLiteral("byte"));
    QVERIFY(writeTake(file, format, 2, sines(1000, 2))); // 6000 bytes of sound, at the end
    const QByteArray whole = bytesOf(file);
    QVERIFY(takeInfo(fsPath(file)).has_value());
    QVERIFY(writeBytes(file, whole.first(whole.size() - 1)));
    const auto info = takeInfo(fsPath(file));
    QVERIFY(!info);
    QCOMPARE(info.error().code, ErrorCode::Damaged);
}

void TestTake::source_playsAtItsOwnPaceToTheEnd()
{
    const std::size_t frames = 19'210; // 400.2 ms, no whole number of blocks
    const QString file = path(QStringLiteral("play.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_FLOAT, 2, sines(frames, 2)));
    const auto source = audio::makeTakeSource(fsPath(file));
    QCOMPARE(source->status().condition, audio::SourceCondition::Idle);
    const auto format = source->open();
    QVERIFY(format.has_value());
    QCOMPARE(format->channels, 2);
    QCOMPARE(format->rate.hz, double(kRateHz));
    audio::SampleRing ring(2, kRateHz);
    QElapsedTimer timer;
    timer.start();
    QVERIFY(source->start(ring).has_value());
    QTRY_COMPARE(source->status().condition, audio::SourceCondition::Ended);
    QCOMPARE_GE(timer.elapsed(),
                400); // never faster than the signal; later is the machine's business
    QCOMPARE(source->status().message, std::string());

    std::vector<float> played;
    while (const auto block = ring.pop()) {
        QCOMPARE(block->lostBefore, 0U);
        QCOMPARE(block->firstFrame, played.size() / 2);
        played.insert(played.end(), block->interleaved.begin(), block->interleaved.end());
    }
    QCOMPARE(played.size(), 2 * frames);
    for (std::size_t i = 0; i < frames; ++i) {
        QCOMPARE(played[2 * i], static_cast<float>(sineAt(i, 1)));
        QCOMPARE(played[2 * i + 1], static_cast<float>(sineAt(i, 2)));
    }
    source->stop();
    QCOMPARE(source->status().condition, audio::SourceCondition::Idle);
}

void TestTake::source_stopsAtASampleThatIsNoNumber()
{
    std::vector<double> signal = sines(3000, 1);
    signal[2000] = std::numeric_limits<double>::quiet_NaN();
    const QString file = path(QStringLiteral("nan.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_FLOAT, 1, signal));
    const auto source = audio::makeTakeSource(fsPath(file));
    QVERIFY(source->open().has_value());
    audio::SampleRing ring(1, kRateHz);
    QVERIFY(source->start(ring).has_value());
    QTRY_COMPARE(source->status().condition, audio::SourceCondition::Ended);
    QVERIFY(source->status().message.find("frame 2000, channel 1") != std::string::npos);
    while (const auto block = ring.pop()) {
        for (const float sample : block->interleaved) {
            QVERIFY(std::isfinite(sample));
        }
    }
}

void TestTake::source_playsAgainAfterAStop()
{
    const QString file = path(QStringLiteral("twice.wav"));
    QVERIFY(writeTake(file, SF_FORMAT_WAV | SF_FORMAT_FLOAT, 1, sines(480'000, 1)));
    const auto source = audio::makeTakeSource(fsPath(file));
    QVERIFY(source->open().has_value());
    for (int round = 0; round < 2; ++round) {
        audio::SampleRing ring(1, kRateHz);
        QVERIFY(source->start(ring).has_value());
        QTRY_VERIFY(ring.framesSeen() > 0);
        QCOMPARE(source->status().condition, audio::SourceCondition::Running);
        source->stop(); // far from the end
        const std::uint64_t seen = ring.framesSeen();
        QCOMPARE_LT(seen, 480'000U);
        const auto first = ring.pop();
        QVERIFY(first.has_value());
        QCOMPARE(first->interleaved.at(1), static_cast<float>(sineAt(1, 1)));
        QCOMPARE(ring.framesSeen(), seen); // nothing pushes any more
    }
}

QTEST_GUILESS_MAIN(TestTake)
#include "tst_take.moc"
