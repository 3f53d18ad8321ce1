// A PIN as a key: Argon2id (RFC 9106) makes of it and a salt the seed of an Ed25519 (RFC 8032) key pair. The
// log keeps the public half, by which a PIN is checked and a signature verified; no one can sign without the
// PIN.
#pragma once

#include <optional>
#include <string>

#include "bathwright/logbook/people.hpp"

namespace bathwright::logbook {

/// The shortest PIN, in characters.
inline constexpr std::size_t shortest_pin = 6;

/// Fills in the key of a person for a new PIN, with a fresh salt.
[[nodiscard]] Outcome give_key(Person& person, const std::string& pin, const PinCost& cost);

/// The private half of a person's key, wiped when it goes.
class SigningKey {
 public:
  /// Nothing where the PIN is not this person's. Takes its time, which is its purpose.
  [[nodiscard]] static std::optional<SigningKey> unlock(const Person& person, const std::string& pin);
  SigningKey(SigningKey&& other) noexcept;
  SigningKey& operator=(SigningKey&&) = delete;
  ~SigningKey();

  /// 128 hexadecimal digits.
  [[nodiscard]] std::string sign(const std::string& digest) const;

 private:
  explicit SigningKey(std::string secret) : secret_(std::move(secret)) {}
  std::string secret_;
};

/// Whether `signature`, hexadecimal, is that of the key over the bytes of `digest`.
[[nodiscard]] bool signed_by(const std::string& key, const std::string& digest, const std::string& signature);

}  // namespace bathwright::logbook
