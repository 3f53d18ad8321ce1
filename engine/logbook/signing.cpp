#include "signing.hpp"

#include <fmt/format.h>
#include <sodium.h>

#include <limits>

#include "hex.hpp"

namespace bathwright::logbook {
namespace {

const unsigned char* bytes(const std::string& text) {
  return reinterpret_cast<const unsigned char*>(text.data());
}
unsigned char* bytes(std::string& text) { return reinterpret_cast<unsigned char*>(text.data()); }

struct KeyPair {
  std::string open, secret;
};

/// Nothing where the person's numbers are out of range or there is not memory enough.
std::optional<KeyPair> key_pair(const Person& person, const std::string& pin) {
  const std::string salt = bytes_of_hex(person.salt, crypto_pwhash_SALTBYTES);
  constexpr std::int64_t most_KiB = 1024 * 1024, most_passes = 16;  // a forged entry must not hang the log
  if (salt.empty() || person.memory_KiB < 8 || person.memory_KiB > most_KiB || person.passes < 1 ||
      person.passes > most_passes)
    return std::nullopt;
  std::string seed(crypto_sign_SEEDBYTES, '\0');
  if (crypto_pwhash(bytes(seed), seed.size(), pin.data(), pin.size(), bytes(salt),
                    static_cast<unsigned long long>(person.passes),
                    static_cast<std::size_t>(person.memory_KiB) * 1024, crypto_pwhash_ALG_ARGON2ID13) != 0)
    return std::nullopt;
  KeyPair pair{std::string(crypto_sign_PUBLICKEYBYTES, '\0'), std::string(crypto_sign_SECRETKEYBYTES, '\0')};
  crypto_sign_seed_keypair(bytes(pair.open), bytes(pair.secret), bytes(seed));
  sodium_memzero(seed.data(), seed.size());
  return pair;
}

}  // namespace

Outcome give_key(Person& person, const std::string& pin, const PinCost& cost) {
  if (pin.size() < shortest_pin)
    return Problem{Fault::bad_input, "PIN", fmt::format("{} characters", pin.size()),
                   fmt::format("at least {} characters, digits or letters", shortest_pin),
                   "choose a longer one"};
  std::string salt(crypto_pwhash_SALTBYTES, '\0');
  randombytes_buf(salt.data(), salt.size());
  person.salt = hex(salt);
  person.memory_KiB = cost.memory_KiB;
  person.passes = cost.passes;
  const auto pair = key_pair(person, pin);
  if (!pair)
    return Problem{Fault::io, "PIN", "there is not memory enough to make a key of it",
                   fmt::format("{} MiB free", cost.memory_KiB / 1024), "close other programs and try again"};
  person.key = hex(pair->open);
  return Done{};
}

std::optional<SigningKey> SigningKey::unlock(const Person& person, const std::string& pin) {
  auto pair = key_pair(person, pin);
  if (!pair || hex(pair->open) != person.key) return std::nullopt;
  return SigningKey(std::move(pair->secret));
}

SigningKey::SigningKey(SigningKey&& other) noexcept : secret_(std::move(other.secret_)) {
  other.secret_.clear();
}

SigningKey::~SigningKey() { sodium_memzero(secret_.data(), secret_.size()); }

std::string SigningKey::sign(const std::string& digest) const {
  std::string signature(crypto_sign_BYTES, '\0');
  crypto_sign_detached(bytes(signature), nullptr, bytes(digest), digest.size(), bytes(secret_));
  return hex(signature);
}

bool signed_by(const std::string& key, const std::string& digest, const std::string& signature) {
  const std::string open = bytes_of_hex(key, crypto_sign_PUBLICKEYBYTES);
  const std::string mark = bytes_of_hex(signature, crypto_sign_BYTES);
  return !open.empty() && !mark.empty() &&
         crypto_sign_verify_detached(bytes(mark), bytes(digest), digest.size(), bytes(open)) == 0;
}

}  // namespace bathwright::logbook
