#include "words.hpp"

#include <bathwright/sheets/names.hpp>

namespace bathwright::desktop {

using sheets::pretty;

std::string pretty_words(const std::string& sentence) {
  std::string out, word;
  const auto end_word = [&] {
    std::string tail;
    while (!word.empty() && (word.back() == ':' || word.back() == ',' || word.back() == ';'))
      tail.insert(tail.begin(), word.back()), word.pop_back();
    const bool may_be_formula = !word.empty() && word.front() >= 'A' && word.front() <= 'Z' &&
                                word.find_first_of("0123456789^") != std::string::npos;
    out += (may_be_formula ? pretty(word) : word == "degC" ? "°C" : word == "degF" ? "°F" : word) + tail;
    word.clear();
  };
  for (const char c : sentence) {
    if (c == ' ') {
      end_word();
      out += c;
    } else {
      word += c;
    }
  }
  end_word();
  return out;
}

}  // namespace bathwright::desktop
