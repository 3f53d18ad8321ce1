#include <algorithm>
#include <bathwright/bath/bath_type.hpp>

namespace bathwright::bath {

const Quantity* BathType::quantity(std::string_view wanted) const {
  const auto found =
      std::find_if(quantities.begin(), quantities.end(), [&](const Quantity& q) { return q.id == wanted; });
  return found == quantities.end() ? nullptr : &*found;
}

bool BathType::acid_by_pH() const {
  return std::any_of(components.begin(), components.end(),
                     [](const Component& c) { return c.found_by == FoundBy::pH; });
}

}  // namespace bathwright::bath
