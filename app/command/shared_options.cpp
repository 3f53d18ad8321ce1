#include "shared_options.hpp"

#include <CLI/CLI.hpp>
#include <memory>

namespace bathwright::command {

void add_tank_and_readings(CLI::App& verb, Context& context, Action& action, RunOnReadings run) {
  auto tank = std::make_shared<std::string>();
  auto readings = std::make_shared<std::string>();
  verb.add_option("TANK", *tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb.add_option("READINGS", *readings, "burette readings, pH, level, temperature, TOML")
      ->required()
      ->check(CLI::ExistingFile);
  verb.callback([&context, &action, run, tank, readings] {
    action = [&context, run, tank, readings] { return run(context, *tank, *readings); };
  });
}

void add_signature(CLI::App& verb, Context& context) {
  verb.add_option("--by", context.by, "who signs the entry; else the user of the computer");
  verb.add_option("--witness", context.witness, "who signs second, where the tank asks for it");
  verb.add_option("--pin-file", context.pin_file,
                  "PINs, one a line, the signer's first; - for standard input. Else they are asked for");
  verb.add_option("--shift", context.shift, "name of the shift; else the log's shift of this hour");
}

void add_units(CLI::App& verb, Context& context) {
  verb.add_option_function<std::string>(
      "--units",
      [&context](const std::string& list) {
        const auto units = sheets::unit_names(list);
        if (!units) throw CLI::ValidationError(text(units.problems()));
        context.units = *units;
      },
      "of what is printed, as \"oz/US gal, lb, US gal, degF\"; --json stays in g/L, kg, L and degC");
}

}  // namespace bathwright::command
