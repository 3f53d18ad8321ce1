#include <bathwright/shopfiles/fit_file.hpp>
#include <cmath>

#include "promises.hpp"

using namespace bathwright;

fuzz::BrokenPromise fuzz::fit_file(std::string_view input) {
  const auto task = shopfiles::read_fit_text("file.toml", input);
  if (!task) return in_words(task.problems(), "file.toml", input);
  if (task->source.empty()) return "measurements from nowhere";
  for (const regression::Unknown& unknown : task->unknowns) {
    const auto* interaction = std::get_if<activity::Interaction>(&unknown.what);
    if (!interaction) {
      if (!task->equilibria.stated(owner(unknown))) return "a constant of nothing: " + owner(unknown);
    } else if (!check(*interaction) || activity::model_with(interaction->parameter) != task->model) {
      return "an interaction that cannot be: " + text(*interaction);
    }
  }
  for (const regression::Measurement& m : task->measurements) {
    if (!(m.uncertainty > 0) || !std::isfinite(m.value)) return "a measurement that is not one";
    if (!of_solution(m.quantity) && m.of.empty()) return "a measurement of nothing";
    if (!m.where.starts_with("file.toml")) return "a measurement without its place";
  }
  return {};
}
