#include "reading_draft.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/whole_file.hpp>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>
#include <system_error>
#include <tuple>

namespace bathwright::desktop {
namespace {

using Json = nlohmann::json;

/// A TOML string. What a person types has no use for control signs; they are left out.
std::string in_quotes(const std::string& text) {
  std::string out = "\"";
  for (const char c : text) {
    if (c == '"' || c == '\\') out += '\\';
    if (static_cast<unsigned char>(c) >= 0x20) out += c;
  }
  return out + '"';
}

/// A pH as TOML takes it; a decimal comma is one of ours.
std::string number(std::string text) {
  std::ranges::replace(text, ',', '.');
  std::erase(text, ' ');
  const bool plain = !text.empty() && text.find_first_not_of("0123456789.-") == std::string::npos;
  // A number TOML would not read stays a text, so that the reader's message names what was typed.
  return plain && text.front() != '.' && text.back() != '.' ? text : in_quotes(text);
}

/// A bare number means the unit its field is headed with; anything else stays as it is typed.
std::string with_unit(const std::string& text, const std::string& unit) {
  const bool bare = !text.empty() && text.find_first_not_of("0123456789.,- ") == std::string::npos;
  return bare ? text + " " + unit : text;
}

std::string value_unit(const HeadUnits& units, const std::string& quantity) {
  const auto unit = units.value.find(quantity);
  return unit == units.value.end() ? "g/L" : unit->second;
}

void set_usual(DraftRow& row) {
  const analysis::Method* method =
      row.is_value() ? nullptr : analysis::method(row.methods[static_cast<std::size_t>(row.method)]);
  // In the units their heads have, so that a bare number typed over one means the same.
  row.sample = method && method->usual_sample.v > 0
                   ? units::significant(units::value_in(method->usual_sample, "mL"))
                   : "";
  row.titrant = method && method->usual_titrant.v > 0 ? units::significant(method->usual_titrant.v) : "";
}

std::string& field_of(Draft& draft, int row, Field field) {
  if (row < 0)
    return field == Field::volume ? draft.volume
                                  : (field == Field::temperature ? draft.temperature : draft.pH);
  DraftRow& one = draft.rows[static_cast<std::size_t>(row)];
  switch (field) {
    case Field::sample:
      return one.sample;
    case Field::titrant:
      return one.titrant;
    case Field::burette:
      return one.burette;
    default:
      return one.value;
  }
}

}  // namespace

Draft blank_draft(const bath::Tank& tank, const bath::BathType& type) {
  Draft draft;
  const auto add = [&](const bath::Quantity& quantity) {
    if (std::ranges::find(draft.rows, quantity.id, &DraftRow::quantity) != draft.rows.end()) return;
    DraftRow row;
    row.quantity = quantity.id;
    row.methods = analysis::methods_for(quantity);
    row.methods.emplace_back();
    set_usual(row);
    draft.rows.push_back(std::move(row));
  };
  for (const bath::Aim& aim : tank.aims) {
    const bath::Quantity* quantity = type.quantity(aim.quantity);
    if (!quantity) continue;
    bool found_by_parts = false;
    // Nobody titrates nickel sulfate: a salt is what its components make up, and those are read.
    if (quantity->salt_view)
      for (const bath::Quantity& part : type.quantities) {
        const bool of_it = !part.salt_view && part.counts.size() == 1 &&
                           std::ranges::any_of(quantity->counts, [&](const auto& counted) {
                             return counted.first == part.counts.begin()->first;
                           });
        if (!of_it || analysis::methods_for(part).empty()) continue;
        add(part);
        found_by_parts = true;
      }
    if (!found_by_parts) add(*quantity);
  }
  return draft;
}

std::string readings_text(const Draft& draft, const HeadUnits& units, std::vector<int>& line_of_row) {
  std::string text;
  int line = 1;
  const auto add = [&](const std::string& words) {
    text += words + '\n';
    ++line;
  };
  if (!draft.sampled.empty()) add("sampled = " + draft.sampled);
  if (!draft.volume.empty()) {
    const bool level = units::read_length(draft.volume).operator bool();
    add(level ? "level_below_mark = " + in_quotes(draft.volume)
              : "volume = " + in_quotes(with_unit(draft.volume, units.volume)));
  }
  if (!draft.temperature.empty())
    add("temperature = " + in_quotes(with_unit(draft.temperature, units.temperature)));
  if (!draft.pH.empty()) add("pH = " + number(draft.pH));
  line_of_row.assign(draft.rows.size(), 0);
  for (std::size_t i = 0; i < draft.rows.size(); ++i) {
    const DraftRow& row = draft.rows[i];
    if (row.is_empty()) continue;
    line_of_row[i] = line;
    add(row.is_value() ? "[[found]]" : "[[titration]]");
    add("quantity = " + in_quotes(row.quantity));
    if (row.is_value()) {
      add("value = " + in_quotes(with_unit(row.value, value_unit(units, row.quantity))));
    } else {
      add("method = " + in_quotes(row.methods[static_cast<std::size_t>(row.method)]));
      for (const auto& [key, value, unit] : {std::tuple{"sample", &row.sample, "mL"},
                                             {"titrant", &row.titrant, "mol/L"},
                                             {"burette", &row.burette, "mL"}})
        if (!value->empty()) add(std::string(key) + " = " + in_quotes(with_unit(*value, unit)));
    }
  }
  return text;
}

Draft with_units(Draft draft, const HeadUnits& units) {
  draft.volume = with_unit(draft.volume, units.volume);
  draft.temperature = with_unit(draft.temperature, units.temperature);
  for (DraftRow& row : draft.rows) row.value = with_unit(row.value, value_unit(units, row.quantity));
  return draft;
}

void DraftHistory::begin_step(int row, Field field) {
  future_.clear();
  if (row == last_row_ && field == last_field_) return;
  past_.push_back(now_);
  last_row_ = row;
  last_field_ = field;
}

void DraftHistory::type(const TypeReading& typed, const std::string& now) {
  if (typed.row >= static_cast<int>(now_.rows.size())) return;
  if (field_of(now_, typed.row, typed.field) == typed.text) return;
  begin_step(typed.row, typed.field);
  field_of(now_, typed.row, typed.field) = typed.text;
  if (now_.sampled.empty()) now_.sampled = now;
}

void DraftHistory::choose(const ChooseMethod& chosen) {
  if (chosen.row < 0 || chosen.row >= static_cast<int>(now_.rows.size())) return;
  DraftRow& row = now_.rows[static_cast<std::size_t>(chosen.row)];
  if (chosen.method < 0 || chosen.method >= static_cast<int>(row.methods.size()) ||
      chosen.method == row.method)
    return;
  begin_step(chosen.row, Field::method);
  row.method = chosen.method;
  set_usual(row);
}

void DraftHistory::start_again(Draft blank) {
  begin_step(-3, Field::method);
  now_ = std::move(blank);
}

void DraftHistory::undo() {
  if (past_.empty()) return;
  future_.push_back(std::exchange(now_, std::move(past_.back())));
  past_.pop_back();
  last_row_ = -2;
}

void DraftHistory::redo() {
  if (future_.empty()) return;
  past_.push_back(std::exchange(now_, std::move(future_.back())));
  future_.pop_back();
  last_row_ = -2;
}

void DraftHistory::write_out(const HeadUnits& units) {
  now_ = with_units(std::move(now_), units);
  for (std::vector<Draft>* drafts : {&past_, &future_})
    for (Draft& draft : *drafts) draft = with_units(std::move(draft), units);
}

Outcome keep_draft(const std::filesystem::path& file, const Draft& draft) {
  Json rows = Json::array();
  for (const DraftRow& row : draft.rows)
    rows.push_back({{"quantity", row.quantity},
                    {"method", row.methods[static_cast<std::size_t>(row.method)]},
                    {"sample", row.sample},
                    {"titrant", row.titrant},
                    {"burette", row.burette},
                    {"value", row.value}});
  const Json all = {{"sampled", draft.sampled},
                    {"volume", draft.volume},
                    {"temperature", draft.temperature},
                    {"pH", draft.pH},
                    {"rows", std::move(rows)}};
  return write_whole(file, all.dump(1, ' ', false, Json::error_handler_t::replace));
}

Result<std::optional<Draft>> kept_draft(const std::filesystem::path& file, const Draft& blank) {
  std::error_code failed;
  if (!std::filesystem::exists(file, failed)) return std::optional<Draft>{};
  std::ifstream in(file, std::ios::binary);
  const Json all = Json::parse(std::string(std::istreambuf_iterator<char>(in), {}), nullptr, false);
  if (!all.is_object() || !all.contains("rows") || !all["rows"].is_array())
    return Problem{Fault::bad_input, file.string(), "does not hold readings", "readings kept by this program",
                   "Move it away and type them again."};
  const auto text = [](const Json& from, const char* key) {
    return from.is_object() && from.contains(key) && from[key].is_string() ? from[key].get<std::string>()
                                                                           : std::string();
  };
  Draft draft = blank;
  draft.sampled = text(all, "sampled");
  draft.volume = text(all, "volume");
  draft.temperature = text(all, "temperature");
  draft.pH = text(all, "pH");
  for (const Json& kept : all["rows"]) {
    const auto row = std::ranges::find(draft.rows, text(kept, "quantity"), &DraftRow::quantity);
    if (row == draft.rows.end()) continue;
    const auto method = std::ranges::find(row->methods, text(kept, "method"));
    if (method != row->methods.end()) row->method = static_cast<int>(method - row->methods.begin());
    row->sample = text(kept, "sample");
    row->titrant = text(kept, "titrant");
    row->burette = text(kept, "burette");
    row->value = text(kept, "value");
  }
  return std::optional(std::move(draft));
}

}  // namespace bathwright::desktop
