// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/window_commands.h"

#include "app/bench_session.h"
#include "app/picture.h"
#include "app/picture_run.h"
#include "app/settings.h"
#include "app/window_wiring.h"

#include <QApplication>
#include <QFile>
#include <QLocale>
#include <QTemporaryDir>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

void nameApplication()
{
    QApplication::setApplicationName(u"sinewright"_s);
    QApplication::setApplicationDisplayName(u"Sinewright"_s);
    QApplication::setApplicationVersion(QStringLiteral(SINEWRIGHT_VERSION));
    QApplication::setDesktopFileName(u"org.sinewright.Sinewright"_s);
}

} // namespace

Outcome runWindow(const WindowOptions& options, int& argc, char** argv)
{
    const bool hasDisplay = qEnvironmentVariableIsSet("DISPLAY") ||
                            qEnvironmentVariableIsSet("WAYLAND_DISPLAY") ||
                            qEnvironmentVariableIsSet("QT_QPA_PLATFORM");
    if (!hasDisplay) {
        return complaint(
            ExitStatus::NotWritten,
            "the window needs a display and there is none; 'sinewright --picture FILE' and "
            "'sinewright measure SOURCE' need none");
    }
    const QApplication application(argc, argv);
    nameApplication();
    BenchSession session;
    Settings settings;
    ui::MainWindow window([&session] { return session.newestFrame(); });
    WindowWiring wiring(window, session, settings);
    wiring.start(options.source.value_or(settings.values().source));
    window.show();
    QApplication::exec();
    settings.setView(window.viewSettings());
    return {};
}

Outcome runPicture(const PictureOptions& options, int& argc, char** argv)
{
    // Said before the wait for what the picture shows, not after it.
    if (const auto place = checkPicturePlace(options.file); !place) {
        return complaint(ExitStatus::NotWritten, place.error().detail);
    }
    const QTemporaryDir folder;
    if (!folder.isValid()) {
        return complaint(ExitStatus::NotWritten, folder.errorString().toStdString());
    }
    // The same picture on every machine: off screen unless told otherwise, no user's locale, no user's scale.
    if (!qEnvironmentVariableIsSet("QT_QPA_PLATFORM")) {
        qputenv("QT_QPA_PLATFORM", "offscreen");
    }
    if (!qEnvironmentVariableIsSet("XDG_RUNTIME_DIR")) {
        // Qt grumbles on stderr without one.
        qputenv("XDG_RUNTIME_DIR", QFile::encodeName(folder.path()));
    }
    qputenv("LC_ALL", "C.UTF-8");
    qputenv("QT_SCALE_FACTOR", "1");
    const QApplication application(argc, argv);
    nameApplication();
    QLocale::setDefault(QLocale::c());
    return PictureRun(options, folder.filePath(u"settings.ini"_s)).run();
}

} // namespace sinewright::app
