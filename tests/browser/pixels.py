"""What colours a screenshot really holds, read by the browser's own decoder."""

from __future__ import annotations

import base64

# Green and blue must be absent, and no pixel brighter than WCAG relative luminance 0.20.
READ_PIXELS = """async (source) => {
  const picture = new Image();
  picture.src = source;
  await picture.decode();
  const canvas = new OffscreenCanvas(picture.width, picture.height);
  const context = canvas.getContext("2d");
  context.drawImage(picture, 0, 0);
  const { data } = context.getImageData(0, 0, picture.width, picture.height);
  const most = [0, 0, 0];
  const where = [0, 0, 0];
  const sum = [0, 0, 0];
  for (let i = 0; i < data.length; i += 4) {
    for (let c = 0; c < 3; c += 1) {
      sum[c] += data[i + c];
      if (data[i + c] > most[c]) { most[c] = data[i + c]; where[c] = i / 4; }
    }
  }
  const n = data.length / 4;
  const place = (k) => [k % picture.width, Math.floor(k / picture.width)];
  return { most, mean: sum.map((total) => total / n), where: where.map(place) };
}"""


def read_colours(blank_page, png: bytes) -> dict:
    """Largest and mean value of red, green and blue over all pixels, and where the largest is."""
    source = "data:image/png;base64," + base64.b64encode(png).decode()
    return blank_page.evaluate(READ_PIXELS, source)


def relative_luminance(red: float) -> float:
    """WCAG 2.2 relative luminance of a pure red of 0..255."""
    share = red / 255.0
    linear = share / 12.92 if share <= 0.04045 else ((share + 0.055) / 1.055) ** 2.4
    return 0.2126 * linear
