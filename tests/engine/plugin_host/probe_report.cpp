// The report of a probe as text and back.
#include <bathwright/plugin_host/probe_report.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::plugin_host;

TEST_CASE("a report is read back as it was", "[unit][plugin_host]") {
  const ProbeReport report = {
      {{"tin", "Tin", "1.0", "Bo", "MIT"}},
      {{"a check", {{Fault::refused, "here", "what \xff", "that", "try"}}}, {"another", {}}},
      {"a note"}};
  const auto back = decoded(encoded(report));
  REQUIRE(back);
  REQUIRE(back->types.size() == 1);
  CHECK(back->types[0].author == "Bo");
  REQUIRE(back->checks.size() == 2);
  REQUIRE(back->problems().size() == 1);
  CHECK(back->problems()[0].kind == Fault::refused);
  CHECK(back->problems()[0].what == "what \xef\xbf\xbd");
  CHECK(back->notes == std::vector<std::string>{"a note"});
}

TEST_CASE("what is no report is not read", "[failure][plugin_host]") {
  for (
      const char* wrong :
      {"", "{", "[]", "{}", R"({"format":2,"types":[],"checks":[],"notes":[]})",
       R"({"format":1,"types":[{}],"checks":[],"notes":[]})",
       R"({"format":1,"types":[],"checks":[],"notes":[1]})",
       R"({"format":1,"types":[],"checks":[{"name":"","problems":[{"kind":99,"where":"","what":"","expected":"","try":""}]}],"notes":[]})"}) {
    INFO(wrong);
    CHECK_FALSE(decoded(wrong));
  }
}
