// The keys with which a file states a solution, for all files that do. Private to shopfiles.
#pragma once

#include <bathwright/solution/recipe.hpp>

#include "schema.hpp"

namespace bathwright::shopfiles {

/// Nothing for "auto".
std::optional<activity::ModelKind> read_model(Table& root);

/// Temperature, held pH, ingredients, solids and gases of a solution; all but its model.
solution::Recipe read_recipe(Table& root, std::string_view file);

}  // namespace bathwright::shopfiles
