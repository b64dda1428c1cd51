// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/theme.h"

#include <QList>
#include <QSlider>

namespace sinewright::ui {

/// The demo's virtual trimmer: a ruler in ohms with a copper index. Mouse, wheel (with Ctrl coarse) and keys.
///
/// Its keys are actions(), so that the list of keys cannot differ from what they do.
class Trimmer final : public QSlider
{
    Q_OBJECT
public:
    static constexpr double kFineOhm = 0.2;
    static constexpr double kCoarseOhm = 5.0;

    explicit Trimmer(QWidget* parent = nullptr);

    void setTheme(const Theme& theme);
    /// Sets travel and stand without saying moved().
    void setTravel(double lowestOhm, double highestOhm);
    void setOhm(double ohm);
    [[nodiscard]] double ohm() const;
    [[nodiscard]] QList<QAction*> keyActions() const { return m_keyActions; }
    [[nodiscard]] QSize sizeHint() const override;
    [[nodiscard]] QSize minimumSizeHint() const override;

signals:
    void moved(double ohm);

protected:
    void paintEvent(QPaintEvent* event) override;
    void mousePressEvent(QMouseEvent* event) override;
    void mouseMoveEvent(QMouseEvent* event) override;
    void mouseReleaseEvent(QMouseEvent* event) override;
    void wheelEvent(QWheelEvent* event) override;

private:
    void addKey(const QString& text, const QKeySequence& key, int steps);
    void turnBy(int steps);
    void turnTo(int value);
    [[nodiscard]] double pixelOf(double ohm) const;
    void paintRuler(QPainter& painter) const;
    void paintIndex(QPainter& painter) const;

    const Theme* m_theme;
    QList<QAction*> m_keyActions;
};

} // namespace sinewright::ui
