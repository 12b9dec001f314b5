"""Compares two records of the study on the clean pictures, codec by codec.

Usage: agreement.py OURS/trials.csv PEER.csv
Prints mean PSNR and mean SSIM of both; fails where they differ by more than 0.01 dB or 0.001.
What is left is the order of summation at the edge between two steps.
"""

import csv
import sys

PSNR_TOLERANCE_DB = 0.01
SSIM_TOLERANCE = 0.001


def clean_means(path):
    sums = {}
    with open(path, encoding="utf-8", newline="") as file:
        for row in csv.DictReader(file):
            if row["impairment"] == "none":
                psnr, ssim, count = sums.get(row["codec"], (0.0, 0.0, 0))
                sums[row["codec"]] = (
                    psnr + float(row["psnr_db"]),
                    ssim + float(row["ssim"]),
                    count + 1,
                )
    return {codec: (psnr / n, ssim / n) for codec, (psnr, ssim, n) in sums.items()}


def main():
    ours, peer = clean_means(sys.argv[1]), clean_means(sys.argv[2])
    if not ours or ours.keys() != peer.keys():
        sys.exit(f"the codecs differ: {sorted(ours)} and {sorted(peer)}")
    print(f"{'codec':28}{'PSNR (dB)':>12}{'peer':>10}{'SSIM':>12}{'peer':>10}")
    apart = []
    for codec, (psnr, ssim) in ours.items():
        peer_psnr, peer_ssim = peer[codec]
        print(f"{codec:28}{psnr:12.4f}{peer_psnr:10.4f}{ssim:12.5f}{peer_ssim:10.5f}")
        if abs(psnr - peer_psnr) > PSNR_TOLERANCE_DB or abs(ssim - peer_ssim) > SSIM_TOLERANCE:
            apart.append(codec)
    if apart:
        sys.exit("apart by more than the tolerance: " + ", ".join(apart))
    print(f"agree within {PSNR_TOLERANCE_DB} dB and {SSIM_TOLERANCE}")


if __name__ == "__main__":
    main()
