// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <optional>
#include <string>
#include <string_view>

namespace sinewright::app {

/// Writes one JSON text with its keys in the order they are written, which Qt's own documents do not keep.
///
/// Numbers carry every digit they have (shortest text that reads back to the same double) and a point whatever the
/// user's language; a number that is not finite, or is not there, becomes null.
///
/// @thread  one.
class JsonWriter final
{
public:
    JsonWriter& beginObject();
    JsonWriter& endObject();
    JsonWriter& beginArray();
    JsonWriter& endArray();

    /// Inside an object, before each value.
    JsonWriter& key(std::string_view name);

    JsonWriter& text(std::string_view utf8);
    JsonWriter& number(std::optional<double> value);
    JsonWriter& wholeNumber(int value);
    JsonWriter& boolean(bool value);

    /// What was written, as one line without a line end.
    [[nodiscard]] const std::string& line() const { return m_line; }

private:
    void separate();
    JsonWriter& raw(std::string_view value);

    std::string m_line;
    bool m_needsComma = false;
};

} // namespace sinewright::app
