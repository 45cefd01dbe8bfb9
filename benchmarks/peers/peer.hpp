// What every peer written in C++ shares: the conversation on standard input and output, the clock, the reading of files.
//
// A peer answers one line for each line it reads: "load FILE", "factor 5", ... A timed verb takes the number of runs and
// answers "ms=MEAN ..." and figures by which a wrong result would show; whatever fails answers "error WHY".
#pragma once
#include <chrono>
#include <cmath>
#include <cstdint>
#include <cstdio>
#include <functional>
#include <iostream>
#include <map>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

using Verb = std::function<std::string(std::istream &)>;

inline void serve(const std::map<std::string, Verb> &verbs) {
  for (std::string line; std::getline(std::cin, line);) {
    std::istringstream words(line);
    std::string name;
    words >> name;
    try {
      const auto verb = verbs.find(name);
      if (verb == verbs.end()) throw std::runtime_error("unknown verb " + name);
      std::cout << verb->second(words) << std::endl;
    } catch (const std::exception &error) {
      std::cout << "error " << error.what() << std::endl;
    }
  }
}

/// Mean milliseconds of the runs asked for in the line (one where it names none).
template <typename Work> double meanMs(std::istream &words, Work work) {
  int runs = 1;
  words >> runs;
  const auto begun = std::chrono::steady_clock::now();
  for (int i = 0; i < runs; i++) work();
  const std::chrono::duration<double, std::milli> all = std::chrono::steady_clock::now() - begun;
  return all.count() / runs;
}

/// "key=value" pairs in one line.
struct Answer {
  std::ostringstream text;
  template <typename T> Answer &add(const char *key, const T &value) {
    text << (text.tellp() > 0 ? " " : "") << key << '=' << value;
    return *this;
  }
  operator std::string() const { return text.str(); }
};

/// Binary arrays one after another, little-endian, as the comparison writes them.
class Arrays {
public:
  explicit Arrays(const std::string &path) : file(std::fopen(path.c_str(), "rb")) {
    if (!file) throw std::runtime_error("cannot read " + path);
  }
  ~Arrays() { std::fclose(file); }
  Arrays(const Arrays &) = delete;
  template <typename T> std::vector<T> next(size_t count) {
    std::vector<T> values(count);
    if (std::fread(values.data(), sizeof(T), count, file) != count) throw std::runtime_error("the file is short");
    return values;
  }

private:
  std::FILE *file;
};

/// Symmetric matrix, lower triangle by columns, and a right-hand side.
struct Problem {
  int n = 0;
  std::vector<int32_t> start, row;
  std::vector<double> values, right;

  static Problem read(std::istream &words) {
    std::string path;
    words >> path;
    Arrays file(path);
    const auto sizes = file.next<int32_t>(2);
    Problem p;
    p.n = sizes[0];
    p.start = file.next<int32_t>(sizes[0] + 1);
    p.row = file.next<int32_t>(sizes[1]);
    p.values = file.next<double>(sizes[1]);
    p.right = file.next<double>(sizes[0]);
    return p;
  }

  /// |b - A x| / |b|, 2-norms.
  double residual(const double *x) const {
    std::vector<double> left = right;
    for (int j = 0; j < n; j++) {
      for (int k = start[j]; k < start[j + 1]; k++) {
        left[row[k]] -= values[k] * x[j];
        if (row[k] != j) left[j] -= values[k] * x[row[k]];
      }
    }
    double above = 0, below = 0;
    for (int i = 0; i < n; i++) {
      above += left[i] * left[i];
      below += right[i] * right[i];
    }
    return std::sqrt(above / below);
  }
};
