#pragma once
#include <QRectF>

#include "station/sequence/line_view.h"

class QPainter;

namespace probewright::windows {

class Look;

/// The spectrum of both LEDs over the wavelength. `plots` may be nullptr: an empty plot with its caption. Red is a full
/// line, infrared a dashed one.
void draw_spectra(QPainter& painter, const QRectF& place, const sequence::NestPlots* plots, const Look& look);
/// The pulse trains of both over time, one above the other, each on a scale of its own.
void draw_pulses(QPainter& painter, const QRectF& place, const sequence::NestPlots* plots, const Look& look);

}  // namespace probewright::windows
