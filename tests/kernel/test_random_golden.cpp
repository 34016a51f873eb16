#include "numerics/strict.hpp"

// The promise of the stream version: golden_streams.csv is reproduced bit by bit.
//
// To approve a change on purpose, raise stream_version and run the test binary with
// FOLKMOTE_APPROVE=1 in the environment: it prints the difference and rewrites the file.

#include <algorithm>
#include <bit>
#include <catch2/catch.hpp>
#include <cstdio>
#include <cstdlib>
#include <iostream>
#include <limits>
#include <string>
#include <vector>

#include "random/streams.hpp"
#include "random_table.hpp"

using namespace folkmote;

namespace {

constexpr std::uint64_t largest = std::numeric_limits<std::uint64_t>::max();

struct GoldenRow {
  std::uint64_t version;
  StreamKey key;
  std::uint64_t position;
  std::uint64_t bits;
  std::uint64_t uniform;  // The bits of the number, so that equal means equal bits.
  std::uint64_t normal;

  friend bool operator==(const GoldenRow&, const GoldenRow&) = default;
};

std::vector<StreamKey> golden_keys() {
  std::vector<StreamKey> keys;
  for (std::uint64_t purpose = 1; purpose <= 7; ++purpose) {
    keys.push_back({20240229, Purpose{purpose}, 0, 0});
  }
  keys.push_back({20240229, Purpose::demonstration, 0, 0});
  keys.push_back({20240229, Purpose::test, 0, 0});
  for (const std::uint64_t seed : {std::uint64_t{0}, std::uint64_t{1}, std::uint64_t{1} << 53, largest}) {
    keys.push_back({seed, Purpose::signal, 0, 0});
    keys.push_back({seed, Purpose::stake, 12, 345});
  }
  for (std::uint64_t index = 1; index <= 5; ++index) {
    keys.push_back({7, Purpose::relay, index, 0});
    keys.push_back({7, Purpose::relay, 0, index});
  }
  for (const std::uint64_t index : {std::uint64_t{1} << 32, largest}) {
    keys.push_back({7, Purpose::broadcast, index, 0});
    keys.push_back({7, Purpose::broadcast, 0, index});
  }
  keys.push_back({largest, Purpose{largest}, largest, largest});
  keys.push_back({0, Purpose{0}, 0, 0});
  return keys;
}

GoldenRow draw_row(const StreamKey& key, std::uint64_t position) {
  Stream stream(key);
  stream.seek(position);
  const std::uint64_t bits = stream.bits();
  stream.seek(position);
  const double uniform = stream.uniform();
  stream.seek(position);
  const double normal = stream.normal();
  return {
      stream_version, key, position, bits, std::bit_cast<std::uint64_t>(uniform), std::bit_cast<std::uint64_t>(normal)};
}

std::vector<GoldenRow> drawn_rows() {
  std::vector<GoldenRow> rows;
  for (const StreamKey& key : golden_keys()) {
    for (const std::uint64_t position : {0U, 1U, 2U, 3U, 1000U}) {
      rows.push_back(draw_row(key, position));
    }
    rows.push_back(draw_row(key, std::uint64_t{1} << 40));
  }
  return rows;
}

std::vector<GoldenRow> approved_rows() {
  std::vector<GoldenRow> rows;
  for (const auto& row : random_table("golden_streams.csv")) {
    const StreamKey key{row.integer("seed"), Purpose{row.integer("purpose")}, row.integer("community"),
                        row.integer("replication")};
    rows.push_back({row.integer("stream_version"), key, row.integer("position"), row.integer("bits"),
                    std::bit_cast<std::uint64_t>(row.real("uniform")),
                    std::bit_cast<std::uint64_t>(row.real("normal"))});
  }
  return rows;
}

std::string in_hex(std::uint64_t bits, const char* format) {
  char text[40];
  std::snprintf(text, sizeof text, format, std::bit_cast<double>(bits));
  return text;
}

std::string line_of(const GoldenRow& row) {
  char word[24];
  std::snprintf(word, sizeof word, "0x%016llx", static_cast<unsigned long long>(row.bits));
  const auto purpose = static_cast<std::uint64_t>(row.key.purpose);
  return std::to_string(row.version) + "," + std::to_string(row.key.seed) + "," + std::to_string(purpose) + "," +
         std::to_string(row.key.community) + "," + std::to_string(row.key.replication) + "," +
         std::to_string(row.position) + "," + word + "," + in_hex(row.uniform, "%a") + "," + in_hex(row.normal, "%a");
}

// Lines of one side only where they differ, as a reader of diffs expects them.
std::string difference(const std::vector<GoldenRow>& approved, const std::vector<GoldenRow>& drawn) {
  std::string text;
  for (std::size_t i = 0; i < std::max(approved.size(), drawn.size()); ++i) {
    if (i < approved.size() && i < drawn.size() && approved[i] == drawn[i]) {
      continue;
    }
    text += i < approved.size() ? "- " + line_of(approved[i]) + "\n" : "";
    text += i < drawn.size() ? "+ " + line_of(drawn[i]) + "\n" : "";
  }
  return text;
}

bool approving() {
  const char* wish = std::getenv("FOLKMOTE_APPROVE");
  return wish != nullptr && std::string(wish) == "1";
}

void approve(const std::vector<GoldenRow>& drawn) {
  std::vector<GoldenRow> approved;
  if (std::ifstream(random_table_path("golden_streams.csv"))) {
    approved = approved_rows();
  }
  std::cout << difference(approved, drawn);
  std::ofstream file(random_table_path("golden_streams.csv"));
  file << "stream_version,seed,purpose,community,replication,position,bits,uniform,normal\n";
  for (const GoldenRow& row : drawn) {
    file << line_of(row) << "\n";
  }
  REQUIRE(file.flush());
}

}  // namespace

TEST_CASE("the golden streams are reproduced bit by bit", "[random][golden]") {
  const auto drawn = drawn_rows();
  if (approving()) {
    approve(drawn);
  }
  const auto approved = approved_rows();
  INFO(difference(approved, drawn));
  CHECK(approved.size() >= 180);
  CHECK((approved == drawn));
}

TEST_CASE("the golden comparison sees one changed bit", "[random][golden]") {
  const auto approved = drawn_rows();
  auto drawn = approved;
  CHECK(difference(approved, drawn).empty());
  drawn[5].normal ^= 1;
  CHECK(difference(approved, drawn).find("\n+ ") != std::string::npos);
  CHECK_FALSE(approved == drawn);
}

TEST_CASE("the numbers of the purposes are pinned", "[random][golden]") {
  CHECK(Purpose::obstacle == Purpose{1});
  CHECK(Purpose::signal == Purpose{2});
  CHECK(Purpose::relay == Purpose{3});
  CHECK(Purpose::broadcast == Purpose{4});
  CHECK(Purpose::stake == Purpose{5});
  CHECK(Purpose::thinning == Purpose{6});
  CHECK(Purpose::rewiring == Purpose{7});
  CHECK(Purpose::generator == Purpose{20});
  CHECK(Purpose::placement == Purpose{21});
  CHECK(Purpose::meeting == Purpose{30});
  CHECK(Purpose::meeting_order == Purpose{31});
  CHECK(Purpose::replay == Purpose{40});
  CHECK(Purpose::replay_start == Purpose{41});
  CHECK(Purpose::audit == Purpose{45});
  CHECK(Purpose::pair_sample == Purpose{50});
  CHECK(Purpose::likelihood_simulation == Purpose{51});
  CHECK(Purpose::start_values == Purpose{52});
  CHECK(Purpose::resampling == Purpose{53});
  CHECK(Purpose::trial_population == Purpose{60});
  CHECK(Purpose::trial_assignment == Purpose{61});
  CHECK(Purpose::trial_outcome == Purpose{62});
  CHECK(Purpose::demonstration == Purpose{900});
  CHECK(Purpose::test == Purpose{999});
}
