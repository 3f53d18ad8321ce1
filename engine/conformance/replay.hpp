// Hand-worked cases of a bath type, computed by the engine and compared.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/conformance/check.hpp>

#include "examples_file.hpp"

namespace bathwright::conformance {

/// One check for each expectation: it holds where the computed figure lies within its tolerance or on the
/// stated side of its limit. An example that cannot be computed, or that speaks of what the bath type does
/// not have, fails.
[[nodiscard]] std::vector<Check> replay(const bath::BathType& type, const std::vector<Example>& examples);

}  // namespace bathwright::conformance
