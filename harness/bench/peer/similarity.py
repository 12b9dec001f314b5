"""SSIM (11 x 11 Gaussian window, sigma 1.5, population moments) of pictures of 8 bits, two ways.

judge(how, clean) returns a function of the shown picture. "skimage" is scikit-image's own;
"opencv" filters by separable passes of OpenCV on doubles and keeps the moments of the clean
picture; "opencv32" does the same on floats.
"""

import numpy as np

PEAK = 255
SIGMA = 1.5
RADIUS = 5
INSIDE = (slice(RADIUS, -RADIUS), slice(RADIUS, -RADIUS))


def judge(how, clean):
    return by_skimage(clean) if how == "skimage" else by_opencv(clean, how == "opencv32")


def by_skimage(clean):
    from skimage.metrics import structural_similarity

    return lambda shown: structural_similarity(
        clean,
        shown,
        gaussian_weights=True,
        sigma=SIGMA,
        use_sample_covariance=False,
        data_range=PEAK,
    )


def by_opencv(clean, single):
    import cv2

    cv2.setNumThreads(1)
    window = cv2.getGaussianKernel(2 * RADIUS + 1, SIGMA)
    kind, depth = (np.float32, cv2.CV_32F) if single else (np.float64, cv2.CV_64F)

    def means(values):
        return cv2.sepFilter2D(values, depth, window, window)[INSIDE]

    c1, c2 = (0.01 * PEAK) ** 2, (0.03 * PEAK) ** 2
    x = clean.astype(kind)
    mx = means(x)
    mx2 = mx * mx
    vx_c2 = means(x * x) - mx2 + c2
    mx2_c1 = mx2 + c1

    def of(shown):
        y = shown.astype(kind)
        my = means(y)
        vy = means(y * y)
        covariance = means(x * y)
        product = mx * my
        covariance -= product
        covariance *= 2
        covariance += c2
        product *= 2
        product += c1
        product *= covariance
        my *= my
        vy -= my
        vy += vx_c2
        my += mx2_c1
        my *= vy
        product /= my
        return float(product.mean(dtype=np.float64))

    return of
