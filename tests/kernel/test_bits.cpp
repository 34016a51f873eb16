// The numerical functions give the golden bits, whatever compiled them.
#include "numerics/strict.hpp"

#include <catch2/catch.hpp>
#include <fstream>
#include <map>

#include "numeric_digests.hpp"
#include "reference_table.hpp"

TEST_CASE("results have the golden bits", "[numerics][bits][golden]") {
  std::ifstream file(reference::path_of("golden_numerics.txt"));
  REQUIRE(file);
  std::map<std::string, std::string> golden;
  for (std::string line; std::getline(file, line);) {
    if (line.empty() || line[0] == '#') continue;
    const std::size_t space = line.find(' ');
    golden[line.substr(0, space)] = line.substr(space + 1);
  }
  const auto now = digests::all();
  CHECK(golden.size() == now.size());
  for (const auto& [name, digest] : now) {
    INFO(name);
    CHECK(digest == golden[name]);
  }
}

TEST_CASE("a digest sees a change of one bit", "[bits]") {
  digests::Fnv one, other;
  one.add(0x1.0000000000000p0);
  other.add(0x1.0000000000001p0);
  CHECK(one.text() != other.text());
}
