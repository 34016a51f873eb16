#pragma once
// How what members know moves with the precisions that it is made of (MODEL.md, section 2): derivatives of K_i and C_ij
// in own signals, reports, relays and broadcasts, taken forward for one change, or backward for all of them at once.
#include "numerics/strict.hpp"

#include <cmath>
#include <span>
#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

/// One way in which information can change: by the same small amount for all of a community.
enum class Change { none, signal_precision, relay_precision, broadcast_precision };

/// Derivatives of some number in the information that the laws of the indices are made of.
struct LawGradient {
  std::vector<double> held;    // in K_i
  std::vector<double> shared;  // in C_ij = C_ji, n x n, both halves alike, 0 on the diagonal; empty: not held
};

/// The same number's derivatives in what the study and its beliefs give.
struct SourceGradient {
  std::vector<double> signal_precision;     // in beta_k, by member
  std::vector<double> relay_precision;      // in the relay precision of all reports that i hears, by listener
  std::vector<double> broadcast_precision;  // in tau_q, by broadcast
};

/// With r_ik = beta_ik / beta_k (1 for the own signal and for an exact report),
///   K_i = sum_k beta_k r_ik + ...,   C_ij = sum_k beta_k r_ik r_jk + ...,
///   dr_ik/dbeta_k = -r_ik (1 - r_ik) / beta_k,   dr_ik/dgamma_ik = (1 - r_ik)^2 / beta_k.
class InformationSlopes {
 public:
  explicit InformationSlopes(const Knowledge& knowledge);

  /// Forward: dK_i, and row i of dC, under a change; `broadcast` counts for Change::broadcast_precision only.
  double held(Change change, int broadcast, int i) const;
  void shared(Change change, int broadcast, int i, std::span<double> row) const;

  /// The same sparsely: visit(j, part of dC_ij), j more than once.
  template <class Visit>
  void each_shared(Change change, int broadcast, int i, const Visit& visit) const {
    if (change == Change::broadcast_precision) {
      if (held(change, broadcast, i) == 0.0) return;
      for (int j : knowledge_.broadcasts[broadcast].audience) visit(j, 1.0);
    } else if (change != Change::none) {
      each_source(i, [&](int k, double r, double slope) {
        for (const Holder& j : holders_[k]) {
          visit(j.member, change == Change::signal_precision
                              ? by_signal(r, j.fraction)
                              : j.fraction * by_relay(r, slope) + r * by_relay(j.fraction, j.relay_slope));
        }
      });
    }
  }

  /// Backward, for all sources at once; of `laws.shared` only where it is held.
  SourceGradient gradient(const LawGradient& laws) const;

  /// Backward through one row: adds factor * sum_j row_j dC_ij. The row is 0 at i.
  void add_row(int i, std::span<const double> row, double factor, SourceGradient& sources) const;

  /// Calls visit(j) for everybody who holds a signal that i holds, though it be of precision 0.
  template <class Visit>
  void each_silent_partner(int i, const Visit& visit) const {
    each_source(i, [&](int k, double, double) {
      if (knowledge_.signal_precision[k] > 0.0) return;
      for (const Holder& j : holders_[k]) visit(j.member);
    });
  }

  /// Backward, in the precision beta_ik with which `listener` hears each other member k, now 0 where it does not hear
  /// it: a report enters K_i, and C_ij of everybody who holds k's signal. 0 where k has no signal to report.
  void reports(const LawGradient& laws, int listener, std::span<double> by_speaker) const;

 private:
  struct Holder {
    int member;
    double fraction;     // r
    double relay_slope;  // d(relay precision) under a common change of it; 0 for the own signal
  };
  /// d(beta r_i r_j)/dbeta, and beta dr/dgamma per unit of a common change.
  static double by_signal(double r_i, double r_j) { return r_i * r_j * (r_i + r_j - 1.0); }
  static double by_relay(double r, double relay_slope) { return (1.0 - r) * (1.0 - r) * relay_slope; }
  /// gamma / (beta + gamma), which is beta_ik / beta_k and has its limit where beta_k = 0.
  static double fraction_of(double signal, double relay) { return std::isinf(relay) ? 1.0 : relay / (signal + relay); }

  /// visit(k, r_ik, relay slope) for the own signal and every report.
  template <class Visit>
  void each_source(int i, const Visit& visit) const {
    visit(i, 1.0, 0.0);
    for (std::int64_t k = knowledge_.start[i]; k < knowledge_.start[i + 1]; ++k) {
      const int speaker = knowledge_.speaker[k];
      visit(speaker, fraction_of(knowledge_.signal_precision[speaker], knowledge_.relay_precision[k]),
            knowledge_.relay_slope[k]);
    }
  }

  const Knowledge& knowledge_;
  std::vector<std::vector<Holder>> holders_;     // by speaker
  std::vector<std::vector<int>> broadcasts_of_;  // by member
};

}  // namespace folkmote
