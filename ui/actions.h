// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QAction>
#include <QActionGroup>
#include <QList>
#include <QObject>

#include <array>

namespace sinewright::ui {

/// A titled group of actions, as the list of keys shows it.
struct ActionGroup
{
    QString title;
    QList<QAction*> actions;
};

/// Every command of the window, with its key. The list of keys is made from these.
class Actions final : public QObject
{
    Q_OBJECT
public:
    static constexpr int kPages = 5;

    explicit Actions(QObject* parent = nullptr);

    std::array<QAction*, kPages> pages{}; ///< in the order of Page, exclusive
    QAction* openTake;
    QAction* chooseSource;
    QAction* freeze; ///< checkable
    QAction* resetBest;
    QAction* spectrumUnit;
    QAction* figureTable;
    QAction* armsLength; ///< checkable
    QAction* leaveArmsLength;
    QAction* dusk; ///< checkable
    QAction* savePage;
    QAction* savePlot;
    QAction* pictureScale; ///< checkable: twice as fine
    QAction* keys;
    QAction* quit;

    [[nodiscard]] QList<ActionGroup> groups() const;
    [[nodiscard]] QList<QAction*> all() const;

private:
    QAction*
    add(const QString& text, const QString& shortText, const QKeySequence& key, const QString& tip);
    void addPages();

    QActionGroup* m_pageGroup;
};

} // namespace sinewright::ui
