#include <bathwright/activity/make_model.hpp>

#include "charge_models.hpp"
#include "pitzer_model.hpp"
#include "sit_model.hpp"

namespace bathwright::activity {

ParameterSets parameter_sets_for(const std::map<std::string, double>& total_molality) {
  const auto total = [&](const char* name) {
    const auto found = total_molality.find(name);
    return found == total_molality.end() ? 0.0 : found->second;
  };
  ParameterSets sets;
  sets.acid = acid_set_for(total("Cl^-"), total("SO4^2-"));
  if (!(total("Zn^2+") > 0)) return sets;
  // Twice the zinc chloride to which the published fit goes; the alkali from which the zincate set holds.
  constexpr double strong_chloride = 2.4, strong_alkali = 0.3;  // mol/kg
  if (-total("H^+") > strong_alkali)
    sets.zinc = ZincSet::alkaline;
  else if (total("Cl^-") > strong_chloride)
    sets.zinc = ZincSet::chloride;
  return sets;
}

Result<std::unique_ptr<const ActivityModel>> make_model(ModelKind kind, std::span<const Solute> solutes,
                                                        units::Celsius t, ParameterSets sets,
                                                        std::span<const Interaction> stated) {
  if (solutes.size() > max_solutes)
    return Problem{Fault::out_of_range, "", std::to_string(solutes.size()) + " dissolved species",
                   "at most " + std::to_string(max_solutes), ""};
  if (!(t.v >= 0 && t.v <= 100))
    return Problem{Fault::out_of_range, "temperature", std::to_string(t.v) + " degC", "0 to 100 degC", ""};
  for (const Interaction& one : stated) {
    if (const Outcome good = check(one); !good) return good.problems();
    if (model_with(one.parameter) != kind)
      return Problem{Fault::inconsistent_data, one.where,
                     "the model " + std::string(name(kind)) + " has no " + text(one),
                     "the model " + std::string(name(model_with(one.parameter))), ""};
  }
  std::unique_ptr<const ActivityModel> model;
  switch (kind) {
    case ModelKind::davies:
      model = std::make_unique<DaviesModel>(solutes, t);
      break;
    case ModelKind::debye_huckel:
      model = std::make_unique<DebyeHueckelModel>(solutes, t);
      break;
    case ModelKind::sit:
      model = std::make_unique<SitModel>(solutes, t, stated);
      break;
    case ModelKind::pitzer:
      model = std::make_unique<PitzerModel>(solutes, t, pitzer_parameters(solutes, t, sets, stated));
      break;
  }
  return model;
}

}  // namespace bathwright::activity
