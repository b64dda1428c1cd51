// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QProcess>
#include <QString>
#include <QTemporaryDir>

#include <vector>

namespace sinewright::tests {

/// A sound card for machines without one: a private PulseAudio server with a null sink, 96 kHz, float, stereo. What is
/// played into it comes back from its input sample for sample. PortAudio lists it as "pulse" and "default".
///
/// Make it and call useInThisProcess() before anything touches PortAudio; child processes inherit the environment.
/// Every call that can fail returns false and says why in whatFailed().
class VirtualCard final
{
public:
    static constexpr double kRateHz = 96000.0;

    VirtualCard() = default;
    ~VirtualCard(); ///< ends player and server, by their own process ids
    VirtualCard(const VirtualCard&) = delete;
    VirtualCard& operator=(const VirtualCard&) = delete;
    VirtualCard(VirtualCard&&) = delete;
    VirtualCard& operator=(VirtualCard&&) = delete;

    /// What a program must have installed; empty when all is there. For QSKIP.
    [[nodiscard]] static QString missingProgram();

    /// Points this process and its children to the card.
    void useInThisProcess() const;

    /// Starts the server and returns when it answers.
    [[nodiscard]] bool start();

    /// The cable is pulled: SIGKILL, waited for. start() brings the card back.
    void kill();

    /// The server hangs, and goes on.
    void freeze();
    void thaw();

    /// Plays a sound file into the card from now on; ends the one before.
    [[nodiscard]] bool play(const QString& file);
    [[nodiscard]] bool isPlaying() const { return m_player.state() != QProcess::NotRunning; }
    void stopPlaying();

    [[nodiscard]] QString whatFailed() const { return m_whatFailed; }
    [[nodiscard]] QString folder() const { return m_folder.path(); }

private:
    [[nodiscard]] bool answers() const;
    [[nodiscard]] QProcessEnvironment environment() const;

    QTemporaryDir m_folder;
    QProcess m_server;
    QProcess m_player;
    QString m_whatFailed;
};

/// Writes channels of equal length as a 32-bit float WAV.
[[nodiscard]] bool
writeFloatWav(const QString& file, int rateHz, const std::vector<std::vector<float>>& channels);

} // namespace sinewright::tests
