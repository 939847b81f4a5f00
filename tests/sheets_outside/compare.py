"""How far two pictures of one sheet differ: mean over the sheet, and mean over the worst field of 10 mm, of the difference in grey after a
slight blur; 0 is equal, 1 is black against white. The second picture is three times as fine, so that whole pixels of thin lines do not tell."""
import sys

import numpy
from PIL import Image, ImageFilter

pixels_per_mm = int(sys.argv[3])
first = Image.open(sys.argv[1]).convert("L")
second = Image.open(sys.argv[2]).convert("L").resize(first.size, Image.Resampling.BOX)
blurred = [numpy.asarray(p.filter(ImageFilter.GaussianBlur(0.5 * pixels_per_mm)), dtype=float) / 255 for p in (first, second)]
difference = abs(blurred[0] - blurred[1])
side = 10 * pixels_per_mm
down, across = (n // side for n in difference.shape)
fields = difference[: down * side, : across * side].reshape(down, side, across, side).mean(axis=(1, 3))
worst = numpy.unravel_index(fields.argmax(), fields.shape)
ink = 1 - blurred[0].mean()
print(f"{difference.mean():.5f} {fields.max():.5f} {ink:.5f} {worst[1] * 10} {worst[0] * 10}")
