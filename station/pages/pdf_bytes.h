#pragma once
#include <QByteArray>
#include <QSize>

#include "station/base/times.h"

/// What the tool kit's PDF writer has no setting for, written anew into the same bytes so that the file's offsets hold
/// (ISO 32000-1). Private to pages. Any thread.
namespace probewright::pages {

/// The writer takes whole points (0.35 mm) only: a page that holds `width_mm` x `height_mm` at its upper left.
QSize whole_points(double width_mm, double height_mm);

/// Makes the only page of a file begun with whole_points as large as it was asked for, to 0.001 point.
/// False: there is not one page box, or no room.
bool set_page_size(QByteArray& pdf, double width_mm, double height_mm);

/// The time at which the file says it was made: the caller's, not the machine's. False: no such entry, or no room.
bool set_creation_time(QByteArray& pdf, UtcTime time);

}  // namespace probewright::pages
