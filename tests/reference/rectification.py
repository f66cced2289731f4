"""Fixture rectification.json: plane-to-plane projections by OpenCV.

Run:  /usr/bin/python3 tests/reference/rectification.py > tests/reference/rectification.json
(Debian: python3-opencv)
"""
import json
import cv2
import numpy as np

rng = np.random.default_rng(9)


def case(count, noise):
    true = np.array([[.3, .02, 40], [-.03, .28, 60], [1e-4, 6e-5, 1]])
    image = rng.uniform(80, 1000, (count, 2))
    if count == 4:
        image = np.array([[120., 90], [930, 140], [890, 960], [160, 900]])
    plane = cv2.perspectiveTransform(image.reshape(-1, 1, 2), true).reshape(-1, 2) + rng.normal(0, noise, (count, 2))
    image, plane = image.round(4), plane.round(6)
    if count == 4:
        found = cv2.getPerspectiveTransform(image.astype(np.float32), plane.astype(np.float32))
    else:
        found, _ = cv2.findHomography(image, plane, 0)
    probes = np.array([[300., 500], [640, 360], [100, 1000]])
    return {
        'image': image.tolist(), 'plane': plane.tolist(), 'probes': probes.tolist(),
        'rectified': cv2.perspectiveTransform(probes.reshape(-1, 1, 2), found).reshape(-1, 2).round(6).tolist(),
    }


print(json.dumps([case(4, 0), case(4, .5), case(8, 0), case(12, .5), case(30, .2)]))
