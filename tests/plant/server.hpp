// A PostgreSQL server of its own for a test: made in a folder that goes away, reached over a socket in that
// folder and over TLS on the loop-back, killed and frozen at will. Run by root it runs as user postgres,
// because the server refuses to run as root.
#pragma once

#include <sys/types.h>

#include <filesystem>
#include <string>
#include <vector>

#include "bathwright/logbook/people.hpp"
#include "bathwright/plant/connection.hpp"
#include "scratch.hpp"

namespace plant_test {

using namespace bathwright;

/// With a database `shop`, set up and owned by plant_owner.
class Server {
 public:
  explicit Server(Where where = Where::memory);
  ~Server();
  Server(const Server&) = delete;
  Server& operator=(const Server&) = delete;

  /// A login with that role at that site; its name is the role's, a dot and the site's. Made when first asked
  /// for.
  std::string login(logbook::Role role, const std::string& site);

  /// The way there for that login, over the socket.
  [[nodiscard]] plant::Connection as(const std::string& login, const std::string& database = "shop") const;
  [[nodiscard]] std::string text(const std::string& login, const std::string& database = "shop") const;
  /// Likewise over TLS, with certificate and name verified.
  [[nodiscard]] plant::Connection over_tls(const std::string& login,
                                           const plant::TimeOuts& time_outs = {}) const;
  /// The text of such a connection, for messages and files; `host` as given.
  [[nodiscard]] std::string tls_text(const std::string& login, const std::string& host) const;

  /// As the superuser.
  void sql(const std::string& text, const std::string& database = "shop") const;

  void kill();    ///< SIGKILL, as when the machine dies; what is on the disk stays
  void start();   ///< and waits until it answers
  void freeze();  ///< SIGSTOP to every process of it: the network still takes what is sent
  void thaw();

  [[nodiscard]] const std::filesystem::path& folder() const { return folder_; }

 private:
  [[nodiscard]] std::vector<pid_t> processes() const;
  void make_data();
  void stop();
  std::filesystem::path folder_;
  int port_ = 0;
  pid_t postmaster_ = -1;
};

/// A connection without any manners, for attacks.
struct Answer {
  std::string sqlstate;  ///< empty: done
  std::string message;   ///< of the refusal
  std::string value;     ///< first column of the first row
};
Answer raw(const Server& server, const std::string& login, const std::string& sql,
           const std::string& database = "shop");

/// The password of every login.
inline constexpr const char* password = "open-sesame-99";

}  // namespace plant_test
