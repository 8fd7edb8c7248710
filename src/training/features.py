"""What the beat network hears: log-mel bands and two chromas, fifty times a second.

The application computes the same figures in TypeScript (src/core/music/network/features.ts); a stored
example holds the two together. Whoever changes a number here changes it there and trains again.

Frames: frame i is centred on sample 441 i of the 22.05 kHz mono signal, which is zero outside its ends.
Level:  the track is scaled to RMS 0.1 first, so that loudness carries no information.
Mel:    Hann 1024, 48 triangles of height 1 between 30 Hz and 10 kHz (HTK mel scale),
        log10(1 + 1000 * magnitude); magnitude is that of the sine a bin stands for (2 |X| / sum of window).
Chroma: Hann 4096 every second frame, each value standing for two frames; square root of magnitude gathered
        into twelve pitch classes by Gaussians of a quarter semitone (MIDI 50-96, and 28-52 for the bass),
        log(1 + 20 x).
"""
import numpy as np

RATE = 22050          # Hz
HOP = 441             # samples: 50 frames a second
FRAMES = RATE / HOP
MEL_WINDOW, MEL_BANDS, MEL_LOW, MEL_HIGH = 1024, 48, 30.0, 10000.0
CHROMA_WINDOW = 4096
CHROMA_RANGES = ((50, 96), (28, 52))   # MIDI note numbers, inclusive: harmony, bass
CHROMA_SIGMA = 0.25   # semitones
LEVEL = 0.1           # RMS after scaling
MEL_SPREAD = 0.4      # what the band-wise deviation is divided by


def mel_filters():
    """(48, 513) triangles of height 1, evenly spaced on the HTK mel scale."""
    mel = lambda hz: 2595.0 * np.log10(1.0 + hz / 700.0)
    edges = 700.0 * (10.0 ** (np.linspace(mel(MEL_LOW), mel(MEL_HIGH), MEL_BANDS + 2) / 2595.0) - 1.0)
    bins = np.arange(MEL_WINDOW // 2 + 1) * RATE / MEL_WINDOW
    low, centre, high = edges[:-2, None], edges[1:-1, None], edges[2:, None]
    return np.maximum(0.0, np.minimum((bins - low) / (centre - low), (high - bins) / (high - centre)))


def chroma_filters():
    """(24, 2049): twelve rows of harmony (C first), then twelve of bass; each row sums to 1."""
    bins = np.arange(CHROMA_WINDOW // 2 + 1) * RATE / CHROMA_WINDOW
    pitch = np.full(bins.shape, -1000.0)
    pitch[1:] = 69.0 + 12.0 * np.log2(bins[1:] / 440.0)
    rows = np.zeros((24, bins.size))
    for half, (low, high) in enumerate(CHROMA_RANGES):
        for note in range(low, high + 1):
            rows[12 * half + note % 12] += np.exp(-0.5 * ((pitch - note) / CHROMA_SIGMA) ** 2)
    return rows / rows.sum(1, keepdims=True)


def _hann(n):
    return 0.5 - 0.5 * np.cos(2.0 * np.pi * np.arange(n) / n)


def _magnitudes(signal, window, hop, count):
    """(count, window/2 + 1) magnitudes of frames centred on multiples of hop."""
    padded = np.zeros((count - 1) * hop + window)
    inside = min(signal.size, padded.size - window // 2)
    padded[window // 2:window // 2 + inside] = signal[:inside]
    frames = np.lib.stride_tricks.sliding_window_view(padded, window)[::hop]
    shape = _hann(window)
    out = np.empty((count, window // 2 + 1), np.float32)
    for at in range(0, count, 512):   # in blocks: four minutes of frames at once would be a gigabyte
        out[at:at + 512] = np.abs(np.fft.rfft(frames[at:at + 512] * shape)) * (2.0 / shape.sum())
    return out


MEL, CHROMA = mel_filters().T.astype(np.float32), chroma_filters().T.astype(np.float32)


def hear(signal):
    """Raw features of a mono signal at 22.05 kHz: (72, frames) float32, rows mel 0-47, harmony 48-59, bass 60-71."""
    signal = np.asarray(signal, np.float64)
    level = np.sqrt(np.mean(signal ** 2)) if signal.size else 0.0
    if level > 1e-7:
        signal = signal * (LEVEL / level)
    count = signal.size // HOP + 1
    mel = np.log10(1.0 + 1000.0 * (_magnitudes(signal, MEL_WINDOW, HOP, count) @ MEL))
    pairs = (count + 1) // 2
    chroma = np.log1p(20.0 * (np.sqrt(_magnitudes(signal, CHROMA_WINDOW, 2 * HOP, pairs)) @ CHROMA))
    return np.concatenate([mel.T, np.repeat(chroma.T, 2, axis=1)[:, :count]]).astype(np.float32)


def normalise(raw):
    """Network input from raw features: each row without its mean over the track, mel / 0.4, each chroma / its deviation."""
    out = raw - raw.mean(1, keepdims=True)
    out[:MEL_BANDS] /= MEL_SPREAD
    for half in (slice(48, 60), slice(60, 72)):
        out[half] /= max(1e-3, np.sqrt(np.mean(out[half] ** 2)))
    return out.astype(np.float32)
