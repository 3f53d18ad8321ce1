#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <bathwright/matter/formula.hpp>
#include <cassert>
#include <cmath>
#include <map>
#include <numeric>
#include <set>

#include "elements.hpp"

namespace bathwright::matter {
namespace {

using Composition = std::map<int, double>;  // atomic number -> atoms per formula unit

constexpr std::size_t longest_text = 200;
constexpr double highest_count = 1e4;
constexpr int highest_charge = 20;
constexpr std::string_view middle_dot = "·";

bool is_digit(char c) { return c >= '0' && c <= '9'; }
bool is_upper(char c) { return c >= 'A' && c <= 'Z'; }
bool is_lower(char c) { return c >= 'a' && c <= 'z'; }

void add(Composition& to, const Composition& from, double times) {
  for (const auto& [number, count] : from) to[number] += times * count;
}

bool is_water(const Composition& part) { return part == Composition{{1, 2}, {8, 1}}; }

// formula = part {("." | "·") part} ["^" [digits] sign];  part = [multiplier] group;
// group = {(symbol | token | "(" group ")" | "[" group "]") [count]}.
// The first problem ends the parse: what follows a slip is seldom another one.
class Parser {
 public:
  explicit Parser(std::string_view text) : text_(text) {}

  bool formula() {
    if (text_.empty()) return fail("nothing is written", "a formula such as NiSO4.6H2O");
    if (text_.size() > longest_text)
      return fail("the formula is longer than 200 characters", "a shorter one");
    bool first = true;
    do {
      const double times = is_digit(peek()) ? multiplier() : 1;
      Composition part;
      if (!group(part, '\0')) return false;
      if (!first && is_water(part)) crystal_water += times;
      add(atoms, part, times);
      first = false;
    } while (separator());
    if (peek() == '^' && !read_charge()) return false;
    if (at_ < text_.size()) return unexpected();
    for (const auto& [number, count] : atoms) {
      if (!(count > 0 && count <= highest_count)) {
        return fail("a count of atoms is 0 or above 10000", "a count from 1 to 10000");
      }
    }
    return true;
  }

  Composition atoms;
  int charge = 0;
  double crystal_water = 0;
  std::set<std::string> ligands;
  Problem problem;

 private:
  char peek() const { return at_ < text_.size() ? text_[at_] : '\0'; }

  bool fail(std::string what, std::string expected, std::string try_this = "") {
    problem.what = "formula \"" + std::string(whole_letters(text_, longest_text)) + "\": " + std::move(what);
    problem.expected = std::move(expected);
    problem.try_this = std::move(try_this);
    return false;
  }

  std::string place() const { return " at character " + std::to_string(at_ + 1); }

  bool unexpected() {
    const char c = peek();
    if (c == ')' || c == ']')
      return fail("a closing bracket" + place() + " was never opened", "balanced brackets");
    if (c == ' ') return fail("a blank" + place(), "a formula alone, without a phase label or a note");
    if (c == '\0' || c == '.' || c == '^' || text_.substr(at_).starts_with(middle_dot)) {
      return fail("nothing stands before the end, a dot or the charge" + place(),
                  "an element, a ligand or a bracket");
    }
    return fail("cannot be read" + place(),
                "an element, a ligand token, a bracket, a number, a dot or a charge");
  }

  bool separator() {
    if (peek() == '.') return ++at_, true;
    if (!text_.substr(at_).starts_with(middle_dot)) return false;
    at_ += middle_dot.size();
    return true;
  }

  double digits() {
    double value = 0;
    while (is_digit(peek())) value = 10 * value + (text_[at_++] - '0');
    return value;
  }

  // Before a part: a whole or decimal number. A dot is decimal where a digit follows it.
  double multiplier() {
    double value = digits();
    if (peek() == '.' && at_ + 1 < text_.size() && is_digit(text_[at_ + 1])) {
      const std::size_t start = ++at_;
      const double decimals = digits();
      value += decimals / std::pow(10.0, static_cast<double>(at_ - start));
    }
    return value;
  }

  bool count(double& value) {
    if (!is_digit(peek())) return value = 1, true;
    if (peek() == '0')
      return fail("a count begins with 0" + place(), "a count from 1 to 10000", "Was the letter O meant?");
    value = digits();
    return true;
  }

  bool group(Composition& sum, char closing) {
    const std::size_t start = at_;
    while (true) {
      Composition unit;
      if (is_upper(peek())) {
        if (!symbol(unit)) return false;
      } else if (is_lower(peek())) {
        if (!token(unit)) return false;
      } else if (peek() == '(' || peek() == '[') {
        if (!bracket(unit)) return false;
      } else {
        break;
      }
      double times = 1;
      if (!count(times)) return false;
      add(sum, unit, times);
    }
    if (at_ == start) return unexpected();
    if (closing != '\0' && peek() != closing) {
      return fail("a bracket is not closed" + place(), std::string("\"") + closing + "\"");
    }
    return true;
  }

  bool bracket(Composition& unit) {
    const char closing = peek() == '(' ? ')' : ']';
    ++at_;
    if (!group(unit, closing)) return false;
    ++at_;
    return true;
  }

  bool symbol(Composition& unit) {
    std::size_t end = at_ + 1;
    while (end < text_.size() && is_lower(text_[end])) ++end;
    const std::string_view name = text_.substr(at_, end - at_);
    const Element* element = find_element(name);
    if (!element) {
      const std::string near = nearest_element(name);
      return fail("there is no element \"" + std::string(name) + "\"" + place(),
                  "a symbol of the periodic table; a ligand token stands in brackets",
                  near.empty() ? "" : "Did you mean " + near + "?");
    }
    unit[element->atomic_number] = 1;
    at_ = end;
    return true;
  }

  bool token(Composition& unit) {
    std::size_t end = at_;
    while (end < text_.size() && is_lower(text_[end])) ++end;
    const std::string_view name = text_.substr(at_, end - at_);
    const Ligand* ligand = find_ligand(name);
    if (!ligand) {
      const std::string near = nearest_ligand(name);
      return fail("there is no ligand token \"" + std::string(name) + "\"" + place(),
                  "an element, which begins with a capital, or a ligand token such as cit or edta",
                  near.empty() ? "" : "Did you mean " + near + "?");
    }
    Parser atoms_of(ligand->formula);
    if (!atoms_of.formula())
      return fail("the table's own formula of " + ligand->token + " cannot be read", "");
    unit = atoms_of.atoms;
    ligands.insert(ligand->token);
    at_ = end;
    return true;
  }

  bool read_charge() {
    ++at_;
    const std::size_t start = at_;
    const double size = is_digit(peek()) ? digits() : 1;
    const char sign = peek();
    const bool whole = (sign == '+' || sign == '-') && at_ + 1 == text_.size();
    if (!whole || size < 1 || size > highest_charge) {
      at_ = start;
      return fail("the charge" + place() + " cannot be read", "a number up to 20, then a sign, at the end",
                  "Write ^2+ or ^-.");
    }
    ++at_;
    charge = static_cast<int>(sign == '+' ? size : -size);
    return true;
  }

  std::string_view text_;
  std::size_t at_ = 0;
};

void append_subscript(std::string& to, char digit) {  // U+2080 ...
  to += "\xe2\x82";
  to += static_cast<char>(0x80 + (digit - '0'));
}

std::string superscript(char c) {
  switch (c) {
    case '+':
      return "⁺";
    case '-':
      return "⁻";
    case '1':
      return "¹";
    case '2':
      return "²";
    case '3':
      return "³";
    default:
      return std::string("\xe2\x81") + static_cast<char>(0xb0 + (c - '0'));  // U+2070 ...
  }
}

// "SO4^2-" twice is "(SO4)2", "Na^+" twice "Na2"; a ligand token always stands in brackets.
std::string ion_in_salt(std::string_view ion, int times) {
  const std::string bare(ion.substr(0, ion.find('^')));
  const bool one_symbol = is_upper(bare.front()) && std::all_of(bare.begin() + 1, bare.end(), is_lower);
  const bool bracketed = is_lower(bare.front()) || (times > 1 && !one_symbol);
  return (bracketed ? '(' + bare + ')' : bare) + (times > 1 ? std::to_string(times) : "");
}

}  // namespace

Result<Formula> Formula::parse(std::string_view text, std::string_view where) {
  Parser parser(text);
  if (!parser.formula()) {
    parser.problem.where = std::string(where);
    return parser.problem;
  }
  Formula formula;
  formula.text_ = std::string(text);
  formula.charge_ = parser.charge;
  formula.crystal_water_ = parser.crystal_water;
  formula.ligands_.assign(parser.ligands.begin(), parser.ligands.end());
  for (const Element& element : elements()) {
    const auto found = parser.atoms.find(element.atomic_number);
    if (found == parser.atoms.end()) continue;
    formula.atoms_.push_back({element.symbol, found->second});
    formula.molar_mass_.v += found->second * element.g_per_mol;
  }
  return formula;
}

Formula Formula::salt(const Formula& cation, const Formula& anion) {
  assert(cation.charge() > 0 && anion.charge() < 0);
  const int common = std::lcm(cation.charge(), anion.charge());
  const int cations = common / cation.charge(), anions = common / -anion.charge();
  Formula salt;
  salt.text_ = ion_in_salt(cation.text(), cations) + ion_in_salt(anion.text(), anions);
  for (const Element& element : elements()) {
    const double count = cations * cation.count(element.symbol) + anions * anion.count(element.symbol);
    if (count > 0) salt.atoms_.push_back({element.symbol, count});
  }
  salt.molar_mass_ = cations * cation.molar_mass() + anions * anion.molar_mass();
  salt.crystal_water_ = cations * cation.crystal_water() + anions * anion.crystal_water();
  std::ranges::set_union(cation.ligands(), anion.ligands(), std::back_inserter(salt.ligands_));
  return salt;
}

double Formula::count(std::string_view element) const {
  for (const Atom& atom : atoms_) {
    if (atom.element == element) return atom.count;
  }
  return 0;
}

std::string Formula::pretty() const {
  std::string out;
  bool before_part = true;  // where digits are a multiplier, not a count
  for (std::size_t i = 0; i < text_.size(); ++i) {
    const char c = text_[i];
    if (c == '^') {
      for (const char sign : std::string_view(text_).substr(i + 1)) out += superscript(sign);
      break;
    }
    if (is_digit(c) && !before_part) {
      append_subscript(out, c);
    } else if (before_part && (is_digit(c) || c == '.')) {
      out += c;  // a multiplier and its decimal point
    } else if (c == '.' || std::string_view(text_).substr(i).starts_with(middle_dot)) {
      out += middle_dot;
      if (c != '.') i += middle_dot.size() - 1;
      before_part = true;
    } else {
      out += c;
      before_part = false;
    }
  }
  return out;
}

bool same_composition(const Formula& a, const Formula& b) {
  if (a.atoms().size() != b.atoms().size()) return false;
  for (std::size_t i = 0; i < a.atoms().size(); ++i) {
    const Atom &left = a.atoms()[i], &right = b.atoms()[i];
    if (left.element != right.element || std::abs(left.count - right.count) > 1e-9) return false;
  }
  return true;
}

}  // namespace bathwright::matter
