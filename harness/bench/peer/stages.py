"""SSIM and the eigendecomposition alone, this program's and others' in turn; see ../README.md.

Usage: stages.py MANIFEST.csv PAIRS COMMAND...   (the command prints a stage, milliseconds and a
figure a line). Processor time of one thread, median of rounds; ratios are medians of the pairs'.
Fails where the others find another figure.
"""

import os

for variable in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[variable] = "1"

import statistics
import subprocess
import sys
import time
from pathlib import Path

import numpy as np
from scipy.linalg import eigh
from skimage.io import imread

from similarity import PEAK, judge

ROUNDS = 11
ROUND_SECONDS = 0.15
LEADING = 64


def milliseconds(work):
    rounds = []
    for _ in range(ROUNDS + 1):
        calls, start = 0, time.thread_time()
        while time.thread_time() - start < ROUND_SECONDS:
            work()
            calls += 1
        rounds.append((time.thread_time() - start) / calls * 1e3)
    return statistics.median(rounds[1:])


def others(clean):
    """Stage, who, work and its figure."""
    change = 7919 * np.arange(clean.size, dtype=np.int64) % 41 - 20
    shown = np.clip(clean + change.reshape(clean.shape), 0, PEAK).astype(np.uint8)
    for how, who in (
        ("skimage", "scikit-image"),
        ("opencv", "OpenCV, doubles"),
        ("opencv32", "OpenCV, floats"),
    ):
        of = judge(how, clean)
        yield "ssim", who, lambda of=of: of(shown)
    centred = clean - clean.mean(axis=1, keepdims=True)
    covariance = centred @ centred.T / clean.shape[1]
    d = len(clean)
    for stage, subset in (("eigen-leading", (d - LEADING, d - 1)), ("eigen-all", None)):

        def largest(subset=subset):
            return eigh(covariance, subset_by_index=subset, driver="evr", check_finite=False)[0][-1]

        yield stage, "LAPACK dsyevr", largest


def main():
    manifest, pairs, command = Path(sys.argv[1]), int(sys.argv[2]), sys.argv[3:]
    clean = imread(next(manifest.parent.glob("pictures/**/photographer.png")))
    works = list(others(clean))
    times = {}
    for _ in range(pairs):
        text = subprocess.run(command, check=True, capture_output=True, text=True).stdout
        ours = {stage: (float(ms), float(figure)) for stage, ms, figure in map(str.split, text.splitlines())}
        for stage, who, work in works:
            if abs(work() / ours[stage][1] - 1) > (1e-4 if "floats" in who else 1e-9):
                sys.exit(f"{stage}: {who} finds {work()}, this program {ours[stage][1]}")
            times.setdefault((stage, who), []).append((ours[stage][0], milliseconds(work)))
    print("| stage | this program, ms | other | ms | other / this program |")
    print("|---|---|---|---|---|")
    for (stage, who), pair in times.items():
        mine, other = zip(*pair)
        ratio = statistics.median(b / a for a, b in pair)
        print(
            f"| {stage} | {statistics.median(mine):.2f} | {who} | {statistics.median(other):.2f}"
            f" | {ratio:.2f} |"
        )


if __name__ == "__main__":
    main()
