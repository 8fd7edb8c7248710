"""Features of annotated recordings: recordings.py FOLDER OUT.npz [--check]

FOLDER holds NAME.wav (16 bit) and NAME.json {"beats": s, "downbeats": s, optional}. The first four fifths of the files by name are taken; with
--check the last fifth, which is never trained on.
"""
import argparse
import glob
import json
import os
from math import gcd
import numpy as np
from scipy.io import wavfile
from scipy.signal import resample_poly
import features


def read_samples(path):
    """Mono samples at 22.05 kHz."""
    rate, x = wavfile.read(path)
    x = x.astype(np.float64) / (32768.0 if x.dtype == np.int16 else 1.0)
    if x.ndim > 1:
        x = x.mean(1)
    common = gcd(rate, features.RATE)
    return resample_poly(x, features.RATE // common, rate // common)


def split(names, check):
    names = sorted(names)
    cut = len(names) * 4 // 5
    return names[cut:] if check else names[:cut]


def main():
    ap = argparse.ArgumentParser()
    ap.add_argument('folder')
    ap.add_argument('out')
    ap.add_argument('--check', action='store_true')
    args = ap.parse_args()
    out = {}
    for i, path in enumerate(split(glob.glob(os.path.join(args.folder, '*.wav')), args.check)):
        truth = json.load(open(path[:-4] + '.json'))
        beats, downbeats = np.array(truth['beats']), np.array(truth.get('downbeats', []))
        flags = np.array([downbeats.size > 0 and np.abs(downbeats - b).min() < 0.02 for b in beats])
        out |= {f'raw{i}': features.hear(read_samples(path)).astype(np.float16), f'beats{i}': beats.astype(np.float32), f'down{i}': flags,
                f'source{i}': np.array(os.path.basename(path)[:-4])}
    np.savez(args.out + '.part.npz', **out)
    os.replace(args.out + '.part.npz', args.out)      # a training under way may be waiting for it


if __name__ == '__main__':
    main()
