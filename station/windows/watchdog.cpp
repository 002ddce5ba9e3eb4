#include "station/windows/watchdog.h"

#include <QEvent>
#include <QThread>
#include <QtDebug>

namespace probewright::windows {

bool WatchedApplication::notify(QObject* receiver, QEvent* event) {
  if (QThread::currentThread() != thread()) return QApplication::notify(receiver, event);
  if (depth_ > 0) {
    if (QThread::currentThread()->loopLevel() > loops_) nested_ = true;
    return QApplication::notify(receiver, event);
  }
  // The receiver may be gone afterwards, so it is named before.
  const char* kind = receiver->metaObject()->className();
  const auto type = event->type();
  loops_ = QThread::currentThread()->loopLevel();
  nested_ = false;
  QElapsedTimer timer;
  timer.start();
  ++depth_;
  const bool done = QApplication::notify(receiver, event);
  --depth_;
  if (!nested_ && timer.elapsed() > longest_ms) {
    ++slow_;
    qWarning("the main thread was busy for %d ms with event %d of a %s", static_cast<int>(timer.elapsed()),
             static_cast<int>(type), kind);
  }
  return done;
}

}  // namespace probewright::windows
