#include <bathwright/shopfiles/readings_file.hpp>
#include <bathwright/units/read.hpp>

#include "ranges.hpp"
#include "schema.hpp"

namespace bathwright::shopfiles {
namespace {

using analysis::Found;
using analysis::Readings;
using analysis::Titration;

/// ISO 8601 of a date and time in quotes, with or without seconds: what TOML itself would take without
/// quotes.
std::string local_date_time(std::string text) {
  constexpr std::size_t without_seconds = std::string_view("2026-03-02T05:40").size();
  if (text.size() == without_seconds) text += ":00";
  const auto tree = parse_toml("", "sampled = " + text);
  return tree && tree->items[0].kind == Node::Kind::moment ? tree->items[0].text : "";
}

std::string read_sampled(Table& root) {
  constexpr std::string_view example = "2026-03-02T05:40:00";
  const Node* written = root.any({"sampled", optional, example});
  if (!written) return "";
  std::string moment = written->kind == Node::Kind::text ? local_date_time(written->text) : written->text;
  if (written->kind == Node::Kind::number || moment.empty()) {
    root.report("sampled", "is not a local date and time",
                "year-month-dayThour:minute:second, as " + std::string(example), "Leave the time zone out.");
  }
  return moment;
}

/// Those of `keys` that are there.
analysis::AsWritten as_written(const Table& table, std::initializer_list<const char*> keys) {
  analysis::AsWritten written;
  for (const char* key : keys)
    if (table.has(key)) written[key] = {table.written(key), table.where(key)};
  return written;
}

Titration read_titration(Table& entry) {
  Titration t;
  const auto volume = [&](const char* key, const char* example) {
    return entry.positive({key, optional, example}, units::read_volume).value_or(units::Litres{});
  };
  t.where = entry.where("quantity");
  t.quantity = entry.text({"quantity", required, R"("Ni^2+")"});
  t.method = entry.text({"method", required, R"("edta-nickel")"});
  t.sample =
      entry.positive({"sample", required, R"("2.00 mL")"}, units::read_volume).value_or(units::Litres{});
  t.diluted_to = volume("diluted_to", R"("500 mL")");
  t.aliquot = volume("aliquot", R"("10.00 mL")");
  t.weighed =
      entry.positive({"weighed", optional, R"("0.4512 g")"}, units::read_mass).value_or(units::Kilograms{});
  const Need titrated = entry.has("weighed") ? optional : required;  // what is weighed has no burette
  t.titrant = entry.positive({"titrant", titrated, R"("0.1012 mol/L")"}, units::read_molarity)
                  .value_or(units::MolesPerLitre{});
  t.factor = entry.number({"factor", optional, "1.003"}, possible_factor).value_or(1);
  t.burette =
      entry.quantity({"burette", titrated, R"("23.80 mL")"}, units::read_volume).value_or(units::Litres{});
  t.second_burette = volume("second_burette", R"("18.20 mL")");
  t.excess = volume("excess", R"("50.00 mL")");
  t.excess_strength = entry.positive({"excess_strength", optional, R"("0.0500 mol/L")"}, units::read_molarity)
                          .value_or(units::MolesPerLitre{});
  const auto blank = entry.quantity({"blank", optional, R"("0.05 mL")"}, units::read_volume);
  t.blank = blank.value_or(units::Litres{});
  t.written =
      as_written(entry, {"quantity", "method", "sample", "diluted_to", "aliquot", "titrant", "factor",
                         "burette", "second_burette", "blank", "excess", "excess_strength", "weighed"});
  if (t.blank > t.burette) {
    entry.report("blank", "is more than the burette reading", "the titrant used without a sample",
                 "Are the two readings interchanged?");
  }
  return t;
}

Found read_found(Table& entry) {
  Found found;
  found.where = entry.where("quantity");
  found.quantity = entry.text({"quantity", required, R"("Cl^-")"});
  found.value = entry.quantity({"value", required, R"("14.3 g/L")"}, units::read_concentration)
                    .value_or(units::Concentration{});
  found.method = entry.text({"method", optional, R"("electrode-fluoride")"});
  if (!found.method.empty()) found.method_where = entry.where("method");
  found.uncertainty = entry.quantity({"uncertainty", optional, R"("0.2 g/L")"}, units::read_concentration);
  return found;
}

void read_level(Table& root, Readings& readings) {
  readings.volume = root.positive({"volume", optional, R"("2340 L")"}, units::read_volume);
  readings.level_below_mark = root.quantity({"level_below_mark", optional, R"("3 cm")"}, units::read_length);
  if (root.has("volume") && root.has("level_below_mark")) {
    root.report("level_below_mark", "stands beside a volume", "the volume or the level",
                "Remove one of them.");
  }
}

}  // namespace

Result<Readings> read_readings_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  Readings readings;
  readings.file = name;
  readings.sampled = read_sampled(root);
  read_level(root, readings);
  readings.temperature = root.quantity({"temperature", optional, R"("54 degC")"}, units::read_temperature);
  readings.pH = root.number({"pH", optional, "4.1"}, possible_pH);
  readings.density = root.positive({"density", optional, R"("28 degBe")"}, units::read_density);
  readings.written = as_written(root, {"level_below_mark", "density"});
  for (Table& entry : root.tables({"titration", optional, "[[titration]]"})) {
    readings.titrations.push_back(read_titration(entry));
  }
  for (Table& entry : root.tables({"found", optional, "[[found]]"}))
    readings.found.push_back(read_found(entry));
  return file.conclude(std::move(readings));
}

Result<Readings> read_readings(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_readings_text(path, *text);
}

}  // namespace bathwright::shopfiles
