// Named checks that are printed and counted, and one comparison of floating-point numbers.
#ifndef COUPLET_TEST_CHECKS_HPP
#define COUPLET_TEST_CHECKS_HPP

#include <cmath>
#include <cstdio>
#include <string>

struct Checks {
  int passed = 0, failed = 0;

  void operator()(bool ok, const std::string& name) {
    std::printf("%s  %s\n", ok ? "ok" : "FAILED", name.c_str());
    (ok ? passed : failed) += 1;
  }

  // That `action` throws an Error with exactly this message.
  template <class Error, class Action>
  void refused(Action action, const std::string& message, const std::string& name) {
    try {
      action();
    } catch (const Error& error) {
      if (error.what() == message) return (*this)(true, name);
      std::printf("  expected: %s\n  got:      %s\n", message.c_str(), error.what());
    } catch (const std::exception& error) {
      std::printf("  another exception: %s\n", error.what());
    }
    (*this)(false, name);
  }
};

// True if |a - b| <= tolerance |b|; never for NaN, and exact where b is 0.
inline bool close(double a, double b, double tolerance) { return std::fabs(a - b) <= tolerance * std::fabs(b); }

#endif
