#include "hex.hpp"

#include <sodium.h>

namespace bathwright::logbook {

std::string hex(std::string_view bytes) {
  std::string text(2 * bytes.size() + 1, '\0');  // sodium ends the text with a zero
  sodium_bin2hex(text.data(), text.size(), reinterpret_cast<const unsigned char*>(bytes.data()),
                 bytes.size());
  text.pop_back();
  return text;
}

std::string bytes_of_hex(std::string_view digits, std::size_t bytes) {
  std::string binary(bytes, '\0');
  std::size_t length = 0;
  if (digits.size() != 2 * bytes ||
      sodium_hex2bin(reinterpret_cast<unsigned char*>(binary.data()), bytes, digits.data(), digits.size(),
                     nullptr, &length, nullptr) != 0 ||
      length != bytes || hex(binary) != digits)  // capital digits are another text
    return {};
  return binary;
}

}  // namespace bathwright::logbook
