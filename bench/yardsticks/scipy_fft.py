"""SciPy's convolutions of images, one line of JSON to each line read (the protocol of yardstick.h):

    <form> <plane>    filters that image                       ->  {"milliseconds": ...}
    save              writes the last result                   ->  {"saved": 1}

fftconvolve, oaconvolve    scipy.signal, mode "same", zero outside
ndimage                    scipy.ndimage.correlate of the reversed taps, mode "nearest"
ndimage-separable          scipy.ndimage.correlate1d along both axes, mode "nearest", for taps that are an outer product of unit gain
ndimage-box                scipy.ndimage.uniform_filter, mode "nearest"

Arguments: columns, rows, channels, sample (u8 or f32), images, image file, tap columns, tap rows, tap file, result file. Several channels
are filtered plane by plane; bytes become 32-bit floats before and are rounded and clamped after, all of it timed. One thread: the
caller sets OMP_NUM_THREADS and its like, and SciPy's transforms get one worker. Times are processor time of this process.
"""

import json
import sys
import time

import numpy
import scipy
import scipy.fft
import scipy.ndimage
import scipy.signal


def forms_of(taps):
    row, column = taps.sum(axis=0)[::-1], taps.sum(axis=1)[::-1]
    nearest = {"mode": "nearest"}
    return {
        "fftconvolve": lambda plane: scipy.signal.fftconvolve(plane, taps, mode="same"),
        "oaconvolve": lambda plane: scipy.signal.oaconvolve(plane, taps, mode="same"),
        "ndimage": lambda plane: scipy.ndimage.correlate(plane, taps[::-1, ::-1], **nearest),
        "ndimage-separable": lambda plane: scipy.ndimage.correlate1d(scipy.ndimage.correlate1d(plane, row, axis=1, **nearest), column, axis=0, **nearest),
        "ndimage-box": lambda plane: scipy.ndimage.uniform_filter(plane, taps.shape, **nearest),
    }


def filtered(image, form, result):
    """Plane by plane, with the conversions that bytes need."""
    for channel in range(image.shape[2]):
        plane = form(numpy.ascontiguousarray(image[:, :, channel], dtype=numpy.float32))
        if image.dtype == numpy.uint8:
            plane = numpy.clip(numpy.floor(plane + numpy.float32(0.5)), 0, 255)
        result[:, :, channel] = plane


def main():
    columns, rows, channels = map(int, sys.argv[1:4])
    kind = {"u8": numpy.uint8, "f32": numpy.float32}[sys.argv[4]]
    images = numpy.fromfile(sys.argv[6], dtype=kind).reshape(int(sys.argv[5]), rows, columns, channels)
    taps = numpy.fromfile(sys.argv[9], dtype=numpy.float32).reshape(int(sys.argv[8]), int(sys.argv[7]))
    forms = forms_of(taps)
    result = numpy.zeros(images.shape[1:], dtype=kind)
    plain = channels == 1 and kind == numpy.float32
    with scipy.fft.set_workers(1):
        for line in sys.stdin:
            name, *plane = line.split()
            if name == "save":
                assert result.dtype == kind
                result.tofile(sys.argv[10])
                answer = {"saved": 1}
            else:
                image = images[int(plane[0])]
                begun = time.process_time()
                if plain:
                    result = forms[name](image[:, :, 0])
                else:
                    filtered(image, forms[name], result)
                answer = {"milliseconds": 1e3 * (time.process_time() - begun)}
            print(json.dumps(answer), flush=True)


if __name__ == "__main__":
    main()
