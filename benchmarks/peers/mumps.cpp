// MUMPS, sequential, symmetric positive definite, with the ordering asked for, as a peer of the sparse solver.
#include "peer.hpp"
#include <dmumps_c.h>

namespace {

Problem problem;
std::vector<MUMPS_INT> rows, columns;
std::vector<double> solution;
DMUMPS_STRUC_C mumps;
int ordering = 3;
bool live = false, factored = false;

int &control(int number) { return mumps.icntl[number - 1]; }

void job(int number) {
  mumps.job = number;
  dmumps_c(&mumps);
  if (mumps.infog[0] < 0) throw std::runtime_error("MUMPS " + std::to_string(mumps.infog[0]));
}

void forget() {
  if (live) job(-2);
  live = factored = false;
}

void begin() {
  forget();
  mumps.par = 1;
  mumps.sym = 1;
  mumps.comm_fortran = -987654; // the sequential stand-in for MPI_COMM_WORLD
  job(-1);
  live = true;
  for (int stream : {1, 2, 3, 4}) control(stream) = stream == 4 ? 0 : -1; // silent
  control(7) = ordering;
  control(8) = 0; // no scaling: nothing to gain here, and it costs time
  mumps.n = problem.n;
  mumps.nnz = static_cast<int64_t>(rows.size());
  mumps.irn = rows.data();
  mumps.jcn = columns.data();
  mumps.a = problem.values.data();
}

void analyse() {
  begin();
  job(1);
}

void factorise() {
  if (!live) analyse();
  job(2);
  factored = true;
}

void solve() {
  if (!factored) factorise();
  solution = problem.right;
  mumps.rhs = solution.data();
  job(3);
}

std::string load(std::istream &words) {
  forget();
  problem = Problem::read(words);
  solution.clear();
  rows.assign(problem.row.begin(), problem.row.end());
  columns.assign(rows.size(), 0);
  for (int j = 0; j < problem.n; j++) {
    for (int k = problem.start[j]; k < problem.start[j + 1]; k++) {
      rows[k]++;
      columns[k] = j + 1;
    }
  }
  return Answer().add("n", problem.n);
}

/// "setting scotch|metis|pord|amd".
std::string setting(std::istream &words) {
  const std::map<std::string, int> numbers = {{"amd", 0}, {"scotch", 3}, {"pord", 4}, {"metis", 5}};
  std::string name;
  words >> name;
  forget();
  ordering = numbers.at(name);
  return Answer().add("setting", name);
}

std::string timed(std::istream &words, const std::function<void()> &work) {
  Answer answer;
  answer.add("ms", meanMs(words, work)).add("ordering", mumps.infog[6]).add("fill", mumps.infog[8]);
  if (!solution.empty()) answer.add("residual", problem.residual(solution.data()));
  return answer;
}

} // namespace

int main() {
  serve({
      {"load", load},
      {"setting", setting},
      {"factor", [](std::istream &w) { return timed(w, factorise); }},
      {"solve", [](std::istream &w) { return timed(w, solve); }},
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
}
