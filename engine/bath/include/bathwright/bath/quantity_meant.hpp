// What somebody meant who named a quantity as the bath type does not, for messages.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <optional>

namespace bathwright::bath {

/// The id of the quantity whose label the word is ("nickel"), or whose id it is without its charge ("Ni",
/// "SO4"), else the nearest id; nothing where none is near.
[[nodiscard]] std::optional<std::string> quantity_meant(const BathType& type, std::string_view word);

}  // namespace bathwright::bath
