#pragma once
// How what members know moves with the precisions that it is made of (MODEL.md, section 2): derivatives of K_i and C_ij
// in own signals, reports, relays and broadcasts, taken forward for one change, or backward for all of them at once.
#include "numerics/strict.hpp"

#include <span>
#include <vector>

#include "information/knowledge.hpp"

namespace folkmote {

/// One way in which information can change: by the same small amount for all of a community.
enum class Change { none, signal_precision, relay_precision, broadcast_precision };

/// Derivatives of some number in the information that the laws of the indices are made of.
struct LawGradient {
  std::vector<double> held;    // in K_i
  std::vector<double> shared;  // in C_ij = C_ji, n x n, both halves alike, 0 on the diagonal
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

  /// Backward, for all sources at once.
  SourceGradient gradient(const LawGradient& laws) const;

  /// Backward, in the precision beta_ik with which `listener` hears each other member k, now 0 where it does not hear
  /// it: a report enters K_i, and C_ij of everybody who holds k's signal. 0 where k has no signal to report.
  void reports(const LawGradient& laws, int listener, std::span<double> by_speaker) const;

 private:
  struct Holder {
    int member;
    double fraction;     // r
    double relay_slope;  // d(relay precision) under a common change of it; 0 for the own signal
  };
  /// sum over holders j != i of k's signal of dC_ij r_jk.
  double met(const LawGradient& laws, int i, int k) const;
  template <class Visit>
  void each_source(int i, const Visit& visit) const;

  const Knowledge& knowledge_;
  std::vector<std::vector<Holder>> holders_;     // by speaker
  std::vector<std::vector<int>> broadcasts_of_;  // by member
};

}  // namespace folkmote
