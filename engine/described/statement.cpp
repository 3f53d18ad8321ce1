#include "statement.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/speciation/equilibria.hpp>
#include <cmath>

namespace bathwright::described {
namespace {

using toml_schema::Node;
using toml_schema::printable;
using toml_schema::Range;
using enum toml_schema::Need;

constexpr double unknown = bath::not_given;
constexpr bw_datum unknown_datum = {unknown, unknown, 0, 0};

/// The interface's name of each table, and this file's.
struct TableName {
  std::string_view table, key;
};
constexpr TableName table_names[] = {{"sources", "source"},
                                     {"components", "components"},
                                     {"quantities", "quantity"},
                                     {"own_species", "own_species"},
                                     {"own_solids", "own_solid"},
                                     {"watched_solids", "watched"},
                                     {"windows", "window"},
                                     {"additions", "addition"},
                                     {"cautions", "caution"},
                                     {"indicators", "indicator"},
                                     {"uses", "use"},
                                     {"incompatibilities", "incompatible"}};

/// Fields that have another name here than in the interface.
struct FieldName {
  std::string_view table, field, key;
};
constexpr FieldName field_names[] = {{"watched_solids", "name", "solid"},
                                     {"watched_solids", "sign_in_tank", "sign"},
                                     {"sources", "key", ""},
                                     {"uses", "counted_in", "per"},
                                     {"uses", "effects_spread", "effects_uncertainty"}};

std::string key_of(const plugin_host::Place& place) {
  if (place.row == 0) {
    const auto table = std::ranges::find(table_names, place.field, &TableName::table);
    return table == std::end(table_names) ? place.field : std::string(table->key);
  }
  for (const FieldName& name : field_names)
    if (name.table == place.table && name.field == place.field) return std::string(name.key);
  return place.field;
}

/// What stands for an indicator's value, which no plain function can give.
bw_status not_called(const bw_view*, double*) { return BW_NOT_KNOWN; }

template <class T>
bw_rows rows_of(const std::vector<T>& rows) {
  return {rows.data(), static_cast<std::uint32_t>(rows.size()), sizeof(T)};
}

}  // namespace

Statement::Statement(Table root) : root_(std::move(root)) {
  read_head();
  read_sources();
  read_components();
  read_quantities();
  read_own_species();
  read_own_solids();
  read_watched_solids();
  read_windows();
  read_additions();
  read_cautions();
  read_incompatibilities();
  read_uses();
  read_indicators();
}

bw_bath_type Statement::stated() const {
  bw_bath_type type = head_;
  type.sources = rows_of(sources_);
  type.components = rows_of(components_);
  type.quantities = rows_of(quantities_);
  type.own_species = rows_of(own_species_);
  type.own_solids = rows_of(own_solids_);
  type.watched_solids = rows_of(watched_solids_);
  type.windows = rows_of(windows_);
  type.additions = rows_of(additions_);
  type.cautions = rows_of(cautions_);
  type.indicators = rows_of(indicators_);
  type.uses = rows_of(uses_);
  type.incompatibilities = rows_of(incompatibilities_);
  return type;
}

void Statement::report(const std::vector<plugin_host::Place>& places, const Problems& problems) {
  struct Found {
    Table table;
    std::string key;
    const Problem* problem;
  };
  std::vector<Found> found;
  for (std::size_t i = 0; i < problems.size(); ++i) {
    const plugin_host::Place& place = places[i];
    const auto rows = places_.find(place.table);
    Found at{root_, key_of(place), &problems[i]};
    if (place.row > 0 && rows != places_.end() && place.row <= rows->second.size()) {
      const Row& row = rows->second[place.row - 1];
      at.table = row.table;
      if (row.key) at.key = *row.key;
      if (place.table == "quantities" && !at.table.has(at.key)) at.key = "id";  // what it stands for
    }
    if (!at.table.reported(at.key)) found.push_back(std::move(at));
  }
  for (Found& one : found)
    one.table.report(one.key, one.problem->what, one.problem->expected, one.problem->try_this);
}

// ---- One value

const char* Statement::keep(std::string text) { return texts_.emplace_back(std::move(text)).c_str(); }

double Statement::number(Table& table, const Key& key) { return table.number(key).value_or(unknown); }

std::uint32_t Statement::word(Table& table, const Key& key, std::span<const Word> words) {
  const std::string written = table.text(key);
  if (written.empty()) return 0;
  const auto found = std::ranges::find(words, written, &Word::word);
  if (found != words.end()) return found->code;
  std::vector<std::string> known;
  std::string all;
  for (const Word& word : words) {
    known.emplace_back(word.word);
    all += (all.empty() ? "\"" : ", \"") + known.back() + '"';
  }
  const auto near = nearest(written, known);
  table.report(key.name, '"' + printable(written) + "\" is not known here", "one of " + all,
               near ? "Did you mean \"" + *near + "\"?" : "");
  return 0;
}

std::uint32_t Statement::source(Table& table, toml_schema::Need need) {
  const std::string key = table.text({"source", need, "\"a-handbook\""});
  if (key.empty()) return 0;
  std::vector<std::string> known;
  for (const bw_source& source : sources_) known.emplace_back(source.key);
  const auto found = std::ranges::find(known, key);
  if (found != known.end()) return static_cast<std::uint32_t>(found - known.begin() + 1);
  const auto near = nearest(key, known);
  table.report("source", '"' + printable(key) + "\" is not a source of this file",
               "the key of a [source.<key>]", near ? "Did you mean \"" + *near + "\"?" : "");
  return 0;
}

Statement::Terms Statement::terms(Table& table, const Key& key) {
  auto entry = table.table(key);
  if (!entry) return {};
  std::vector<bw_term> all;
  for (const std::string& name : entry->names()) {
    const auto coefficient = entry->number({name, required, "1"});
    if (coefficient) all.push_back({keep(name), *coefficient});
  }
  terms_.push_back(std::move(all));
  return {terms_.back().data(), static_cast<std::uint32_t>(terms_.back().size())};
}

bw_datum Statement::datum(Table& table, const Key& key, std::uint32_t source) {
  return {number(table, key), unknown, source, 0};
}

bw_datum Statement::efficiency(Table& use, const char* name, std::uint32_t source_of_use) {
  auto table = use.table({name, optional, "{ value = 0.96, uncertainty = 0.02 }"});
  if (!table) return {unknown, unknown, source_of_use, 0};
  const double value = number(*table, {"value", required, "0.96"});
  const double uncertainty = number(*table, {"uncertainty", optional, "0.02"});
  const std::uint32_t own = source(*table, optional);
  return {value, uncertainty, table->has("source") ? own : source_of_use, 0};
}

std::vector<toml_schema::Table> Statement::rows(const char* name) {
  const auto key = std::ranges::find(table_names, name, &TableName::table)->key;
  std::vector<Table> found = root_.tables({key, optional, ""});
  for (const Table& table : found) places_[name].push_back({table, {}});
  return found;
}

// ---- The tables

void Statement::read_head() {
  constexpr Word conventions[] = {{"interaction", BW_INTERACTION}, {"association", BW_ASSOCIATION}};
  constexpr Word acid_sets[] = {{"little chloride", BW_LITTLE_CHLORIDE}, {"much chloride", BW_MUCH_CHLORIDE}};
  constexpr Word zinc_sets[] = {
      {"dilute", BW_ZINC_DILUTE}, {"in chloride", BW_ZINC_IN_CHLORIDE}, {"in alkali", BW_ZINC_IN_ALKALI}};
  head_.size = sizeof head_;
  head_.abi_minor = BW_ABI_MINOR;
  head_.id = text(root_, {"id", required, "\"acid-copper\""});
  head_.name = text(root_, {"name", required, "\"Acid copper\""});
  head_.version = text(root_, {"version", required, "\"1.0.0\""});
  head_.author = text(root_, {"author", required, "\"Bathwright contributors\""});
  head_.licence = text(root_, {"licence", required, "\"MIT\""});
  head_.summary = text(root_, {"summary", required, "\"Bright copper from sulfate and sulfuric acid.\""});
  head_.validity = text(root_, {"validity", required, "\"Up to 5 mol/kg, 15 to 40 degC.\""});
  head_.min_C = number(root_, {"min_C", required, "15"});
  head_.max_C = number(root_, {"max_C", required, "40"});
  head_.max_ionic_strength_mol_per_kg = number(root_, {"max_ionic_strength_mol_per_kg", optional, "10"});
  head_.convention = word(root_, {"convention", required, "\"interaction\""}, conventions);
  head_.acid_set = root_.has("acid_set")
                       ? word(root_, {"acid_set", optional, "\"little chloride\""}, acid_sets)
                       : static_cast<std::uint32_t>(BW_LITTLE_CHLORIDE);
  head_.zinc_set = word(root_, {"zinc_set", optional, "\"dilute\""}, zinc_sets);
}

void Statement::read_sources() {
  auto table = root_.table({"source", required, "tables headed [source.<key>]"});
  if (!table) return;
  for (const std::string& key : table->names()) {
    auto row = table->table({key, required, "{ citation = \"...\" }"});
    if (!row) continue;
    places_["sources"].push_back({*row, {}});
    sources_.push_back({keep(key), text(*row, {"citation", required, "\"Author, Title, year, page\""}),
                        text(*row, {"terms", optional, "\"facts\""})});
  }
}

void Statement::read_components() {
  constexpr Word ways[] = {
      {"analysis", BW_BY_ANALYSIS}, {"pH", BW_BY_PH}, {"charge", BW_BY_CHARGE}, {"book", BW_BY_BOOK}};
  auto table = root_.table({"components", required, R"({ "H^+" = "pH", "Ni^2+" = "analysis", ... })"});
  if (!table) return;
  for (const std::string& species : table->names()) {
    places_["components"].push_back({*table, species});
    const std::uint32_t way = word(*table, {species, required, "\"analysis\""}, ways);
    components_.push_back({keep(species), way, 0});
  }
}

void Statement::read_quantities() {
  constexpr Word roles[] = {
      {"metal", BW_METAL},     {"ligand", BW_LIGAND},       {"buffer", BW_BUFFER},          {"salt", BW_SALT},
      {"reducer", BW_REDUCER}, {"byproduct", BW_BYPRODUCT}, {"contaminant", BW_CONTAMINANT}};
  for (Table& row : rows("quantities")) {
    bw_quantity quantity{};
    quantity.id = text(row, {"id", required, "\"Ni^2+\""});
    quantity.label = text(row, {"label", required, "\"nickel\""});
    const char* formula = text(row, {"formula", optional, "\"NiSO4.6H2O\""});
    quantity.formula = row.has("formula") ? formula : quantity.id;
    const Terms counts = terms(row, {"counts", optional, R"({ "Ni^2+" = 1 })"});
    quantity.counts = counts.first;
    quantity.count = counts.count;
    if (!row.has("counts")) {
      terms_.push_back({{quantity.id, 1}});
      quantity.counts = terms_.back().data();
      quantity.count = 1;
    }
    quantity.role = word(row, {"role", required, "\"metal\""}, roles);
    quantity.flags = row.truth({"salt_view", optional, "true"}) ? BW_SALT_VIEW : 0;
    quantities_.push_back(quantity);
  }
}

void Statement::read_own_species() {
  for (Table& row : rows("own_species")) {
    bw_own_species species{};
    species.name = text(row, {"name", required, "\"NiOH^+\""});
    species.reaction = text(row, {"reaction", optional, "\"Ni^2+ + OH^- = NiOH^+\""});
    const std::uint32_t from = source(row);
    // A basis species, made of nothing else, has no constant.
    species.log10_K = datum(row, {"log10_K", *species.reaction ? required : optional, "4.1"}, from);
    species.log10_K.spread = number(row, {"uncertainty", optional, "0.2"});
    species.dH_kJ_per_mol = datum(row, {"dH_kJ_per_mol", optional, "-5"}, from);
    species.dCp_J_per_mol_K = datum(row, {"dCp_J_per_mol_K", optional, "0"}, from);
    species.medium_mol_per_kg = row.number({"medium_mol_per_kg", optional, "0.1"}).value_or(0);
    own_species_.push_back(species);
  }
}

void Statement::read_own_solids() {
  for (Table& row : rows("own_solids")) {
    bw_own_solid solid{};
    solid.name = text(row, {"name", required, "\"NiSO4.6H2O (alpha)\""});
    solid.formula = text(row, {"formula", required, "\"NiSO4.6H2O\""});
    solid.reaction = text(row, {"reaction", required, "\"NiSO4.6H2O(s) = Ni^2+ + SO4^2- + 6 H2O\""});
    solid.note = text(row, {"note", optional, "\"aged a day\""});
    const std::uint32_t from = source(row);
    solid.log10_K = datum(row, {"log10_K", required, "-2.2"}, from);
    solid.log10_K.spread = number(row, {"uncertainty", optional, "0.1"});
    solid.dH_kJ_per_mol = datum(row, {"dH_kJ_per_mol", optional, "-5"}, from);
    solid.dCp_J_per_mol_K = datum(row, {"dCp_J_per_mol_K", optional, "0"}, from);
    solid.min_C = number(row, {"min_C", required, "0"});
    solid.max_C = number(row, {"max_C", required, "60"});
    solid.slow = row.truth({"slow", optional, "true"}) ? 1 : 0;
    own_solids_.push_back(solid);
  }
}

void Statement::read_watched_solids() {
  for (Table& row : rows("watched_solids")) {
    const char* solid = text(row, {"solid", required, "\"H3BO3\""});
    watched_solids_.push_back({solid, text(row, {"sign", required, "\"white flakes on cold pipes\""})});
  }
}

void Statement::read_windows() {
  for (Table& row : rows("windows")) {
    bw_window window{};
    window.subject = text(row, {"subject", required, "\"Ni^2+\""});
    window.low = number(row, {"low", optional, "60"});
    window.aim = number(row, {"aim", optional, "75"});
    window.high = number(row, {"high", optional, "90"});
    window.stop_low = number(row, {"stop_low", optional, "40"});
    window.stop_high = number(row, {"stop_high", optional, "110"});
    window.source = source(row);
    windows_.push_back(window);
  }
}

void Statement::read_additions() {
  constexpr Range orders{1, 1000};
  for (Table& row : rows("additions")) {
    bw_addition_rule rule{};
    rule.supply = text(row, {"supply", required, "\"boric-acid\""});
    rule.how = text(row, {"how", required, "\"Dissolve hot in a side tank, filter in.\""});
    rule.largest_rise_g_per_L = number(row, {"largest_rise_g_per_L", optional, "10"});
    rule.largest_pH_step = number(row, {"largest_pH_step", optional, "0.2"});
    rule.wait_h = number(row, {"wait_h", required, "0.5"});
    const double order = row.number({"order", required, "1"}, orders).value_or(1);
    if (order != std::floor(order)) row.report("order", "is no whole number", "1, 2, 3 ...");
    rule.order = static_cast<std::uint32_t>(order);
    rule.source = source(row);
    constexpr Range parts{0, 1000};
    rule.thin_to_parts = row.number({"thin_to_parts", optional, "10"}, parts).value_or(0);
    rule.half_then_analyse = row.truth({"half_then_analyse", optional, "true"}) ? 1 : 0;
    additions_.push_back(rule);
  }
}

std::uint32_t Statement::level(Table& table) {
  constexpr Word levels[] = {{"notice", BW_NOTICE}, {"warn", BW_WARN}, {"stop", BW_STOP}};
  return word(table, {"level", required, "\"stop\""}, levels);
}

void Statement::read_cautions() {
  for (Table& row : rows("cautions")) {
    bw_caution caution{};
    caution.subject = text(row, {"subject", optional, "\"sulfuric-acid\""});
    caution.level = level(row);
    caution.text = text(row, {"text", required, "\"Acid into water, never water into acid.\""});
    caution.source = source(row);
    cautions_.push_back(caution);
  }
}

void Statement::read_incompatibilities() {
  for (Table& row : rows("incompatibilities")) {
    bw_incompatibility pair{};
    pair.with = text(row, {"with", required, "\"acid_cyanide\""});
    pair.why = text(row, {"why", required, "\"Cyanide in this acid bath gives off hydrogen cyanide.\""});
    pair.level = level(row);
    pair.source = source(row);
    incompatibilities_.push_back(pair);
  }
}

void Statement::read_uses() {
  constexpr Word units[] = {{"Ah", BW_PER_AH},
                            {"g deposited", BW_PER_G_DEPOSIT},
                            {"m2", BW_PER_M2},
                            {"h", BW_PER_HOUR},
                            {"m2 h", BW_PER_M2_HOUR}};
  for (Table& row : rows("uses")) {
    bw_use use{};
    use.id = text(row, {"id", required, "\"plating\""});
    use.label = text(row, {"label", required, "\"nickel plated from soluble anodes\""});
    use.counted_in = word(row, {"per", required, "\"Ah\""}, units);
    const Terms effects = terms(row, {"effects", optional, R"({ "H2PO2^-" = -1.2 })"});
    use.effects = effects.first;
    use.effect_count = effects.count;
    use.effects_spread = number(row, {"effects_uncertainty", optional, "0.2"});
    use.deposits = text(row, {"deposits", optional, "\"Ni^2+\""});
    use.electrons = number(row, {"electrons", optional, "2"});
    use.source = source(row);
    use.cathode_efficiency = efficiency(row, "cathode_efficiency", use.source);
    use.anode_efficiency = efficiency(row, "anode_efficiency", use.source);
    uses_.push_back(use);
  }
}

void Statement::read_indicators() {
  const Known names = known();
  for (Table& row : rows("indicators")) {
    bw_indicator indicator{};
    indicator.id = text(row, {"id", required, "\"chloride-to-nickel\""});
    indicator.label = text(row, {"label", required, "\"chloride to nickel\""});
    indicator.meaning = text(row, {"meaning", required, "\"Too low and the anodes passivate.\""});
    indicator.unit = text(row, {"unit", optional, "\"g/g\""});
    indicator.eval = not_called;
    indicators_.push_back(indicator);
    values_.push_back(read_value(row, names));
  }
}

Known Statement::known() const {
  Known known;
  for (const bw_quantity& quantity : quantities_)
    if (*quantity.id) known.quantities.emplace_back(quantity.id);
  for (const bw_watched_solid& solid : watched_solids_)
    if (*solid.name) known.solids.emplace_back(solid.name);
  const auto is_component = [&](const auto& part) {
    return std::ranges::any_of(components_, [&](const bw_component& c) { return part.first == c.species; });
  };
  const auto zinc = head_.zinc_set == BW_ZINC_IN_CHLORIDE ? activity::ZincSet::chloride
                    : head_.zinc_set == BW_ZINC_IN_ALKALI ? activity::ZincSet::alkaline
                                                          : activity::ZincSet::dilute;
  const auto convention = head_.convention == BW_ASSOCIATION ? activity::Convention::association
                                                             : activity::Convention::interaction;
  for (const auto& [name, species] : speciation::Equilibria::built_in(convention, zinc).species())
    if (std::ranges::all_of(species.made_of, is_component)) known.species.push_back(name);
  for (const bw_own_species& own : own_species_)
    if (*own.name) known.species.emplace_back(own.name);
  return known;
}

}  // namespace bathwright::described
