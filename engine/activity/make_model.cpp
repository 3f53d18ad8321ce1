#include <bathwright/activity/make_model.hpp>

#include "charge_models.hpp"
#include "pitzer_model.hpp"

namespace bathwright::activity {

Result<std::unique_ptr<const ActivityModel>> make_model(ModelKind kind, std::span<const Solute> solutes,
                                                        units::Celsius t, AcidSet acid_set) {
  if (solutes.size() > max_solutes)
    return Problem{Fault::out_of_range, "", std::to_string(solutes.size()) + " dissolved species",
                   "at most " + std::to_string(max_solutes), ""};
  if (!(t.v >= 0 && t.v <= 100))
    return Problem{Fault::out_of_range, "temperature", std::to_string(t.v) + " degC", "0 to 100 degC", ""};
  std::unique_ptr<const ActivityModel> model;
  switch (kind) {
    case ModelKind::davies:
      model = std::make_unique<DaviesModel>(solutes, t);
      break;
    case ModelKind::debye_huckel:
      model = std::make_unique<DebyeHueckelModel>(solutes, t);
      break;
    case ModelKind::pitzer:
      model = std::make_unique<PitzerModel>(solutes, t, pitzer_parameters(solutes, t, acid_set));
      break;
  }
  return model;
}

}  // namespace bathwright::activity
