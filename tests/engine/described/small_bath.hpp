// A small, sound bath type in TOML, one of every table, for tests to add to and to spoil.
#pragma once

#include <bathwright/described/bath_type_file.hpp>
#include <catch2/catch.hpp>
#include <string>

/// Copper sulfate in sulfuric acid. Lines 1 to 60 are what the failure tests count on.
inline const std::string small_bath = R"(id = "test-bath"
name = "Test bath"
version = "1.2"
author = "an author"
licence = "MIT"
summary = "a summary"
validity = "its limits"
min_C = 10
max_C = 70
convention = "association"

[source.a-book]
citation = "An author, A book, a publisher, 1976"

[components]
"H^+" = "analysis"
"Cu^2+" = "analysis"
"SO4^2-" = "charge"

[[quantity]]
id = "Cu^2+"
label = "copper"
role = "metal"

[[quantity]]
id = "H2SO4"
label = "sulfuric acid"
counts = { "H^+" = 0.5 }
role = "salt"

[[own_species]]
name = "CuOH^+"
reaction = "Cu^2+ + H2O = CuOH^+ + H^+"
log10_K = -7.5
uncertainty = 0.2
source = "a-book"

[[own_solid]]
name = "CuSO4.3H2O"
formula = "CuSO4.3H2O"
reaction = "CuSO4.3H2O(s) = Cu^2+ + SO4^2- + 3 H2O"
log10_K = -2.3
min_C = 10
max_C = 60
source = "a-book"

[[watched]]
solid = "CuSO4.5H2O"
sign = "blue crystals"

[[window]]
subject = "Cu^2+"
low = 40
aim = 50
high = 60
source = "a-book"

[[addition]]
supply = "copper-sulfate"
how = "dissolve in a side tank"
largest_rise_g_per_L = 10
wait_h = 1
order = 1
source = "a-book"

[[caution]]
level = "stop"
text = "Acid into water, never water into acid."
source = "a-book"

[[incompatible]]
with = "acid_cyanide"
why = "Hydrogen cyanide."
level = "stop"
source = "a-book"

[[use]]
id = "plating"
label = "plating"
per = "Ah"
effects = { "H2SO4" = -0.1 }
effects_uncertainty = 0.2
deposits = "Cu^2+"
electrons = 2
cathode_efficiency = { value = 0.99 }
anode_efficiency = { value = 1 }
source = "a-book"

[[indicator]]
id = "acid-to-copper"
label = "acid to copper"
meaning = "throw"
unit = "g/g"
value = { g_per_L = { "H2SO4" = 1 } }
over = { g_per_L = { "Cu^2+" = 1 } }
)";

inline bathwright::Result<bathwright::bath::BathType> read_small(const std::string& text) {
  return bathwright::described::read_bath_type_text("small.bathtype.toml", text);
}
