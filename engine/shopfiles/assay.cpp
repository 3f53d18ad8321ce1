#include "assay.hpp"

#include <bathwright/units/concentration.hpp>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <string>

namespace bathwright::shopfiles {
namespace {

constexpr std::string_view example = R"("99 %" or "22.2 %w/w Ni")";

Result<double> read_mass_share(std::string_view text, std::string_view where) {
  const auto concentration = units::read_concentration(text, where);
  if (concentration && concentration->unit == units::ConcentrationUnit::percent_by_mass) {
    return concentration->value / 100;
  }
  return units::read_fraction(text, where);
}

bool is_symbol(std::string_view word) { return !word.empty() && word[0] >= 'A' && word[0] <= 'Z'; }

}  // namespace

Result<double> read_assay(std::string_view text, const matter::Formula& substance, std::string_view where) {
  const auto problem = [&](std::string what, std::string expected) {
    return Problem{Fault::bad_input, std::string(where), std::move(what), std::move(expected), ""};
  };
  const std::size_t blank = text.rfind(' ');
  const std::string_view last = blank == text.npos ? text : text.substr(blank + 1);
  const bool of_element = is_symbol(last);
  const auto share = read_mass_share(of_element ? text.substr(0, text.size() - last.size()) : text, where);
  if (!share) return share.problems();
  if (*share == 0) return problem("is zero", "an assay, as " + std::string(example));
  if (!of_element) return *share;

  const auto element = matter::Formula::parse(last, where);
  if (!element) return element.problems();
  const double atoms = element->atoms().size() == 1 ? substance.count(element->atoms()[0].element) : 0;
  if (atoms == 0) {
    return problem(std::string(last) + " is not an element of " + substance.text(),
                   "the content of one of its elements, as " + std::string(example));
  }
  const double pure = atoms * element->molar_mass().v / element->atoms()[0].count / substance.molar_mass().v;
  if (*share > pure) {
    return problem("is more " + std::string(last) + " than pure " + substance.text() + " holds",
                   "up to " + units::significant(100 * pure) + " %w/w " + std::string(last));
  }
  return *share / pure;
}

}  // namespace bathwright::shopfiles
