#pragma once
#include <QObject>

#include "station/windows/look/colours.h"
#include "station/windows/look/type_scale.h"

namespace probewright::windows {

class SystemScheme;

/// Which colours a person wants.
enum class Scheme { system, light, dark };

/// Colours and fonts that all windows draw with, and the only place where they change. Main thread only.
class Look : public QObject {
  Q_OBJECT
 public:
  /// `system` outlives the look.
  explicit Look(const SystemScheme& system, QObject* parent = nullptr);

  const Colours& colours() const { return colours_; }
  const TypeScale& type() const { return type_; }
  Scheme scheme() const { return scheme_; }
  bool dark() const { return dark_; }

  void set_scheme(Scheme scheme);
  /// 100 to 200.
  void set_percent(int percent);

 signals:
  /// Everything is to be drawn anew.
  void changed();

 private:
  void apply();
  const SystemScheme& system_;
  Scheme scheme_ = Scheme::system;
  bool dark_ = false;
  Colours colours_;
  TypeScale type_;
};

}  // namespace probewright::windows
