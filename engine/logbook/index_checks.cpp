#include "index_checks.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>
#include <sodium.h>

#include <cstring>
#include <numeric>

#include "stored_entry.hpp"

namespace bathwright::logbook {
namespace {

/// Whether a partial index has this row. One with a condition we did not set is reported as altered
/// elsewhere.
bool holds(const std::string& condition, const Statement& row) {
  if (condition == " WHERE about IS NOT NULL") return row.optional_integer(column::about).has_value();
  if (condition == " WHERE at < latest_at") return row.view(column::at) < row.view(column::latest_at);
  return true;
}

}  // namespace

IndexChecks::IndexChecks(const Database& database) {
  crypto_shorthash_keygen(secret_.data());
  Statement indexes = database.prepare(
      "SELECT list.name, coalesce(substr(sql, nullif(instr(sql, ' WHERE '), 0)), '')"
      " FROM pragma_index_list('entry') AS list JOIN sqlite_schema AS schema ON schema.name = list.name");
  while (indexes.step()) {
    Index index{indexes.text(0), {}, {}, indexes.text(1)};
    Statement columns = database.prepare("SELECT name FROM pragma_index_info(?) ORDER BY seqno");
    columns.bind(1, index.name);
    while (columns.step()) {
      index.names.push_back(columns.text(0));
      index.columns.push_back(column_of(index.names.back()));
    }
    indexes_.push_back(std::move(index));
  }
}

std::uint64_t IndexChecks::hash(const Statement& row, const std::vector<int>& columns, int seq) const {
  std::string key;
  const auto add = [&](std::string_view bytes) {
    const auto length = static_cast<std::uint32_t>(bytes.size());
    key.append(reinterpret_cast<const char*>(&length), sizeof length);
    key += bytes;
  };
  for (const int column : columns) add(row.view(column));
  add(row.view(seq));
  std::uint64_t hash = 0;
  static_assert(sizeof hash == crypto_shorthash_BYTES);
  crypto_shorthash(reinterpret_cast<unsigned char*>(&hash),
                   reinterpret_cast<const unsigned char*>(key.data()), key.size(), secret_.data());
  return hash;
}

void IndexChecks::take(const Statement& row) {
  for (Index& index : indexes_) {
    if (!holds(index.condition, row)) continue;
    index.sum += hash(row, index.columns, column::seq);
  }
}

void IndexChecks::compare(const Database& database, std::vector<Finding>& findings) const {
  for (const Index& index : indexes_) {
    std::string names;
    for (const std::string& name : index.names) names += '"' + name + "\", ";
    Statement rows = database.prepare(
        fmt::format("SELECT {}seq FROM entry INDEXED BY \"{}\"{}", names, index.name, index.condition));
    std::vector<int> columns(index.names.size());
    std::iota(columns.begin(), columns.end(), 0);
    std::uint64_t sum = 0;
    while (rows.step()) sum += hash(rows, columns, static_cast<int>(columns.size()));
    if (rows.failed())
      findings.push_back({FindingKind::unreadable, 0, database.problem().text()});
    else if (sum != index.sum)
      findings.push_back({FindingKind::unreadable, 0,
                          fmt::format("the index {} is damaged: lists may leave entries out", index.name)});
  }
}

}  // namespace bathwright::logbook
