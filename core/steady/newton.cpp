// SPDX-License-Identifier: MIT

#include "core/steady/newton.hpp"

#include "core/steady/detail/lane_links.hpp"

#include <Eigen/SparseCholesky>
#include <Eigen/SparseCore>

#include <algorithm>
#include <cmath>
#include <numeric>

namespace headband::steady {
namespace {

using Matrix = Eigen::SparseMatrix<double, Eigen::ColMajor, int>;

/// Rounds of fixing one-way links and jumps and solving again.
constexpr int most_rounds = 8;
/// Trials of one step's length.
constexpr int most_trials = 12;
/// A flow under this velocity in the widest pipe is no flow [share of the flow scale].
constexpr double no_flow_share = 1e-9;

/// The symmetric matrix of the free nodes; every link knows its places in the value array.
class HeadMatrix {
 public:
  explicit HeadMatrix(const FlowGraph& graph) : row_of_node_(static_cast<std::size_t>(graph.nodes()), -1) {
    for (std::size_t n = 0; n < row_of_node_.size(); ++n)
      if (!graph.held[n]) row_of_node_[n] = rows_++;
    std::vector<Eigen::Triplet<double>> entries;
    for (int r = 0; r < rows_; ++r) entries.emplace_back(r, r, 1.0);
    for (const auto& link : graph.links) {
      const auto [row, column] = rows_of(link);
      if (row >= 0 && column >= 0) entries.emplace_back(std::max(row, column), std::min(row, column), 1.0);
    }
    matrix_.resize(rows_, rows_);
    matrix_.setFromTriplets(entries.begin(), entries.end());
    for (int r = 0; r < rows_; ++r) diagonal_.push_back(slot(r, r));
    for (const auto& link : graph.links) {
      const auto [row, column] = rows_of(link);
      between_.push_back(row >= 0 && column >= 0 ? slot(std::max(row, column), std::min(row, column)) : -1);
    }
    right_side.resize(rows_);
    if (rows_ > 0) solver_.analyzePattern(matrix_);
  }

  [[nodiscard]] int row(int node) const { return row_of_node_[static_cast<std::size_t>(node)]; }
  [[nodiscard]] int rows() const { return rows_; }

  void clear() {
    std::fill_n(matrix_.valuePtr(), matrix_.nonZeros(), 0.0);
    right_side.setZero();
  }
  void add_link(std::size_t l, const Link& link, double conductance) {
    const auto [row, column] = rows_of(link);
    if (row >= 0) add_diagonal(row, conductance);
    if (column >= 0) add_diagonal(column, conductance);
    if (between_[l] >= 0) matrix_.valuePtr()[between_[l]] -= conductance;
  }
  void add_diagonal(int row, double conductance) {
    matrix_.valuePtr()[diagonal_[static_cast<std::size_t>(row)]] += conductance;
  }
  /// @return false where the matrix has no factors
  [[nodiscard]] bool solve() {
    if (rows_ == 0) return true;
    solver_.factorize(matrix_);
    if (solver_.info() != Eigen::Success) return false;
    solution = solver_.solve(right_side);
    return true;
  }

  Eigen::VectorXd right_side, solution;

 private:
  [[nodiscard]] std::pair<int, int> rows_of(const Link& link) const { return {row(link.from), row(link.to)}; }
  [[nodiscard]] int slot(int row, int column) const {
    const int* begin = matrix_.innerIndexPtr() + matrix_.outerIndexPtr()[column];
    const int* end = matrix_.innerIndexPtr() + matrix_.outerIndexPtr()[column + 1];
    return static_cast<int>(std::lower_bound(begin, end, row) - matrix_.innerIndexPtr());
  }

  std::vector<int> row_of_node_, diagonal_, between_;
  int rows_ = 0;
  Matrix matrix_;
  Eigen::SimplicialLDLT<Matrix, Eigen::Lower, Eigen::AMDOrdering<int>> solver_;
};

}  // namespace

struct NewtonFlow::Parts {
  explicit Parts(const FlowGraph& graph) : matrix(graph), links(graph) {
    const auto nodes = static_cast<std::size_t>(graph.nodes());
    head.resize(nodes);
    outflow.resize(nodes);
    imbalance.resize(nodes);
    group.resize(nodes);
    has_head.resize(nodes);
    flow.resize(graph.links.size());
    trial.resize(graph.links.size());
    step.resize(graph.links.size());
    fixed.resize(graph.links.size());
  }

  HeadMatrix matrix;
  detail::LaneLinks links;
  std::vector<double> head, outflow, imbalance;
  std::vector<double> flow, trial, step;
  std::vector<char> fixed;       ///< per link: its flow is held
  std::vector<int> group;        ///< per node, for finding parts without a held head
  std::vector<char> has_head;    ///< per root of `group`
  std::vector<int> pinned_rows;  ///< one free node of every part that no free link joins to a held head
  int iterations = 0;

  [[nodiscard]] double head_difference(const Link& link) const {
    return head[static_cast<std::size_t>(link.from)] - head[static_cast<std::size_t>(link.to)];
  }

  template <int W>
  void begin(const FlowGraph& graph, const LinkNumbers<W>& numbers, int lane) {
    links.take(graph, numbers, lane);
    double sum = 0.0;
    int count = 0;
    for (std::size_t n = 0; n < head.size(); ++n) {
      outflow[n] = numbers.outflow[n][lane];
      if (!graph.held[n]) continue;
      head[n] = numbers.node_head[n][lane];
      sum += head[n];
      ++count;
    }
    for (std::size_t n = 0; n < head.size(); ++n)
      if (!graph.held[n]) head[n] = count > 0 ? sum / count : 0.0;
    for (std::size_t l = 0; l < flow.size(); ++l) {
      fixed[l] = links.passable[l] != 0 ? 0 : 1;
      flow[l] = fixed[l] != 0 ? 0.0 : links.start_flow[l];
    }
    iterations = 0;
  }

  int root(int n) {
    while (group[static_cast<std::size_t>(n)] != n) {
      int& up = group[static_cast<std::size_t>(n)];
      up = group[static_cast<std::size_t>(up)];  // halves the way for the next one
      n = up;
    }
    return n;
  }

  /// Parts that only fixed links join to the rest keep the head of one of their nodes.
  void find_pinned_rows(const FlowGraph& graph) {
    std::iota(group.begin(), group.end(), 0);
    for (std::size_t l = 0; l < flow.size(); ++l) {
      if (fixed[l] != 0) continue;
      const int a = root(graph.links[l].from), b = root(graph.links[l].to);
      group[static_cast<std::size_t>(std::max(a, b))] = std::min(a, b);
    }
    std::fill(has_head.begin(), has_head.end(), char{0});
    for (int n = 0; n < graph.nodes(); ++n)
      if (graph.held[static_cast<std::size_t>(n)]) has_head[static_cast<std::size_t>(root(n))] = 1;
    pinned_rows.clear();
    for (int n = 0; n < graph.nodes(); ++n) {
      const auto part = static_cast<std::size_t>(root(n));
      if (graph.held[static_cast<std::size_t>(n)] || has_head[part] != 0) continue;
      has_head[part] = 1;
      pinned_rows.push_back(matrix.row(n));
    }
  }

  /// What flows into a node less what leaves it, free nodes only; the largest size. [m3/s]
  double find_imbalance(const FlowGraph& graph) {
    for (std::size_t n = 0; n < imbalance.size(); ++n) imbalance[n] = -outflow[n];
    for (std::size_t l = 0; l < flow.size(); ++l) {
      imbalance[static_cast<std::size_t>(graph.links[l].from)] -= flow[l];
      imbalance[static_cast<std::size_t>(graph.links[l].to)] += flow[l];
    }
    double worst = 0.0;
    for (std::size_t n = 0; n < imbalance.size(); ++n)
      if (!graph.held[n]) worst = std::max(worst, std::abs(imbalance[n]));
    return worst;
  }

  [[nodiscard]] double head_change(int node) const {
    const int row = matrix.row(node);
    return row >= 0 ? matrix.solution[row] : 0.0;
  }

  /// One linear solve: new heads, and the step of every flow.
  [[nodiscard]] bool find_step(const FlowGraph& graph) {
    matrix.clear();
    double largest = 0.0;
    for (std::size_t l = 0; l < flow.size(); ++l) {
      if (fixed[l] != 0) continue;
      const Link& link = graph.links[l];
      const double conductance = 1.0 / std::max(links.slope[l], links.least_slope);
      const double pull = conductance * (head_difference(link) - links.loss[l]);
      step[l] = pull;
      largest = std::max(largest, conductance);
      matrix.add_link(l, link, conductance);
      if (matrix.row(link.from) >= 0) matrix.right_side[matrix.row(link.from)] -= pull;
      if (matrix.row(link.to) >= 0) matrix.right_side[matrix.row(link.to)] += pull;
    }
    for (int n = 0; n < graph.nodes(); ++n)
      if (matrix.row(n) >= 0) matrix.right_side[matrix.row(n)] += imbalance[static_cast<std::size_t>(n)];
    for (const int row : pinned_rows) matrix.add_diagonal(row, largest > 0.0 ? largest : 1.0);
    if (!matrix.solve()) return false;
    for (int n = 0; n < graph.nodes(); ++n)
      if (matrix.row(n) >= 0) head[static_cast<std::size_t>(n)] += matrix.solution[matrix.row(n)];
    // from the changes of head, not from the rounded heads: links nearly without loss would feel the rounding
    for (std::size_t l = 0; l < flow.size(); ++l) {
      if (fixed[l] != 0) {
        step[l] = 0.0;
        continue;
      }
      const double conductance = 1.0 / std::max(links.slope[l], links.least_slope);
      step[l] += conductance * (head_change(graph.links[l].from) - head_change(graph.links[l].to));
    }
    return true;
  }

  /// Slope of the content along the step, at the flows last evaluated [m4/s]. Never falls with the length.
  [[nodiscard]] double content_slope(const FlowGraph& graph) const {
    double sum = 0.0;
    for (std::size_t l = 0; l < flow.size(); ++l)
      if (fixed[l] == 0) sum += step[l] * (links.loss[l] - head_difference(graph.links[l]));
    return sum;
  }

  void evaluate_at(const FlowGraph& graph, double length) {
    for (std::size_t l = 0; l < flow.size(); ++l) trial[l] = flow[l] + length * step[l];
    links.evaluate(graph, trial);
  }

  /// Goes along the step: all of it, or to where the content has (nearly) its least value.
  void take_step(const FlowGraph& graph, bool balanced) {
    const double before = content_slope(graph);
    evaluate_at(graph, 1.0);
    if (balanced && before < 0.0) {
      double low = 0.0, high = 1.0, at_low = before, at_high = content_slope(graph);
      for (int trials = 0; trials < most_trials && at_high > 0.5 * std::abs(before); ++trials) {
        // between the secant and the middle: laws bend sharply where one-way links shut
        const double secant = low + (high - low) * (at_low / (at_low - at_high));
        const double length =
            trials % 3 == 2 ? 0.5 * (low + high) : std::clamp(secant, low + 0.05 * (high - low), high);
        evaluate_at(graph, length);
        const double here = content_slope(graph);
        if (std::abs(here) <= 0.5 * std::abs(before)) break;
        if (here > 0.0) {
          high = length;
          at_high = here;
        } else {
          low = length;
          at_low = here;
        }
      }
    }
    std::swap(flow, trial);
  }

  /// Worst difference between the heads at a free link's ends and its loss [m].
  [[nodiscard]] double residual(const FlowGraph& graph) const {
    double worst = 0.0;
    for (std::size_t l = 0; l < flow.size(); ++l)
      if (fixed[l] == 0) worst = std::max(worst, std::abs(head_difference(graph.links[l]) - links.loss[l]));
    return worst;
  }

  /// Newton steps with the present set of fixed links. @return true when converged
  bool iterate(const FlowGraph& graph, const SteadyOptions& options) {
    find_pinned_rows(graph);
    links.evaluate(graph, flow);
    const double no_flow = no_flow_share * links.flow_scale;
    bool close = false;
    while (iterations < options.most_iterations) {
      ++iterations;
      const double unbalanced = find_imbalance(graph);
      if (!find_step(graph)) return false;
      take_step(graph, unbalanced <= 1e-6 * links.flow_scale);
      double moved = 0.0, flowing = 0.0, highest = 0.0;
      for (std::size_t l = 0; l < flow.size(); ++l) {
        moved += std::abs(flow[l] - trial[l]);  // `trial` holds the flows before the step
        flowing += std::abs(flow[l]);
      }
      for (const double h : head) highest = std::max(highest, std::abs(h));
      if (!std::isfinite(flowing) || !std::isfinite(highest)) return false;
      const double head_tolerance = std::max(options.tolerance * links.head_scale, 1e-14 * highest);
      const bool here = moved <= options.tolerance * flowing + no_flow && residual(graph) <= head_tolerance &&
                        find_imbalance(graph) <= options.tolerance * flowing + no_flow;
      if (here && close) return true;  // one more step after the first that passes: it costs little and halves no digit
      close = here;
    }
    return false;
  }

  /// Fixes links that want to flow backwards and pipes on the jump of their law; frees those that were fixed wrongly.
  /// @return true when something changed
  bool revise_fixed_links(const FlowGraph& graph, const SteadyOptions& options) {
    bool changed = false;
    const double head_tolerance = 1e3 * options.tolerance * links.head_scale;
    for (std::size_t l = 0; l < flow.size(); ++l) {
      const Link& link = graph.links[l];
      if (links.passable[l] == 0) continue;
      const auto& jump = links.jumps[l];
      const double difference = head_difference(link);
      bool hold = fixed[l] != 0;
      if (link.one_way) {
        hold = fixed[l] != 0 ? difference - links.loss_at_rest[l] <= head_tolerance : flow[l] < 0.0;
        if (hold) flow[l] = 0.0;
      } else if (jump.flow > 0.0 && jump.above > jump.below) {
        const double past = std::abs(flow[l]) - jump.flow;
        hold = fixed[l] != 0 ? std::abs(difference) >= jump.below - head_tolerance &&
                                   std::abs(difference) <= jump.above + head_tolerance
                             : past >= 0.0 && past <= jump.width();
        if (hold) flow[l] = std::copysign(jump.flow, flow[l]);
      }
      changed = changed || hold != (fixed[l] != 0);
      fixed[l] = hold ? 1 : 0;
    }
    return changed;
  }

  [[nodiscard]] bool on_jump(std::size_t l) const { return fixed[l] != 0 && links.jumps[l].flow > 0.0; }
};

NewtonFlow::NewtonFlow(const FlowGraph& graph) : parts_(std::make_unique<Parts>(graph)) {}
NewtonFlow::~NewtonFlow() = default;
NewtonFlow::NewtonFlow(NewtonFlow&&) noexcept = default;
NewtonFlow& NewtonFlow::operator=(NewtonFlow&&) noexcept = default;

template <int W>
LaneOutcome NewtonFlow::solve(
    const FlowGraph& graph, const SteadyOptions& options, int lane, LinkNumbers<W>& numbers, LinkFlows<W>& flows) {
  Parts& p = *parts_;
  p.begin(graph, numbers, lane);
  bool converged = p.iterate(graph, options);
  for (int round = 0; converged && p.revise_fixed_links(graph, options); ++round)
    converged = round < most_rounds && p.iterate(graph, options);

  LaneOutcome outcome;
  outcome.status = converged ? SteadyStatus::converged : SteadyStatus::not_converged;
  outcome.residual = p.residual(graph);
  outcome.iterations = p.iterations;
  flows.flow.resize(graph.links.size());
  for (std::size_t l = 0; l < graph.links.size(); ++l) {
    flows.flow[l].set(lane, p.flow[l]);
    if (converged && p.on_jump(l)) outcome.status = SteadyStatus::on_jump;
  }
  for (std::size_t n = 0; n < p.head.size(); ++n) numbers.node_head[n].set(lane, p.head[n]);
  return outcome;
}

template LaneOutcome NewtonFlow::solve<1>(const FlowGraph&, const SteadyOptions&, int, LinkNumbers<1>&, LinkFlows<1>&);
template LaneOutcome NewtonFlow::solve<8>(const FlowGraph&, const SteadyOptions&, int, LinkNumbers<8>&, LinkFlows<8>&);

}  // namespace headband::steady
