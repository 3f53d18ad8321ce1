// forecast_report FILE: writes the table of the demonstration policies.
#include <fstream>

#include "forecast_table.hpp"

int main(int count, char** arguments) {
  if (count != 2) return 2;
  std::vector<forecast_table::Row> all;
  for (const std::string& policy : forecast_table::policies())
    for (forecast_table::Row& row : forecast_table::rows_of(policy)) all.push_back(std::move(row));
  return (std::ofstream(arguments[1]) << forecast_table::markdown(all)).flush() ? 0 : 1;
}
