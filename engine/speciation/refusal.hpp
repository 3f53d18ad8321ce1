// Why there is no answer, in the words of the person who asked.
#pragma once

#include "workspace.hpp"

namespace bathwright::speciation {

/// Why no answer exists where the solution could be followed only as far as `reached`: a pH that cannot be
/// held, no liquid left, a strength the model does not follow; else not_converged.
Problem refusal(const Workspace& reached, const ChemicalSystem& system, const Task& task);

/// Of an answer that does not pass its check.
Problem failed_check(const Residuals& residuals);

}  // namespace bathwright::speciation
