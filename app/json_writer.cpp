// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/json_writer.h"

#include <QJsonArray>
#include <QJsonDocument>
#include <QString>

#include <array>
#include <charconv>
#include <cmath>

namespace sinewright::app {

namespace {

/// A JSON string with its quotes; Qt knows what must be escaped.
std::string quoted(std::string_view utf8)
{
    const QString text = QString::fromUtf8(utf8.data(), static_cast<qsizetype>(utf8.size()));
    const std::string array =
        QJsonDocument(QJsonArray{text}).toJson(QJsonDocument::Compact).toStdString();
    return array.substr(1, array.size() - 2);
}

} // namespace

void JsonWriter::separate()
{
    if (m_needsComma) {
        m_line += ',';
    }
    m_needsComma = false;
}

JsonWriter& JsonWriter::raw(std::string_view value)
{
    separate();
    m_line += value;
    m_needsComma = true;
    return *this;
}

JsonWriter& JsonWriter::beginObject()
{
    separate();
    m_line += '{';
    return *this;
}

JsonWriter& JsonWriter::endObject()
{
    m_line += '}';
    m_needsComma = true;
    return *this;
}

JsonWriter& JsonWriter::beginArray()
{
    separate();
    m_line += '[';
    return *this;
}

JsonWriter& JsonWriter::endArray()
{
    m_line += ']';
    m_needsComma = true;
    return *this;
}

JsonWriter& JsonWriter::key(std::string_view name)
{
    separate();
    m_line += quoted(name);
    m_line += ':';
    return *this;
}

JsonWriter& JsonWriter::text(std::string_view utf8)
{
    return raw(quoted(utf8));
}

JsonWriter& JsonWriter::number(std::optional<double> value)
{
    if (!value || !std::isfinite(*value)) {
        return raw("null");
    }
    std::array<char, 32> digits{}; // the longest shortest form of a double has 24 characters
    const auto end = std::to_chars(digits.data(), digits.data() + digits.size(), *value).ptr;
    return raw(std::string_view(digits.data(), static_cast<std::size_t>(end - digits.data())));
}

JsonWriter& JsonWriter::wholeNumber(int value)
{
    return raw(std::to_string(value));
}

JsonWriter& JsonWriter::boolean(bool value)
{
    return raw(value ? "true" : "false");
}

} // namespace sinewright::app
