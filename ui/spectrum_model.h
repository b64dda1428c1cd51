// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/range_choice.h"

#include <QObject>
#include <QPointF>

#include <memory>
#include <optional>
#include <vector>

namespace sinewright::ui {

enum class LevelUnit { Dbc, Dbfs };

/// One numbered stem: the fundamental (order 1) or a harmonic.
struct Stem
{
    int order = 1;
    double frequencyHz = 0.0;
    double levelDb = 0.0; ///< in the model's unit
    bool inBand = true;
};

/// The spectrum as it is drawn: extremes per pixel column over log frequency, and the stems.
class SpectrumModel final : public QObject
{
    Q_OBJECT
public:
    explicit SpectrumModel(QObject* parent = nullptr);

    /// How many pixel columns the frequency axis has.
    void setColumns(int columns);
    /// dBc falls back to dBFS as long as there is no fundamental.
    void setUnit(LevelUnit unit);
    void setFrame(std::shared_ptr<const core::Frame> frame);

    [[nodiscard]] LevelUnit unit() const { return m_unit; }
    [[nodiscard]] LevelUnit shownUnit() const { return m_shownUnit; }
    [[nodiscard]] bool isEmpty() const { return m_highest.empty(); }
    /// x [Hz], y in the shown unit; ascending; where a column holds several bins its greatest ...
    [[nodiscard]] const std::vector<QPointF>& highest() const { return m_highest; }
    /// ... and its least value. Same length and x as highest().
    [[nodiscard]] const std::vector<QPointF>& lowest() const { return m_lowest; }
    [[nodiscard]] const std::vector<Stem>& stems() const { return m_stems; }
    [[nodiscard]] AxisRange frequencyRange() const { return m_frequencyRange; } ///< [Hz]
    [[nodiscard]] AxisRange levelRange() const { return m_levelRange; }

signals:
    void changed();

private:
    void rebuild();
    void rebuildColumns(double offsetDb);
    void rebuildStems();
    void chooseLevelRange();

    int m_columns = 0;
    LevelUnit m_unit = LevelUnit::Dbc;
    LevelUnit m_shownUnit = LevelUnit::Dbfs;
    std::shared_ptr<const core::Frame> m_frame;
    std::vector<QPointF> m_highest;
    std::vector<QPointF> m_lowest;
    std::vector<Stem> m_stems;
    AxisRange m_frequencyRange{20.0, 20000.0};
    AxisRange m_levelRange{-140.0, 5.0};
};

} // namespace sinewright::ui
