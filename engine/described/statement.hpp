// A TOML file in the tables of the plugin interface, and the way back from a row to its line. Private to
// described.
#pragma once

#include <bathwright_plugin.h>

#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <bathwright/toml_schema/schema.hpp>
#include <deque>
#include <map>
#include <span>

#include "indicator.hpp"

namespace bathwright::described {

class Statement {
 public:
  /// Reads every key; what is wrong with the file itself is reported to its document.
  explicit Statement(toml_schema::Table root);
  Statement(const Statement&) = delete;
  Statement& operator=(const Statement&) = delete;

  /// The whole, pointing into this. The indicators have a function that stands for values(), which the
  /// interface has no way to say.
  [[nodiscard]] bw_bath_type stated() const;
  [[nodiscard]] const std::vector<DeclaredValue>& values() const { return values_; }  ///< of each indicator

  /// Reports the problems of the tables where they stand in the file, but those whose key is known to be
  /// wrong.
  void report(const std::vector<plugin_host::Place>& places, const Problems& problems);

 private:
  using Table = toml_schema::Table;
  using Key = toml_schema::Key;
  /// Where a row stands: a table of the file, or a key of one.
  struct Row {
    Table table;
    std::optional<std::string> key;
  };
  struct Terms {
    const bw_term* first = nullptr;
    std::uint32_t count = 0;
  };
  struct Word {
    std::string_view word;
    std::uint32_t code;
  };

  const char* keep(std::string text);  ///< never null: to the interface "" is as good
  const char* text(Table& table, const Key& key) { return keep(table.text(key)); }
  static double number(Table& table, const Key& key);
  static std::uint32_t word(Table& table, const Key& key, std::span<const Word> words);
  std::uint32_t source(Table& table, toml_schema::Need need = toml_schema::required);
  static std::uint32_t level(Table& table);
  Terms terms(Table& table, const Key& key);
  static bw_datum datum(Table& table, const Key& key, std::uint32_t source);
  bw_datum efficiency(Table& use, const char* name, std::uint32_t source);
  std::vector<Table> rows(const char* name);

  void read_head();
  void read_sources();
  void read_components();
  void read_quantities();
  void read_own_species();
  void read_own_solids();
  void read_watched_solids();
  void read_windows();
  void read_additions();
  void read_cautions();
  void read_incompatibilities();
  void read_uses();
  void read_indicators();
  [[nodiscard]] Known known() const;

  Table root_;
  std::deque<std::string> texts_;
  std::deque<std::vector<bw_term>> terms_;
  std::map<std::string, std::vector<Row>> places_;  ///< by the interface's name of the table
  bw_bath_type head_{};
  std::vector<bw_source> sources_;
  std::vector<bw_component> components_;
  std::vector<bw_quantity> quantities_;
  std::vector<bw_own_species> own_species_;
  std::vector<bw_own_solid> own_solids_;
  std::vector<bw_watched_solid> watched_solids_;
  std::vector<bw_window> windows_;
  std::vector<bw_addition_rule> additions_;
  std::vector<bw_caution> cautions_;
  std::vector<bw_indicator> indicators_;
  std::vector<bw_use> uses_;
  std::vector<bw_incompatibility> incompatibilities_;
  std::vector<DeclaredValue> values_;
};

}  // namespace bathwright::described
