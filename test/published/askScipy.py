"""Answers problems with scipy.ndimage: one JSON object a line in, one list of numbers a line out."""
import json
import sys

import numpy
from scipy import ndimage, signal

MODES = {
    "zero": "constant",
    "replicate": "nearest",
    "periodic": "wrap",
    "half-sample-symmetric": "reflect",
    "whole-sample-symmetric": "mirror",
}


def answer(problem):
    image = numpy.array(problem["image"], dtype=float).reshape(problem["height"], problem["width"])
    taps = numpy.array(problem["taps"], dtype=float).reshape(problem["n"], problem["m"])
    border = problem["border"]
    if problem["extent"] != "same":
        sense = signal.correlate2d if problem["correlate"] else signal.convolve2d
        return sense(image, taps, mode=problem["extent"])
    mode, value = ("constant", border["constant"]) if isinstance(border, dict) else (MODES[border], 0.0)
    sense = ndimage.correlate if problem["correlate"] else ndimage.convolve
    # SciPy counts the origin from its own centre, floor(n / 2) of the taps as they lie on the image.
    centre = [problem["n"] // 2, problem["m"] // 2]
    origin = [problem["oy"] - centre[0], problem["ox"] - centre[1]]
    return sense(image, taps, mode=mode, cval=value, origin=origin)


for line in sys.stdin:
    print(json.dumps(answer(json.loads(line)).ravel().tolist()))
