// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/bench_page.h"

#include <QElapsedTimer>

class QButtonGroup;
class QLabel;

namespace sinewright::ui {

/// Warm-up: what it will do, and the running frequency and level that can be read now.
class WarmUpPage final : public BenchPage
{
    Q_OBJECT
public:
    explicit WarmUpPage(QWidget* parent = nullptr);
    void showFrame(const std::shared_ptr<const core::Frame>& frame) override;
    void hurry() override { m_sinceShown.invalidate(); }

private:
    QLabel* m_frequency;
    QLabel* m_deviation;
    QLabel* m_level;
    QLabel* m_thd;
    QElapsedTimer m_sinceShown;
};

/// Network: what it will do.
class NetworkPage final : public BenchPage
{
    Q_OBJECT
public:
    explicit NetworkPage(QWidget* parent = nullptr);
};

/// Record: what it will do, and pictures, which can be saved now.
class RecordPage final : public BenchPage
{
    Q_OBJECT
public:
    explicit RecordPage(QWidget* parent = nullptr);

    void setPictureScale(int scale);

signals:
    void pictureOfTrimWanted();
    void pictureScaleChosen(int scale);

private:
    QButtonGroup* m_scale;
};

} // namespace sinewright::ui
