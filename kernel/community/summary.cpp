#include "numerics/strict.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "community/hearing.hpp"
#include "community/study.hpp"

namespace folkmote {

namespace {

struct Listening {
  double mean = 0.0;
  std::int64_t most = 0;
};

Listening listening(const Community& community) {
  std::int64_t total = 0;
  Listening result;
  // Whom one hears does not depend on how precisely.
  HeardSet heard(community, std::vector<double>(community.size, std::numeric_limits<double>::infinity()));
  for (int i = 0; i < community.size; ++i) {
    const auto count = static_cast<std::int64_t>(heard.of(i).size());
    total += count;
    result.most = std::max(result.most, count);
  }
  result.mean = static_cast<double>(total) / static_cast<double>(community.size);
  return result;
}

}  // namespace

Table summarise(const Study& study) {
  const std::size_t count = study.communities.size();
  std::vector<std::int64_t> members(count), links(count), broadcasts(count), gatherings(count), most(count),
      missing(count);
  std::vector<double> mean(count), observed(count);
  for (std::size_t c = 0; c < count; ++c) {
    const Community& community = study.communities[c];
    members[c] = community.size;
    links[c] = static_cast<std::int64_t>(community.links.speaker.size());
    broadcasts[c] = static_cast<std::int64_t>(community.broadcasts.size());
    gatherings[c] = static_cast<std::int64_t>(community.gatherings.size());
    const Listening heard = listening(community);
    mean[c] = heard.mean;
    most[c] = heard.most;
    double acted = 0.0, seen = 0.0;
    for (int i = 0; i < community.size; ++i) {
      const double action = community.values.turnout[i];
      if (std::isnan(action)) {
        ++missing[c];
        continue;
      }
      acted += community.values.weight[i] * action;
      seen += community.values.weight[i];
    }
    observed[c] = seen > 0.0 ? acted / seen : std::numeric_limits<double>::quiet_NaN();
  }
  Table table(count);
  table.add("community", study.roster->community_labels);
  table.add("members", std::move(members));
  table.add("links", std::move(links));
  table.add("broadcasts", std::move(broadcasts));
  table.add("gatherings", std::move(gatherings));
  table.add("hears_mean", std::move(mean));
  table.add("hears_most", std::move(most));
  table.add("turnout_observed", std::move(observed));
  table.add("turnout_missing", std::move(missing));
  return table;
}

}  // namespace folkmote
