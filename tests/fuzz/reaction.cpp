#include <bathwright/speciation/reaction.hpp>
#include <cmath>

#include "promises.hpp"

using bathwright::speciation::Term;

fuzz::BrokenPromise fuzz::reaction(std::string_view input) {
  const auto read = bathwright::speciation::parse_reaction(input, "here");
  if (!read) return in_words(read.problems(), "here", input);
  for (const auto* side : {&read->left, &read->right}) {
    if (side->empty()) return "a side of nothing";
    for (const Term& term : *side) {
      if (!(term.coefficient > 0) || !std::isfinite(term.coefficient)) return "a coefficient that is not one";
      if (term.name.empty()) return "a term without a name";
    }
  }
  return {};
}
