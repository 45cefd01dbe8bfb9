// CHOLMOD with its orderings (AMD, METIS, nested dissection) as a peer of the sparse solver.
#include "peer.hpp"
#include <suitesparse/cholmod.h>
#include <dlfcn.h>

namespace {

cholmod_common common;
Problem problem;
cholmod_sparse matrix; // views of the problem's arrays
cholmod_dense right;
cholmod_factor *factor = nullptr;
cholmod_dense *solution = nullptr, *work1 = nullptr, *work2 = nullptr;

int orderingOf(const std::string &name) {
  if (name == "amd") return CHOLMOD_AMD;
  if (name == "metis") return CHOLMOD_METIS;
  if (name == "nesdis") return CHOLMOD_NESDIS;
  throw std::runtime_error("unknown ordering " + name);
}

void forget() {
  cholmod_free_factor(&factor, &common);
  cholmod_free_dense(&solution, &common);
  cholmod_free_dense(&work1, &common);
  cholmod_free_dense(&work2, &common);
}

std::string load(std::istream &words) {
  forget();
  problem = Problem::read(words);
  matrix = {};
  matrix.nrow = matrix.ncol = problem.n;
  matrix.nzmax = problem.row.size();
  matrix.p = problem.start.data();
  matrix.i = problem.row.data();
  matrix.x = problem.values.data();
  matrix.stype = -1;
  matrix.itype = CHOLMOD_INT;
  matrix.xtype = CHOLMOD_REAL;
  matrix.dtype = CHOLMOD_DOUBLE;
  matrix.sorted = matrix.packed = 1;
  right = {};
  right.nrow = right.d = right.nzmax = problem.n;
  right.ncol = 1;
  right.x = problem.right.data();
  right.xtype = CHOLMOD_REAL;
  right.dtype = CHOLMOD_DOUBLE;
  return Answer().add("n", problem.n);
}

/// "setting supernodal|simplicial amd|metis|nesdis": what `factor`, `solve`, `once` and `ten` use from now on.
std::string setting(std::istream &words) {
  std::string kind, ordering;
  words >> kind >> ordering;
  forget();
  common.supernodal = kind == "simplicial" ? CHOLMOD_SIMPLICIAL : CHOLMOD_SUPERNODAL;
  common.nmethods = 1;
  common.method[0].ordering = orderingOf(ordering);
  return Answer().add("setting", kind + "-" + ordering);
}

void analyse() {
  cholmod_free_factor(&factor, &common);
  factor = cholmod_analyze(&matrix, &common);
  if (!factor) throw std::runtime_error("the analysis failed");
}

void factorise() {
  if (!factor) analyse();
  if (!cholmod_factorize(&matrix, factor, &common) || common.status != CHOLMOD_OK)
    throw std::runtime_error("the factorisation failed");
}

void solve() {
  if (!cholmod_solve2(CHOLMOD_A, factor, &right, nullptr, &solution, nullptr, &work1, &work2, &common))
    throw std::runtime_error("the solve failed");
}

Answer &describe(Answer &answer, double ms) {
  answer.add("ms", ms).add("fill", common.lnz).add("flops", common.fl);
  if (solution) answer.add("residual", problem.residual(static_cast<double *>(solution->x)));
  return answer;
}

std::string timed(std::istream &words, const std::function<void()> &work) {
  Answer answer;
  return describe(answer, meanMs(words, work));
}

std::string order(std::istream &words) {
  std::vector<int> permutation(problem.n);
  return Answer().add("ms", meanMs(words, [&] { cholmod_amd(&matrix, nullptr, 0, permutation.data(), &common); }));
}

/// Supernodal analysis for an ordering that is given: AMD's, made outside the timed part.
std::string symbolic(std::istream &words) {
  std::vector<int> permutation(problem.n);
  cholmod_amd(&matrix, nullptr, 0, permutation.data(), &common);
  std::istringstream supernodal("supernodal amd");
  setting(supernodal);
  common.method[0].ordering = CHOLMOD_GIVEN;
  const double ms = meanMs(words, [&] {
    cholmod_free_factor(&factor, &common);
    factor = cholmod_analyze_p(&matrix, permutation.data(), nullptr, 0, &common);
  });
  Answer answer;
  answer.add("ms", ms).add("fill", common.lnz);
  forget();
  return answer;
}

/// Entries of the factor without explicit zeros: "fill amd|metis|nesdis", or "fill given FILE" for Int32 x n in a file.
std::string fill(std::istream &words) {
  std::string ordering, path;
  words >> ordering >> path;
  std::vector<int32_t> permutation;
  std::istringstream simplicial("simplicial amd");
  setting(simplicial);
  if (ordering == "given") permutation = Arrays(path).next<int32_t>(problem.n);
  common.method[0].ordering = ordering == "given" ? CHOLMOD_GIVEN : orderingOf(ordering);
  cholmod_factor *counted =
      cholmod_analyze_p(&matrix, permutation.empty() ? nullptr : permutation.data(), nullptr, 0, &common);
  if (!counted) throw std::runtime_error("not an ordering");
  cholmod_free_factor(&counted, &common);
  return Answer().add("fill", common.lnz).add("flops", common.fl);
}

std::string info(std::istream &) {
  const auto core = reinterpret_cast<char *(*)()>(dlsym(RTLD_DEFAULT, "openblas_get_corename"));
  const auto threads = reinterpret_cast<int (*)()>(dlsym(RTLD_DEFAULT, "openblas_get_num_threads"));
  return Answer()
      .add("cholmod", std::to_string(CHOLMOD_MAIN_VERSION) + "." + std::to_string(CHOLMOD_SUB_VERSION))
      .add("blas", core ? std::string("OpenBLAS-") + core() : "not-OpenBLAS")
      .add("threads", threads ? threads() : 0);
}

} // namespace

int main() {
  cholmod_start(&common);
  common.print = 0;
  serve({
      {"info", info},
      {"load", load},
      {"setting", setting},
      {"order", order},
      {"symbolic", symbolic},
      {"fill", fill},
      {"factor", [](std::istream &w) { return timed(w, factorise); }},
      {"solve", [](std::istream &w) { return timed(w, [] { if (!factor) factorise(); solve(); }); }},
      {"once", [](std::istream &w) { return timed(w, [] { analyse(); factorise(); solve(); }); }},
      {"ten", [](std::istream &w) {
         return timed(w, [] {
           analyse();
           for (int i = 0; i < 10; i++) {
             factorise();
             solve();
           }
         });
       }},
  });
  forget();
  cholmod_finish(&common);
}
