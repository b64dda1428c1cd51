// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/figures_model.h"

#include "ui/advice.h"
#include "ui/reading_choice.h"

#include <QCoreApplication>

namespace sinewright::ui {

using namespace Qt::StringLiterals;

namespace {

void addPurity(std::vector<FigureRow>& rows, const core::Reading& reading, int digits)
{
    rows.push_back({FiguresModel::tr("THD"),
                    percentFigure(reading.thdRatio, digits),
                    joined(ratioDecibelFigure(reading.thdRatio, 1, u"dB"_s))});
    rows.push_back(
        {FiguresModel::tr("THD over the total"), percentFigure(reading.thdRRatio, digits), {}});
    rows.push_back({FiguresModel::tr("THD+N"),
                    percentFigure(reading.thdnRatio, digits),
                    joined(ratioDecibelFigure(reading.thdnRatio, 1, u"dB"_s))});
    rows.push_back({FiguresModel::tr("SINAD"), decibelFigure(reading.sinadDb, 1, u"dB"_s), {}});
    rows.push_back({FiguresModel::tr("SNR"), decibelFigure(reading.snrDb, 1, u"dB"_s), {}});
    rows.push_back({FiguresModel::tr("noise"), decibelFigure(reading.noiseDbfs, 1, u"dBFS"_s), {}});
    rows.push_back(
        {FiguresModel::tr("mains hum"), decibelFigure(reading.mainsHumDbc, 1, u"dBc"_s), {}});
}

void addTone(std::vector<FigureRow>& rows, const core::Reading& reading)
{
    QString sigma;
    if (reading.frequencyStdHz) {
        sigma =
            FiguresModel::tr("standard deviation %1 Hz").arg(*reading.frequencyStdHz, 0, 'g', 2);
    }
    rows.push_back({FiguresModel::tr("frequency"),
                    frequencyFigure(reading.frequencyHz, reading.frequencyStdHz),
                    sigma});
    rows.push_back({FiguresModel::tr("level"), decibelFigure(reading.levelDbfs, 2, u"dBFS"_s), {}});
    rows.push_back(
        {FiguresModel::tr("level in volts rms"),
         voltFigure(reading.levelVrms),
         reading.levelVrms ? QString() : FiguresModel::tr("needs the full scale, see Hook-up")});
    rows.push_back({FiguresModel::tr("DC, of full scale"), percentFigure(reading.dcFs, 2), {}});
}

void addHarmonics(std::vector<FigureRow>& rows, const core::Reading& reading, int digits)
{
    for (const core::HarmonicReading& harmonic : reading.harmonics) {
        QString note = FiguresModel::tr("%1, phase %2")
                           .arg(joined(percentFigure(harmonic.ratio, digits)),
                                joined(degreeFigure(harmonic.phaseDeg)));
        if (!harmonic.inBand) {
            note = FiguresModel::tr("%1, above the band").arg(note);
        }
        rows.push_back({FiguresModel::tr("harmonic %1").arg(harmonic.order),
                        ratioDecibelFigure(harmonic.ratio, 1, u"dBc"_s),
                        note});
    }
}

Qt::Alignment alignmentOf(int column)
{
    return (column == FiguresModel::Value ? Qt::AlignRight : Qt::AlignLeft) | Qt::AlignVCenter;
}

} // namespace

std::vector<FigureRow> figureRows(const core::Frame* frame)
{
    std::vector<FigureRow> rows;
    if (frame == nullptr) {
        return rows;
    }
    const ShownReading shown = shownReading(*frame);
    const int digits = shown.isFull ? kFullDigits : kQuickDigits;
    addPurity(rows, *shown.reading, digits);
    addTone(rows, *shown.reading);
    if (frame->trend && frame->trend->best) {
        rows.push_back({FiguresModel::tr("best THD so far"),
                        percentFigure(frame->trend->best->thdRatio),
                        ageText(frame->timeS - frame->trend->best->timeS)});
    }
    addHarmonics(rows, *shown.reading, digits);
    return rows;
}

FiguresModel::FiguresModel(QObject* parent) : QAbstractTableModel(parent) {}

void FiguresModel::setFrame(const core::Frame* frame)
{
    std::vector<FigureRow> rows = figureRows(frame);
    if (rows.size() != m_rows.size()) {
        beginResetModel();
        m_rows = std::move(rows);
        endResetModel();
        return;
    }
    for (std::size_t i = 0; i < rows.size(); ++i) {
        if (!(rows[i] == m_rows[i])) {
            m_rows[i] = rows[i];
            emit dataChanged(index(static_cast<int>(i), 0),
                             index(static_cast<int>(i), ColumnCount - 1));
        }
    }
}

int FiguresModel::rowCount(const QModelIndex& parent) const
{
    return parent.isValid() ? 0 : static_cast<int>(m_rows.size());
}

int FiguresModel::columnCount(const QModelIndex& parent) const
{
    return parent.isValid() ? 0 : ColumnCount;
}

QVariant FiguresModel::data(const QModelIndex& index, int role) const
{
    if (!checkIndex(index, CheckIndexOption::IndexIsValid)) {
        return {};
    }
    if (role == Qt::TextAlignmentRole) {
        return QVariant(alignmentOf(index.column()));
    }
    if (role != Qt::DisplayRole) {
        return {};
    }
    const FigureRow& row = m_rows[static_cast<std::size_t>(index.row())];
    switch (index.column()) {
    case Name:
        return row.name;
    case Value:
        return row.figure.value;
    case Unit:
        return row.figure.unit;
    case Note:
        return row.note;
    default:
        return {};
    }
}

QVariant FiguresModel::headerData(int section, Qt::Orientation orientation, int role) const
{
    if (orientation == Qt::Horizontal && role == Qt::TextAlignmentRole) {
        return QVariant(alignmentOf(section));
    }
    if (orientation != Qt::Horizontal || role != Qt::DisplayRole) {
        return {};
    }
    switch (section) {
    case Name:
        return tr("Figure");
    case Value:
        return tr("Value");
    case Unit:
        return tr("Unit");
    case Note:
        return tr("Note");
    default:
        return {};
    }
}

} // namespace sinewright::ui
