"""Isophote models by photutils for bench-lens-light.ts.

In: one line of JSON, a list of {"x", "y", "bands"}, then 80 x 80 little-endian float32 pictures in the same order.
Out: one model each, NaN where no isophotes could be fitted. Geometry is fitted in the last band and applied to the others
(Isophote at fixed geometry), with sigma clipping, as a user would who wants arcs to remain.
"""
import json
import sys
import warnings

import numpy as np
from photutils.isophote import Ellipse, EllipseGeometry, build_ellipse_model
from photutils.isophote import EllipseSample, Isophote, IsophoteList

SIDE = 80
warnings.simplefilter("ignore")


def fitted(picture, x, y):
    geometry = EllipseGeometry(x0=x, y0=y, sma=5.0, eps=0.2, pa=0.5)
    ellipse = Ellipse(picture, geometry)
    ellipse.set_threshold(0.05)
    return ellipse.fit_image(sma0=5.0, minsma=0.0, maxsma=30.0, step=0.15, sclip=2.5, nclip=3, fflag=0.3)


def forced(picture, isophotes):
    made = []
    for known in isophotes:
        if known.sma == 0:
            continue
        g = known.sample.geometry
        sample = EllipseSample(
            picture, g.sma, x0=g.x0, y0=g.y0, eps=g.eps, position_angle=g.pa, astep=0.15, sclip=2.5, nclip=3
        )
        sample.update(g.fix)
        made.append(Isophote(sample, 0, True, 0))
    return IsophoteList(made)


def models(pictures, x, y):
    red = fitted(pictures[-1], x, y)
    if len(red) < 5:
        raise ValueError("too few isophotes")
    found = []
    for k, picture in enumerate(pictures):
        isophotes = red if k == len(pictures) - 1 else forced(picture, red)
        found.append(build_ellipse_model((SIDE, SIDE), isophotes, fill=0.0).astype("<f4"))
    return found


def main():
    stream = sys.stdin.buffer
    for case in json.loads(stream.readline()):
        count = case["bands"]
        raw = stream.read(4 * SIDE * SIDE * count)
        pictures = np.frombuffer(raw, "<f4").reshape(count, SIDE, SIDE).astype(float)
        try:
            made = models(pictures, case["x"], case["y"])
        except Exception:
            made = [np.full((SIDE, SIDE), np.nan, "<f4")] * count
        for model in made:
            sys.stdout.buffer.write(model.tobytes())


main()
