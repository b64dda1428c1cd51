// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/source_spec.h"
#include "core/measure/reading.h"
#include "ui/main_window.h"

#include <QObject>
#include <QString>
#include <QTimer>

namespace sinewright::app {

/// What is remembered between runs.
struct Remembered
{
    ui::ViewSettings view;
    SourceSpec source;
    core::MeasureSettings measure;
    QString pictureFolder; ///< empty: not chosen yet
};

/// The settings file. Written a moment after the last change, so that dragging a window does not write a hundred times.
///
/// An INI file gives every value back as text: each is turned into its type and kept within its range here, and what
/// makes no sense becomes the default. A file of a version that is not known is not read.
///
/// @thread  [gui].
class Settings final : public QObject
{
    Q_OBJECT
public:
    static constexpr int kVersion = 1;

    /// @param file  empty: `sinewright.ini` in the user's configuration folder.
    explicit Settings(const QString& file = {}, QObject* parent = nullptr);
    /// Writes what is not written yet.
    ~Settings() override;

    [[nodiscard]] const Remembered& values() const { return m_values; }

    void setView(const ui::ViewSettings& view);
    void setSource(const SourceSpec& source);
    void setMeasure(const core::MeasureSettings& measure);
    void setPictureFolder(const QString& folder);

    /// Writes now. @return false when the file cannot be written.
    bool write();

    [[nodiscard]] const QString& file() const { return m_file; }

private:
    void writeSoon();

    QString m_file; // constant after construction
    Remembered m_values;
    QTimer m_writing;
};

} // namespace sinewright::app
