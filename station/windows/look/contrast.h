#pragma once
#include <QColor>

namespace probewright::windows {

/// Relative luminance of an opaque colour, 0 (black) to 1 (white). Source: W3C, Web Content Accessibility Guidelines
/// 2.1, definition of "relative luminance".
double relative_luminance(const QColor& colour);
/// Contrast of two opaque colours, 1 to 21. Source: the same, definition of "contrast ratio". Text needs 4.5, large
/// text and what is drawn 3 (level AA, success criteria 1.4.3 and 1.4.11).
double contrast(const QColor& one, const QColor& other);

}  // namespace probewright::windows
