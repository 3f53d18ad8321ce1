#include "attacks.hpp"

#include <catch2/catch.hpp>

TEST_CASE("every attack on a log ends as the format's page says", "[failure][logbook]") {
  for (const auto& attack : log_attacks::try_all()) {
    INFO(attack.what << ", " << attack.how << ": " << attack.words);
    CHECK(log_attacks::words(attack.got) == log_attacks::words(attack.expected));
  }
}
