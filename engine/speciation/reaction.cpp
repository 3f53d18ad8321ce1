#include <bathwright/speciation/reaction.hpp>
#include <charconv>
#include <cmath>

namespace bathwright::speciation {
namespace {

std::string_view trimmed(std::string_view text) {
  while (text.starts_with(' ')) text.remove_prefix(1);
  while (text.ends_with(' ')) text.remove_suffix(1);
  return text;
}

/// False when a term is empty or its coefficient is not positive.
bool parse_side(std::string_view text, std::vector<Term>& terms) {
  constexpr std::string_view joint = " + ";
  while (true) {
    const std::size_t end = text.find(joint);
    std::string_view part = trimmed(text.substr(0, end));
    double coefficient = 1;
    if (const std::size_t space = part.find(' '); space != std::string_view::npos) {
      const auto [stop, error] = std::from_chars(part.data(), part.data() + space, coefficient);
      if (error == std::errc{} && stop == part.data() + space) part = trimmed(part.substr(space));
    }
    if (part.empty() || !(coefficient > 0) || !std::isfinite(coefficient)) return false;
    terms.push_back({coefficient, std::string(part)});
    if (end == std::string_view::npos) return true;
    text.remove_prefix(end + joint.size());
  }
}

}  // namespace

Result<Reaction> parse_reaction(std::string_view text, std::string_view where) {
  const auto wrong = [&] {
    return Problem{Fault::bad_input, std::string(where),
                   "cannot read the reaction '" + std::string(text) + "'",
                   "reactants = products, e.g. H^+ + SO4^2- = HSO4^-", ""};
  };
  const std::size_t equals = text.find(" = ");
  if (equals == std::string_view::npos || text.find(" = ", equals + 3) != std::string_view::npos)
    return wrong();
  Reaction reaction;
  if (!parse_side(text.substr(0, equals), reaction.left) ||
      !parse_side(text.substr(equals + 3), reaction.right))
    return wrong();
  return reaction;
}

}  // namespace bathwright::speciation
