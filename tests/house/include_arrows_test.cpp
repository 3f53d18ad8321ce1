#include <catch2/catch.hpp>

#include "include_arrows.hpp"
#include "scratch_tree.hpp"

namespace {

/// A tree that keeps every rule: water uses units; matter uses nothing.
void write_good_tree(const house::ScratchTree& tree) {
  tree.write("engine/CMakeLists.txt",
             "# parts\nforeach(part units matter water)\n  add_subdirectory(${part})\n");
  tree.write("engine/units/CMakeLists.txt", "bathwright_part(units SOURCES read.cpp)\n");
  tree.write("engine/matter/CMakeLists.txt", "bathwright_part(matter SOURCES formula.cpp)\n");
  tree.write("engine/water/CMakeLists.txt",
             "bathwright_part(water SOURCES density.cpp\n  USES units PRIVATE Eigen3::Eigen)\n");
  tree.write("engine/units/include/bathwright/units/read.hpp", "#pragma once\n#include <string>\n");
  tree.write("engine/units/read.cpp", "#include <bathwright/units/read.hpp>\n// printf() is for the app\n");
  tree.write("engine/matter/formula.cpp", "#include \"formula.hpp\"\nint n = snprintf(b, 9, \"x\");\n");
  tree.write("engine/water/density.cpp", "#include <bathwright/units/read.hpp>\n#include <Eigen/Dense>\n");
  tree.write("app/command/main.cpp",
             "#include <bathwright/water/density.hpp>\n#include \"../sheets/slip.hpp\"\n");
  tree.write("plugins/include/bathwright_plugin.h", "#include <stdint.h>\n");
  tree.write("engine/matter/formula.hpp", "#pragma once\n");
  tree.write("plugins/tin/rows.h", "");
  tree.write("plugins/tin/tin.c", "#include <bathwright_plugin.h>\n#include <math.h>\n#include \"rows.h\"\n");
}

struct BadFile {
  const char* file;
  const char* text;
  const char* fault;  ///< exactly this, and nothing else, is reported
};

}  // namespace

TEST_CASE("includes follow the arrows of the architecture", "[unit][house]") {
  const house::Inspection project = house::inspect_includes(PROJECT_DIR);
  for (const std::string& fault : project.faults) FAIL_CHECK(fault);
  CHECK(project.sources_read > 0);
}

TEST_CASE("a tree that keeps the rules has no faults", "[unit][house]") {
  const house::ScratchTree tree;
  write_good_tree(tree);
  const house::Inspection found = house::inspect_includes(tree.root());
  CHECK(found.faults.empty());
  CHECK(found.sources_read == 9);
}

TEST_CASE("each broken rule is reported with its line", "[failure][house]") {
  const BadFile bad = GENERATE(values<BadFile>({
      {"engine/units/show.cpp", "\n#include <bathwright/water/density.hpp>\n",
       "engine/units/show.cpp:2: units includes bathwright/water/density.hpp, but water does not stand above "
       "it"},
      {"engine/units/show.cpp", "#include \"bathwright/water/density.hpp\"\n",
       "engine/units/show.cpp:1: units includes bathwright/water/density.hpp, but water does not stand above "
       "it"},
      {"engine/units/show.cpp", "#include <bathwright/sheets/slip.hpp>\n",
       "engine/units/show.cpp:1: units includes bathwright/sheets/slip.hpp, but sheets does not stand above "
       "it"},
      {"engine/water/ice.cpp", "#include <bathwright/matter/formula.hpp>\n",
       "engine/water/ice.cpp:1: water includes bathwright/matter/formula.hpp, but its USES do not reach "
       "matter"},
      {"engine/units/CMakeLists.txt", "bathwright_part(units SOURCES read.cpp USES matter)\n",
       "engine/units/CMakeLists.txt: USES matter, which does not stand above units"},
      {"engine/water/ice.cpp", "#include \"../units/private.hpp\"\n",
       "engine/water/ice.cpp:1: ../units/private.hpp leaves engine/water"},
      {"engine/water/ice.cpp", "#include \"../../app/command/verbs.hpp\"\n",
       "engine/water/ice.cpp:1: ../../app/command/verbs.hpp leaves engine/water"},
      {"engine/water/include/bathwright/water/ice.hpp", "#include <Eigen/Dense>\n",
       "engine/water/include/bathwright/water/ice.hpp:1: a public header names the library Eigen/Dense"},
      {"engine/water/include/bathwright/water/ice.hpp", "#include <sqlite3.h>\n",
       "engine/water/include/bathwright/water/ice.hpp:1: a public header names the library sqlite3.h"},
      {"engine/water/include/bathwright/water/ice.hpp", "#include \"sqlite3.h\"\n",
       "engine/water/include/bathwright/water/ice.hpp:1: a public header names the library sqlite3.h"},
      {"engine/water/ice.cpp", "void f() {\n  std::cout << 1;\n}\n",
       "engine/water/ice.cpp:2: the engine prints nothing"},
      {"engine/water/ice.cpp", "void f() { printf(\"1\"); }\n",
       "engine/water/ice.cpp:1: the engine prints nothing"},
      {"engine/water/ice.cpp", "void f() { fputs(\"1\", stderr); }\n",
       "engine/water/ice.cpp:1: the engine prints nothing"},
      {"engine/water/ice.cpp", "#include <iostream>\n", "engine/water/ice.cpp:1: the engine prints nothing"},
      {"plugins/tin/more.cpp", "#include <bathwright/units/read.hpp>\n",
       "plugins/tin/more.cpp:1: a plugin sees only bathwright_plugin.h and the standard library, not "
       "bathwright/units/read.hpp"},
      {"plugins/tin/more.cpp", "#include <fmt/core.h>\n",
       "plugins/tin/more.cpp:1: a plugin sees only bathwright_plugin.h and the standard library, not "
       "fmt/core.h"},
      {"plugins/tin/more.c", "#include \"../zinc/rows.h\"\n",
       "plugins/tin/more.c:1: ../zinc/rows.h leaves plugins/tin"},
      {"app/command/verbs.cpp", "#include \"../../engine/units/private.hpp\"\n",
       "app/command/verbs.cpp:1: ../../engine/units/private.hpp leaves app"},
  }));
  const house::ScratchTree tree;
  write_good_tree(tree);
  tree.write(bad.file, bad.text);
  CHECK(house::inspect_includes(tree.root()).faults == std::vector<std::string>{bad.fault});
}

TEST_CASE("a tree without a list of parts is a fault, not a pass", "[failure][house]") {
  const house::ScratchTree tree;
  tree.write("engine/CMakeLists.txt", "# empty\n");
  tree.write("app/main.cpp", "");
  CHECK(house::inspect_includes(tree.root()).faults ==
        std::vector<std::string>{"engine/CMakeLists.txt: no foreach(part ...) lists the parts"});
}
