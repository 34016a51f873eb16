// Pooled estimates and shared information against exact values and against the joint normal law written out.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <functional>

#include "information/shared.hpp"
#include "reference_table.hpp"
#include "small_studies.hpp"

using namespace folkmote;

namespace {

std::vector<studies::Link> named_graph(const std::string& name) {
  std::vector<studies::Link> links;
  if (name == "path5") {
    for (int i = 0; i < 4; ++i) links.emplace_back(i, i + 1);
  } else if (name == "star6") {
    for (int i = 1; i < 6; ++i) links.emplace_back(0, i);
  } else {
    const reference::Table edges("karate_edges.csv");  // Zachary (1977)
    for (std::size_t r = 0; r < edges.size(); ++r) {
      links.emplace_back(static_cast<int>(edges.number(r, "from_1based")) - 1,
                         static_cast<int>(edges.number(r, "to_1based")) - 1);
    }
  }
  return links;
}

int size_of(const std::string& name) { return name == "path5" ? 5 : name == "star6" ? 6 : 34; }

// The loadings of every m_i on (theta, x_k noise, relay noise, broadcast noise), from which covariances follow without
// the formula for C_ij: m_i = const + a_i theta + sum of independent noises.
struct Loadings {
  std::vector<std::vector<double>> on_noise;  // by member, over all noise terms scaled to unit variance
  std::vector<double> on_theta;
};

Loadings loadings_of(const Knowledge& k) {
  const std::size_t noises = k.size + k.speaker.size() + k.broadcasts.size();
  Loadings made{std::vector<std::vector<double>>(k.size, std::vector<double>(noises, 0.0)),
                std::vector<double>(k.size, 0.0)};
  for (int i = 0; i < k.size; ++i) {
    const double p = k.posterior_precision[i];
    const auto hear = [&](int j, double weight) {
      made.on_theta[i] += weight / p;
      if (k.signal_precision[j] > 0) made.on_noise[i][j] += weight / p / std::sqrt(k.signal_precision[j]);
    };
    hear(i, k.signal_precision[i]);
    for (std::int64_t r = k.start[i]; r < k.start[i + 1]; ++r) {
      hear(k.speaker[r], k.report_precision[r]);
      if (!std::isinf(k.relay_precision[r])) {
        made.on_noise[i][k.size + r] = k.report_precision[r] / p / std::sqrt(k.relay_precision[r]);
      }
    }
    for (std::size_t q = 0; q < k.broadcasts.size(); ++q) {
      const auto& audience = k.broadcasts[q].audience;
      if (std::find(audience.begin(), audience.end(), i) == audience.end()) continue;
      made.on_theta[i] += k.broadcasts[q].precision / p;
      made.on_noise[i][k.size + k.speaker.size() + q] = std::sqrt(k.broadcasts[q].precision) / p;
    }
  }
  return made;
}

double covariance_of(const Loadings& loadings, const Knowledge& k, int i, int j) {
  double sum = loadings.on_theta[i] * loadings.on_theta[j] / k.prior_precision;
  for (std::size_t t = 0; t < loadings.on_noise[i].size(); ++t)
    sum += loadings.on_noise[i][t] * loadings.on_noise[j][t];
  return sum;
}

}  // namespace

TEST_CASE("covariances of posterior means on small graphs and the karate club", "[information]") {
  // Exact fractions (posterior_mean_covariance.csv): conjugate normal updating, DeGroot (1970), sec. 9.5.
  const reference::Table table("posterior_mean_covariance.csv");
  for (std::size_t r = 0; r < table.size(); ++r) {
    const std::string name = table.text(r, "graph");
    const auto study = studies::one_community(size_of(name), named_graph(name), true);
    const Knowledge k =
        make_knowledge(*study, studies::beliefs(0.0, table.number(r, "alpha"), table.number(r, "beta")), 0);
    const SharedInformation shared(k);
    const int i = static_cast<int>(table.number(r, "i")), j = static_cast<int>(table.number(r, "j"));
    CAPTURE(name, i, j);
    CHECK(std::fabs(shared.covariance(i, j) - table.number(r, "value")) < 1e-15);
  }
}

TEST_CASE("posterior precisions on path and karate club", "[information]") {
  const reference::Table table("posterior_network.csv");
  int checked = 0;
  for (std::size_t r = 0; r < table.size(); ++r) {
    const std::string setting = table.text(r, "setting");
    const std::string name = setting.rfind("path5", 0) == 0 ? "path5" : setting.rfind("karate", 0) == 0 ? "karate" : "";
    if (name.empty()) continue;
    const auto study = studies::one_community(size_of(name), named_graph(name), true);
    const Knowledge k = make_knowledge(*study, studies::beliefs(0.0, 1.0, 1.0), 0);
    CHECK(k.posterior_precision[static_cast<int>(table.number(r, "node"))] == table.number(r, "posterior_precision"));
    ++checked;
  }
  CHECK(checked == 39);
}

TEST_CASE("every pair's law equals that of the joint normal written out", "[information]") {
  for (std::uint64_t seed = 0; seed < 50; ++seed) {
    const studies::Mixed made = studies::mixed(seed);
    const Knowledge k = make_knowledge(*made.study, made.beliefs, 0);
    const SharedInformation shared(k);
    const Loadings loadings = loadings_of(k);
    CAPTURE(seed);
    for (int i = 0; i < k.size; ++i) {
      CHECK(k.estimate_variance[i] == Approx(covariance_of(loadings, k, i, i)).epsilon(1e-12));
      for (int j = 0; j < k.size; ++j) {
        if (j == i) continue;
        const double covariance = covariance_of(loadings, k, i, j);
        CHECK(std::fabs(shared.covariance(i, j) - covariance) <= 1e-13 * std::fabs(covariance));
        const double rho = covariance / k.index_variance[i];
        const ConditionalLaw law = shared.law(i, j);
        CHECK(law.one_less_rho == Approx(1.0 - rho).margin(1e-12));
        CHECK(law.sd == Approx(std::sqrt(k.index_variance[j] - covariance * rho)).epsilon(1e-9));
      }
    }
  }
}

TEST_CASE("the same information gives exactly no spread, and nearly the same keeps its digits", "[information]") {
  Beliefs beliefs = studies::beliefs(0.0, 0.3, 0.1);
  beliefs.signal_precision = {0.1, 0.7, 1.3, 2.9, 1e-9};
  const auto all = studies::one_community(5, studies::complete(5));
  const Knowledge k = make_knowledge(*all, beliefs, 0);
  const SharedInformation shared(k);
  CHECK(shared.law(0, 3).sd == 0.0);
  CHECK(shared.law(0, 3).one_less_rho == 0.0);
  // Member 0 does not hear member 4: what 4 holds beyond 0 is 4's tiny precision, to full relative accuracy.
  std::vector<studies::Link> links = studies::complete(5);
  links.erase(std::find(links.begin(), links.end(), studies::Link{0, 4}));
  const auto fewer = studies::one_community(5, links);
  const Knowledge known = make_knowledge(*fewer, beliefs, 0);
  const SharedInformation nearly(known);
  CHECK(nearly.unshared(4, 0) == Approx(1e-9).epsilon(1e-12));
  CHECK(nearly.unshared(0, 4) == 0.0);
}

TEST_CASE("a gathering holds what its exact links hold, and outdoes a noisy link", "[information]") {
  Table noisy = studies::link_table({{0, 1}, {1, 0}, {0, 3}});
  noisy.add("relay_precision", std::vector<double>{0.5, 0.5, 0.5});
  const Table members = studies::member_table(4), gathering = studies::group_table("gathering", {{0, 1, 2}});
  const Study study = make_study({members, &noisy, nullptr, &gathering});
  const Knowledge k = make_knowledge(study, studies::beliefs(0.0, 1.0, 2.0), 0);
  CHECK(k.held[0] == Approx(2.0 * 3 + 2.0 * 0.5 / 2.5));
  CHECK(k.held[1] == 6.0);
  CHECK(k.held[2] == 6.0);
  CHECK(k.held[3] == 2.0);
}

TEST_CASE("forwarded reports travel the most precise path of at most h links", "[information]") {
  // Against plain enumeration of all simple paths.
  drawn::Numbers numbers(5);
  for (int trial = 0; trial < 40; ++trial) {
    const Table members = studies::member_table(7), links = studies::mixed_links(7, numbers);
    Study study = make_study({members, &links});
    const int hops = 1 + trial % 4;
    study.communities[0].hops = hops;
    const Knowledge direct = [&] {
      Study plain = study;
      plain.communities[0].hops = 1;
      return make_knowledge(plain, studies::beliefs(0.0, 1.0, 1.0), 0);
    }();
    const Knowledge k = make_knowledge(study, studies::beliefs(0.0, 1.0, 1.0), 0);
    for (int i = 0; i < 7; ++i) {
      std::vector<double> best(7, -1.0);  // variance; -1: not heard
      const std::function<void(int, double, int)> walk = [&](int at, double variance, int left) {
        if (left == 0) return;
        for (std::int64_t r = direct.start[at]; r < direct.start[at + 1]; ++r) {
          const int next = direct.speaker[r];
          const double further = variance + 1.0 / direct.relay_precision[r];
          if (next != i && (best[next] < 0 || further < best[next])) best[next] = further;
          walk(next, further, left - 1);
        }
      };
      walk(i, 0.0, hops);
      const auto heard = std::count_if(best.begin(), best.end(), [](double v) { return v >= 0; });
      REQUIRE(k.start[i + 1] - k.start[i] == heard);
      for (std::int64_t r = k.start[i]; r < k.start[i + 1]; ++r) {
        CHECK(1.0 / k.relay_precision[r] == Approx(best[k.speaker[r]]).margin(1e-14));
      }
    }
  }
}
