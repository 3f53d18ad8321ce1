#include "bathwright/logbook/file_digest.hpp"

#include <sodium.h>

#include <fstream>
#include <vector>

#include "hex.hpp"

namespace bathwright::logbook {

Result<std::string> file_digest(const std::filesystem::path& file) {
  std::ifstream in(file, std::ios::binary);
  crypto_generichash_state state;
  crypto_generichash_init(&state, nullptr, 0, crypto_generichash_BYTES);
  std::vector<char> block(std::size_t{1} << 20);
  while (in.read(block.data(), static_cast<std::streamsize>(block.size())), in.gcount() > 0)
    crypto_generichash_update(&state, reinterpret_cast<const unsigned char*>(block.data()),
                              static_cast<unsigned long long>(in.gcount()));
  if (!in.eof())
    return Problem{Fault::io, file.string(), "the file cannot be read", "",
                   "check that it is there and may be read"};
  std::string hash(crypto_generichash_BYTES, '\0');
  crypto_generichash_final(&state, reinterpret_cast<unsigned char*>(hash.data()), hash.size());
  return "blake2b:" + hex(hash);
}

}  // namespace bathwright::logbook
