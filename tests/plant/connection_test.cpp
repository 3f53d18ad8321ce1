// What a connection string may be, and that no message shows its password.
#include <catch2/catch.hpp>
#include <fstream>

#include "bathwright/plant/connection.hpp"
#include "support.hpp"

using namespace plant_test;
using plant::Connection;

namespace {

std::string option(const Connection& connection, const std::string& keyword) {
  for (const auto& one : connection.options())
    if (one.keyword == keyword) return one.value;
  return "";
}

}  // namespace

TEST_CASE("a connection demands TLS with the server's name verified and never waits for ever",
          "[unit][plant]") {
  const Connection connection =
      must(Connection::of(" host=pg.plant.example user=line-a \n", {.connecting = std::chrono::seconds(3)}));
  CHECK(option(connection, "sslmode") == "verify-full");
  CHECK(option(connection, "gssencmode") == "disable");
  CHECK(option(connection, "connect_timeout") == "3");
  CHECK(option(connection, "tcp_user_timeout") == "20000");
  CHECK(connection.words() == "database (default) on pg.plant.example");
}

TEST_CASE("less than verified TLS is for this machine only", "[failure][plant]") {
  struct Row {
    const char* text;
    bool accepted;
  };
  const Row row = GENERATE(values<Row>({
      {"host=pg.plant.example sslmode=disable", false},
      {"host=pg.plant.example sslmode=prefer", false},
      {"host=pg.plant.example sslmode=require", false},
      {"host=pg.plant.example sslmode=verify-ca", false},
      {"host=pg.plant.example sslmode=verify-full", true},
      {"postgresql://line-a@pg.plant.example/shop?sslmode=require", false},
      {"postgresql://line-a@pg.plant.example/shop", true},
      {"host=localhost sslmode=disable", true},
      {"host=127.0.0.1 sslmode=disable", true},
      {"host=::1 sslmode=disable", true},
      {"host=/run/postgresql sslmode=disable", true},
      {"host=localhost,pg.plant.example sslmode=disable", false},
      {"host=localhost hostaddr=10.0.0.7 sslmode=disable", false},
      {"host=pg.plant.example hostaddr=127.0.0.1 sslmode=disable", true},
      {"dbname=shop sslmode=disable", false},
      {"service=shop sslmode=disable", false},
  }));
  INFO(row.text);
  const auto connection = Connection::of(row.text);
  CHECK(static_cast<bool>(connection) == row.accepted);
  if (!connection) CHECK(connection.problems()[0].kind == Fault::refused);
}

TEST_CASE("a file with a connection string is for its owner alone", "[failure][plant]") {
  namespace fs = std::filesystem;
  const TempFolder folder;
  const fs::path file = folder / "plant";
  const auto missing = Connection::from_file(file);
  REQUIRE_FALSE(missing);
  CHECK(missing.problems()[0].what == "is not there");
  std::ofstream(file) << "host=localhost user=line-a password=open-sesame-99\n";
  for (const unsigned mode : {0644U, 0640U, 0604U, 0620U}) {
    fs::permissions(file, static_cast<fs::perms>(mode));
    const auto refused = Connection::from_file(file);
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].kind == Fault::refused);
    CHECK(refused.problems()[0].text().find("chmod 600") != std::string::npos);
  }
  for (const unsigned mode : {0600U, 0400U}) {
    fs::permissions(file, static_cast<fs::perms>(mode));
    CHECK(option(must(Connection::from_file(file)), "password") == "open-sesame-99");
  }
}

TEST_CASE("the environment names the plant", "[unit][plant]") {
  unsetenv("BATHWRIGHT_PLANT");
  const auto unset = Connection::from_environment();
  REQUIRE_FALSE(unset);
  CHECK(unset.problems()[0].where == "BATHWRIGHT_PLANT");
  setenv("BATHWRIGHT_PLANT", "host=localhost dbname=shop", 1);
  CHECK(must(Connection::from_environment()).words() == "database shop on localhost");
  unsetenv("BATHWRIGHT_PLANT");
}

TEST_CASE("no message shows a password", "[failure][plant]") {
  // Parsers like to quote the place they stumbled over.
  for (const char* text :
       {"host=localhost open-sesame-99", "host=localhost pasword=open-sesame-99",
        "host=localhost password='open-sesame-99", "postgresql://u:open-sesame-99@[::1/shop"}) {
    INFO(text);
    const auto refused = Connection::of(text);
    REQUIRE_FALSE(refused);
    CHECK(refused.problems()[0].text().find("open-sesame") == std::string::npos);
  }
  const Connection connection = must(Connection::of("host=localhost password=open-sesame-99"));
  CHECK(connection.without_password("for open-sesame-99 and open-sesame-99") == "for *** and ***");
  CHECK(connection.words().find("open-sesame") == std::string::npos);
}

TEST_CASE("a server that is not there is named at once, and the log goes on", "[failure][plant]") {
  const TempFolder folder;
  auto log = open_log(folder / "shop.log");
  must(log.append(note()));
  // Port 1 of the loop-back: nobody listens there.
  plant::Station station(must(Connection::of("host=127.0.0.1 port=1 user=line-a password=open-sesame-99")));
  const auto sent = station.send(log);
  REQUIRE_FALSE(sent);
  CHECK(sent.problems()[0].kind == Fault::io);
  CHECK(sent.problems()[0].what.starts_with("cannot be reached: "));
  CHECK(sent.problems()[0].text().find("open-sesame") == std::string::npos);
  CHECK(must(log.append(note())).seq == 2);
}
