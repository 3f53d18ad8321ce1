#include "bathwright/plant/administration.hpp"

#include <fmt/format.h>

#include "link.hpp"
#include "migrations.hpp"

namespace bathwright::plant {
namespace {

// Two that set up at once take turns, and the second finds everything done.
constexpr const char* before_migrations = R"sql(
SELECT pg_catalog.pg_advisory_xact_lock(pg_catalog.hashtext('bathwright plant set-up'));
CREATE SCHEMA IF NOT EXISTS bathwright;
CREATE TABLE IF NOT EXISTS bathwright.format (
  version int PRIMARY KEY,
  since   timestamptz NOT NULL DEFAULT now()
);
)sql";

}  // namespace

Outcome set_up(const Connection& connection) {
  Link link(connection);
  Transaction transaction(link);
  if (auto begun = transaction.begin(); !begun) return begun.problems();
  if (auto begun = link.run(before_migrations); !begun) return begun.problems();
  const auto version = link.ask("SELECT coalesce(max(version), 0) FROM bathwright.format");
  if (!version) return version.problems();
  if (version->integer(0, 0) > format_version)
    return Problem{Fault::bad_input, connection.words(),
                   fmt::format("has tables of version {}, made by a newer program", version->integer(0, 0)),
                   fmt::format("version {} or older", format_version), "use the newer program"};
  for (std::int64_t step = version->integer(0, 0); step < format_version; ++step) {
    if (auto made = link.run(std::string(migrations[static_cast<std::size_t>(step)])); !made)
      return made.problems();
    const auto noted =
        link.ask("INSERT INTO bathwright.format (version) VALUES ($1)", {std::to_string(step + 1)});
    if (!noted) return noted.problems();
  }
  return transaction.commit();
}

Outcome grant(const Connection& connection, const std::string& login, logbook::Role role,
              const std::string& site) {
  Link link(connection);
  if (site == "*" && role != logbook::Role::auditor)
    return Problem{Fault::bad_input, "site", "an entry is of one site", "the name of a site",
                   "only an auditor's login may be bound to every site"};
  const auto name = link.identifier(login);
  if (!name) return name.problems();
  Transaction transaction(link);
  if (auto begun = transaction.begin(); !begun) return begun.problems();
  const auto member = link.ask(fmt::format("GRANT bathwright_{} TO {}", logbook::name(role), *name));
  if (!member) return member.problems();
  const auto bound =
      link.ask("INSERT INTO bathwright.site_of_login (login, site) VALUES ($1, $2) ON CONFLICT DO NOTHING",
               {login, site});
  if (!bound) return bound.problems();
  return transaction.commit();
}

}  // namespace bathwright::plant
