// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/theme.h"

#include <qcustomplot.h>

#include <functional>
#include <vector>

namespace sinewright::ui {

/// Something painted by hand on a layer of a plot, in pixels: stems, rules, numbers.
class Overprint final : public QCPLayerable
{
public:
    using Paint = std::function<void(QCPPainter&)>;
    Overprint(QCustomPlot* plot, const QString& layer, Paint paint);

protected:
    void applyDefaultAntialiasingHint(QCPPainter* painter) const override;
    void draw(QCPPainter* painter) override;

private:
    Paint m_paint;
};

/// What all plots of the window share: a title set flush left over the figure, keys of the lines flush right, hair
/// axes, fixed margins so that neighbours align, a note in place of data that are not there.
class Plot : public QCustomPlot
{
    Q_OBJECT
public:
    /// A line's name at the right end of the title row, behind a sample of the line.
    struct Key
    {
        QString text;
        QPen pen;
    };

    /// @param plainName  one word for file names.   @param unit  of the y axis; may be empty.
    Plot(QString plainName, QString title, QString unit, QWidget* parent);

    [[nodiscard]] QString plainName() const { return m_plainName; }
    void setTheme(const Theme& theme);

    /// Width of the axes' inside in logical pixels: how many columns a model should make.
    [[nodiscard]] int columns() const;

    /// Draws with the next turn of the event loop; nothing while the plot cannot be seen.
    void draw();
    /// Replots that were asked for through draw() and were not skipped.
    [[nodiscard]] int drawCount() const { return m_drawCount; }

    /// Larger type for the view that is read from across the bench.
    void setTypeSize(int pixels);

protected:
    /// The unit stands behind the title as it is written; titles are set in capitals.
    void setUnitText(const QString& unit) { m_unit = unit; }
    void setKeys(std::vector<Key> keys) { m_keys = std::move(keys); }
    void setNote(const QString& note) { m_note = note; }
    void setSideMargins(int left, int right);
    [[nodiscard]] const Theme& colours() const { return *m_theme; }
    [[nodiscard]] int typeSize() const { return m_typeSize; }
    /// Pens of graphs and keys, from colours().
    virtual void restyle() = 0;
    static void styleAxis(QCPAxis& axis, const Theme& theme, int typeSize);
    /// At most one a second: screen readers should not be talked over.
    void describe(const QString& description);

    static void fill(QCPGraph& graph, const std::vector<QPointF>& points);

private:
    void paintTitle(QCPPainter& painter) const;
    void paintNote(QCPPainter& painter) const;
    void applyMargins();

    QString m_plainName;
    QString m_title;
    QString m_unit;
    QString m_note;
    std::vector<Key> m_keys;
    const Theme* m_theme;
    int m_typeSize;
    int m_leftMargin = 0;
    int m_rightMargin = 0;
    int m_drawCount = 0;
    QElapsedTimer m_sinceDescribed;
};

} // namespace sinewright::ui
