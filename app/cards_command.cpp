// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands.h"
#include "app/json_writer.h"
#include "audio/card.h"

#include <QString>
#include <QStringList>

#include <algorithm>

namespace sinewright::app {

using namespace Qt::StringLiterals;

namespace {

constexpr double kKilo = 1000.0;

QString kiloHertz(double hz)
{
    return QString::number(hz / kKilo, 'g', 6);
}

QString ratesText(const std::vector<double>& ratesHz)
{
    QStringList rates;
    for (const double rateHz : ratesHz) {
        rates.append(kiloHertz(rateHz));
    }
    return rates.isEmpty() ? u"-"_s : rates.join(u' ');
}

std::string cardsAsJson(const std::vector<audio::CardInfo>& cards)
{
    JsonWriter json;
    json.beginObject().key("schema").text("sinewright.cards/1").key("cards").beginArray();
    for (const audio::CardInfo& card : cards) {
        json.beginObject();
        json.key("hostApi").text(card.hostApi);
        json.key("name").text(card.name);
        json.key("inputChannels").wholeNumber(card.inputChannels);
        json.key("defaultRateHz").number(card.defaultRateHz);
        json.key("ratesHz").beginArray();
        for (const double rateHz : card.ratesHz) {
            json.number(rateHz);
        }
        json.endArray();
        json.key("isDefault").boolean(card.isDefault);
        json.endObject();
    }
    return json.endArray().endObject().line() + '\n';
}

std::string cardsAsTable(const std::vector<audio::CardInfo>& cards)
{
    if (cards.empty()) {
        return "No audio interface with an input was found. Plug one in, or look whether another "
               "program holds it;\n"
               "meanwhile 'sinewright --source demo' shows the demo oscillator.\n";
    }
    using Row = QStringList;
    std::vector<Row> rows{
        {u"host API"_s, u"name"_s, u"inputs"_s, u"default kHz"_s, u"accepts kHz"_s}};
    for (const audio::CardInfo& card : cards) {
        rows.push_back({QString::fromStdString(card.hostApi),
                        QString::fromStdString(card.name) + (card.isDefault ? u" *"_s : QString()),
                        QString::number(card.inputChannels),
                        kiloHertz(card.defaultRateHz),
                        ratesText(card.ratesHz)});
    }
    QString table;
    for (const Row& row : rows) {
        for (qsizetype column = 0; column + 1 < row.size(); ++column) {
            const auto wider = [column](const Row& a, const Row& b) {
                return a[column].size() < b[column].size();
            };
            const auto width = (*std::max_element(rows.begin(), rows.end(), wider))[column].size();
            table += row[column].leftJustified(width) + u"  "_s;
        }
        table += row.last() + u'\n';
    }
    table += u"\n* the default. Use one with --source card:NAME, a part of the name will do; "
             u"card:HOST API::NAME\n"
             "tells apart inputs of the same name.\n"_s;
    return table.toStdString();
}

} // namespace

Outcome runCards(const CardsOptions& options)
{
    const auto cards = audio::listCards();
    if (!cards) {
        return complaint(ExitStatus::NoSource, cards.error().detail);
    }
    return Outcome{.output = options.asJson ? cardsAsJson(*cards) : cardsAsTable(*cards)};
}

} // namespace sinewright::app
