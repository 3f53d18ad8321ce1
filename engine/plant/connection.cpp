#include "bathwright/plant/connection.hpp"

#include <fmt/format.h>
#include <libpq-fe.h>
#include <sys/stat.h>

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <iterator>
#include <memory>

namespace bathwright::plant {
namespace {

constexpr std::string_view example =
    "host=pg.plant.example dbname=shop user=line-a sslrootcert=/etc/bathwright/plant-ca.crt";

Problem no_connection_string(const std::string& where) {
  // libpq's own words would quote the text, and with it perhaps the password.
  return {Fault::bad_input, where, "is no connection string", std::string(example),
          "see engine/plant/FORMAT.md, Setting up"};
}

/// An address that does not leave this machine: a folder with a socket, or the loop-back.
bool is_this_machine(std::string_view host) {
  return host.starts_with('/') || host.starts_with('@') || host == "localhost" || host == "::1" ||
         host.starts_with("127.");
}

/// `hosts`: separated by commas.
bool all_this_machine(std::string_view hosts) {
  for (;;) {
    const auto comma = hosts.find(',');
    if (!is_this_machine(hosts.substr(0, comma))) return false;
    if (comma == std::string_view::npos) return true;
    hosts.remove_prefix(comma + 1);
  }
}

std::string trimmed(std::string text) {
  const auto is_space = [](unsigned char c) { return std::isspace(c) != 0; };
  text.erase(std::find_if_not(text.rbegin(), text.rend(), is_space).base(), text.end());
  text.erase(text.begin(), std::find_if_not(text.begin(), text.end(), is_space));
  return text;
}

}  // namespace

std::string Connection::value(std::string_view keyword) const {
  for (const Option& option : options_)
    if (option.keyword == keyword) return option.value;
  return "";
}

Result<Connection> Connection::of(std::string_view given, const TimeOuts& time_outs) {
  const std::string text = trimmed(std::string(given));
  const std::unique_ptr<PQconninfoOption, decltype(&PQconninfoFree)> parsed(
      PQconninfoParse(text.c_str(), nullptr), PQconninfoFree);
  if (text.empty() || !parsed) return no_connection_string("the plant's server");
  Connection connection({}, time_outs);
  for (const PQconninfoOption* option = parsed.get(); option->keyword; ++option)
    if (option->val) connection.options_.push_back({option->keyword, option->val});

  // Where hostaddr is given, that is where the connection goes; the host is then a name to be verified.
  const char* default_address = std::getenv("PGHOSTADDR");
  const std::string given_address = connection.value("hostaddr");
  const std::string address = given_address.empty() && default_address ? default_address : given_address;
  const std::string host = connection.value("host");
  const std::string mode = connection.value("sslmode");
  if (!mode.empty() && mode != "verify-full" && !all_this_machine(address.empty() ? host : address))
    return Problem{Fault::refused, connection.words(),
                   fmt::format("sslmode={} would let somebody else answer in the server's place", mode),
                   "sslmode=verify-full, or a host on this machine",
                   "leave sslmode out and name the authority's certificate with sslrootcert=FILE"};
  const auto unless_given = [&](const char* keyword, std::string fallback) {
    if (connection.value(keyword).empty()) connection.options_.push_back({keyword, std::move(fallback)});
  };
  unless_given("sslmode", "verify-full");
  unless_given("gssencmode", "disable");  // it would be tried in the place of TLS
  unless_given("application_name", "bathwright");
  unless_given("connect_timeout", std::to_string(time_outs.connecting.count()));
  unless_given("tcp_user_timeout", std::to_string(std::chrono::milliseconds(time_outs.answer).count()));
  unless_given("keepalives_idle", std::to_string(time_outs.answer.count()));
  std::erase_if(connection.options_,
                [](const Option& option) { return option.keyword == "client_encoding"; });
  connection.options_.push_back({"client_encoding", "UTF8"});
  return connection;
}

Result<Connection> Connection::from_file(const std::filesystem::path& file, const TimeOuts& time_outs) {
  struct stat about {};
  if (stat(file.c_str(), &about) != 0)
    return Problem{Fault::bad_input, file.string(), "is not there", "a file with a connection string",
                   std::string("for example: ") + std::string(example)};
  if ((about.st_mode & (S_IRWXG | S_IRWXO)) != 0)
    return Problem{Fault::refused, file.string(), "others may use this file, and it may hold a password",
                   "mode 0600", "take it from them: chmod 600 " + file.string()};
  std::ifstream in(file);
  const std::string text{std::istreambuf_iterator<char>(in), {}};
  if (!in) return Problem{Fault::io, file.string(), "cannot be read", "", "check who owns it"};
  auto connection = of(text, time_outs);
  if (connection) return connection;
  Problems problems = connection.problems();
  for (Problem& problem : problems) problem.where = file.string();
  return problems;
}

Result<Connection> Connection::from_environment(const TimeOuts& time_outs) {
  const char* text = std::getenv("BATHWRIGHT_PLANT");
  if (text) return of(text, time_outs);
  return Problem{Fault::bad_input, "BATHWRIGHT_PLANT", "is not set", "a connection string",
                 std::string("for example: ") + std::string(example)};
}

std::string Connection::words() const {
  const auto or_default = [](std::string text, const char* fallback) {
    return text.empty() ? fallback : text;
  };
  const std::string host = value("host");
  return fmt::format("database {} on {}", or_default(value("dbname"), "(default)"),
                     or_default(host.empty() ? value("hostaddr") : host, "(default host)"));
}

std::string Connection::without_password(std::string text) const {
  for (const char* keyword : {"password", "sslpassword"}) {
    const std::string secret = value(keyword);
    if (secret.empty()) continue;
    for (std::size_t at = 0; (at = text.find(secret, at)) != std::string::npos; at += 3)
      text.replace(at, secret.size(), "***");
  }
  return text;
}

}  // namespace bathwright::plant
