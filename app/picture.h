// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/session_status.h"
#include "core/measure/frame.h"
#include "core/measure/reading.h"
#include "core/result.h"

#include <QDateTime>
#include <QImage>
#include <QString>
#include <QStringList>
#include <QWidget>

#include <memory>

namespace sinewright::app {

/// What is set under a picture so that it can be trusted later.
struct PictureFacts {
    QDateTime when;
    SessionStatus session;
    core::MeasureSettings settings;
    std::shared_ptr<const core::Frame> frame; ///< what the picture shows; may be null
};

/// The caption: when, source, rate and settings; then the figures. Two lines.
[[nodiscard]] QStringList pictureCaption(const PictureFacts& facts);

/// What `subject` shows, with the caption on a strip below, in its own colours.
///
/// @param scale  1 or 2: pixels for each logical one; plots are drawn anew at that scale, not blown up.
/// @thread  [gui].
[[nodiscard]] QImage pictureOf(QWidget& subject, const QStringList& caption, int scale);

/// Height of the strip [logical pixels].
[[nodiscard]] int captionHeight(qsizetype lines);

/// `sinewright-20261201-143015-trim.png`: sorts by time. With `again` > 0 a letter follows the seconds, which sorts
/// behind the same name without.
/// @param again  0 .. 26
[[nodiscard]] QString pictureName(const QDateTime& when, const QString& subjectName, int again);

/// Saves as PNG under a name of its own in `folder`; no file is ever written over.
///
/// @return  the path it was saved as.
/// @error WriteFailed: folder missing or not writable, disk full.
[[nodiscard]] core::Result<QString>
savePicture(const QImage& image, const QString& folder, const QDateTime& when, const QString& subjectName);

/// Saves as PNG under exactly this name, over what is there.
/// @error WriteFailed
[[nodiscard]] core::Result<void> writePicture(const QImage& image, const QString& file);

} // namespace sinewright::app
