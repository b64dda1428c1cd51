// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/option_reader.h"

#include <cmath>

namespace sinewright::app {

using namespace Qt::StringLiterals;

OptionReader::OptionReader(const QString& helpHint,
                           std::initializer_list<OptionName> options,
                           const QStringList& arguments)
    : m_helpHint(helpHint)
{
    for (const OptionName& option : options) {
        const QString valueName = option.takesValue ? u"VALUE"_s : QString();
        m_parser.addOption(
            QCommandLineOption(QString::fromLatin1(option.name), QString(), valueName));
    }
    // The parser takes its first word for the program's name.
    const bool understood = m_parser.parse(QStringList{u"sinewright"_s} + arguments);
    if (!understood) {
        const QStringList unknown = m_parser.unknownOptionNames();
        if (unknown.isEmpty()) {
            // Qt ends it like a sentence of its own; here another part follows.
            QString text = m_parser.errorText().remove(u'\n');
            while (text.endsWith(u'.')) {
                text.chop(1);
            }
            complain(text.left(1).toLower() + text.mid(1));
        } else {
            const QString dashes = unknown.first().size() > 1 ? u"--"_s : u"-"_s;
            complain(u"unknown option %1%2"_s.arg(dashes, unknown.first()));
        }
    }
}

bool OptionReader::has(QStringView name) const
{
    return m_parser.isSet(name.toString());
}

QString OptionReader::text(QStringView name) const
{
    return m_parser.value(name.toString());
}

std::optional<double> OptionReader::number(QStringView name, double lowest, double highest)
{
    if (!has(name)) {
        return std::nullopt;
    }
    bool isNumber = false;
    const double value = text(name).toDouble(&isNumber);
    if (!isNumber || !std::isfinite(value) || value < lowest || value > highest) {
        complainAbout(
            name,
            u"a number from %1 to %2 is wanted"_s.arg(lowest, 0, 'g', 10).arg(highest, 0, 'g', 10));
        return std::nullopt;
    }
    return value;
}

std::optional<int> OptionReader::wholeNumber(QStringView name, int lowest, int highest)
{
    if (!has(name)) {
        return std::nullopt;
    }
    bool isNumber = false;
    const int value = text(name).toInt(&isNumber);
    if (!isNumber || value < lowest || value > highest) {
        complainAbout(name, u"a whole number from %1 to %2 is wanted"_s.arg(lowest).arg(highest));
        return std::nullopt;
    }
    return value;
}

void OptionReader::complainAbout(QStringView name, const QString& why)
{
    complain(u"--%1 %2: %3"_s.arg(name.toString(), text(name), why));
}

void OptionReader::complain(const QString& what)
{
    if (m_complaint.isEmpty()) {
        m_complaint = what;
    }
}

std::optional<core::Error> OptionReader::error() const
{
    if (m_complaint.isEmpty()) {
        return std::nullopt;
    }
    // A word with a line break in it must not break the line.
    const QString line = u"%1; try '%2'"_s.arg(m_complaint, m_helpHint).simplified();
    return core::Error{core::ErrorCode::InvalidArgument, line.toStdString()};
}

} // namespace sinewright::app
