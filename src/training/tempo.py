"""Where the beats fall in time: steady, drifting or rubato."""
import numpy as np

SLOWEST, FASTEST = 60.0, 205.0   # beats a minute


def choose_tempo(rng):
    """Log-uniform, with a quarter of the draws from the fast end, where trackers halve the tempo most."""
    low = 135.0 if rng.random() < 0.25 else SLOWEST
    return float(np.exp(rng.uniform(np.log(low), np.log(FASTEST))))


def place_beats(rng, tempo, bars, beats, manner):
    """Times in seconds of beats 0 .. beats (inclusive) of a piece whose bars are [(position, metre)]."""
    n = beats + 1
    bend = np.zeros(n)                                         # log of the beat's length over the mean
    at = np.arange(n)
    if manner == 'steady' and rng.random() < 0.3:
        bend += rng.normal(0, 0.004, n)
    if manner in ('drift', 'rubato'):
        walk = np.cumsum(rng.normal(0, 1, n))
        walk = np.convolve(np.pad(walk, 4, 'edge'), np.ones(9) / 9, 'valid')
        walk -= walk.mean()
        bend += walk / max(1e-6, np.abs(walk).max()) * rng.uniform(0.01, 0.09 if manner == 'drift' else 0.14)
        bend += rng.normal(0, rng.uniform(0.003, 0.012), n)
    if manner == 'drift' and rng.random() < 0.12:              # a new tempo from some bar on
        bend[bars[len(bars) // 2][0]:] += rng.uniform(-0.25, 0.25)
    if manner == 'rubato':
        phrase = int(rng.choice([2, 4, 4, 8]))
        depth, jitter = rng.uniform(0.03, 0.16), rng.uniform(0.01, 0.05)
        ends = [start for start, _ in bars[phrase::phrase]]
        for previous, end in zip([0] + ends, ends):
            span = max(1, end - previous)
            inside = (at >= previous) & (at < end)
            bend[inside] -= depth * np.sin(np.pi * (at[inside] - previous) / span)
            if rng.random() < 0.6:                             # broaden into the phrase's end
                bend[max(0, end - 2):end] += rng.uniform(0.05, 0.35) * np.array([0.5, 1.0])[-min(2, end):]
        bend += rng.normal(0, jitter, n)
    lengths = 60.0 / tempo * np.exp(bend[:-1])
    return np.concatenate([[0.0], np.cumsum(lengths)])
