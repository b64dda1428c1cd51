// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <QDateTime>
#include <QImage>
#include <QString>

namespace sinewright::app {

/// `sinewright-20261201-143015-trim.png`: sorts by time. With `again` > 0 a letter follows the seconds, which sorts
/// behind the same name without.
/// @param again  0 .. 26
[[nodiscard]] QString pictureName(const QDateTime& when, const QString& subjectName, int again);

/// Saves as PNG under a name of its own in `folder`; no file is ever written over.
///
/// @return  the path it was saved as.
/// @error WriteFailed: folder missing or not writable, disk full.
[[nodiscard]] core::Result<QString> savePicture(const QImage& image,
                                                const QString& folder,
                                                const QDateTime& when,
                                                const QString& subjectName);

/// Whether a picture could be written under this name now, as far as its folder tells.
/// @error WriteFailed
[[nodiscard]] core::Result<void> checkPicturePlace(const QString& file);

/// Saves as PNG under exactly this name, over what is there.
/// @error WriteFailed
[[nodiscard]] core::Result<void> writePicture(const QImage& image, const QString& file);

} // namespace sinewright::app
