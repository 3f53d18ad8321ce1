// The uncertainties every result rests on: class A glass and the terms of common practice
// (data/analysis/glassware.csv, uncertainty_terms.csv).
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::analysis {

/// Standard uncertainty, mL, of the volume from the smallest class A burette, pipette or flask that holds
/// `volume_mL`: tolerance/sqrt 6, a triangular distribution. Nothing where none in the table is large enough.
[[nodiscard]] std::optional<double> u_burette_mL(double volume_mL);
[[nodiscard]] std::optional<double> u_pipette_mL(double volume_mL);
[[nodiscard]] std::optional<double> u_flask_mL(double volume_mL);
[[nodiscard]] double largest_burette_mL();
[[nodiscard]] double largest_pipette_mL();
[[nodiscard]] double largest_flask_mL();

/// A row of uncertainty_terms.csv, in its unit. Asserts that there is one.
[[nodiscard]] double uncertainty_term(std::string_view id);

/// What may be said of a titrant that is not simply one with a certificate: the rows "titrant-..." without
/// that word.
[[nodiscard]] const std::vector<std::string>& titrant_states();

}  // namespace bathwright::analysis
