// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/bench_state.h"

#include <QDateTime>
#include <QImage>
#include <QString>

#include <memory>

class QWidget;

namespace sinewright::ui {

/// What is set under a picture. Empty lines are left out.
struct PictureCaption
{
    QString title;    ///< what is shown: "Trim", "Spectrum"
    QString when;     ///< date and time with offset
    QString source;   ///< name, rate, channel
    QString settings; ///< band, harmonics, weighting, full scale
    QString figures;  ///< status and figures of the shown reading
};

/// The caption of a picture of `frame` (null: nothing measured yet).
[[nodiscard]] PictureCaption captionFor(const QString& title,
                                        const core::Frame* frame,
                                        const BenchState& bench,
                                        const core::MeasureSettings& settings,
                                        const QDateTime& when);

/// The widget as it stands, with the caption strip set under it.
///
/// @param scale  1 or 2: pixels of the picture over logical pixels of the widget.
/// @return       The widget at that scale and the strip, with a margin of paper around all but what fills its
///               window; device
///               pixel ratio 1.
[[nodiscard]] QImage composePicture(QWidget* subject, const PictureCaption& caption, int scale);

} // namespace sinewright::ui
