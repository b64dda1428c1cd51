// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <QString>

namespace sinewright::tests {

/// One line of what tests/figures.sh prints: a figure measured now, its bar, and whether it is met.
inline QString figureLine(const QString& name, const QString& value, const QString& bar, bool isMet)
{
    using namespace Qt::StringLiterals;
    return u"%1 | %2 | %3 | %4"_s.arg(name, value, bar, isMet ? u"met"_s : u"missed"_s);
}

} // namespace sinewright::tests
