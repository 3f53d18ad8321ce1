#include <fmt/format.h>

#include <bathwright/analysis/method.hpp>
#include <bathwright/analysis/standardisation.hpp>
#include <bathwright/shopfiles/readings_file.hpp>
#include <bathwright/units/read.hpp>
#include <cctype>

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

bool has_time_of_day(const std::string& moment) { return moment.find('T') != std::string::npos; }

std::string read_sampled(Table& root) {
  constexpr std::string_view example = "2026-03-02T05:40:00";
  const Node* written = root.any({"sampled", optional, example});
  if (!written) return "";
  std::string moment = written->kind == Node::Kind::text ? local_date_time(written->text) : written->text;
  if (written->kind == Node::Kind::number || !has_time_of_day(moment)) {
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

/// A strength as typed, or the name of a standardised titrant, which begins with no digit. A normality must
/// say its equivalents; the answer is what it says, or 0.
double read_strength(Table& entry, const Key& key, const std::string& titrant, units::MolesPerLitre& strength,
                     std::string& name) {
  if (entry.any(key) == nullptr) return 0;
  const std::string text = entry.written(key.name);
  if (!text.empty() && std::isalpha(static_cast<unsigned char>(text.front())) != 0) {
    name = text;
    return 0;
  }
  const bool normality = text.find('N') != std::string::npos;
  if (!normality) {
    strength = entry.positive(key, units::read_molarity).value_or(units::MolesPerLitre{});
    return 0;
  }
  const auto usual = analysis::equivalents_of(titrant);
  const auto typed = units::read_concentration(text, entry.where(key.name));
  if (typed) {
    strength = *units::moles_per_litre_if_direct(*typed);
    if (!(strength.v > 0))
      entry.report(key.name, "is zero", "more than zero, as " + std::string(key.example));
    return typed->equivalents;
  }
  Problem problem = typed.problems().front();
  if (usual && problem.what.find("equivalents") != std::string::npos)
    problem.try_this =
        fmt::format("Write ({:g} eq/mol) behind it if it is {}, or give mol/L.", *usual, titrant);
  entry.report(key.name, Problems{problem});
  return 0;
}

/// Each text of a list as a quantity more than zero.
template <class T>
std::vector<T> read_all(Table& entry, const Key& key, Result<T> (*read)(std::string_view, std::string_view)) {
  std::vector<T> all;
  for (const std::string& text : entry.texts(key)) {
    auto value = read(text, entry.where(key.name));
    if (!value)
      entry.report(key.name, value.problems());
    else if (!(value->v > 0))
      entry.report(key.name, "holds a zero", "more than zero, as " + std::string(key.example));
    else
      all.push_back(*std::move(value));
  }
  return all;
}

analysis::Standardised read_standardised(Table& entry) {
  analysis::Standardised s;
  const auto volume = [&](const char* key, const char* example) {
    return entry.positive({key, optional, example}, units::read_volume).value_or(units::Litres{});
  };
  s.where = entry.where("name");
  s.name = entry.text({"name", required, R"("EDTA-2611")"});
  if (!s.name.empty() && std::isdigit(static_cast<unsigned char>(s.name.front())) != 0)
    entry.report("name", "begins with a digit, as a strength does", "a name, as \"EDTA-2611\"");
  s.titrant = entry.text({"titrant", required, R"("EDTA")"});
  s.against = entry.text({"against", required, R"("zinc")"});
  s.weighed = read_all(entry, {"weighed", optional, R"(["0.1634 g", "0.1650 g"])"}, units::read_mass);
  s.taken = read_all(entry, {"taken", optional, R"(["25.00 mL"])"}, units::read_volume);
  s.burette = read_all(entry, {"burette", required, R"(["24.98 mL", "25.22 mL"])"}, units::read_volume);
  s.blank = entry.quantity({"blank", optional, R"("0.05 mL")"}, units::read_volume).value_or(units::Litres{});
  if (entry.any({"assay", optional, R"("99.9 %")"}) != nullptr) {
    const auto assay = units::read_fraction(entry.written("assay"), entry.where("assay"));
    if (assay)
      s.assay = *assay;
    else
      entry.report("assay", assay.problems());
  }
  s.diluted_to = volume("diluted_to", R"("250 mL")");
  s.aliquot = volume("aliquot", R"("25.00 mL")");
  const Key known{"known_strength", optional, R"("THIO-12")"};
  read_strength(entry, known, "", s.known_strength, s.known_name);
  s.written = as_written(entry, {"name", "titrant", "against", "weighed", "taken", "burette", "blank",
                                 "assay", "diluted_to", "aliquot", "known_strength"});
  return s;
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
  const analysis::Method* method = analysis::method(t.method);
  const std::string usual = method ? method->titrant : "", behind = method ? method->back_titrant : "";
  t.equivalents = read_strength(entry, {"titrant", titrated, R"("0.1012 mol/L")"},
                                behind.empty() ? usual : behind, t.titrant, t.titrant_name);
  t.factor = entry.number({"factor", optional, "1.003"}, possible_factor).value_or(1);
  t.burette =
      entry.quantity({"burette", titrated, R"("23.80 mL")"}, units::read_volume).value_or(units::Litres{});
  t.second_burette = volume("second_burette", R"("18.20 mL")");
  t.excess = volume("excess", R"("50.00 mL")");
  read_strength(entry, {"excess_strength", optional, R"("0.0500 mol/L")"}, usual, t.excess_strength,
                t.excess_name);
  t.titrant_state = entry.text({"titrant_state", optional, R"("week-old")"});
  const auto blank = entry.quantity({"blank", optional, R"("0.05 mL")"}, units::read_volume);
  t.blank = blank.value_or(units::Litres{});
  t.written = as_written(
      entry, {"quantity", "method", "sample", "diluted_to", "aliquot", "titrant", "factor", "burette",
              "second_burette", "blank", "excess", "excess_strength", "weighed", "titrant_state"});
  t.titrant_lot = entry.text({"titrant_lot", optional, R"("E-2611")"});
  t.titrated_by = entry.text({"titrated_by", optional, R"("M. Okafor")"});
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
  readings.sample_number = root.text({"sample_number", optional, R"("2611-07")"});
  readings.sampled_by = root.text({"sampled_by", optional, R"("J. Marsh")"});
  read_level(root, readings);
  readings.temperature = root.quantity({"temperature", optional, R"("54 degC")"}, units::read_temperature);
  readings.sample_temperature =
      root.quantity({"sample_temperature", optional, R"("22 degC")"}, units::read_temperature);
  if (readings.sample_temperature && (readings.sample_temperature->v < liquid_bath_C.low ||
                                      readings.sample_temperature->v > liquid_bath_C.high))
    root.report("sample_temperature", "no bath is liquid at this temperature", "-10 to 110 degC",
                "Check the unit.");
  readings.pH = root.number({"pH", optional, "4.1"}, possible_pH);
  readings.density = root.positive({"density", optional, R"("28 degBe")"}, units::read_density);
  readings.written = as_written(root, {"level_below_mark", "density"});
  for (Table& entry : root.tables({"standardised", optional, "[[standardised]]"}))
    readings.standardised.push_back(read_standardised(entry));
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
