// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/theme.h"

#include <QWidget>

#include <optional>

namespace sinewright::ui {

/// What the level meter shows: peak and rms in dBFS, the highest peak of the last moments, an overload that stays
/// to be seen.
class MeterModel final
{
public:
    /// @param peakFs, rmsFs  since the last call, 1.0 = full scale.   @param nowMs  any steady clock.
    void feed(double peakFs, double rmsFs, bool isOverloaded, qint64 nowMs);
    void clear();

    [[nodiscard]] std::optional<double> peakDbfs() const
    {
        return m_peakDbfs;
    } ///< held; empty: silence
    [[nodiscard]] std::optional<double> rmsDbfs() const { return m_rmsDbfs; } ///< AES17
    [[nodiscard]] bool isOver() const { return m_isOver; }

private:
    std::optional<double> m_peakDbfs;
    std::optional<double> m_rmsDbfs;
    qint64 m_peakAtMs = 0;
    qint64 m_overAtMs = 0;
    bool m_isOver = false;
};

/// A horizontal level meter: a bar for rms, a tick for the peak, a word for an overload.
class LevelMeter final : public QWidget
{
    Q_OBJECT
public:
    explicit LevelMeter(QWidget* parent = nullptr);

    void setTheme(const Theme& theme);
    void feed(double peakFs, double rmsFs, bool isOverloaded, qint64 nowMs);
    void clear();
    [[nodiscard]] const MeterModel& model() const { return m_model; }
    [[nodiscard]] QSize sizeHint() const override;
    [[nodiscard]] QSize minimumSizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    void paintScale(QPainter& painter, const QRectF& bar) const;
    void paintText(QPainter& painter, const QRectF& area) const;

    const Theme* m_theme;
    MeterModel m_model;
    qint64 m_shownAtMs = 0;
    QString m_peakText;
    QString m_rmsText;
};

} // namespace sinewright::ui
