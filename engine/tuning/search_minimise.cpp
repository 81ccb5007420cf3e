#include "engine/tuning/search_minimise.h"

#include <Eigen/Dense>
#include <algorithm>
#include <cmath>
#include <deque>

#include "engine/numeric/random.h"

namespace lw {
namespace {

using Eigen::MatrixXd;
using Eigen::VectorXd;

constexpr std::uint32_t search_stream = 8;  // of numeric/random.h; none of a drive's purposes
constexpr double most_stretched = 1e7;      // ratio of the cloud's axes at which it counts as closed in

/// Strategy parameters of the tutorial's table 1, positive weights only.
struct Strategy {
  int offspring, parents;
  VectorXd weights;
  double effective, c_sigma, d_sigma, c_path, c_one, c_mu, expected_length;

  Strategy(int n, int count) : offspring(count), parents(count / 2), weights(count / 2) {
    for (int i = 0; i < parents; ++i) weights[i] = std::log(0.5 * (count + 1)) - std::log(i + 1.0);
    weights /= weights.sum();
    effective = 1.0 / weights.squaredNorm();
    c_sigma = (effective + 2.0) / (n + effective + 5.0);
    d_sigma = 1.0 + 2.0 * std::max(0.0, std::sqrt((effective - 1.0) / (n + 1.0)) - 1.0) + c_sigma;
    c_path = (4.0 + effective / n) / (n + 4.0 + 2.0 * effective / n);
    c_one = 2.0 / ((n + 1.3) * (n + 1.3) + effective);
    c_mu = std::min(1.0 - c_one,
                    2.0 * (0.25 + effective + 1.0 / effective - 2.0) / ((n + 2.0) * (n + 2.0) + effective));
    expected_length = std::sqrt(static_cast<double>(n)) * (1.0 - 1.0 / (4.0 * n) + 1.0 / (21.0 * n * n));
  }
};

/// The draws of one search, one after the other.
class Draws {
 public:
  explicit Draws(std::uint64_t seed) : seed_(seed) {}
  double normal() {
    if (spare_used_) {
      const Words<double> words = draw<double>(seed_, number_++, 0, search_stream);
      pair_ = normal_from<double>(words.word[0], words.word[1]);
    }
    spare_used_ = !spare_used_;
    return spare_used_ ? pair_.second : pair_.first;
  }
  double even() { return unit_from<double>(draw<double>(seed_, number_++, 0, search_stream).word[0]); }

 private:
  std::uint64_t seed_, number_ = 0;
  bool spare_used_ = true;
  NormalPair<double> pair_{};
};

struct Try {
  VectorXd point;  // in the box
  Worth worth;
};

/// Keeps the count and the best, and asks whether to go on.
class Trial {
 public:
  Trial(const std::function<Worth(const std::vector<double>&)>& worth_of,
        const std::function<bool(const Minimised&)>& go_on, int most)
      : worth_of_(worth_of), go_on_(go_on), most_(most) {}

  bool over() {
    if (!found.stopped && go_on_ && !go_on_(found)) found.stopped = true;
    return found.stopped || found.evaluations >= most_;
  }
  Worth of(const VectorXd& point) {
    const std::vector<double> plain(point.data(), point.data() + point.size());
    const Worth worth = worth_of_(plain);
    if (found.evaluations++ == 0 || better(worth, found.worth)) {
      found.point = plain;
      found.worth = worth;
    }
    return worth;
  }
  Minimised found;

 private:
  const std::function<Worth(const std::vector<double>&)>& worth_of_;
  const std::function<bool(const Minimised&)>& go_on_;
  int most_;
};

/// One cloud, from its start until it has closed in.
class Cloud {
 public:
  Cloud(VectorXd mean, double size, int offspring)
      : n_(static_cast<int>(mean.size())),
        strategy_(n_, offspring),
        mean_(std::move(mean)),
        size_(size),
        covariance_(MatrixXd::Identity(n_, n_)),
        axes_(MatrixXd::Identity(n_, n_)),
        lengths_(VectorXd::Ones(n_)),
        path_size_(VectorXd::Zero(n_)),
        path_shape_(VectorXd::Zero(n_)) {}

  /// One generation. False when the trial is over.
  bool step(Trial& trial, Draws& draws) {
    std::vector<Try> tries;
    for (int i = 0; i < strategy_.offspring; ++i) {
      if (trial.over()) return false;
      VectorXd point = mean_ + size_ * (axes_ * lengths_.cwiseProduct(normals(draws)));
      point = point.cwiseMax(0.0).cwiseMin(1.0);
      const Worth worth = trial.of(point);
      tries.push_back({std::move(point), worth});
    }
    std::stable_sort(tries.begin(), tries.end(),
                     [](const Try& a, const Try& b) { return better(a.worth, b.worth); });
    flat_ = !better(tries.front().worth, tries.back().worth);
    remember(tries.front().worth);
    adapt(tries);
    return true;
  }

  bool closed_in(double size) const {
    const double longest = size_ * lengths_.maxCoeff();
    const bool stretched = lengths_.maxCoeff() > most_stretched * lengths_.minCoeff();
    return !(longest > size) || stretched || flat_ || stalled_;
  }

 private:
  VectorXd normals(Draws& draws) const {
    VectorXd values(n_);
    for (int i = 0; i < n_; ++i) values[i] = draws.normal();
    return values;
  }

  /// A run whose best has been the same over 10 + 30 n / offspring generations is over (tutorial, appendix
  /// B).
  void remember(const Worth& best) {
    const std::size_t span = 10 + static_cast<std::size_t>(30 * n_ / strategy_.offspring);
    history_.push_back(best);
    if (history_.size() > span) history_.pop_front();
    stalled_ = history_.size() == span;
    for (const Worth& worth : history_) {
      stalled_ = stalled_ && worth.breach == best.breach &&
                 std::fabs(worth.value - best.value) <= 1e-12 * std::fabs(best.value) + 1e-15;
    }
  }

  void adapt(const std::vector<Try>& tries) {
    ++generation_;
    const Strategy& s = strategy_;
    const VectorXd before = mean_;
    mean_.setZero();
    for (int i = 0; i < s.parents; ++i) mean_ += s.weights[i] * tries[static_cast<std::size_t>(i)].point;
    const VectorXd moved = (mean_ - before) / size_;

    const VectorXd whitened = axes_ * (axes_.transpose() * moved).cwiseQuotient(lengths_);
    path_size_ =
        (1.0 - s.c_sigma) * path_size_ + std::sqrt(s.c_sigma * (2.0 - s.c_sigma) * s.effective) * whitened;
    const double settled = std::sqrt(1.0 - std::pow(1.0 - s.c_sigma, 2.0 * generation_));
    const bool steady = path_size_.norm() / settled < (1.4 + 2.0 / (n_ + 1.0)) * s.expected_length;
    path_shape_ *= 1.0 - s.c_path;
    if (steady) path_shape_ += std::sqrt(s.c_path * (2.0 - s.c_path) * s.effective) * moved;

    const double kept = steady ? 0.0 : s.c_one * s.c_path * (2.0 - s.c_path);
    covariance_ *= 1.0 - s.c_one - s.c_mu + kept;
    covariance_ += s.c_one * path_shape_ * path_shape_.transpose();
    for (int i = 0; i < s.parents; ++i) {
      const VectorXd y = (tries[static_cast<std::size_t>(i)].point - before) / size_;
      covariance_ += s.c_mu * s.weights[i] * y * y.transpose();
    }
    size_ *= std::exp(s.c_sigma / s.d_sigma * (path_size_.norm() / s.expected_length - 1.0));
    size_ = std::min(size_, 1.0);  // the box is no larger

    const Eigen::SelfAdjointEigenSolver<MatrixXd> solver(covariance_);
    axes_ = solver.eigenvectors();
    lengths_ = solver.eigenvalues().cwiseMax(1e-300).cwiseSqrt();
  }

  int n_;
  Strategy strategy_;
  VectorXd mean_;
  double size_;
  MatrixXd covariance_, axes_;
  VectorXd lengths_, path_size_, path_shape_;
  int generation_ = 0;
  bool flat_ = false, stalled_ = false;
  std::deque<Worth> history_;
};

VectorXd anywhere(int n, Draws& draws) {
  VectorXd point(n);
  for (int i = 0; i < n; ++i) point[i] = draws.even();
  return point;
}

}  // namespace

bool better(const Worth& a, const Worth& b) {
  return a.breach != b.breach ? a.breach < b.breach : a.value < b.value;
}

Minimised minimise(const std::vector<std::vector<double>>& starts,
                   const std::function<Worth(const std::vector<double>&)>& worth_of,
                   const MinimiseSettings& settings, const std::function<bool(const Minimised&)>& go_on) {
  Trial trial(worth_of, go_on, settings.evaluations);
  for (const std::vector<double>& start : starts) {
    if (trial.over()) return trial.found;
    trial.of(Eigen::Map<const VectorXd>(start.data(), static_cast<Eigen::Index>(start.size())));
  }
  const int n = static_cast<int>(starts.front().size());
  int offspring = 4 + static_cast<int>(3.0 * std::log(n));
  Draws draws(settings.seed);
  VectorXd mean = Eigen::Map<const VectorXd>(trial.found.point.data(), n);
  for (bool going = true; going; offspring *= 2) {
    Cloud cloud(mean, settings.spread, offspring);
    ++trial.found.runs;
    do going = cloud.step(trial, draws);
    while (going && !cloud.closed_in(settings.closed_in));
    mean = anywhere(n, draws);
  }
  return trial.found;
}

}  // namespace lw
