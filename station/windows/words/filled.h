#pragma once
#include <QString>
#include <functional>

namespace probewright::windows {

/// A sentence with its {names} replaced by `value_of(name)`; a name for which that gives a null string stays as it is.
QString filled(const QString& sentence, const std::function<QString(const QString& name)>& value_of);
/// With a capital at its start and a full stop at its end, as a sentence stands on a screen.
QString as_sentence(QString words);

}  // namespace probewright::windows
