// The words in which a file type states its keys, for the readers of this part. Private to shopfiles.
#pragma once

#include <bathwright/toml_schema/schema.hpp>

namespace bathwright::shopfiles {

using namespace toml_schema;

}  // namespace bathwright::shopfiles
