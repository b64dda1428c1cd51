// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/keys_dialog.h"

#include "ui/prose.h"
#include "ui/theme.h"

#include <QGridLayout>
#include <QLabel>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

QWidget* groupBlock(const ActionGroup& group, QWidget* parent)
{
    auto* block = new QWidget(parent);
    auto* grid = new QGridLayout(block);
    grid->setContentsMargins(0, 0, 0, 0);
    grid->setHorizontalSpacing(24);
    grid->setVerticalSpacing(5);
    grid->setColumnStretch(0, 1);
    grid->addWidget(fieldLabel(group.title, block), 0, 0, 1, 2);
    grid->addWidget(hairRule(block), 1, 0, 1, 2);
    int row = 2;
    for (const QAction* action : group.actions) {
        auto* text = new QLabel(action->text(), block);
        auto* key = new QLabel(action->shortcut().toString(QKeySequence::NativeText), block);
        key->setObjectName(u"key"_s);
        key->setFont(figureFont(14));
        key->setAlignment(Qt::AlignRight);
        grid->addWidget(text, row, 0);
        grid->addWidget(key, row++, 1);
    }
    return block;
}

} // namespace

KeysDialog::KeysDialog(const QList<ActionGroup>& groups, QWidget* parent) : QDialog(parent)
{
    setWindowTitle(tr("Keys"));
    setAttribute(Qt::WA_DeleteOnClose);
    auto* outer = new QVBoxLayout(this);
    outer->setContentsMargins(32, 24, 32, 28);
    outer->setSpacing(16);
    outer->addWidget(titleLabel(tr("Keys"), this));
    auto* columns = new QHBoxLayout;
    columns->setSpacing(44);
    QVBoxLayout* sides[] = {new QVBoxLayout, new QVBoxLayout};
    int lines[] = {0, 0};
    for (const ActionGroup& group : groups) {
        const int side = lines[0] <= lines[1] ? 0 : 1;
        sides[side]->addWidget(groupBlock(group, this));
        sides[side]->setSpacing(18);
        lines[side] += static_cast<int>(group.actions.size()) + 2;
    }
    for (QVBoxLayout* side : sides) {
        side->addStretch(1);
        columns->addLayout(side, 1);
    }
    outer->addLayout(columns);
}

} // namespace sinewright::ui
