#include <algorithm>
#include <bathwright/sheets/chance.hpp>
#include <bathwright/sheets/names.hpp>
#include <cmath>

namespace bathwright::sheets {
namespace {

/// Never more than it is: 94.9 % is no 95 %.
std::string per_cent(double share) {
  const double floor = std::floor(100 * share + 1e-9);
  if (share > 0.99) return "more than 99 %";
  return floor < 1 ? "less than 1 %" : fixed(floor, 0) + " %";
}

/// "nickel sulfate", "pH".
std::string called(const bath::BathType& type, const std::string& quantity) {
  const bath::Quantity* known = type.quantity(quantity);
  return known ? known->label : quantity;
}

/// "a second nickel analysis": a component by the label of what is analysed of it.
std::string again(const bath::BathType& type, const std::string& at) {
  if (at == "pH") return "a second pH reading";
  if (at == "volume") return "a second look at the level";
  const auto of_it = std::ranges::find_if(type.quantities, [&](const bath::Quantity& q) {
    return !q.salt_view && q.counts.size() == 1 && q.counts.contains(at);
  });
  return "a second " + (of_it == type.quantities.end() ? pretty(at) : of_it->label) + " analysis";
}

}  // namespace

std::string chance_of_ending_inside(const bath::BathType& type, const dosing::Plan& plan) {
  if (!plan.chances) return "Chance of ending inside every window: not known.";
  const dosing::Chances& chances = *plan.chances;
  const double whole = chances.in_every_window;
  const std::string told = per_cent(whole) + " chance of ending inside every window";
  if (whole >= dosing::promised || chances.levels.empty())
    return (whole > 0.99 ? "More than 99 % chance of ending inside every window" : told) + ".";
  const auto& doubtful = *std::ranges::min_element(chances.levels, {}, &dosing::LevelChance::inside);
  std::string text = (whole < 0.01 ? "Less than 1 % chance of ending inside every window" : "Only " + told) +
                     ": " + called(type, doubtful.quantity) + " is the doubtful one; ";
  constexpr double worth_it = 0.02;
  const auto& look = plan.second_look;
  if (look && look->in_every_window >= whole + worth_it)
    return text + again(type, look->at) + " would make it " + per_cent(look->in_every_window) + ".";
  return text + "no second analysis would help much.";
}

std::string chance_of_staying_dissolved(const bath::Tank& tank, const dosing::Plan& plan,
                                        const Units& units) {
  std::string text;
  if (!plan.chances) return text;
  for (const dosing::SolidChance& solid : plan.chances->solids) {
    if (!solid.working || *solid.working >= dosing::promised) continue;
    text +=
        (text.empty() ? "Chance of staying dissolved at " + units.degrees(tank.temperature) + ": " : ", ") +
        pretty(solid.solid) + " " + per_cent(*solid.working);
  }
  return text.empty() ? text : text + ".";
}

}  // namespace bathwright::sheets
