#pragma once
#include <QApplication>
#include <QElapsedTimer>

namespace probewright::windows {

/// An application that says which calls kept the main thread busy for too long, so that a window that stutters is
/// noticed by whoever builds it. Only debug builds use it; waiting in an open menu does not count.
class WatchedApplication : public QApplication {
  Q_OBJECT
 public:
  static constexpr int longest_ms = 50;

  WatchedApplication(int& argc, char** argv) : QApplication(argc, argv) {}
  bool notify(QObject* receiver, QEvent* event) override;

  int slow_calls() const { return slow_; }

 private:
  int depth_ = 0;
  int loops_ = 0;        ///< event loops that run inside the outermost call
  bool nested_ = false;  ///< one began since the outermost call did
  int slow_ = 0;
};

}  // namespace probewright::windows
