// Safety by formula: what a bath type that holds something deadly must say and forbid.
#include <algorithm>
#include <bathwright/matter/reactive_kind.hpp>
#include <bathwright/matter/stock.hpp>
#include <cctype>

#include "type_checks.hpp"

namespace bathwright::plugin_host {
namespace {

/// What can kill or maim, by its kinds, and a word that its caution cannot do without.
struct Deadly {
  const char* common_name;
  std::initializer_list<const char*> kinds;
  std::initializer_list<const char*> words;
};

const Deadly deadly_substances[] = {
    {"cyanide", {"cyanide", "bound-cyanide"}, {"cyanide"}},
    {"chromium(VI)", {"chromium-6"}, {"chromium(VI)", "chromic"}},
    {"fluoride", {"fluoride"}, {"hydrofluoric", "hydrogen fluoride"}},
    {"formaldehyde", {"formaldehyde"}, {"formaldehyde"}},
    {"a strong oxidiser",
     {"peroxide", "chlorate", "permanganate", "hypochlorite", "other-oxidiser"},
     {"oxidiser"}},
    {"hydrazine", {"hydrazine"}, {"hydrazine"}},
};

bool mentions(const std::string& text, const Deadly& substance) {
  std::string lower = text;
  std::ranges::transform(lower, lower.begin(), [](unsigned char c) { return std::tolower(c); });
  return std::ranges::any_of(substance.words, [&](std::string word) {
    std::ranges::transform(word, word.begin(), [](unsigned char c) { return std::tolower(c); });
    return lower.find(word) != std::string::npos;
  });
}

}  // namespace

void check_safety(const bath::BathType& type, Report& report) {
  std::vector<std::string> formulas;
  for (const auto& component : type.components) formulas.push_back(component.species);
  for (const auto& quantity : type.quantities) formulas.push_back(quantity.formula.text());
  for (const auto& rule : type.additions)
    if (const auto* stock = matter::StockCatalogue::built_in().find(rule.supply))
      formulas.push_back(stock->formula);
  for (const Deadly& substance : deadly_substances) {
    const auto held = std::ranges::find_if(formulas, [&](const std::string& formula) {
      return std::ranges::any_of(substance.kinds,
                                 [&](const char* kind) { return matter::is_of_kind(formula, kind); });
    });
    if (held == formulas.end()) continue;
    const bool told = std::ranges::any_of(type.cautions, [&](const bath::Caution& caution) {
      return caution.level == bath::Level::stop && mentions(caution.text, substance);
    });
    if (!told)
      report.add(
          {"", 0, "cautions"},
          "a bath with " + std::string(substance.common_name) + " (" + *held +
              ") has no caution of level stop that speaks of it",
          "what can kill, said plainly, with the word '" + std::string(*substance.words.begin()) + "'");
    if (substance.common_name != std::string("cyanide")) continue;
    const bool locked = std::ranges::any_of(type.incompatibilities, [](const bath::Incompatible& row) {
      return row.with == "acid_cyanide" && row.level == bath::Level::stop;
    });
    const bool alkaline = std::ranges::none_of(type.windows, [](const bath::Window& w) {
      return w.subject == "pH" && w.low < 7;  // acid gold: its cyanide is bound, and the bath is acid itself
    });
    if (alkaline && !locked)
      report.add({"", 0, "incompatibilities"}, "a cyanide bath without acid among them",
                 "a row of level stop with 'acid_cyanide'");
  }
}

}  // namespace bathwright::plugin_host
