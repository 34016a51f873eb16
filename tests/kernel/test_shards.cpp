// Chunks of plays: every split merges to the single run, and whatever is not one run is refused.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "community/fault.hpp"
#include "shards/run.hpp"
#include "small_studies.hpp"

using namespace folkmote;
namespace fs = std::filesystem;

namespace {

class Folder {
 public:
  Folder() {
    char name[] = "/tmp/folkmote-chunks-XXXXXX";
    path_ = mkdtemp(name);
  }
  ~Folder() { fs::remove_all(path_); }
  std::string file(int k) const { return (path_ / ("chunk-" + std::to_string(k))).string(); }
  std::size_t files() const {
    return static_cast<std::size_t>(std::distance(fs::directory_iterator(path_), fs::directory_iterator()));
  }

 private:
  fs::path path_;
};

std::shared_ptr<const Study> two_communities() {
  Table members(9);
  members.add("community", std::vector<std::int64_t>{1, 2, 1, 2, 1, 2, 1, 2, 2});
  members.add("member", std::vector<Text>{"a", "b", "c", "d", "e", "f", "g", "h", "i"});
  return std::make_shared<const Study>(make_study({members}));
}

/// The ranges of a split of `draws` at the given places, each run into its file.
std::vector<std::string> run_split(const Folder& folder, ChunkRun run, std::vector<std::int64_t> cuts, int threads) {
  std::vector<std::string> files;
  const std::int64_t draws = run.range.count;
  cuts.insert(cuts.begin(), 0);
  cuts.push_back(draws);
  for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
    run.range.first = cuts[k];
    run.range.count = cuts[k + 1] - cuts[k];
    files.push_back(folder.file(static_cast<int>(k)));
    CHECK(run_chunk(files.back(), "1.2.3", run, {threads, {}}));
  }
  return files;
}

template <class Call>
std::string refusal(const Call& call) {
  try {
    call();
  } catch (const BadFile& fault) {
    return fault.what();
  }
  return "";
}

}  // namespace

TEST_CASE("any split of the draws merges to the table of the single run", "[shards]") {
  const auto study = two_communities();
  const Solution solution = studies::solved(study, studies::beliefs(0.4, 1.0, 4.0, 0.2));
  Scenario scenario(study);
  scenario.broadcast(nullptr, 2.0);
  const PlayRange whole{0, 50, 7, {-0.5, 1.5}};
  for (const bool by_member : {false, true}) {
    const ChunkRun run{solution, nullptr, whole, by_member, {}};
    const std::uint64_t single =
        by_member ? action_table(solution, whole, {}).digest() : play_table(solution, whole, {}).digest();
    for (const auto& cuts : std::vector<std::vector<std::int64_t>>{{}, {1}, {25}, {3, 4, 11, 49}}) {
      const Folder folder;
      std::vector<std::string> files = run_split(folder, run, cuts, static_cast<int>(cuts.size()) + 1);
      std::reverse(files.begin(), files.end());
      CHECK(merge_chunks(files, 0, 50).digest() == single);
      CHECK(folder.files() == files.size());  // nothing unfinished is left
    }
  }
  const Folder folder;
  const auto files = run_split(folder, {solution, &scenario, whole, false, {}}, {20}, 2);
  CHECK(merge_chunks(files, 0, 50).digest() == paired_table(solution, scenario, whole, {}, {}).digest());
}

TEST_CASE("a chunk that is there is not computed again", "[shards]") {
  const Solution solution = studies::solved(two_communities(), studies::beliefs(0.4, 1.0, 4.0));
  const Folder folder;
  ChunkRun run{solution, nullptr, {5, 10, 7, {}}, false, {}};
  CHECK(run_chunk(folder.file(0), "1.2.3", run, {}));
  CHECK_FALSE(run_chunk(folder.file(0), "1.2.3", run, {}));
  run.range.seed = 8;
  CHECK(refusal([&] { run_chunk(folder.file(0), "1.2.3", run, {}); }).find("other inputs") != std::string::npos);
}

TEST_CASE("gaps, overlaps, other runs and damaged files are refused by name", "[shards]") {
  const Solution solution = studies::solved(two_communities(), studies::beliefs(0.4, 1.0, 4.0));
  const Folder folder;
  const ChunkRun run{solution, nullptr, {0, 30, 7, {}}, false, {}};
  const auto files = run_split(folder, run, {10, 20}, 1);
  const auto merge = [&](std::vector<std::string> some, std::int64_t first, std::int64_t count) {
    return refusal([&] { merge_chunks(some, first, count); });
  };
  CHECK(merge(files, 0, 30).empty());
  CHECK(merge({files[0], files[2]}, 0, 30).find("draws 10 to 19") == 0);
  CHECK(merge({files[0], files[1]}, 0, 30).find("draws 20 to 29") == 0);
  CHECK(merge({files[1], files[2]}, 0, 30).find("draws 0 to 9") == 0);
  CHECK(merge({files[0], files[1], files[1]}, 0, 20).find("stand in another file") != std::string::npos);
  CHECK(merge(files, 0, 25).find("was to be the last") != std::string::npos);
  CHECK(merge(files, 5, 25).find("not wanted") != std::string::npos);
  CHECK(merge({folder.file(99)}, 0, 1).find("cannot be read") != std::string::npos);

  const auto odd_one = [&](ChunkRun other, const std::string& version, const std::string& why) {
    other.range.first = 10;
    other.range.count = 10;
    const std::string file = folder.file(50);
    run_chunk(file, version, other, {});
    CHECK(merge({files[0], file, files[2]}, 0, 30).find(why) != std::string::npos);
    fs::remove(file);
  };
  const Solution cheaper = studies::solved(two_communities(), studies::beliefs(0.3, 1.0, 4.0));
  odd_one(run, "1.2.4", "differ in version");
  odd_one({solution, nullptr, {0, 30, 8, {}}, false, {}}, "1.2.3", "differ in version");
  odd_one({solution, nullptr, {0, 30, 7, {0.0, 1.0}}, false, {}}, "1.2.3", "differ in version");
  odd_one({cheaper, nullptr, {0, 30, 7, {}}, false, {}}, "1.2.3", "differ in version");

  std::ifstream in(files[1], std::ios::binary);
  const std::string bytes((std::istreambuf_iterator<char>(in)), {});
  for (std::size_t at = 0; at < bytes.size(); at += 7) {  // any byte changed, any end cut off
    std::string changed = bytes;
    changed[at] = static_cast<char>(changed[at] ^ 0x20);
    for (const std::string& damaged : {changed, bytes.substr(0, at)}) {
      std::ofstream(folder.file(60), std::ios::binary | std::ios::trunc) << damaged;
      CHECK_FALSE(merge({files[0], folder.file(60), files[2]}, 0, 30).empty());
    }
  }
}
