#include <algorithm>
#include <array>
#include <bathwright/activity/interaction.hpp>
#include <cmath>

#include "pitzer_parameters.hpp"
#include "sit_model.hpp"

namespace bathwright::activity {
namespace {

using enum InteractionParameter;

std::vector<std::string> sorted(std::vector<std::string> names) {
  std::sort(names.begin(), names.end());
  return names;
}

struct Place {
  bool good;
  const char* expected;
};

Place place_of(InteractionParameter parameter, const std::vector<std::string>& solutes) {
  int cations = 0, anions = 0, neutrals = 0;
  for (const std::string& solute : solutes) {
    const int z = charge_in_name(solute);
    ++(z > 0 ? cations : z < 0 ? anions : neutrals);
  }
  const auto names = sorted(solutes);
  const bool all_differ = std::adjacent_find(names.begin(), names.end()) == names.end();
  const std::size_t n = solutes.size();
  switch (parameter) {
    case theta:
      return {n == 2 && all_differ && (cations == 2 || anions == 2), "two cations or two anions"};
    case lambda:
      return {n == 2 && neutrals > 0, "a neutral solute and any other"};
    case psi:
      return {n == 3 && all_differ && neutrals == 0 && cations > 0 && anions > 0,
              "two ions of one sign and one of the other"};
    case zeta:
      return {n == 3 && neutrals == 1 && cations == 1 && anions == 1,
              "a neutral solute, a cation and an anion"};
    case mu:
      return {n == 3 && neutrals == 3, "three neutral solutes"};
    case beta0:
    case beta1:
    case beta2:
    case cphi:
    case epsilon:
      break;
  }
  return {n == 2 && cations == 1 && anions == 1, "one cation and one anion"};
}

/// The solutes of an interaction, each once, with the position of each of its members.
struct Alone {
  std::vector<Solute> solutes;
  std::vector<std::uint32_t> members;

  explicit Alone(const Interaction& interaction) {
    for (const std::string& name : interaction.solutes) {
      const auto known =
          std::find_if(solutes.begin(), solutes.end(), [&](const Solute& s) { return s.name == name; });
      members.push_back(static_cast<std::uint32_t>(known - solutes.begin()));
      if (known == solutes.end()) solutes.push_back({name, charge_in_name(name)});
    }
    std::sort(members.begin(), members.end());
  }

  [[nodiscard]] bool are(std::vector<std::uint32_t> others) const {
    std::sort(others.begin(), others.end());
    return others == members;
  }
};

double of_pair(InteractionParameter parameter, const BinaryTerm& term, double charge_product) {
  switch (parameter) {
    case beta0:
      return term.beta0;
    case beta1:
      return term.beta1;
    case beta2:
      return term.beta2;
    default:
      return term.c * 2 * std::sqrt(std::abs(charge_product));
  }
}

}  // namespace

std::string_view name(InteractionParameter parameter) {
  constexpr std::array<std::string_view, interaction_parameters> names{
      "beta0", "beta1", "beta2", "cphi", "theta", "lambda", "psi", "zeta", "mu", "epsilon"};
  return names[static_cast<std::size_t>(parameter)];
}

ModelKind model_with(InteractionParameter parameter) {
  return parameter == epsilon ? ModelKind::sit : ModelKind::pitzer;
}

std::string solutes_of(const Interaction& interaction) {
  std::string names;
  for (const std::string& solute : interaction.solutes) names += (names.empty() ? "" : " - ") + solute;
  return names;
}

std::string text(const Interaction& interaction) {
  return std::string(name(interaction.parameter)) + " of " + solutes_of(interaction);
}

bool same_place(const Interaction& a, const Interaction& b) {
  return a.parameter == b.parameter && sorted(a.solutes) == sorted(b.solutes);
}

Outcome check(const Interaction& interaction) {
  const Place place = place_of(interaction.parameter, interaction.solutes);
  if (place.good) return Done{};
  return Problem{Fault::bad_input, interaction.where, "there is no " + text(interaction),
                 std::string(name(interaction.parameter)) + " belongs to " + place.expected, ""};
}

double value_in_tables(const Interaction& interaction) {
  constexpr units::Celsius room{25};
  const Alone alone(interaction);
  if (interaction.parameter == epsilon) {
    const auto pairs = sit_parameters(alone.solutes, room, {}).pairs;
    return pairs.empty() ? 0 : pairs.front().epsilon.constant;
  }
  const PitzerParameters all = pitzer_parameters(alone.solutes, room, {}, {});
  switch (interaction.parameter) {
    case theta:
      return all.like_pairs.empty() ? 0 : all.like_pairs.front().theta;
    case lambda:
      for (const NeutralPair& pair : all.neutral_pairs)
        if (alone.are({pair.neutral, pair.other})) return pair.lambda;
      return 0;
    case psi:
    case zeta:
    case mu:
      for (const Triplet& triplet : all.triplets)
        if (alone.are({triplet.i, triplet.j, triplet.k})) return triplet.value;
      return 0;
    default:
      return all.binary.empty() ? 0
                                : of_pair(interaction.parameter, all.binary.front(),
                                          alone.solutes[0].charge * alone.solutes[1].charge);
  }
}

}  // namespace bathwright::activity
