// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "app/words.h"
#include "core/result.h"

#include <QCommandLineParser>
#include <QString>
#include <QStringList>
#include <QStringView>

#include <initializer_list>
#include <optional>

namespace sinewright::app {

/// An option as a command knows it.
struct OptionName
{
    const char* name;       ///< without the dashes
    bool takesValue = true; ///< false: it is there or it is not
};

/// Reads the options of one command and keeps the first complaint, so that a command reads them one after another and
/// looks once, at the end.
///
/// @thread  one.
class OptionReader final
{
public:
    /// @param helpHint   what to type for help: "sinewright measure --help".
    /// @param arguments  after the command's name.
    OptionReader(const QString& helpHint,
                 std::initializer_list<OptionName> options,
                 const QStringList& arguments);

    [[nodiscard]] bool has(QStringView name) const;
    [[nodiscard]] QString text(QStringView name) const;
    [[nodiscard]] QStringList words() const { return m_parser.positionalArguments(); }

    /// A number from `lowest` to `highest`; empty when the option is not there or is not such a number.
    std::optional<double> number(QStringView name, double lowest, double highest);
    std::optional<int> wholeNumber(QStringView name, int lowest, int highest);

    /// What the option's word spells; empty when the option is not there or says something else.
    template <typename T, std::size_t N>
    std::optional<T> choice(QStringView name, const Words<T, N>& words)
    {
        if (!has(name)) {
            return std::nullopt;
        }
        const auto value = valueOf(words, text(name));
        if (!value) {
            complainAbout(name,
                          QStringLiteral("one of %1 is wanted")
                              .arg(allWords(words).join(QStringLiteral(", "))));
        }
        return value;
    }

    /// Notes that `--name VALUE` is wrong and why, unless something was wrong before.
    void complainAbout(QStringView name, const QString& why);
    /// The same for anything else.
    void complain(const QString& what);

    /// The first complaint as one line.
    [[nodiscard]] std::optional<core::Error> error() const;

private:
    QString m_helpHint; // constant after construction
    QCommandLineParser m_parser;
    QString m_complaint;
};

} // namespace sinewright::app
