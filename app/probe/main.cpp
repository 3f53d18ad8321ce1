// The program `bathwright_probe`, which bathwright starts for every plugin that is new to it: tries the
// plugin in descriptor 3 and reports to descriptor 4. Not for people.
#include <bathwright/plugin_host/probe_program.hpp>
#include <cstdio>

int main(int argc, char** argv) {
  constexpr int memory = 3, report = 4, wrong_use = 2;
  if (argc != 2) {
    std::fprintf(stderr, "bathwright starts this program itself, to try a plugin: bathwright plugins list\n");
    return wrong_use;
  }
  return bathwright::plugin_host::run_probe(memory, report, argv[1]);
}
