#include "titrants.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using units::show;

/// The added share of a titrant that has stood; nothing where none is known by that name.
std::optional<double> u_of_state(const std::string& state) {
  if (std::ranges::count(titrant_states(), state) == 0) return std::nullopt;
  return uncertainty_term("titrant-" + state);
}

}  // namespace

Result<Titrants::Known> Titrants::known(const std::string& name, const std::string& where) const {
  const auto found = known_.find(name);
  if (found != known_.end()) return found->second;
  std::vector<std::string> names;
  for (const auto& [other, strength] : known_) names.push_back(other);
  const auto close = nearest(name, names);
  return Problem{
      Fault::bad_input, where, fmt::format("there is no standardised titrant \"{}\"", name),
      names.empty() ? "a strength in mol/L, or a [[standardised]] of this name"
                    : fmt::format("one of {}", fmt::join(names, ", ")),
      close ? fmt::format("Did you mean {}?", *close) : "Write [[standardised]] before it is used."};
}

Result<Titrants> Titrants::of(const std::vector<Standardised>& standardised) {
  Titrants all;
  Problems problems;
  const auto refuse = [&](const Problems& more) {
    problems.insert(problems.end(), more.begin(), more.end());
  };
  for (Standardised entry : standardised) {
    if (all.known_.contains(entry.name)) {
      refuse({Problem{Fault::bad_input, entry.where, "two titrants are called " + entry.name,
                      "a name of its own for each", "Rename one of them."}});
      continue;
    }
    entry.known_u_rel = uncertainty_term("titrant");
    if (!entry.known_name.empty()) {
      const auto by = all.known(entry.known_name, entry.where);
      if (!by) {
        refuse(by.problems());
        continue;
      }
      if (by->titrant != entry.against) {
        refuse({Problem{Fault::bad_input, entry.where,
                        fmt::format("{} is {}, not {}", entry.known_name, by->titrant, entry.against),
                        "the solution it was standardised against", "Name the other one."}});
        continue;
      }
      entry.known_strength = by->strength.value;
      entry.known_u_rel = by->strength.u_rel;
    }
    auto strength = strength_of(entry);
    if (!strength) {
      refuse(strength.problems());
      continue;
    }
    all.notes_.push_back(fmt::format("{}: {} {}, +/- {} %, {}", entry.name, show(strength->value),
                                     entry.titrant, units::significant(100 * strength->u_rel, 2),
                                     strength->how));
    all.known_.emplace(entry.name, Known{entry.titrant, *std::move(strength)});
  }
  if (!problems.empty()) return problems;
  return all;
}

Result<Titration> Titrants::filled_in(Titration t, const Method& method) const {
  Problems problems;
  const auto refuse = [&](std::string_view key, std::string what, std::string expected, std::string mend) {
    problems.push_back({Fault::bad_input, t.written.where(key, t.where), t.quantity + ": " + std::move(what),
                        std::move(expected), std::move(mend)});
  };
  const auto take = [&](const char* key, const std::string& name, const std::string& titrant,
                        units::MolesPerLitre& strength, double& u_rel) {
    if (name.empty()) return;
    const auto by = known(name, t.written.where(key, t.where));
    if (!by) {
      problems.insert(problems.end(), by.problems().begin(), by.problems().end());
    } else if (by->titrant != titrant) {
      refuse(key, fmt::format("{} is {}, and {} titrates with {}", name, by->titrant, method.id, titrant),
             titrant, "Name the titrant that was used.");
    } else {
      strength = by->strength.value;
      u_rel = by->strength.u_rel;
      t.written[key].text = fmt::format("{} ({})", show(strength), name);
    }
  };
  const bool back = method.kind == Kind::back;
  take("titrant", t.titrant_name, back ? method.back_titrant : method.titrant, t.titrant, t.u_titrant_rel);
  take("excess_strength", t.excess_name, method.titrant, t.excess_strength, t.u_excess_rel);

  if (t.equivalents > 0) {
    const std::string& titrant = back ? method.back_titrant : method.titrant;
    const auto usual = equivalents_of(titrant);
    if (usual && *usual != t.equivalents)
      refuse("titrant", fmt::format("{:g} eq/mol given, {} has {:g}", t.equivalents, titrant, *usual),
             "the strength in mol/L of " + titrant, "Check the label; mol/L leaves no doubt.");
  }
  if (!t.titrant_state.empty()) {
    const auto u = u_of_state(t.titrant_state);
    if (!u)
      refuse("titrant_state", fmt::format("nothing is known of a titrant that is \"{}\"", t.titrant_state),
             fmt::format("one of {}", fmt::join(titrant_states(), ", ")),
             "Leave it out for one with a certificate.");
    else  // on top of what its standardisation left open
      t.u_titrant_rel = std::hypot(t.u_titrant_rel, *u);
  }
  if (!problems.empty()) return problems;
  return t;
}

}  // namespace bathwright::analysis
