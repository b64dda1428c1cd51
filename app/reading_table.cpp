// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/reading_report.h"
#include "ui/figure_text.h"

#include <QString>

#include <algorithm>
#include <cmath>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr int kLabelWidth = 11;
constexpr int kValueWidth = 14;

/// As the window sets it, in characters that every terminal and every script has.
QString plain(QString text)
{
    return text.replace(QChar(0x2212), u'-')
        .replace(QChar(0x00A0), u' ')
        .replace(ui::kAbsent, u'-');
}

QString plain(const ui::FigureText& figure)
{
    const QString unit = figure.unit == u"\u00B0" ? u"deg"_s : figure.unit;
    return plain(figure.value) + u' ' + unit;
}

/// "  label        value   second value".
QString row(const QString& label, const ui::FigureText& figure, const QString& second = {})
{
    QString line = u"  "_s + label.leftJustified(kLabelWidth) +
                   plain(figure.value).rightJustified(kValueWidth) + u' ' + figure.unit;
    if (!second.isEmpty()) {
        line = line.leftJustified(kLabelWidth + kValueWidth + 9) + second;
    }
    return line + u'\n';
}

/// A figure in percent with the same in decibels beside it.
QString ratioRow(const QString& label, std::optional<double> ratio)
{
    return row(label, ui::percentFigure(ratio), plain(ui::ratioDecibelFigure(ratio, 2, u"dB"_s)));
}

QString frequencyRow(const core::Reading& reading)
{
    const QString deviation =
        reading.frequencyStdHz ? u"+/- %1 Hz"_s.arg(*reading.frequencyStdHz, 0, 'g', 2) : QString();
    return row(u"frequency"_s,
               ui::frequencyFigure(reading.frequencyHz, reading.frequencyStdHz),
               deviation);
}

QString levelRow(const core::Reading& reading)
{
    const QString volts = reading.levelVrms ? plain(ui::voltFigure(reading.levelVrms)) + u" rms"_s
                                            : u"(volts need --full-scale)"_s;
    return row(u"level"_s, ui::decibelFigure(reading.levelDbfs, 3, u"dBFS"_s), volts);
}

QString dcRow(const core::Reading& reading)
{
    constexpr double kPercent = 100.0;
    if (!reading.dcFs) {
        return row(u"DC"_s, {ui::kAbsent, u"% FS"_s});
    }
    return row(u"DC"_s, {ui::numberText(*reading.dcFs * kPercent, 4), u"% FS"_s});
}

QString harmonicRow(const core::HarmonicReading& harmonic)
{
    const ui::FigureText percent = ui::percentFigure(harmonic.ratio);
    return u"  %1 %2 Hz %3 dBc %4 % %5 deg%6\n"_s.arg(harmonic.order, 8)
        .arg(harmonic.frequencyHz, 13, 'f', 2)
        .arg(plain(ui::ratioDecibelFigure(harmonic.ratio, 2, {}).value), 9)
        .arg(plain(percent.value), 12)
        .arg(harmonic.phaseDeg, 8, 'f', 1)
        .arg(harmonic.inBand ? QString() : u"  above the band"_s);
}

QString warningSentence(core::Warning warning)
{
    switch (warning) {
    case core::Warning::InputOverload:
        return u"The input is overloaded: turn the level down; the figures are not to be trusted."_s;
    case core::Warning::HarmonicsAboveBand:
        return u"Harmonics lie above the band: THD counts only those below its upper edge."_s;
    case core::Warning::UnsteadyLevel:
        return u"The level changed during the reading: let it settle and measure again."_s;
    case core::Warning::UnsteadyFrequency:
        return u"The frequency changed during the reading: let it warm up and measure again."_s;
    case core::Warning::MainsHum:
        return u"Mains hum stands out of the noise: look for a ground loop or a missing screen."_s;
    case core::Warning::DcOffset:
        return u"There is more than 1 % of full scale of DC: use a coupling capacitor."_s;
    case core::Warning::CardLimited:
        break;
    }
    return u"The interface itself adds as much as is being measured."_s;
}

QString statusSentence(core::ReadingStatus status)
{
    switch (status) {
    case core::ReadingStatus::Ok:
        return {};
    case core::ReadingStatus::NoTone:
        return u"No reading: there is no single steady tone. Check that the oscillator runs, the cable and the channel."_s;
    case core::ReadingStatus::TooShort:
        return u"No reading: the stretch is too short; at least four periods and 64 samples are needed."_s;
    case core::ReadingStatus::Overload:
        break;
    }
    return u"Overload: the signal is clipped at full scale or flat-topped. Turn the level down."_s;
}

QString heading(const MeasuredReading& measured)
{
    const core::Reading& reading = measured.reading;
    return u"%1, channel %2, %3, %4 s from %5 s\n"_s.arg(sourceLabel(measured.source))
        .arg(measured.source.channel)
        .arg(plain(ui::rateText(measured.rate.hz)))
        .arg(reading.lengthS, 0, 'f', 3)
        .arg(reading.startS, 0, 'f', 3);
}

QString settingsLine(const MeasuredReading& measured)
{
    const core::MeasureSettings& settings = measured.settings;
    const QString weighting = settings.weighting == core::Weighting::None ? u"no weighting"_s
                              : settings.weighting == core::Weighting::Itu468
                                  ? u"468 weighting with an rms detector"_s
                                  : u"A weighting"_s;
    return u"band %1 to %2 Hz, harmonics 2 to %3, %4\n"_s.arg(settings.band.lowHz, 0, 'f', 0)
        .arg(std::min(settings.band.highHz, measured.rate.nyquist().value), 0, 'f', 0)
        .arg(settings.harmonicCount)
        .arg(weighting);
}

QString figureRows(const core::Reading& reading)
{
    QString rows = frequencyRow(reading) + levelRow(reading) + dcRow(reading);
    rows += ratioRow(u"THD"_s, reading.thdRatio) + ratioRow(u"THD_R"_s, reading.thdRRatio);
    rows += ratioRow(u"THD+N"_s, reading.thdnRatio);
    rows += row(u"SINAD"_s, ui::decibelFigure(reading.sinadDb, 2, u"dB"_s));
    rows += row(u"SNR"_s, ui::decibelFigure(reading.snrDb, 2, u"dB"_s));
    rows += row(u"noise"_s, ui::decibelFigure(reading.noiseDbfs, 2, u"dBFS"_s));
    if (reading.mainsHumDbc) {
        rows += row(u"mains hum"_s, ui::decibelFigure(reading.mainsHumDbc, 2, u"dBc"_s));
    }
    return rows;
}

} // namespace

std::string readingAsTable(const MeasuredReading& measured)
{
    const core::Reading& reading = measured.reading;
    QString table = heading(measured) + settingsLine(measured) + u'\n';
    if (reading.frequencyHz) {
        table += figureRows(reading);
    } else {
        table += dcRow(reading);
    }
    if (!reading.harmonics.empty()) {
        table += u"\n  harmonic      frequency         level      percent        phase\n"_s;
        for (const core::HarmonicReading& harmonic : reading.harmonics) {
            table += harmonicRow(harmonic);
        }
    }
    const QString status = statusSentence(reading.status);
    if (!status.isEmpty() || !reading.warnings.empty()) {
        table += u'\n';
    }
    if (!status.isEmpty()) {
        table += status + u'\n';
    }
    for (const core::Warning warning : reading.warnings) {
        table += u"Note: "_s + warningSentence(warning) + u'\n';
    }
    return table.toStdString();
}

std::string readingAsLine(const core::Reading& reading)
{
    if (!reading.frequencyHz) {
        return plain(statusSentence(reading.status)).toStdString();
    }
    QString line = plain(ui::frequencyFigure(reading.frequencyHz, reading.frequencyStdHz)) +
                   u", "_s + plain(ui::decibelFigure(reading.levelDbfs, 2, u"dBFS"_s)) +
                   u", THD "_s + plain(ui::percentFigure(reading.thdRatio)) + u", THD+N "_s +
                   plain(ui::percentFigure(reading.thdnRatio));
    if (reading.status != core::ReadingStatus::Ok) {
        line += u" ("_s + ui::statusText(reading.status) + u')';
    }
    return line.toStdString();
}

} // namespace sinewright::app
