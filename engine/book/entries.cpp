#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <bathwright/book/entries.hpp>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <nlohmann/json.hpp>

namespace bathwright::book {
namespace {

using Json = nlohmann::json;
using logbook::EntryKind;

std::string text_at(const Json& body, const char* key) {
  return body.contains(key) && body[key].is_string() ? body[key].get<std::string>() : std::string();
}

std::optional<double> number_at(const Json& body, const char* key) {
  if (!body.contains(key) || !body[key].is_number()) return std::nullopt;
  return body[key].get<double>();
}

/// "14 kg" from {"amount": 14, "unit": "kg"} or {"amount": "14 kg"}.
std::string amount_of(const Json& body) {
  if (const auto number = number_at(body, "amount"))
    return fmt::format("{} {}", *number, text_at(body, "unit"));
  return text_at(body, "amount");
}

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_letter(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '^' || is_digit(c); }

/// Every number with a word behind it, "14 kg"; a number without one is no quantity.
std::vector<std::string> quantities_in(const std::string& note) {
  std::vector<std::string> found;
  for (std::size_t i = 0; i < note.size();) {
    if (!is_digit(note[i]) || (i > 0 && is_letter(note[i - 1]))) {
      ++i;
      continue;
    }
    std::size_t end = i;
    while (end < note.size() && (is_digit(note[end]) || note[end] == '.' || note[end] == ',')) ++end;
    while (end > i && !is_digit(note[end - 1])) --end;
    std::size_t unit = end;
    while (unit < note.size() && note[unit] == ' ') ++unit;
    std::size_t stop = unit;
    while (stop < note.size() && is_letter(note[stop])) ++stop;
    if (stop > unit) found.push_back(note.substr(i, end - i) + " " + note.substr(unit, stop - unit));
    i = std::max(stop, end);
  }
  return found;
}

/// The one quantity of a note that this reader can read; nothing where there is none, or more.
template <class Reader>
auto only_in(const std::string& note, Reader read)
    -> std::optional<std::decay_t<decltype(*read(std::string_view()))>> {
  std::optional<std::decay_t<decltype(*read(std::string_view()))>> only;
  for (const std::string& quantity : quantities_in(note)) {
    const auto value = read(std::string_view(quantity));
    if (!value) continue;
    if (only) return std::nullopt;
    only = *value;
  }
  return only;
}

std::string lower(std::string text) {
  for (char& c : text)
    if (c >= 'A' && c <= 'Z') c = static_cast<char>(c - 'A' + 'a');
  std::ranges::replace(text, '-', ' ');
  std::ranges::replace(text, '_', ' ');
  return text;
}

/// The chemical of the shelf a text names; where one name holds another ("nickel sulfate heptahydrate"), the
/// longer.
const bath::ShelfItem* named_in(const std::string& text, const bath::Tank& tank) {
  const std::string words = lower(text);
  const bath::ShelfItem* best = nullptr;
  std::size_t longest = 0;
  bool two = false;
  for (const bath::ShelfItem& item : tank.shelf) {
    std::vector<std::string> names{item.stock.id, item.stock.name};
    names.insert(names.end(), item.stock.aliases.begin(), item.stock.aliases.end());
    std::size_t length = 0;
    for (const std::string& name : names)
      if (!name.empty() && words.find(lower(name)) != std::string::npos)
        length = std::max(length, name.size());
    if (length == 0) continue;
    two = best && length == longest;
    if (length > longest) {
      best = &item;
      longest = length;
    }
  }
  return two ? nullptr : best;
}

Problem unread(EntryKind kind, const std::string& expected) {
  return {Fault::bad_input, std::string(logbook::name(kind)), "cannot be read as an amount", expected, ""};
}

std::optional<double> kg_of(const bath::ShelfItem& item, const std::string& amount) {
  if (const auto mass = units::read_mass(amount)) return mass->v;
  const auto volume = units::read_volume(amount);
  if (volume && item.stock.kg_per_L > 0) return volume->v * item.stock.kg_per_L;
  return std::nullopt;
}

Result<Movement> addition(const Json& body, const bath::Tank& tank) {
  const Problem refused =
      unread(EntryKind::addition, "one chemical of the tank's shelf and one mass or volume");
  const std::string chemical = text_at(body, "chemical"), note = text_at(body, "note");
  const bath::ShelfItem* item = chemical.empty() ? named_in(note, tank) : tank.on_shelf(chemical);
  if (!item && !chemical.empty()) item = named_in(chemical, tank);
  if (!item) return refused;
  std::optional<double> kg;
  std::string amount = amount_of(body);
  if (!amount.empty()) {
    kg = kg_of(*item, amount);
  } else {
    for (const std::string& quantity : quantities_in(note)) {
      const auto this_kg = kg_of(*item, quantity);
      if (!this_kg) continue;
      if (kg) return refused;
      kg = this_kg;
      amount = quantity;
    }
  }
  if (!kg || !(*kg >= 0)) return refused;
  return Movement{Addition{item->stock.id, *kg}, amount + " " + item->stock.id, std::nullopt};
}

std::optional<double> litres(const Json& body) {
  if (const auto number = number_at(body, "volume_L")) return number;
  const std::string volume = text_at(body, "volume");
  if (!volume.empty())
    if (const auto read = units::read_volume(volume)) return read->v;
  if (const auto read = only_in(text_at(body, "note"), [](auto t) { return units::read_volume(t); }))
    return read->v;
  return std::nullopt;
}

Result<Movement> level(const Json& body, const bath::Tank& tank) {
  std::optional<double> L = litres(body);
  std::optional<units::Decimetres> below;
  if (const std::string text = text_at(body, "level_below_mark"); !text.empty()) {
    if (const auto read = units::read_length(text)) below = *read;
  } else if (const std::string note = text_at(body, "note"); note.find("below") != std::string::npos) {
    below = only_in(note, [](auto t) { return units::read_length(t); });
  }
  if (below && tank.surface) L = tank.working_volume.v - below->v * tank.surface->v;  // dm * dm2 = L
  if (!L || !(*L > 0))
    return unread(EntryKind::level, "a volume, or a length below the mark of a tank with a surface");
  return Movement{StoodAt{*L}, "level at " + units::show(units::Litres{*L}), std::nullopt};
}

Result<Movement> dump(const Json& body) {
  const auto L = litres(body);
  if (!L || !(*L >= 0)) return unread(EntryKind::dump, "one volume");
  return Movement{Dumped{*L}, units::show(units::Litres{*L}) + " dumped", std::nullopt};
}

/// A number before "Ah" or "A h".
std::optional<double> ampere_hours_in(const std::string& note) {
  for (const std::string& quantity : quantities_in(note)) {
    if (!quantity.ends_with(" Ah") && !quantity.ends_with(" ah")) continue;
    std::string digits = quantity.substr(0, quantity.size() - 3);
    std::erase(digits, ',');
    return std::stod(digits);
  }
  return std::nullopt;
}

Result<Movement> work(const Json& body, const bath::BathType& type) {
  std::optional<double> units = number_at(body, "Ah");
  if (!units) units = number_at(body, "amount");
  if (!units) units = ampere_hours_in(text_at(body, "note"));
  std::string use = text_at(body, "use");
  if (use.empty()) {
    for (const bath::Use& candidate : type.uses) {
      if (candidate.counted_in != bath::CountedIn::ampere_hour) continue;
      if (!use.empty()) return unread(EntryKind::ampere_hours, "a use of the bath type: it has several");
      use = candidate.id;
    }
  }
  if (!units || !(*units >= 0) || use.empty())
    return unread(EntryKind::ampere_hours, "ampere hours of a use of the bath type");
  return Movement{Worked{use, *units}, fmt::format("{} Ah", units::significant(*units)), std::nullopt};
}

}  // namespace

Result<Movement> movement_of(EntryKind kind, const std::string& text, const bath::Tank& tank,
                             const bath::BathType& type) {
  const Json body = Json::parse(text, nullptr, false);
  if (!body.is_object()) return unread(kind, "a JSON object");
  switch (kind) {
    case EntryKind::addition:
      return addition(body, tank);
    case EntryKind::level:
      return level(body, tank);
    case EntryKind::dump:
      return dump(body);
    case EntryKind::ampere_hours:
      return work(body, type);
    default:
      return unread(kind, "an addition, a level, a dump or ampere hours");
  }
}

}  // namespace bathwright::book
