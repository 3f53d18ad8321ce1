#include "stored_entry.hpp"

#include <fmt/format.h>

#include <nlohmann/json.hpp>

namespace bathwright::plant {
namespace {

using Json = nlohmann::json;

// What an entry itself holds; of these and in this order a row is read.
constexpr std::string_view columns =
    R"(form, seq, kind, tank, shift, at, happened, boot, uptime_ms, station, "by", role, witness, body, about, )"
    "program, bath_type, previous, signature, witness_signature, hash";

// The types in which those columns travel.
constexpr std::string_view record =
    R"(form int, seq bigint, kind text, tank text, shift text, at text, happened text, boot text, )"
    R"(uptime_ms bigint, station text, "by" text, role text, witness text, body text, about bigint, )"
    "program text, bath_type text, previous text, signature text, witness_signature text, hash text";

Json json_of(const logbook::Entry& entry) {
  return {{"form", entry.form},
          {"seq", entry.seq},
          {"kind", logbook::name(entry.kind)},
          {"tank", entry.tank},
          {"shift", entry.shift},
          {"at", entry.at},
          {"happened", entry.happened},
          {"boot", entry.uptime.boot},
          {"uptime_ms", entry.uptime.since.count()},
          {"station", entry.station},
          {"by", entry.by},
          {"role", entry.role},
          {"witness", entry.witness},
          {"body", entry.body},
          {"about", entry.about ? Json(*entry.about) : Json()},
          {"program", entry.program},
          {"bath_type", entry.bath_type},
          {"previous", entry.previous},
          {"signature", entry.signature},
          {"witness_signature", entry.witness_signature},
          {"hash", entry.hash}};
}

}  // namespace

std::string select_arrived(std::string_view rest) {
  return fmt::format("SELECT {}, chain, site, arrival, received, login FROM bathwright.entry AS entry {}",
                     columns, rest);
}

Result<Arrived> read_arrived(const Rows& rows, int row) {
  int column = 0;
  const auto text = [&] { return rows.text(row, column++); };
  const auto integer = [&] { return rows.integer(row, column++); };
  Arrived arrived;
  logbook::Entry& entry = arrived.entry;
  entry.form = integer();
  entry.seq = integer();
  const auto kind = logbook::entry_kind(text());
  if (!kind)
    return Problem{Fault::inconsistent_data, fmt::format("entry {}", entry.seq),
                   fmt::format("its kind \"{}\" is unknown", rows.text(row, column - 1)), "",
                   "use the newer program that wrote it, or verify the plant's table"};
  entry.kind = *kind;
  entry.tank = text();
  entry.shift = text();
  entry.at = text();
  entry.happened = text();
  entry.uptime.boot = text();
  entry.uptime.since = std::chrono::milliseconds(integer());
  entry.station = text();
  entry.by = text();
  entry.role = text();
  entry.witness = text();
  entry.body = text();
  if (!rows.is_null(row, column)) entry.about = rows.integer(row, column);
  ++column;
  entry.program = text();
  entry.bath_type = text();
  entry.previous = text();
  entry.signature = text();
  entry.witness_signature = text();
  entry.hash = text();
  arrived.chain = text();
  arrived.site = text();
  arrived.arrival = integer();
  arrived.received = text();
  arrived.login = text();
  return arrived;
}

Result<std::vector<Arrived>> read_all_arrived(const Result<Rows>& rows) {
  if (!rows) return rows.problems();
  std::vector<Arrived> all;
  for (int row = 0; row < rows->size(); ++row) {
    auto arrived = read_arrived(*rows, row);
    if (!arrived) return arrived.problems();
    all.push_back(*std::move(arrived));
  }
  return all;
}

Result<std::int64_t> insert_entries(Link& link, const std::string& chain, const std::string& site,
                                    std::span<const logbook::Entry> entries) {
  static const std::string insert = fmt::format(
      "INSERT INTO bathwright.entry (chain, site, {0}) SELECT $1, $2, {0} FROM json_to_recordset($3::json) "
      "AS given ({1}) ORDER BY seq",
      columns, record);
  Json given = Json::array();
  for (const logbook::Entry& entry : entries) given.push_back(json_of(entry));
  std::string text;
  try {
    text = given.dump();
  } catch (const Json::exception&) {
    return Problem{Fault::inconsistent_data,
                   fmt::format("entries {} to {}", entries.front().seq, entries.back().seq),
                   "one of them holds bytes that are no text", "UTF-8, as it was logged", "verify the log"};
  }
  const auto rows =
      link.ask(insert, {chain, site.empty() ? std::nullopt : std::optional(site), std::move(text)});
  if (!rows) return rows.problems();
  return rows->changed();
}

}  // namespace bathwright::plant
