#include "session.hpp"

#include <cstdlib>

namespace bathwright::work {

std::string program_and_version() { return std::string("bathwright ") + BATHWRIGHT_VERSION; }

std::string signer(const Session& session) {
  if (!session.by.empty()) return session.by;
  const char* user = std::getenv("USER");
  return user && *user ? user : "unsigned";
}

}  // namespace bathwright::work
