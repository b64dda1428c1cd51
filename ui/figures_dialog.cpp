// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figures_dialog.h"

#include "ui/figures_model.h"
#include "ui/prose.h"
#include "ui/theme.h"

#include <QHeaderView>
#include <QTableView>
#include <QVBoxLayout>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

FiguresDialog::FiguresDialog(FiguresModel& figures, QWidget* parent) : QDialog(parent)
{
    setAttribute(Qt::WA_DeleteOnClose);
    setWindowTitle(tr("Figures"));
    resize(620, 560);
    auto* column = new QVBoxLayout(this);
    column->setContentsMargins(18, 14, 18, 14);
    column->addWidget(titleLabel(tr("Figures"), this));
    auto* table = new QTableView(this);
    table->setObjectName(u"figureTable"_s);
    table->setAccessibleName(tr("All figures of the reading"));
    table->setModel(&figures);
    table->setSelectionBehavior(QAbstractItemView::SelectRows);
    table->setShowGrid(false);
    table->setFont(figureFont(15));
    table->verticalHeader()->hide();
    table->horizontalHeader()->setStretchLastSection(true);
    table->horizontalHeader()->setHighlightSections(false);
    table->resizeColumnsToContents();
    table->selectRow(0);
    column->addWidget(table, 1);
    table->setFocus();
}

} // namespace sinewright::ui
