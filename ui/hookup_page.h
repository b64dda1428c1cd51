// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_page.h"

class QComboBox;
class QDoubleSpinBox;
class QLabel;
class QSpinBox;
class QVBoxLayout;

namespace sinewright::ui {

/// Hook-up: the cautions, how to set the level, and what is measured, full-scale calibration included.
class HookUpPage final : public BenchPage
{
    Q_OBJECT
public:
    explicit HookUpPage(QWidget* parent = nullptr);

    void showFrame(const std::shared_ptr<const core::Frame>& frame) override;
    /// Shows what is in force; says nothing.
    void setMeasureSettings(const core::MeasureSettings& settings);

signals:
    void measureSettingsChosen(const sinewright::core::MeasureSettings& settings);

private:
    void addCautions(QVBoxLayout& column);
    void addLevel(QVBoxLayout& column);
    void addSettings(QVBoxLayout& column);
    void choose();

    QLabel* m_level;
    QDoubleSpinBox* m_fullScale;
    QDoubleSpinBox* m_bandLow;
    QDoubleSpinBox* m_bandHigh;
    QSpinBox* m_harmonics;
    QComboBox* m_weighting;
    core::MeasureSettings m_settings;
};

} // namespace sinewright::ui
