// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QProcess>
#include <QString>
#include <QStringList>

#include <linux/capability.h>
#include <sys/prctl.h>
#include <unistd.h>

namespace sinewright::tests {

/// What a run of the program left behind.
struct Ran
{
    int exitCode = -1; ///< -1: it crashed, or did not end in time
    QByteArray output;
    QByteArray complaint;

    /// One line on stderr that names the program, and nothing on stdout.
    [[nodiscard]] bool isOneComplaint() const
    {
        return output.isEmpty() && complaint.startsWith("sinewright: ") &&
               complaint.endsWith('\n') && complaint.count('\n') == 1;
    }
};

/// How to run it.
struct HowToRun
{
    QString outputFile{};     ///< not empty: stdout goes there
    bool asPlainUser = false; ///< when this process is root: file permissions bind it too
    int timeoutMs = 30000;
};

/// Runs the built program and waits for its end.
inline Ran runProgram(const QStringList& arguments, const HowToRun& how = {})
{
    QProcess process;
    if (!how.outputFile.isEmpty()) {
        process.setStandardOutputFile(how.outputFile);
    }
    if (how.asPlainUser && ::geteuid() == 0) {
        process.setChildProcessModifier([] {
            // Root passes every permission check; without these two rights a refusal is seen. Another user could not
            // even reach a program that was built below root's home.
            if (::prctl(PR_CAPBSET_DROP, CAP_DAC_OVERRIDE) != 0 ||
                ::prctl(PR_CAPBSET_DROP, CAP_DAC_READ_SEARCH) != 0) {
                ::_exit(99);
            }
        });
    }
    process.start(QStringLiteral(SINEWRIGHT_PROGRAM), arguments);
    Ran ran;
    if (!process.waitForFinished(how.timeoutMs)) {
        process.kill();
        process.waitForFinished();
        return ran;
    }
    if (process.exitStatus() == QProcess::NormalExit) {
        ran.exitCode = process.exitCode();
    }
    ran.output = process.readAllStandardOutput();
    ran.complaint = process.readAllStandardError();
    return ran;
}

} // namespace sinewright::tests
