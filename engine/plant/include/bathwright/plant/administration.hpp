// What the administrator of the plant's database does once: tables and roles, and who may write for which
// site. Read next: engine/plant/FORMAT.md, "Setting up".
#pragma once

#include <string>

#include "bathwright/base/result.hpp"
#include "bathwright/logbook/people.hpp"
#include "bathwright/plant/connection.hpp"

namespace bathwright::plant {

/// Makes the schema `bathwright` with its tables, guards and group roles, or brings them to this version;
/// doing it again is harmless. The connection's login becomes the owner and needs CREATE on the database and
/// CREATEROLE.
Outcome set_up(const Connection& connection);

/// Lets a login of the server act in a role for a site ("*": an auditor reads every site). The connection's
/// login must own the tables. The login itself is made by the administrator with CREATE ROLE ... LOGIN.
Outcome grant(const Connection& connection, const std::string& login, logbook::Role role,
              const std::string& site);

}  // namespace bathwright::plant
