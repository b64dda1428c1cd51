// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/command_line.h"
#include "app/outcome.h"

namespace sinewright::app {

/// Opens the window and runs until it is closed. Makes the QApplication; needs a display.
[[nodiscard]] Outcome runWindow(const WindowOptions& options, int& argc, char** argv);

/// Runs the same window off screen, saves a picture of it and says what it reads. Makes the QApplication; the user's
/// settings are neither read nor written, so that the same words give the same picture everywhere.
[[nodiscard]] Outcome runPicture(const PictureOptions& options, int& argc, char** argv);

} // namespace sinewright::app
