#include <algorithm>
#include <bathwright/matter/formula.hpp>
#include <cmath>

#include "promises.hpp"

using bathwright::matter::Atom;
using bathwright::matter::Formula;

fuzz::BrokenPromise fuzz::formula(std::string_view input) {
  const auto read = Formula::parse(input, "here");
  if (!read) return in_words(read.problems(), "here", input);
  if (read->text() != input) return "its text is not what was read";
  const double mass = read->molar_mass().v;
  if (!(mass > 0) || !std::isfinite(mass)) return "a molar mass that is not one";
  if (read->atoms().empty()) return "a formula of nothing";
  if (!std::ranges::all_of(read->atoms(),
                           [](const Atom& atom) { return atom.count > 0 && atom.count <= 1e4; }))
    return "a count of atoms that is not one";
  if (!is_utf8(read->pretty())) return "not UTF-8: " + read->pretty();

  if (read->charge() == 0) return {};
  const Formula counter = *Formula::parse(read->charge() > 0 ? "Cl^-" : "Na^+");
  const Formula salt = read->charge() > 0 ? Formula::salt(*read, counter) : Formula::salt(counter, *read);
  if (salt.charge() != 0) return "a salt with a charge: " + salt.text();
  const double counter_ions = std::abs(read->charge());
  if (std::abs(salt.molar_mass().v - mass - counter_ions * counter.molar_mass().v) >
      1e-9 * salt.molar_mass().v)
    return "a salt that lost mass: " + salt.text();
  return {};
}
