#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/reactive_kind.hpp>
#include <cctype>

namespace bathwright::matter {
namespace {

/// Whether `part` stands in `formula` as a whole: "F" in "NaF" and "F^-", not in "Fe" or "F6".
bool holds(std::string_view formula, std::string_view part) {
  for (std::size_t at = formula.find(part); at != std::string_view::npos; at = formula.find(part, at + 1)) {
    const std::size_t end = at + part.size();
    if (end == formula.size()) return true;
    const auto next = static_cast<unsigned char>(formula[end]);
    if (!std::islower(next) && !std::isdigit(next)) return true;
  }
  return false;
}

std::string_view without_crystal_water(std::string_view formula) {
  const std::size_t water = formula.rfind('.');
  return formula.ends_with("H2O") && water != std::string_view::npos ? formula.substr(0, water) : formula;
}

}  // namespace

bool ReactiveKind::is(std::string_view formula) const {
  const auto stands_in = [&](const std::string& part) { return holds(formula, part); };
  if (std::ranges::any_of(except, stands_in)) return false;
  return std::ranges::find(formulas, without_crystal_water(formula)) != formulas.end() ||
         std::ranges::any_of(groups, stands_in);
}

const std::vector<ReactiveKind>& reactive_kinds() {
  static const std::vector<ReactiveKind> kinds = [] {
    std::vector<ReactiveKind> read;
    const auto table = data::built_in_table("matter/reactive_kinds.csv", {"below_pH"});
    for (std::size_t i = 0; i < table.size(); ++i) {
      const auto row = table[i];
      read.push_back({std::string(row["kind"]), std::string(row["name"]), row.list("formulas"),
                      row.list("groups"), row.list("except"), row.list("in_acid"), row.number("below_pH")});
    }
    return read;
  }();
  return kinds;
}

std::vector<std::string> kinds_of(std::string_view formula) {
  std::vector<std::string> found;
  for (const ReactiveKind& kind : reactive_kinds())
    if (kind.is(formula)) found.push_back(kind.id);
  return found;
}

std::string kind_name(std::string_view id) {
  const auto found = std::ranges::find(reactive_kinds(), id, &ReactiveKind::id);
  return found == reactive_kinds().end() ? std::string(id) : found->name;
}

bool is_of_kind(std::string_view formula, std::string_view kind) {
  return std::ranges::any_of(reactive_kinds(),
                             [&](const ReactiveKind& one) { return one.id == kind && one.is(formula); });
}

bool holds_cyanide(std::string_view formula) {
  return is_of_kind(formula, "cyanide") || is_of_kind(formula, "bound-cyanide");
}

}  // namespace bathwright::matter
