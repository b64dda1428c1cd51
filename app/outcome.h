// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace sinewright::app {

/// What the process ends with.
enum class ExitStatus {
    Good = 0, ///< the reading is good
    Unusable =
        1, ///< there is a reading, but it is unusable; or the signal could not be had in one piece
    WrongUsage = 2, ///< the words were wrong, or do not go with this source
    NoSource = 3,   ///< the source cannot be opened or read, or does not hold what was asked for
    NotWritten = 4, ///< a result could not be written
};

/// What a command has to say. The caller writes it out, so that a command can be run in a test.
struct Outcome
{
    ExitStatus status = ExitStatus::Good;
    std::string output{};    ///< for stdout, with its line ends
    std::string complaint{}; ///< one line for stderr without its line end; empty when all went well
};

/// An outcome that is nothing but a complaint.
[[nodiscard]] inline Outcome complaint(ExitStatus status, std::string line)
{
    return Outcome{.status = status, .output = {}, .complaint = std::move(line)};
}

} // namespace sinewright::app
