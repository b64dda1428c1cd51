// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/command_line.h"
#include "app/commands.h"
#include "app/outcome.h"
#include "app/window_commands.h"

#include <QLocale>
#include <QString>
#include <QStringList>

#include <cerrno>
#include <cstdio>
#include <cstring>
#include <string>
#include <variant>

namespace {

using namespace sinewright;
using namespace sinewright::app;

int finish(const Outcome& outcome)
{
    ExitStatus status = outcome.status;
    std::string complaint = outcome.complaint;
    const bool isWritten = std::fwrite(outcome.output.data(), 1, outcome.output.size(), stdout) ==
                               outcome.output.size() &&
                           std::fflush(stdout) == 0;
    if (!isWritten) {
        status = ExitStatus::NotWritten;
        complaint = std::string("cannot write to standard output: ") + std::strerror(errno) +
                    "; check where it is sent to";
    }
    if (!complaint.empty()) {
        std::fprintf(stderr, "sinewright: %s\n", complaint.c_str());
    }
    return static_cast<int>(status);
}

/// Runs what the command line asks for. The commands that print need no application object: they start faster without
/// one, and the C locale stays as it is.
struct Dispatcher
{
    int& argc;
    char** argv;

    Outcome operator()(const WindowOptions& options) const
    {
        return runWindow(options, argc, argv);
    }
    Outcome operator()(const PictureOptions& options) const
    {
        return runPicture(options, argc, argv);
    }
    Outcome operator()(const MeasureOptions& options) const { return runMeasure(options); }
    Outcome operator()(const CardsOptions& options) const { return runCards(options); }
    Outcome operator()(const HelpRequest& request) const { return runHelp(request); }
    Outcome operator()(const VersionRequest&) const { return runVersion(); }
};

} // namespace

int main(int argc, char** argv)
{
    QStringList arguments;
    for (int i = 1; i < argc; ++i) {
        arguments.append(QString::fromLocal8Bit(argv[i]));
    }
    const auto invocation = parseCommandLine(arguments);
    if (!invocation) {
        return finish(complaint(ExitStatus::WrongUsage, invocation.error().detail));
    }
    if (!std::holds_alternative<WindowOptions>(*invocation)) {
        QLocale::setDefault(QLocale::c());
    }
    return finish(std::visit(Dispatcher{argc, argv}, *invocation));
}
