#include "server.hpp"

#include <arpa/inet.h>
#include <fcntl.h>
#include <fmt/format.h>
#include <libpq-fe.h>
#include <netinet/in.h>
#include <pwd.h>
#include <signal.h>
#include <sys/socket.h>
#include <sys/wait.h>
#include <unistd.h>

#include <chrono>
#include <fstream>
#include <memory>
#include <stdexcept>
#include <thread>

#include "bathwright/plant/administration.hpp"

namespace plant_test {
namespace {

namespace fs = std::filesystem;
using std::chrono::steady_clock;

/// Starts a program; as user postgres where we are root. Its words go into `words`.
pid_t start_program(const std::vector<std::string>& command, const fs::path& words) {
  const passwd* postgres = geteuid() == 0 ? getpwnam("postgres") : nullptr;
  if (geteuid() == 0 && !postgres) throw std::runtime_error("no user postgres to run the server as");
  std::vector<char*> arguments;
  for (const std::string& word : command) arguments.push_back(const_cast<char*>(word.c_str()));
  arguments.push_back(nullptr);
  const pid_t child = fork();
  if (child != 0) return child;
  const int file = open(words.c_str(), O_WRONLY | O_CREAT | O_APPEND, 0666);
  dup2(file, STDOUT_FILENO);
  dup2(file, STDERR_FILENO);
  if (postgres && (setgid(postgres->pw_gid) != 0 || setuid(postgres->pw_uid) != 0)) _exit(126);
  execv(arguments[0], arguments.data());
  _exit(127);
}

void run_program(const std::vector<std::string>& command, const fs::path& words) {
  int status = 0;
  waitpid(start_program(command, words), &status, 0);
  if (status == 0) return;
  std::ifstream in(words);
  throw std::runtime_error(command[0] + " failed: " + std::string(std::istreambuf_iterator<char>(in), {}));
}

int free_port() {
  const int probe = socket(AF_INET, SOCK_STREAM, 0);
  sockaddr_in address{};
  address.sin_family = AF_INET;
  address.sin_addr.s_addr = htonl(INADDR_LOOPBACK);
  socklen_t size = sizeof address;
  if (bind(probe, reinterpret_cast<sockaddr*>(&address), size) != 0 ||
      getsockname(probe, reinterpret_cast<sockaddr*>(&address), &size) != 0)
    throw std::runtime_error("no free port");
  close(probe);
  return ntohs(address.sin_port);
}

const std::string binaries = POSTGRES_BIN "/";

/// Gives a file or folder, and what is in it, to the user the server runs as.
void hand_over(const fs::path& path) {
  if (geteuid() != 0) return;
  const passwd* postgres = getpwnam("postgres");
  const auto give = [&](const fs::path& one) {
    if (!postgres || lchown(one.c_str(), postgres->pw_uid, postgres->pw_gid) != 0)
      throw std::runtime_error("no user postgres to run the server as");
  };
  give(path);
  if (fs::is_directory(path))
    for (const auto& entry : fs::recursive_directory_iterator(path)) give(entry.path());
}

}  // namespace

Server::Server(Where where) : folder_(scratch_folder(where)), port_(free_port()) {
  hand_over(folder_);
  // Others may look for the socket and the certificate; the server's data is its own.
  fs::permissions(folder_, fs::perms::owner_all | fs::perms::group_exec | fs::perms::others_exec);
  // Making a server's data takes seconds; each test takes a copy of one that was made once.
  const fs::path made = TEST_CACHE "/plant-server";
  if (!fs::exists(made)) {
    make_data();
    const fs::path making = made.string() + "." + std::to_string(getpid());
    fs::create_directories(making.parent_path());
    fs::copy(folder_ / "data", making, fs::copy_options::recursive);
    std::error_code another_was_quicker;
    fs::rename(making, made, another_was_quicker);
    if (another_was_quicker) fs::remove_all(making);
  } else {
    fs::copy(made, folder_ / "data", fs::copy_options::recursive);
    hand_over(folder_ / "data");
  }
  fs::copy_file(folder_ / "data" / "server.crt", folder_ / "ca.crt");
  fs::permissions(folder_ / "ca.crt", fs::perms::others_read, fs::perm_options::add);
  start();
  if (const auto done = plant::set_up(as("plant_owner")); !done)
    throw std::runtime_error(bathwright::text(done.problems()));
}

/// Data with a certificate, an owner and an empty database.
void Server::make_data() {
  const fs::path words = folder_ / "words";
  const std::string data = folder_ / "data";
  run_program({binaries + "initdb", "--no-sync", "--no-instructions", "--wal-segsize=1", "-D", data, "-U",
               "postgres", "-A", "trust", "-E", "UTF8", "--locale=C.UTF-8"},
              words);
  run_program({OPENSSL_PROGRAM, "req", "-x509", "-newkey", "ec", "-pkeyopt", "ec_paramgen_curve:prime256v1",
               "-nodes", "-days", "3650", "-subj", "/CN=localhost", "-addext", "subjectAltName=DNS:localhost",
               "-keyout", data + "/server.key", "-out", data + "/server.crt"},
              words);
  std::ofstream(data + "/pg_hba.conf") << "local all all trust\nhostssl all all 127.0.0.1/32 scram-sha-256\n";
  start();
  sql("CREATE ROLE plant_owner LOGIN CREATEROLE", "postgres");
  sql("CREATE DATABASE shop OWNER plant_owner", "postgres");
  stop();
}

Server::~Server() {
  thaw();
  kill();
  std::error_code ignored;
  fs::remove_all(folder_, ignored);
}

void Server::stop() {
  ::kill(postmaster_, SIGINT);
  waitpid(postmaster_, nullptr, 0);
  postmaster_ = -1;
}

void Server::start() {
  const auto deadline = steady_clock::now() + std::chrono::seconds(60);
  for (;;) {
    if (postmaster_ < 0)
      postmaster_ = start_program(
          {binaries + "postgres", "-D", folder_ / "data", "-k", folder_, "-p", std::to_string(port_), "-c",
           "listen_addresses=127.0.0.1", "-c", "ssl=on", "-c", "max_connections=60"},
          folder_ / "words");
    const std::string target =
        fmt::format("host={} port={} user=postgres dbname=postgres", folder_.string(), port_);
    if (PQping(target.c_str()) == PQPING_OK) return;
    // Backends of the killed server hold its memory for moments: then the new one gives up, and is tried
    // again.
    int status = 0;
    if (waitpid(postmaster_, &status, WNOHANG) == postmaster_) postmaster_ = -1;
    if (steady_clock::now() > deadline) throw std::runtime_error("the server does not start");
    std::this_thread::sleep_for(std::chrono::milliseconds(20));
  }
}

std::vector<pid_t> Server::processes() const {
  std::vector<pid_t> all;
  if (postmaster_ < 0) return all;
  all.push_back(postmaster_);
  std::ifstream children(fmt::format("/proc/{0}/task/{0}/children", postmaster_));
  for (pid_t child = 0; children >> child;) all.push_back(child);
  return all;
}

void Server::kill() {
  const auto all = processes();
  for (const pid_t process : all) ::kill(process, SIGKILL);
  if (!all.empty()) waitpid(postmaster_, nullptr, 0);
  postmaster_ = -1;
}

void Server::freeze() {
  for (const pid_t process : processes()) ::kill(process, SIGSTOP);
}

void Server::thaw() {
  for (const pid_t process : processes()) ::kill(process, SIGCONT);
}

std::string Server::login(logbook::Role role, const std::string& site) {
  const std::string name = fmt::format("{}.{}", logbook::name(role), site);
  sql(
      fmt::format("DO $$ BEGIN IF NOT EXISTS (SELECT FROM pg_roles WHERE rolname = '{0}') THEN "
                  "CREATE ROLE \"{0}\" LOGIN PASSWORD '{1}'; END IF; END $$",
                  name, password));
  if (const auto done = plant::grant(as("plant_owner"), name, role, site); !done)
    throw std::runtime_error(bathwright::text(done.problems()));
  return name;
}

std::string Server::text(const std::string& login, const std::string& database) const {
  return fmt::format("host={} port={} user='{}' dbname={}", folder_.string(), port_, login, database);
}

plant::Connection Server::as(const std::string& login, const std::string& database) const {
  return *plant::Connection::of(text(login, database));
}

std::string Server::tls_text(const std::string& login, const std::string& host) const {
  return fmt::format("host={} hostaddr=127.0.0.1 port={} user='{}' password={} dbname=shop sslrootcert={}",
                     host, port_, login, password, (folder_ / "ca.crt").string());
}

plant::Connection Server::over_tls(const std::string& login, const plant::TimeOuts& time_outs) const {
  return *plant::Connection::of(tls_text(login, "localhost"), time_outs);
}

void Server::sql(const std::string& text, const std::string& database) const {
  const Answer answer = raw(*this, "postgres", text, database);
  if (!answer.sqlstate.empty()) throw std::runtime_error(answer.message);
}

Answer raw(const Server& server, const std::string& login, const std::string& sql,
           const std::string& database) {
  std::vector<const char*> keywords, values;
  const plant::Connection connection = server.as(login, database);
  for (const auto& option : connection.options()) {
    keywords.push_back(option.keyword.c_str());
    values.push_back(option.value.c_str());
  }
  keywords.push_back(nullptr);
  values.push_back(nullptr);
  const std::unique_ptr<PGconn, decltype(&PQfinish)> handle(
      PQconnectdbParams(keywords.data(), values.data(), 0), PQfinish);
  if (PQstatus(handle.get()) != CONNECTION_OK) return {"08006", PQerrorMessage(handle.get()), ""};
  PQsetNoticeProcessor(
      handle.get(), [](void*, const char*) {}, nullptr);
  const std::unique_ptr<PGresult, decltype(&PQclear)> result(PQexec(handle.get(), sql.c_str()), PQclear);
  if (const char* state = PQresultErrorField(result.get(), PG_DIAG_SQLSTATE))
    return {state, PQresultErrorField(result.get(), PG_DIAG_MESSAGE_PRIMARY), ""};
  Answer answer;
  if (PQntuples(result.get()) > 0) answer.value = PQgetvalue(result.get(), 0, 0);
  return answer;
}

}  // namespace plant_test
