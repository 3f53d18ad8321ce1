#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/standing.hpp>

namespace bathwright::sheets {

std::string_view words(Standing standing) {
  switch (standing) {
    case Standing::not_controlled:
      return "";
    case Standing::in_window:
      return "in window";
    case Standing::low:
      return "below window";
    case Standing::high:
      return "above window";
    case Standing::stop:
      return "stop";
  }
  return "";
}

Standing standing(const bath::BathType& type, std::string_view subject, double value) {
  const auto window = std::ranges::find(type.windows, subject, &bath::Window::subject);
  if (window == type.windows.end()) return Standing::not_controlled;
  // An open limit is NaN and compares false.
  if (value < window->stop_low || value > window->stop_high) return Standing::stop;
  if (value < window->low) return Standing::low;
  return value > window->high ? Standing::high : Standing::in_window;
}

Standing standing(const bath::Tank& tank, const bath::BathType& type, std::string_view quantity,
                  double value) {
  if (standing(type, quantity, value) == Standing::stop) return Standing::stop;
  const bath::Aim* aim = tank.aim(quantity);
  if (!aim) return Standing::not_controlled;
  if (value < aim->low) return Standing::low;
  return value > aim->high ? Standing::high : Standing::in_window;
}

namespace {

/// A salt as it is called on the bags of the tank's shelf; all else, and free acid above all, by the bath
/// type.
std::string called(const bath::Tank& tank, const bath::Quantity& quantity) {
  if (!quantity.salt_view) return quantity.label;
  for (const bath::ShelfItem& item : tank.shelf)
    if (item.stock.formula == quantity.formula.text()) return item.stock.name;
  return quantity.label;
}

}  // namespace

std::vector<Judged> judge(const bath::Tank& tank, const bath::BathType& type,
                          const std::vector<double>& quantity_g_per_L, double pH) {
  std::vector<Judged> judged;
  for (const bath::Aim& aim : tank.aims) {
    if (aim.quantity == "pH") {
      judged.push_back({&aim, "pH", "", pH, standing(tank, type, "pH", pH)});
      continue;
    }
    for (std::size_t i = 0; i < type.quantities.size(); ++i)
      if (type.quantities[i].id == aim.quantity)
        judged.push_back({&aim, called(tank, type.quantities[i]), "g/L", quantity_g_per_L[i],
                          standing(tank, type, aim.quantity, quantity_g_per_L[i])});
  }
  return judged;
}

}  // namespace bathwright::sheets
