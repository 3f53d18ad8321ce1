// The tables of a plugin cannot be made of bytes: they hold pointers that its author answers for. What a
// careless author gets wrong are texts, numbers and codes, so a sound bath type is taken and the input
// changes those.
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <charconv>
#include <cmath>
#include <list>

#include "../engine/plugin_host/stated_bath.hpp"
#include "promises.hpp"

using namespace bathwright;

namespace {

/// The fields of a bath type that a line of the input may change, in the order of the header.
struct Fields {
  std::vector<const char**> texts;
  std::vector<double*> numbers;
  std::vector<std::uint32_t*> codes;

  void datum(bw_datum& datum) {
    numbers.insert(numbers.end(), {&datum.value, &datum.spread});
    codes.insert(codes.end(), {&datum.source, &datum.quality});
  }
};

Fields fields_of(StatedBath& bath) {
  Fields fields;
  auto& [texts, numbers, codes] = fields;
  bw_bath_type& head = bath.head;
  texts = {&head.id, &head.name, &head.version, &head.author, &head.licence, &head.summary, &head.validity};
  numbers = {&head.min_C, &head.max_C, &head.max_ionic_strength_mol_per_kg};
  codes = {&head.convention, &head.acid_set, &head.zinc_set};
  for (bw_source& row : bath.sources) texts.insert(texts.end(), {&row.key, &row.citation, &row.terms});
  for (bw_component& row : bath.components) texts.push_back(&row.species), codes.push_back(&row.found_by);
  for (auto* terms : {&bath.nickel, &bath.chloride_ion, &bath.effects}) {
    for (bw_term& term : *terms) texts.push_back(&term.id), numbers.push_back(&term.coefficient);
  }
  for (bw_quantity& row : bath.quantities) {
    texts.insert(texts.end(), {&row.id, &row.label, &row.formula});
    codes.insert(codes.end(), {&row.role, &row.flags});
  }
  for (bw_own_species& row : bath.own_species) {
    texts.insert(texts.end(), {&row.name, &row.reaction});
    numbers.push_back(&row.medium_mol_per_kg);
    for (bw_datum* datum : {&row.log10_K, &row.dH_kJ_per_mol, &row.dCp_J_per_mol_K}) fields.datum(*datum);
  }
  for (bw_own_solid& row : bath.own_solids) {
    texts.insert(texts.end(), {&row.name, &row.formula, &row.reaction, &row.note});
    numbers.insert(numbers.end(), {&row.min_C, &row.max_C});
    codes.push_back(&row.slow);
    for (bw_datum* datum : {&row.log10_K, &row.dH_kJ_per_mol, &row.dCp_J_per_mol_K}) fields.datum(*datum);
  }
  for (bw_watched_solid& row : bath.watched_solids) texts.insert(texts.end(), {&row.name, &row.sign_in_tank});
  for (bw_window& row : bath.windows) {
    texts.push_back(&row.subject);
    numbers.insert(numbers.end(), {&row.low, &row.aim, &row.high, &row.stop_low, &row.stop_high});
    codes.push_back(&row.source);
  }
  for (bw_addition_rule& row : bath.additions) {
    texts.insert(texts.end(), {&row.supply, &row.how});
    numbers.insert(numbers.end(), {&row.largest_rise_g_per_L, &row.largest_pH_step, &row.wait_h, &row.thin_to_parts});
    codes.insert(codes.end(), {&row.order, &row.source, &row.half_then_analyse});
  }
  for (bw_caution& row : bath.cautions) {
    texts.insert(texts.end(), {&row.subject, &row.text});
    codes.insert(codes.end(), {&row.level, &row.source});
  }
  for (bw_indicator& row : bath.indicators)
    texts.insert(texts.end(), {&row.id, &row.label, &row.meaning, &row.unit});
  for (bw_incompatibility& row : bath.incompatibilities) {
    texts.insert(texts.end(), {&row.with, &row.why});
    codes.insert(codes.end(), {&row.level, &row.source});
  }
  for (bw_use& row : bath.uses) {
    texts.insert(texts.end(), {&row.id, &row.label, &row.deposits});
    numbers.insert(numbers.end(), {&row.electrons, &row.effects_spread});
    codes.insert(codes.end(), {&row.counted_in, &row.source});
    fields.datum(row.cathode_efficiency);
    fields.datum(row.anode_efficiency);
  }
  return fields;
}

/// Takes a number off the front of `text`; `otherwise` where there is none.
template <class Number>
Number taken(std::string_view& text, Number otherwise) {
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), otherwise);
  text.remove_prefix(static_cast<std::size_t>(end - text.data()));
  return otherwise;
}

/// "t12 text", "n3 1e300", "c7 99": field 12 of the texts (counted from 0, round the end), and so on. A text
/// field without a text is NULL. Changed texts live in `kept`.
void change(const Fields& fields, std::string_view line, std::list<std::string>& kept) {
  if (line.empty()) return;
  const char kind = line.front();
  line.remove_prefix(1);
  const std::size_t index = taken(line, std::size_t{0});
  if (line.starts_with(' ')) line.remove_prefix(1);
  if (kind == 't') {
    *fields.texts[index % fields.texts.size()] = line.empty() ? nullptr : kept.emplace_back(line).c_str();
  } else if (kind == 'n') {
    *fields.numbers[index % fields.numbers.size()] = taken(line, StatedBath::open);
  } else if (kind == 'c') {
    *fields.codes[index % fields.codes.size()] = taken(line, std::uint32_t{0});
  }
}

}  // namespace

fuzz::BrokenPromise fuzz::plugin_tables(std::string_view input) {
  StatedBath bath;
  const Fields fields = fields_of(bath);
  std::list<std::string> kept;
  for (std::string_view rest = input; !rest.empty();) {
    const std::size_t end = std::min(rest.find('\n'), rest.size());
    change(fields, rest.substr(0, end), kept);
    rest.remove_prefix(std::min(end + 1, rest.size()));
  }
  const bw_bath_type stated = bath.stated();
  const auto read = plugin_host::read_bath_type(stated);
  if (!read) return in_words(read.problems(), "", input);
  if (read->id.empty() || read->sources.empty() || read->components.empty())
    return "a bath type without its tables";
  for (const bath::Quantity& quantity : read->quantities) {
    if (!(quantity.formula.molar_mass().v > 0)) return "a quantity without a molar mass: " + quantity.id;
  }
  return {};
}
