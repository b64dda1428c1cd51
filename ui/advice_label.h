// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/theme.h"

#include <QLabel>

namespace sinewright::ui {

/// The advice line as it is set: large serif, smaller only when the sentence would not fit.
class AdviceLabel final : public QLabel
{
    Q_OBJECT
public:
    explicit AdviceLabel(QWidget* parent = nullptr);

    void setTheme(const Theme& theme);
    /// @param largest, smallest  type sizes [logical pixels]; @param lines  how many lines it may take.
    void setTypeSizes(int largest, int smallest, int lines);
    void setSentence(const QString& sentence, bool isAlert);
    /// Type size that is used now [logical pixels].
    [[nodiscard]] int typeSize() const { return m_pixels; }
    [[nodiscard]] QSize minimumSizeHint() const override;

protected:
    void resizeEvent(QResizeEvent* event) override;
    void paintEvent(QPaintEvent* event) override;

private:
    void fit();

    const Theme* m_theme;
    int m_pixels = 0;
    int m_largest = 27;
    int m_smallest = 17;
    int m_lines = 1;
    bool m_isAlert = false;
};

} // namespace sinewright::ui
