// The page that a bath type carries for people.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/conformance/check.hpp>

namespace bathwright::conformance {

/// README.md, Markdown: has the headings Modelled, Not modelled, Limits, Sources and Hazards, each with text
/// under it, and under Sources the key of every source in back quotes. `where` names the page in messages.
[[nodiscard]] std::vector<Check> check_page(const bath::BathType& type, const std::string& where,
                                            const std::string& page);

}  // namespace bathwright::conformance
