// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/figure_text.h"

#include <QAbstractTableModel>

#include <memory>
#include <vector>

namespace sinewright::ui {

/// One line of the figures: what it is, its value, and what is worth adding.
struct FigureRow
{
    QString name;
    FigureText figure;
    QString note;
    friend bool operator==(const FigureRow&, const FigureRow&) = default;
};

/// Every figure of the shown reading as text, harmonics included; empty without a frame.
[[nodiscard]] std::vector<FigureRow> figureRows(const core::Frame* frame);

/// The figures as a table: the way to read them without eyes for the page. Columns: figure, value, unit, note.
class FiguresModel final : public QAbstractTableModel
{
    Q_OBJECT
public:
    enum Column { Name, Value, Unit, Note, ColumnCount };

    explicit FiguresModel(QObject* parent = nullptr);

    void setFrame(const core::Frame* frame);

    [[nodiscard]] int rowCount(const QModelIndex& parent = {}) const override;
    [[nodiscard]] int columnCount(const QModelIndex& parent = {}) const override;
    [[nodiscard]] QVariant data(const QModelIndex& index,
                                int role = Qt::DisplayRole) const override;
    [[nodiscard]] QVariant
    headerData(int section, Qt::Orientation orientation, int role) const override;

private:
    std::vector<FigureRow> m_rows;
};

} // namespace sinewright::ui
