// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/actions.h"

namespace sinewright::ui {

Actions::Actions(QObject* parent)
    : QObject(parent)
    , openTake(add(tr("Open a take"),
                   tr("Open take"),
                   Qt::CTRL | Qt::Key_O,
                   tr("Measures a sound file instead of a live input")))
    , chooseSource(add(tr("Choose the source"),
                       tr("Source"),
                       Qt::CTRL | Qt::Key_L,
                       tr("Goes to the source picker")))
    , freeze(add(tr("Freeze, and go on"),
                 tr("Freeze"),
                 Qt::Key_F,
                 tr("Holds what is shown; measuring goes on behind it")))
    , resetBest(add(tr("Forget the best so far"),
                    tr("Forget best"),
                    Qt::Key_R,
                    tr("Starts a new best so far from now on")))
    , spectrumUnit(add(tr("Spectrum in dBc or dBFS"),
                       tr("Spectrum unit"),
                       Qt::Key_D,
                       tr("Levels over the fundamental, or over full scale")))
    , figureTable(add(tr("All figures as a table"),
                      tr("Figures"),
                      Qt::Key_T,
                      tr("Opens every figure as a table")))
    , armsLength(add(tr("Arm's length view"),
                     tr("Arm's length"),
                     Qt::Key_F11,
                     tr("THD to be read from across the bench")))
    , leaveArmsLength(
          add(tr("Leave arm's length view"), tr("Back"), Qt::Key_Escape, tr("Back to the page")))
    , dusk(add(
          tr("Dusk or paper"), tr("Dusk"), Qt::CTRL | Qt::Key_T, tr("Dark page for a dark room")))
    , savePage(add(tr("Save a picture of the page"),
                   tr("Picture"),
                   Qt::Key_P,
                   tr("Saves the page with a caption as a PNG")))
    , savePlot(add(tr("Save a picture of the plot under the pointer"),
                   tr("Picture of plot"),
                   Qt::SHIFT | Qt::Key_P,
                   tr("Saves one plot with a caption as a PNG")))
    , pictureScale(add(tr("Pictures twice as fine, or as on the screen"),
                       tr("Fine pictures"),
                       Qt::CTRL | Qt::Key_P,
                       tr("Pixels of a picture over pixels of the window: 1 or 2")))
    , keys(add(tr("This list of keys"), tr("Keys"), Qt::Key_F1, tr("Lists all keys")))
    , quit(add(tr("Quit"), tr("Quit"), Qt::CTRL | Qt::Key_Q, tr("Closes the window")))
    , m_pageGroup(new QActionGroup(this))
{
    for (QAction* action : {freeze, armsLength, dusk, pictureScale}) {
        action->setCheckable(true);
    }
    leaveArmsLength->setEnabled(false);
    addPages();
}

QAction* Actions::add(const QString& text,
                      const QString& shortText,
                      const QKeySequence& key,
                      const QString& tip)
{
    auto* action = new QAction(text, this);
    action->setIconText(shortText);
    action->setShortcut(key);
    action->setToolTip(tip);
    action->setAutoRepeat(false);
    return action;
}

void Actions::addPages()
{
    const std::pair<QString, QString> texts[kPages] = {
        {tr("Hook-up"), tr("Join the oscillator safely, set the level, say what is measured")},
        {tr("Trim"), tr("Turn the trimmer and see whether it gets better")},
        {tr("Warm-up"), tr("How it settles, and how stable it stays")},
        {tr("Network"), tr("Does the RC network do what its parts promise")},
        {tr("Record"), tr("Pictures and the test record")},
    };
    for (std::size_t i = 0; i < pages.size(); ++i) {
        //: %1 is one of the five pages
        pages[i] =
            add(tr("Page %1").arg(texts[i].first),
                texts[i].first,
                QKeySequence(Qt::CTRL | static_cast<Qt::Key>(Qt::Key_1 + static_cast<int>(i))),
                texts[i].second);
        pages[i]->setCheckable(true);
        m_pageGroup->addAction(pages[i]);
    }
}

QList<ActionGroup> Actions::groups() const
{
    return {
        {tr("Pages"), QList<QAction*>(pages.begin(), pages.end())},
        {tr("Source"), {chooseSource, openTake}},
        {tr("Reading"), {freeze, resetBest, spectrumUnit, figureTable}},
        {tr("View"), {armsLength, leaveArmsLength, dusk, keys, quit}},
        {tr("Pictures"), {savePage, savePlot, pictureScale}},
    };
}

QList<QAction*> Actions::all() const
{
    QList<QAction*> result;
    for (const ActionGroup& group : groups()) {
        result += group.actions;
    }
    return result;
}

} // namespace sinewright::ui
