// The share game in the most obvious form: MODEL.md's formulas typed out over full matrices, solved by best replies
// from near an equilibrium. Every number in it may be moved by itself, so that it is the oracle of every derivative.
#pragma once

#include "numerics/strict.hpp"

#include <cmath>
#include <limits>
#include <vector>

#include "numerics/normal.hpp"
#include "numerics/roots.hpp"
#include "payoff/payoff.hpp"

namespace slow {

using Matrix = std::vector<std::vector<double>>;

struct Game {
  double mu, alpha;
  std::vector<double> beta, sigma, benefit, cost, weight;
  Matrix relay;   // gamma_ij: i hears j; 0: not at all, infinite: exactly
  Matrix report;  // where a number: beta_ij itself, whatever the relay
  Matrix reach;   // w_ij
  std::vector<folkmote::Broadcast> broadcasts;

  int size() const { return static_cast<int>(beta.size()); }

  double heard(int i, int k) const {
    if (i == k) return beta[k];
    if (!std::isnan(report[i][k])) return report[i][k];
    if (std::isinf(relay[i][k])) return beta[k];
    return relay[i][k] == 0.0 ? 0.0 : beta[k] * relay[i][k] / (beta[k] + relay[i][k]);
  }

  double shared(int i, int j) const {
    double sum = 0.0;
    for (int k = 0; k < size(); ++k) {
      if (beta[k] > 0.0) sum += heard(i, k) * heard(j, k) / beta[k];
    }
    for (const auto& q : broadcasts) {
      bool i_hears = false, j_hears = false;
      for (int m : q.audience) {
        i_hears = i_hears || m == i;
        j_hears = j_hears || m == j;
      }
      if (i_hears && j_hears) sum += q.precision;
    }
    return sum;
  }

  double held(int i) const {
    double sum = 0.0;
    for (int k = 0; k < size(); ++k) sum += heard(i, k);
    for (const auto& q : broadcasts) {
      for (int m : q.audience) sum += m == i ? q.precision : 0.0;
    }
    return sum;
  }
};

struct Answer {
  std::vector<double> cutoff, chance;
  double turnout;
};

/// Best replies in turn from `start` until nothing moves.
inline Answer solve(const Game& game, std::vector<double> kappa) {
  const int n = game.size();
  std::vector<double> k(n), p(n), e(n);
  for (int i = 0; i < n; ++i) {
    k[i] = game.held(i);
    p[i] = game.alpha + k[i];
    e[i] = k[i] / (game.alpha * p[i]) + game.sigma[i] * game.sigma[i];
  }
  Matrix rho(n, std::vector<double>(n)), s(n, std::vector<double>(n));
  for (int i = 0; i < n; ++i) {
    for (int j = 0; j < n; ++j) {
      if (i == j) continue;
      const double covariance = (k[i] * k[j] / game.alpha + game.shared(i, j)) / (p[i] * p[j]);
      rho[i][j] = covariance / e[i];
      s[i][j] = std::sqrt(e[j] - covariance * covariance / e[i]);
    }
  }
  for (int sweep = 0; sweep < 100000; ++sweep) {
    double moved = 0.0;
    for (int i = 0; i < n; ++i) {
      const auto gain = [&](double t) {
        double share = 0.0;
        for (int j = 0; j < n; ++j) {
          if (game.reach[i][j] == 0.0) continue;
          const double z = (kappa[j] - game.mu - rho[i][j] * (t - game.mu)) / s[i][j];
          share += game.reach[i][j] * folkmote::normal_cdf(z);
        }
        return game.benefit[i] * share - game.cost[i] - t;
      };
      const double reply = folkmote::decreasing_root(gain, kappa[i] - 0.02, kappa[i] + 0.02, 1e-16);
      moved = std::max(moved, std::fabs(reply - kappa[i]));
      kappa[i] = reply;
    }
    if (moved < 1e-14) break;
  }
  Answer answer{kappa, {}, 0.0};
  double total = 0.0;
  for (int i = 0; i < n; ++i) {
    answer.chance.push_back(folkmote::normal_cdf((kappa[i] - game.mu) / std::sqrt(e[i])));
    answer.turnout += game.weight[i] * answer.chance[i];
    total += game.weight[i];
  }
  answer.turnout /= total;
  return answer;
}

inline Game of(const folkmote::Knowledge& knowledge, const folkmote::Stakes& stakes) {
  const int n = knowledge.size;
  const Matrix none(n, std::vector<double>(n, 0.0));
  Game game{knowledge.prior_mean,
            knowledge.prior_precision,
            knowledge.signal_precision,
            knowledge.stake_sd,
            stakes.benefit,
            stakes.cost,
            stakes.weight,
            none,
            Matrix(n, std::vector<double>(n, std::numeric_limits<double>::quiet_NaN())),
            none,
            knowledge.broadcasts};
  for (int i = 0; i < n; ++i) {
    for (auto k = knowledge.start[i]; k < knowledge.start[i + 1]; ++k) {
      game.relay[i][knowledge.speaker[k]] = knowledge.relay_precision[k];
    }
    const folkmote::ReachRow row = folkmote::reach_of(stakes, knowledge, i);
    for (std::size_t j = 0; j < row.member.size(); ++j) game.reach[i][row.member[j]] = row.weight[j];
  }
  return game;
}

/// The derivative at 0 of `answer(h)`, by differences of fourth order: central, or into one side (sign +1 or -1).
template <class Call>
double derivative(const Call& answer, double h, int side = 0) {
  if (side == 0) return (8.0 * (answer(h) - answer(-h)) - (answer(2 * h) - answer(-2 * h))) / (12.0 * h);
  const double step = side * h;
  return (-25.0 * answer(0.0) + 48.0 * answer(step) - 36.0 * answer(2 * step) + 16.0 * answer(3 * step) -
          3.0 * answer(4 * step)) /
         (12.0 * step);
}

}  // namespace slow
