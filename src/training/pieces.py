"""The music itself before anybody plays it: bars, chords and tunes, counted in beats.

A piece is a dictionary: bars [(position of the first beat, metre)], chords [(from, to, root, tones, bass)] with pitch classes,
lines {name: [(from, to, pitch, velocity)]}, compound (True where the beat divides in three) and, of a song with doubled beats, own (its own
bars' positions). Positions are beats from the piece's start.
Two sources: songs of POP909 (Wang et al. 2020, MIT licence), whose tunes, chords and piano are kept, and pieces made up by rules.
"""
import json
import os
import numpy as np
from midi import read_notes

TONES = {'maj': (0, 4, 7), 'min': (0, 3, 7), 'sus2': (0, 2, 7), 'sus4': (0, 5, 7), 'min7': (0, 3, 7, 10), 'maj7': (0, 4, 7, 11), '7': (0, 4, 7, 10),
         'maj6': (0, 4, 7, 9), 'min6': (0, 3, 7, 9), 'dim': (0, 3, 6), 'aug': (0, 4, 8), 'hdim7': (0, 3, 6, 10), 'dim7': (0, 3, 6, 9),
         'minmaj7': (0, 3, 7, 11), 'sus4(b7)': (0, 5, 7, 10)}
DEGREES = {'b2': 1, '2': 2, 'b3': 3, '3': 4, '4': 5, 'b5': 6, '5': 7, '6': 9, 'b7': 10, '7': 11}
NAMES = {name: i for names in ('C Db D Eb E F Gb G Ab A Bb B', 'C C# D D# E F F# G G# A A# B') for i, name in enumerate(names.split())}


def read_song(folder, name):
    """A POP909 song with everything counted in its own annotated beats."""
    truth = json.load(open(os.path.join(folder, f'{name}.json')))
    beats = np.array(truth['beats'])
    count = lambda t: np.interp(t, beats, np.arange(beats.size), left=np.nan, right=np.nan)
    lines = {}
    for track, notes in read_notes(os.path.join(folder, f'{name}.mid')).items():
        if track in ('MELODY', 'BRIDGE', 'PIANO'):
            placed = [(count(a), count(b), p, v) for a, b, p, v in notes]
            lines[track] = [n for n in placed if n[0] == n[0] and n[1] == n[1]]
    chords = []
    for start, end, symbol in truth['chords']:
        a, b = count(start), count(end)
        if symbol == 'N' or not a < b:
            continue
        root, _, kind = symbol.partition(':')
        kind, _, bass = kind.partition('/')
        root = NAMES[root]
        chords.append((a, b, root, tuple((root + t) % 12 for t in TONES.get(kind, (0, 7))), (root + DEGREES.get(bass, 0)) % 12))
    return dict(beats=beats.size, tempo=60.0 / np.median(np.diff(beats)), first=truth['firstDownbeat'], metre=truth['meter'], chords=chords, lines=lines)


def take_excerpt(rng, song, tempo, beats):
    """An excerpt of a song, to be played at `tempo`; a slow song played fast has its beats doubled, as people would tap it."""
    fold = 2 if tempo / song['tempo'] > 1.55 and song['metre'] == 4 else 1
    length = beats / fold
    start = int(rng.integers(0, max(1, int(song['beats'] - length - 2))))
    if rng.random() < 0.6:
        start += int((song['first'] - start) % song['metre'])
    shift = int(rng.integers(-5, 7))
    move = lambda x: (x - start) * fold
    lines = {k: [(move(a), move(b), p + shift, v) for a, b, p, v in notes if start - 0.1 <= a < start + length] for k, notes in song['lines'].items()}
    chords = [(move(max(a, start)), move(min(b, start + length)), (r + shift) % 12, tuple((t + shift) % 12 for t in ts), (bass + shift) % 12)
              for a, b, r, ts, bass in song['chords'] if b > start and a < start + length]
    metre = song['metre']
    first = -(-int((song['first'] - start) * fold) % metre)     # the bar that the excerpt begins in may begin before it
    bars = [(b, metre) for b in range(first, int(beats), metre)]
    # Doubled beats are what people tap to drums; without drums they go with the song's own, and so do its bars.
    first = -(-int(song['first'] - start) % metre) * fold
    own = list(range(first, int(beats) + 1, metre * fold)) if fold == 2 else None
    return dict(bars=bars, beats=beats, chords=chords, lines=lines, compound=False, own=own)


PROGRESSIONS = [[0, 5, 3, 4], [0, 4, 5, 3], [5, 3, 0, 4], [0, 3, 4, 4], [0, 3, 0, 4], [0, 5, 1, 4], [1, 4, 0, 0], [0, 2, 3, 4], [0, 6, 3, 0],
                [0, 0, 3, 0], [3, 4, 2, 5], [0, 4, 0, 4], [0], [0, 6], [5, 4, 3, 4], [0, 3, 6, 2, 5, 1, 4, 0], [0, 0, 0, 0, 3, 3, 0, 0, 4, 3, 0, 4]]
SCALES = {'major': (0, 2, 4, 5, 7, 9, 11), 'minor': (0, 2, 3, 5, 7, 8, 10), 'dorian': (0, 2, 3, 5, 7, 9, 10), 'mixolydian': (0, 2, 4, 5, 7, 9, 10)}


def make_piece(rng, metre, compound, tempo, beats):
    """A piece by rules: a progression in a key, a tune from a few motifs that come back."""
    bars, at = [], -int(rng.integers(1, metre)) if rng.random() < 0.3 else 0
    change = rng.random()
    while at < beats:
        here = metre
        if change < 0.05 and at > beats * 0.5:
            here = 3 if metre == 4 else 4       # another metre from the middle on
        elif change > 0.94 and rng.random() < 0.12 and metre == 4:
            here = 2                            # a short bar put in
        bars.append((at, here))
        at += here
    key = int(rng.integers(12))
    scale = SCALES[rng.choice(list(SCALES), p=[0.45, 0.35, 0.1, 0.1])]
    progressions = [PROGRESSIONS[rng.integers(len(PROGRESSIONS))] for _ in range(2)]
    seventh, every = rng.random() < 0.3, rng.choice([0.5, 1, 1, 1, 2, 2] if tempo > 90 else [0.5, 0.5, 1, 1])
    anticipate = 0.5 if rng.random() < 0.15 and not compound else 0.0
    chords, spots = [], []
    for bar, (start, here) in enumerate(bars):
        if every == 0.5 and here % 2 == 0:
            spots += [(start, bar * 2), (start + here // 2, bar * 2 + 1)]
        elif every < 2 or bar % 2 == 0:
            spots.append((start, int(bar / max(1, every))))
    for (start, index), (end, _) in zip(spots, spots[1:] + [(bars[-1][0] + bars[-1][1], 0)]):
        progression = progressions[(index // 16) % 2]
        degree = progression[index % len(progression)]
        tones = tuple((key + scale[(degree + 2 * i) % 7]) % 12 for i in range(4 if seventh else 3))
        early = anticipate if start > bars[0][0] else 0.0
        chords.append((start - early, end - anticipate, tones[0], tones, tones[rng.integers(3)] if rng.random() < 0.1 else tones[0]))
    lines = {'MELODY': _tune(rng, bars, chords, key, scale, compound, tempo)}
    return dict(bars=bars, beats=beats, chords=chords, lines=lines, compound=compound)


def chord_at(chords, position):
    return next((c for c in chords if c[0] - 1e-6 <= position < c[1] - 1e-6), None)


def _tune(rng, bars, chords, key, scale, compound, tempo):
    """Motifs of a bar, repeated and moved; chord tones on the beat; rests."""
    unit = 3 if compound else (2 if tempo > 110 else 4)
    density, sync = rng.uniform(0.25, 0.75), rng.choice([0.15, 0.5])
    motifs = {}
    for metre in {m for _, m in bars}:
        motifs[metre] = [[(s / unit, int(rng.integers(-2, 3))) for s in range(metre * unit)
                          if rng.random() < density * (1.3 if s % unit == 0 else sync)] for _ in range(3)]
    order = rng.integers(0, 3, 4)
    notes, degree = [], int(rng.integers(0, 7))
    for bar, (start, metre) in enumerate(bars):
        if bar % 8 == 7 and rng.random() < 0.6:
            continue
        motif = motifs[metre][order[bar % 4]]
        for (at, step), (nxt, _) in zip(motif, motif[1:] + [(metre, 0)]):
            degree = int(np.clip(degree + step, -4, 11))
            pitch = 60 + key % 12 + scale[degree % 7] + 12 * (degree // 7)
            chord = chord_at(chords, start + at)
            if at % 1 == 0 and chord and pitch % 12 not in chord[3]:
                pitch = min((pitch + d for d in range(-3, 4) if (pitch + d) % 12 in chord[3]), key=lambda p: abs(p - pitch), default=pitch)
            notes.append((start + at, start + at + (nxt - at) * rng.uniform(0.6, 1.0), pitch, 80 + 14 * (at % 1 == 0) + int(rng.integers(-8, 9))))
    return notes
