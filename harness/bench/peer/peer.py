"""The study of ../study.yaml in vectorised NumPy and SciPy; see ../README.md.

Usage: peer.py MANIFEST.csv TRIALS.csv SSIM [REPLICATES]
SSIM is skimage, opencv or opencv32. Runs one process a processor, writes a row for each trial and
prints the number of trials and the seconds they took.
"""

import os

for variable in ("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[variable] = "1"

import csv
import multiprocessing
import sys
import time
import zlib
from functools import lru_cache
from pathlib import Path

import numpy as np
from scipy.fft import dctn
from scipy.linalg import eigh
from skimage.io import imread

from similarity import PEAK, judge

KEEPS = (4, 8, 16, 32)
MOST = KEEPS[-1]
STEP = 8.0
MEAN_STEPS = (16.0, 32.0)
SIDE = 8
NOISES = ("gaussian", "salt-and-pepper", "burst-loss")
SNRS_DB = (25.0, 10.0)
MEAN_BURST = 4.0
PAYLOAD_BITS = 8 * 96
SEED = 1

CODECS = (
    [f"pca rows K{k} step8" for k in KEEPS]
    + [f"pca blocks8 K{k} step8" for k in KEEPS]
    + [f"dct blocks8 K{k} step8" for k in KEEPS]
    + [f"mean rows step{step:.0f}" for step in MEAN_STEPS]
)


def zigzag_dct():
    """The first directions of the two-dimensional DCT-II in zig-zag order, one a row."""
    down, across = np.divmod(np.arange(SIDE * SIDE), SIDE)
    diagonal = down + across
    order = np.lexsort((np.where(diagonal % 2 == 1, down, across), diagonal))
    columns = dctn(np.eye(SIDE * SIDE).reshape(-1, SIDE, SIDE), axes=(1, 2), norm="ortho")
    return np.ascontiguousarray(columns.reshape(SIDE * SIDE, -1).T[order[:MOST]])


DCT = zigzag_dct()


def to_blocks(picture):
    """Variables (places in a block) by observations (blocks), edges padded by mirroring."""
    height, width = picture.shape
    padded = np.pad(picture, ((0, -height % SIDE), (0, -width % SIDE)), mode="symmetric")
    down, across = padded.shape[0] // SIDE, padded.shape[1] // SIDE
    blocks = padded.reshape(down, SIDE, across, SIDE).transpose(1, 3, 0, 2)
    return blocks.reshape(SIDE * SIDE, down * across)


def from_blocks(values, shape):
    down, across = -(-shape[0] // SIDE), -(-shape[1] // SIDE)
    blocks = values.reshape(SIDE, SIDE, down, across).transpose(2, 0, 3, 1)
    return blocks.reshape(down * SIDE, across * SIDE)[: shape[0], : shape[1]]


def indices(values):
    """Rounded half away from zero."""
    return (values + np.copysign(0.5, values)).astype(np.int32)


def entropy_bits(symbols):
    """Bits of all symbols at their own entropy: less than any real code of single symbols."""
    counts = np.bincount(symbols.ravel() - symbols.min())
    counts = counts[counts > 0]
    return float(np.sum(counts * (np.log2(symbols.size) - np.log2(counts))))


def strips_of(means, symbols, directions):
    """What travels, in sending order: (kind, index, values, bits)."""
    strips = [("mean", 0, len(means), 8.0 * len(means))]
    for k, row in enumerate(symbols):
        if directions is not None:
            strips.append(("direction", k, directions.shape[1], entropy_bits(directions[k])))
        strips.append(("component", k, len(row), entropy_bits(row)))
    return strips


class Coded:
    """A picture centred, projected, quantised, and its values laid out in packets."""

    def __init__(self, values, basis):
        exact = values.mean(axis=1)
        self.means = np.floor(exact + 0.5)
        directions = None
        if basis is None:
            centred = values - exact[:, None]
            covariance = centred @ centred.T
            covariance /= values.shape[1]
            d = len(values)
            variances, vectors = eigh(
                covariance,
                subset_by_index=(d - MOST, d - 1),
                overwrite_a=True,
                check_finite=False,
                driver="evr",
            )
            basis = vectors.T[::-1]
            steps = STEP / np.sqrt(d * np.maximum(variances[::-1], 1e-300))
            directions = indices(basis / steps[:, None])
            self.basis = directions * steps[:, None]
        else:
            self.basis = basis
        coefficients = basis @ (values - self.means[:, None])
        symbols = indices(coefficients / STEP)
        self.coefficients = symbols * STEP
        self.layout(strips_of(self.means, symbols, directions))

    def layout(self, strips):
        self.strips = strips
        ends = np.cumsum([strip[3] for strip in strips])
        self.starts = ends - [strip[3] for strip in strips]
        self.packets = int(ends[-1] // PAYLOAD_BITS) + 1
        self.bits = {}
        for (kind, k, _, _), end in zip(strips, ends):
            if kind == "component":
                self.bits[k + 1] = float(end)

    def lost_values(self, lost):
        """For each strip that a lost packet holds a part of: kind, index, which values."""
        for (kind, k, count, bits), start in zip(self.strips, self.starts):
            first, last = int(start // PAYLOAD_BITS), int((start + bits) // PAYLOAD_BITS)
            if lost[first : last + 1].any():
                at = start + np.arange(count) * (bits / count)
                yield kind, k, lost[(at // PAYLOAD_BITS).astype(np.intp)]

    def received(self, lost):
        """Means, basis and coefficients as they arrive; lost is None where all do."""
        if lost is None:
            return self.means, self.basis, self.coefficients
        means, coefficients = self.means, self.coefficients.copy()
        for kind, k, gone in self.lost_values(lost):
            if kind == "mean":
                means = filled(means, gone)
            elif kind == "direction" and gone.any():
                coefficients[k] = 0
            elif kind == "component":
                coefficients[k, gone] = 0
        return means, self.basis, coefficients

    def decoded(self, lost):
        """The picture's values with each number of components, each built on the one before."""
        means, basis, coefficients = self.received(lost)
        sums = np.repeat(means[:, None], coefficients.shape[1], axis=1)
        before = 0
        for k in KEEPS:
            sums += basis[before:k].T @ coefficients[before:k]
            before = k
            yield sums, self.bits[k]


class CodedMean(Coded):
    """Mean removal and nothing else."""

    def __init__(self, values, step):
        self.means = np.floor(values.mean(axis=1) + 0.5)
        symbols = indices((values - self.means[:, None]) / step)
        self.coefficients = symbols * step
        self.layout(
            [
                ("mean", 0, len(values), 8.0 * len(values)),
                ("component", 0, symbols.size, entropy_bits(symbols)),
            ]
        )

    def decoded(self, lost):
        means, coefficients = self.means, self.coefficients
        if lost is not None:
            coefficients = coefficients.copy()
            for kind, _, gone in self.lost_values(lost):
                if kind == "mean":
                    means = filled(means, gone)
                else:
                    coefficients.ravel()[gone] = 0
        yield coefficients + means[:, None], self.bits[1]


def filled(means, gone):
    if gone.all():
        return np.full_like(means, (PEAK + 1) / 2)
    at = np.arange(len(means))
    return np.interp(at, at[~gone], means[~gone])


def code(picture):
    """Everything the encoders do with a picture; one eigendecomposition serves every K."""
    values = picture.astype(np.float64)
    blocks = to_blocks(values)
    return [
        (Coded(values, None), False),
        (Coded(blocks, None), True),
        (Coded(blocks, DCT), True),
        *((CodedMean(values, step), False) for step in MEAN_STEPS),
    ]


@lru_cache(maxsize=2)
def clean(path):
    return imread(path)


@lru_cache(maxsize=2)
def judge_of(how, path):
    return judge(how, clean(path))


@lru_cache(maxsize=2)
def clean_code(path):
    return code(clean(path))


def noisy(picture, noise, snr_db, random):
    power = float(picture.var())
    variance = power / 10 ** (snr_db / 10)
    if noise == "gaussian":
        values = random.standard_normal(picture.shape)
        values *= np.sqrt(variance)
        values += picture
        return to_samples(values)
    values = picture.astype(np.float64)
    hit = (np.mean(values**2) + np.mean((PEAK - values) ** 2)) / 2
    density = variance / hit
    draws = random.random(picture.shape)
    result = picture.copy()
    result[draws < density] = PEAK
    result[draws < density / 2] = 0
    return result


def gilbert(count, loss_rate, random):
    """Runs of losses and of arrivals in turn, geometric, four losses long on average."""
    to_bad = loss_rate / (1 - loss_rate) / MEAN_BURST
    lost = np.zeros(count, dtype=bool)
    at = 0 if random.random() < loss_rate else random.geometric(to_bad)
    while at < count:
        run = random.geometric(1 / MEAN_BURST)
        lost[at : at + run] = True
        at += run + random.geometric(to_bad)
    return lost


def to_samples(values):
    """Rounded half up and clipped."""
    samples = np.clip(values, 0, PEAK)
    samples += 0.5
    return samples.astype(np.uint8)


def unit(task):
    """All codecs on one picture under one realisation of noise: a row for each."""
    how, picture_id, path, noise, snr_db, replicate = task
    ssim_of = judge_of(how, path)
    picture = clean(path)
    lost_packets = None
    if noise in ("gaussian", "salt-and-pepper"):
        key = zlib.crc32(f"{picture_id} {noise} {snr_db} {replicate}".encode())
        random = np.random.Generator(np.random.SFC64((SEED, key)))
        coded = code(noisy(picture, noise, snr_db, random))
    else:
        coded = clean_code(path)
        if noise == "burst-loss":
            key = zlib.crc32(f"{picture_id} {noise} {snr_db} {replicate}".encode())
            random = np.random.Generator(np.random.SFC64((SEED, key)))
            most = max(each.packets for each, _ in coded) + 1
            lost_packets = gilbert(most, 10 ** (-snr_db / 10), random)
    rows = []
    for each, blocks in coded:
        for values, bits in each.decoded(lost_packets):
            plane = from_blocks(values, picture.shape) if blocks else values
            shown = to_samples(plane)
            error = shown.astype(np.int32)
            error -= picture
            mse = float(np.vdot(error, error)) / error.size
            psnr = 10 * np.log10(PEAK**2 / mse) if mse > 0 else np.inf
            ssim = ssim_of(shown)
            codec = CODECS[len(rows)]
            rows.append((picture_id, noise, snr_db, replicate, codec, bits, mse, psnr, ssim))
    return rows


def tasks(manifest, how, replicates):
    with open(manifest, encoding="utf-8", newline="") as file:
        pictures = [row for row in csv.DictReader(file) if row["set"] == "field"]
    for row in pictures:
        path = str(manifest.parent / row["file"])
        yield how, row["id"], path, "none", "", 0
        for noise in NOISES:
            for snr_db in SNRS_DB:
                for replicate in range(replicates):
                    yield how, row["id"], path, noise, snr_db, replicate


def main():
    manifest, trials, how = Path(sys.argv[1]), Path(sys.argv[2]), sys.argv[3]
    replicates = int(sys.argv[4]) if len(sys.argv) > 4 else 2
    start = time.perf_counter()
    count = 0
    with multiprocessing.Pool(os.cpu_count()) as pool, open(
        trials, "w", encoding="utf-8", newline=""
    ) as file:
        out = csv.writer(file, lineterminator="\n")
        out.writerow(
            ("picture", "impairment", "severity", "replicate", "codec")
            + ("payload_bits", "mse", "psnr_db", "ssim")
        )
        for rows in pool.imap(unit, tasks(manifest, how, replicates)):
            out.writerows(rows)
            count += len(rows)
    seconds = time.perf_counter() - start
    print(f"{count} trials in {seconds:.2f} s: {count / seconds:.1f} trials/s")


if __name__ == "__main__":
    main()
