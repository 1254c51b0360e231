"""SciPy's FFT convolutions of 32-bit float planes, one line of JSON to each line read (the protocol of yardstick.h):

    <form> <plane>    fftconvolve or oaconvolve, mode "same"    ->  {"milliseconds": ...}
    save              writes the last result                   ->  {"saved": 1}

Arguments: columns, rows, planes, image file, tap columns, tap rows, tap file, result file. One thread: the caller sets
OMP_NUM_THREADS and its like, and SciPy's transforms get one worker. Times are processor time of this process.
"""

import json
import sys
import time

import numpy
import scipy
import scipy.fft
import scipy.signal


def main():
    columns, rows, planes = map(int, sys.argv[1:4])
    images = numpy.fromfile(sys.argv[4], dtype=numpy.float32).reshape(planes, rows, columns)
    taps = numpy.fromfile(sys.argv[7], dtype=numpy.float32).reshape(int(sys.argv[6]), int(sys.argv[5]))
    forms = {"fftconvolve": scipy.signal.fftconvolve, "oaconvolve": scipy.signal.oaconvolve}
    result = None
    with scipy.fft.set_workers(1):
        for line in sys.stdin:
            form, *plane = line.split()
            if form == "save":
                assert result.dtype == numpy.float32
                result.tofile(sys.argv[8])
                answer = {"saved": 1}
            else:
                image = images[int(plane[0])]
                begun = time.process_time()
                result = forms[form](image, taps, mode="same")
                answer = {"milliseconds": 1e3 * (time.process_time() - begun)}
            print(json.dumps(answer), flush=True)


if __name__ == "__main__":
    main()
