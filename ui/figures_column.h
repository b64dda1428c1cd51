// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "ui/figure_text.h"
#include "ui/theme.h"

#include <QElapsedTimer>
#include <QWidget>

#include <memory>
#include <vector>

namespace sinewright::ui {

/// The narrow column of running figures: what the eye goes to between two turns of the trimmer.
class FiguresColumn final : public QWidget
{
    Q_OBJECT
public:
    /// A large figure with its label and what stands small beside and under it.
    struct Block
    {
        QString label;
        QString remark; ///< at the right of the label
        FigureText figure;
        QString under;
        bool isBest = false;
    };
    /// A small figure on a line of its own.
    struct Line
    {
        QString label;
        FigureText figure;
    };

    explicit FiguresColumn(QWidget* parent = nullptr);

    void setTheme(const Theme& theme);
    /// Digits change a few times a second at the most, however many frames come.
    void setFrame(const std::shared_ptr<const core::Frame>& frame);
    void hurry() { m_sinceShown.invalidate(); } ///< as BenchPage::hurry()
    /// The source is gone: the figures are the last ones, and say so.
    void setStale(bool isStale);
    [[nodiscard]] const std::vector<Block>& blocks() const { return m_blocks; }
    [[nodiscard]] const std::vector<Line>& lines() const { return m_lines; }
    [[nodiscard]] QSize sizeHint() const override;

protected:
    void paintEvent(QPaintEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;

private:
    void rebuild();
    [[nodiscard]] double
    paintBlock(QPainter& painter, const Block& block, double y, int figurePixels) const;
    void paintLine(QPainter& painter, const Line& line, double baseline) const;
    void paintRule(QPainter& painter, double y) const;

    [[nodiscard]] int px(double pixels) const; ///< grows with the window's height

    const Theme* m_theme;
    std::shared_ptr<const core::Frame> m_frame;
    std::vector<Block> m_blocks;
    std::vector<Line> m_lines;
    QString m_remarks;
    bool m_isStale = false;
    QElapsedTimer m_sinceShown;
};

} // namespace sinewright::ui
