// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/virtual_card.h"

#include <QDeadlineTimer>
#include <QFile>
#include <QProcessEnvironment>
#include <QStandardPaths>
#include <QThread>

#include <csignal>

#include <sndfile.h>
#include <sys/prctl.h>

#ifdef __SANITIZE_THREAD__
/// A fixture starts processes from a program that has threads; the sanitizer gives up there unless told otherwise.
extern "C" const char* __tsan_default_options() // NOLINT(bugprone-reserved-identifier)
{
    return "die_after_fork=0";
}
#endif

#ifdef __SANITIZE_ADDRESS__
/// ALSA's plug-ins leak some 13 kB whenever the devices are listed, in modules that are unloaded again, which no
/// suppression can name. Everything else that the sanitizer finds stays an error.
extern "C" const char* __asan_default_options() // NOLINT(bugprone-reserved-identifier)
{
    return "detect_leaks=0";
}
#endif

namespace sinewright::tests {

namespace {

constexpr int kAnswerPatienceMs = 20'000;
constexpr int kPollMs = 20;
constexpr int kEndPatienceMs = 5'000;

QString script()
{
    return QStringLiteral(SINEWRIGHT_CARD_SCRIPT);
}

void signalTo(const QProcess& process, int signal)
{
    if (const qint64 id = process.processId(); id > 0) {
        ::kill(static_cast<pid_t>(id), signal);
    }
}

/// A test program that crashes must not leave a server or a player behind.
void endWithThisProcess(QProcess& process)
{
    process.setChildProcessModifier([] { ::prctl(PR_SET_PDEATHSIG, SIGKILL); });
}

void end(QProcess& process)
{
    if (process.state() != QProcess::NotRunning) {
        process.kill();
        process.waitForFinished(kEndPatienceMs);
    }
}

} // namespace

VirtualCard::~VirtualCard()
{
    stopPlaying();
    thaw();
    end(m_server);
}

QString VirtualCard::missingProgram()
{
    for (const auto* const name : {"pulseaudio", "pactl", "paplay"}) {
        const QString program = QString::fromLatin1(name);
        if (QStandardPaths::findExecutable(program).isEmpty()) {
            return program;
        }
    }
    return {};
}

QProcessEnvironment VirtualCard::environment() const
{
    QProcess asked;
    asked.start(script(), {QStringLiteral("env"), m_folder.path()});
    asked.waitForFinished();
    auto environment = QProcessEnvironment::systemEnvironment();
    const QString lines = QString::fromLocal8Bit(asked.readAllStandardOutput());
    for (const QString& line : lines.split(QLatin1Char('\n'), Qt::SkipEmptyParts)) {
        environment.insert(line.section(QLatin1Char('='), 0, 0), line.section(QLatin1Char('='), 1));
    }
    return environment;
}

void VirtualCard::useInThisProcess() const
{
    const auto card = environment();
    for (const QString& name : card.keys()) {
        qputenv(name.toLocal8Bit().constData(), card.value(name).toLocal8Bit());
    }
}

bool VirtualCard::answers() const
{
    QProcess asked;
    asked.setProcessEnvironment(environment());
    asked.setStandardOutputFile(QProcess::nullDevice());
    asked.setStandardErrorFile(QProcess::nullDevice());
    asked.start(QStringLiteral("pactl"), {QStringLiteral("info")});
    return asked.waitForFinished() && asked.exitStatus() == QProcess::NormalExit &&
           asked.exitCode() == 0;
}

bool VirtualCard::start()
{
    endWithThisProcess(m_server);
    m_server.setProcessChannelMode(QProcess::MergedChannels);
    m_server.start(script(), {QStringLiteral("serve"), m_folder.path()});
    const QDeadlineTimer deadline(kAnswerPatienceMs);
    while (m_server.waitForStarted() && !deadline.hasExpired()) {
        if (answers()) {
            return true;
        }
        if (m_server.waitForFinished(kPollMs)) {
            break;
        }
    }
    m_whatFailed = QStringLiteral("the PulseAudio server does not answer: ") +
                   QString::fromLocal8Bit(m_server.readAll());
    return false;
}

void VirtualCard::kill()
{
    end(m_server);
}

void VirtualCard::freeze()
{
    signalTo(m_server, SIGSTOP);
}

void VirtualCard::thaw()
{
    signalTo(m_server, SIGCONT);
}

bool VirtualCard::play(const QString& file)
{
    stopPlaying();
    m_player.setProcessEnvironment(environment());
    endWithThisProcess(m_player);
    m_player.setProcessChannelMode(QProcess::MergedChannels);
    m_player.start(QStringLiteral("paplay"), {file});
    if (!m_player.waitForStarted()) {
        m_whatFailed = QStringLiteral("paplay does not start");
        return false;
    }
    return true;
}

void VirtualCard::stopPlaying()
{
    end(m_player);
}

bool writeFloatWav(const QString& file, int rateHz, const std::vector<std::vector<float>>& channels)
{
    SF_INFO layout{};
    layout.samplerate = rateHz;
    layout.channels = static_cast<int>(channels.size());
    layout.format = SF_FORMAT_WAV | SF_FORMAT_FLOAT;
    SNDFILE* const out = sf_open(QFile::encodeName(file).constData(), SFM_WRITE, &layout);
    if (out == nullptr) {
        return false;
    }
    std::vector<float> interleaved;
    for (std::size_t frame = 0; frame < channels.front().size(); ++frame) {
        for (const auto& channel : channels) {
            interleaved.push_back(channel[frame]);
        }
    }
    const auto count = static_cast<sf_count_t>(interleaved.size());
    const bool isWhole = sf_write_float(out, interleaved.data(), count) == count;
    return sf_close(out) == 0 && isWhole;
}

} // namespace sinewright::tests
