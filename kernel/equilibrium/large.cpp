#include "equilibrium/large.hpp"

#include <algorithm>
#include <cmath>
#include <optional>

#include "equilibrium/mixing.hpp"

// Two ways, chosen by the contraction bound.
//
// Below 1 there is one equilibrium, so that any way of finding it will do: best replies of everybody at once, to first
// order, accelerated by Anderson mixing. It is accepted only when proved. With a contraction bound c the equilibrium is
// no further from k than max_i |F_i(k_i; k)| / (1 - c). Where c is too near 1 for that, F_i(k_i + e; k + e) <= 0 and
// F_i(k_i - e; k - e) >= 0 for every i, errors of the gains included, put an equilibrium between k - e and k + e
// (Tarski), and there is no other.
//
// Otherwise, or when mixing does not get there, monotone best replies from both ends (Milgrom & Roberts 1990), each
// certified as in end.cpp along k = u -+ e v, v = 1 or the direction of the last steps. Where sweeps are slow they
// leap: on the way from u to u -+ r v gain i is at most (for the other end: at least)
//   F_i(u) + r (v_i - R_i(v)) + r^2 L_i / 2,
// R_i(v) and L_i >= |dR_i/dr| from CurveGame. As long as no gain can change its sign on the way, no equilibrium is
// passed: the first cutoff to meet its own would have a gain of 0 there.
//
// An enclosure that has closed without a proof is tried once more: with v > 0 and every R_i(v) below v_i all over the
// small box, there is one equilibrium (the argument is uniqueness.cpp's).

namespace folkmote {

namespace {

constexpr int smallest = 600;
constexpr double most_pairs = 4e8;
constexpr int block = 2048;  // members of one task

using Limit = BestReply::Limit;

class LargeSolver {
 public:
  LargeSolver(CurveGame& game, const SolveRule& rule, const Execution& execution)
      : game_(game), rule_(rule), execution_(execution), bound_(game.contraction_bound(execution)) {
    double scale = 0.0;
    for (int i = 0; i < game.size(); ++i) {
      scale = std::max({scale, std::fabs(game.lowest(i)), std::fabs(game.highest(i))});
    }
    tolerance_ = std::max(rule.tolerance, 64.0 * 0x1p-52 * scale);
    slack_ = tolerance_ / 4.0;
  }

  Enclosure solve() {
    if (bound_ < 1.0) {
      if (const auto found = find_unique()) return *found;
    }
    return enclose_monotonically();
  }

 private:
  /// task(i) for every member, split over workers.
  template <class Task>
  void for_members(const Task& task) {
    const int n = game_.size();
    run_tasks((n + block - 1) / block, execution_, [&](std::int64_t b, const StopFlag&) {
      const int first = static_cast<int>(b) * block;
      for (int i = first; i < std::min(n, first + block); ++i) task(i);
    });
  }

  std::vector<double> replies(const std::vector<double>& cutoffs, Limit limit) {
    game_.set(cutoffs, limit, execution_);
    std::vector<double> image(cutoffs.size());
    for_members([&](int i) { image[i] = game_.reply(i, cutoffs[i]); });
    ++iterations_;
    return image;
  }

  /// Best replies to first order, and the largest |F_i|, its error on top.
  struct Step {
    std::vector<double> image;
    double largest_gain;
  };

  /// One evaluation of each gain, with the slopes taken last; two where they are taken anew, by a chord towards the
  /// root.
  Step step_from(const std::vector<double>& cutoffs, bool anew) {
    game_.set(cutoffs, Limit::left, execution_);
    Step step{std::vector<double>(cutoffs.size()), 0.0};
    std::vector<double> gains(cutoffs.size());
    if (anew) slopes_.assign(cutoffs.size(), -1.0);
    for_members([&](int i) {
      const double gain = game_.gain(i, cutoffs[i]);
      if (anew && gain != 0.0)
        slopes_[i] = std::min(-1.0, (game_.gain(i, cutoffs[i] + 0.5 * gain) - gain) / (0.5 * gain));
      step.image[i] = cutoffs[i] - gain / slopes_[i];
      gains[i] = std::fabs(gain) + game_.error(i);
    });
    ++iterations_;
    step.largest_gain = *std::max_element(gains.begin(), gains.end());
    return step;
  }

  /// Whether F_i at cutoffs + offset * direction is at most 0 (sign -1) or at least 0 (sign +1) for every i, errors of
  /// the gains included.
  bool signs_agree(const std::vector<double>& cutoffs, const std::vector<double>& direction, double offset, double sign,
                   Limit limit) {
    std::vector<double> moved(cutoffs.size());
    for (std::size_t i = 0; i < moved.size(); ++i) moved[i] = cutoffs[i] + offset * direction[i];
    game_.set(moved, limit, execution_);
    std::vector<char> agrees(moved.size());
    for_members([&](int i) { agrees[i] = sign * game_.gain(i, moved[i]) >= game_.error(i); });
    ++iterations_;
    return std::all_of(agrees.begin(), agrees.end(), [](char agree) { return agree != 0; });
  }

  std::optional<Enclosure> find_unique() {
    constexpr int most = 200;
    const int n = game_.size();
    const std::vector<double> ones(n, 1.0);
    std::vector<double> cutoffs(n);
    for (int i = 0; i < n; ++i) cutoffs[i] = 0.5 * (game_.lowest(i) + game_.highest(i));
    Mixing mixing;
    double last = std::numeric_limits<double>::infinity();
    bool anew = true;
    for (int k = 0; k < most && iterations_ < rule_.sweeps; ++k) {
      const Step step = step_from(cutoffs, anew);
      if (step.largest_gain <= slack_ * (1.0 - bound_)) return enclosure_around(cutoffs);
      double moved = 0.0;
      for (int i = 0; i < n; ++i) moved = std::max(moved, std::fabs(step.image[i] - cutoffs[i]));
      if (moved == 0.0 || (moved <= 0.01 * slack_ && signs_agree(step.image, ones, slack_, -1.0, Limit::right) &&
                           signs_agree(step.image, ones, -slack_, +1.0, Limit::left))) {
        return moved == 0.0 ? std::nullopt : std::optional(enclosure_around(step.image));
      }
      anew = moved > 0.5 * last;
      if (moved > 4.0 * last) mixing.restart();
      last = moved;
      cutoffs = mixing.next(cutoffs, step.image);
      for (int i = 0; i < n; ++i) cutoffs[i] = std::clamp(cutoffs[i], game_.lowest(i), game_.highest(i));
    }
    return std::nullopt;
  }

  Enclosure enclosure_around(const std::vector<double>& cutoffs) {
    Enclosure found;
    found.least = cutoffs;
    found.greatest = cutoffs;
    for (double& cutoff : found.least) cutoff -= slack_;
    for (double& cutoff : found.greatest) cutoff += slack_;
    return finished(std::move(found), Verdict::proved_unique);
  }

  struct MonotoneEnd {
    std::vector<double> cutoffs;
    Limit limit;
    double sign;  // +1: falls to the greatest equilibrium, -1: rises to the least
    double last = 0.0;
    std::vector<double> steps = {};
    std::int64_t sweeps = 0;
    bool certified = false;
    bool stalled = false;
  };

  void advance(MonotoneEnd& end) {
    const std::vector<double> image = replies(end.cutoffs, end.limit);
    ++end.sweeps;
    double largest = 0.0;
    end.steps.resize(image.size());
    for (std::size_t i = 0; i < image.size(); ++i) {
      // Errors of the gains may not carry the iterate past the equilibrium: the slope is at most -1.
      const double error = game_.error(static_cast<int>(i));
      const double outward = image[i] + end.sign * error;
      const double next = end.sign > 0.0 ? std::min(outward, end.cutoffs[i]) : std::max(outward, end.cutoffs[i]);
      end.steps[i] = std::fabs(next - end.cutoffs[i]);
      largest = std::max(largest, end.steps[i]);
      end.cutoffs[i] = next;
    }
    if (largest > 0.0) {
      for (double& step : end.steps) step = std::max(step / largest, 0.05);
    }
    if (largest <= slack_) {
      end.certified =
          signs_agree(end.cutoffs, std::vector<double>(image.size(), 1.0), -end.sign * slack_, end.sign, end.limit);
      if (!end.certified && largest > 0.0 && largest < 0.1 * slack_) {
        end.certified = signs_agree(end.cutoffs, end.steps, -end.sign * slack_, end.sign, end.limit);
      }
      end.stalled = !end.certified && largest == 0.0;
    }
    constexpr double slow = 0.3;
    const bool leap_now = largest > slow * end.last && end.sweeps > 2 && !end.certified;
    end.last = largest;
    if (leap_now && leap(end)) end.last = std::numeric_limits<double>::infinity();
  }

  /// Moves along the last steps as far as is proved safe; false where that is not worth a sweep.
  bool leap(MonotoneEnd& end) {
    game_.set(end.cutoffs, end.limit, execution_);
    ++iterations_;
    if (!game_.set_direction(end.steps, execution_)) return false;
    std::vector<double> furthest(end.cutoffs.size());
    for_members([&](int i) {
      const double gain = std::max(0.0, -end.sign * game_.gain(i, end.cutoffs[i]) - game_.error(i));
      const double rate = end.steps[i] - game_.along(i, -1.0);
      const double root = std::sqrt(rate * rate + 2.0 * game_.curvature(i) * gain);
      const double sum = rate + root;
      furthest[i] = sum > 0.0 ? 2.0 * gain / sum : (gain > 0.0 ? std::numeric_limits<double>::infinity() : 0.0);
    });
    const double step = 0.999 * *std::min_element(furthest.begin(), furthest.end());
    if (!std::isfinite(step) || step < 0.1 * slack_) return false;
    for (std::size_t i = 0; i < end.cutoffs.size(); ++i) end.cutoffs[i] -= end.sign * step * end.steps[i];
    return true;
  }

  /// Whether some v proves that the box holds one equilibrium at most; the bound tells how.
  void try_box(const std::vector<double>& least, const std::vector<double>& greatest) {
    constexpr int rounds = 12;
    const double wide = 2.0 * width(least, greatest) + 1e-12;
    game_.set(least, Limit::left, execution_);
    std::vector<double> v(least.size(), 1.0), image(least.size());
    for (int round = 0; round < rounds && bound_ >= 1.0; ++round) {
      ++iterations_;
      if (!game_.set_direction(v, execution_)) return;
      // Over the box kappa_j - rho kappa_i moves by at most 2 (greatest - least).
      for_members([&](int i) { image[i] = game_.along(i, 1.0) + wide * game_.curvature(i); });
      double worst = 0.0, largest = 0.0;
      for (std::size_t i = 0; i < v.size(); ++i) worst = std::max(worst, image[i] / v[i]);
      if (!std::isfinite(worst)) return;
      bound_ = std::min(bound_, worst * (1.0 + 1e-9));
      for (std::size_t i = 0; i < v.size(); ++i) {
        v[i] = std::max(0.5 * (v[i] + image[i]), 1e-6);
        largest = std::max(largest, v[i]);
      }
      for (double& entry : v) entry = std::max(entry / largest, 1e-3);
    }
  }

  Enclosure enclose_monotonically() {
    const int n = game_.size();
    MonotoneEnd greatest{std::vector<double>(n), Limit::left, +1.0};
    MonotoneEnd least{std::vector<double>(n), Limit::right, -1.0};
    for (int i = 0; i < n; ++i) {
      greatest.cutoffs[i] = game_.highest(i);
      least.cutoffs[i] = game_.lowest(i);
    }
    for (bool moved = true; moved && width(least.cutoffs, greatest.cutoffs) > tolerance_;) {
      moved = false;
      for (MonotoneEnd* end : {&greatest, &least}) {
        if (end->certified || end->stalled || end->sweeps >= rule_.sweeps) continue;
        advance(*end);
        moved = true;
      }
    }
    Enclosure found;
    const double wide = width(least.cutoffs, greatest.cutoffs);
    Verdict verdict = Verdict::not_converged;
    if (wide <= tolerance_ && bound_ >= 1.0) try_box(least.cutoffs, greatest.cutoffs);
    if (wide <= tolerance_)
      verdict = bound_ < 1.0 ? Verdict::proved_unique : Verdict::bracketed;
    else if (least.certified && greatest.certified && bound_ >= 1.0)
      verdict = Verdict::several;
    found.least = std::move(least.cutoffs);
    found.greatest = std::move(greatest.cutoffs);
    return finished(std::move(found), verdict);
  }

  Enclosure finished(Enclosure found, Verdict verdict) const {
    found.verdict = verdict;
    found.contraction_bound = bound_;
    found.width = width(found.least, found.greatest);
    found.iterations = iterations_;
    return found;
  }

  static double width(const std::vector<double>& least, const std::vector<double>& greatest) {
    double widest = 0.0;
    for (std::size_t i = 0; i < least.size(); ++i) widest = std::max(widest, greatest[i] - least[i]);
    return widest;
  }

  CurveGame& game_;
  const SolveRule& rule_;
  const Execution& execution_;
  double bound_;
  double tolerance_ = 0.0;
  double slack_ = 0.0;
  std::vector<double> slopes_;  // of the gains, taken last
  std::int64_t iterations_ = 0;
};

}  // namespace

bool is_large(int size) { return size > smallest; }

std::optional<CurveGame> curve_game(const Knowledge& knowledge, const Stakes& stakes, const Execution& execution) {
  for (const std::size_t least : {CurveGame::usual_audience, std::numeric_limits<std::size_t>::max()}) {
    if (Overlap::pairs_at_most(knowledge, common_report(knowledge, least)) > most_pairs) continue;
    std::optional<CurveGame> game(std::in_place, knowledge, stakes, execution, least);
    if (game->serves()) return game;
  }
  return std::nullopt;
}

Enclosure enclose_large(CurveGame& game, const SolveRule& rule, const Execution& execution) {
  return LargeSolver(game, rule, execution).solve();
}

}  // namespace folkmote
