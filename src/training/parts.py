"""What the players make of a piece: bass, accompaniment, pads, tunes; each part a list of (from, to, pitch, velocity) in beats."""
import numpy as np
from pieces import chord_at

# style: programs (General MIDI 1) of bass, accompaniment, pads, lead; chances of drums; fastest tempo for sixteenths
STYLES = {
    'pop': dict(bass=(32, 33, 34, 35), comp=(0, 1, 2, 4, 5, 24, 25, 26, 27), pad=(48, 49, 50, 51, 52, 89), lead=(0, 52, 53, 54, 65, 66, 73, 56, 26, 80), drums=0.92),
    'rock': dict(bass=(33, 34, 34), comp=(25, 26, 27, 28, 29, 30, 16, 18), pad=(18, 48, 30), lead=(29, 30, 27, 54, 53, 52), drums=0.97),
    'metal': dict(bass=(34, 33), comp=(29, 30, 30), pad=(30, 48, 52), lead=(30, 29, 81), drums=0.98),
    'electronic': dict(bass=(38, 39, 87, 33), comp=(62, 63, 80, 81, 90, 5, 7), pad=(88, 89, 90, 91, 94, 95, 50), lead=(80, 81, 82, 84, 62, 54), drums=0.95),
    'chip': dict(bass=(80, 38, 39), comp=(80, 81, 82), pad=(80, 81), lead=(80, 81, 82, 83), drums=0.85),
    'jazz': dict(bass=(32, 32, 33), comp=(0, 0, 4, 26, 11), pad=(48, 61, 4), lead=(65, 66, 56, 59, 11, 71, 0, 64), drums=0.85),
    'folk': dict(bass=(32, 33, 43), comp=(24, 25, 105, 21, 15, 46), pad=(48, 21, 19), lead=(73, 72, 40, 22, 68, 75, 53, 110), drums=0.5),
    'orchestra': dict(bass=(43, 42, 32, 58, 70), comp=(45, 48, 46, 6, 48, 60), pad=(48, 49, 61, 52, 19), lead=(40, 73, 68, 71, 56, 60, 41, 42), drums=0.12),
    'piano': dict(bass=(0, 0, 1), comp=(0, 0, 0, 1, 6), pad=(0,), lead=(0, 0, 1), drums=0.0),
}


def choose_style(rng, metre, tempo):
    weights = dict(pop=3, rock=3, metal=1.6 if tempo > 95 else 0.3, electronic=2.6 if metre == 4 else 0.5, chip=0.8, jazz=1, folk=1, orchestra=1.3, piano=1.8)
    names = list(weights)
    total = sum(weights.values())
    return str(rng.choice(names, p=[weights[n] / total for n in names]))


def spread(tones, low):
    """Pitches of the tones upward from `low`, close position."""
    return sorted(low + (t - low) % 12 for t in tones)


def _mask(rng, metre, compound):
    """A syncopated figure over one bar that the part keeps to."""
    unit = 3 if compound else 4 if rng.random() < 0.4 else 2
    steps = [s / unit for s in range(metre * unit) if s == 0 or rng.random() < (0.6 if s % unit == 0 else 0.33)]
    return steps


def _figure(rng, kind, metre, compound, mask):
    """Onsets within a bar for a kind of accompaniment."""
    half = 1 / 3 if compound else 0.5
    beats = list(range(metre))
    third = (0, 1 / 3, 2 / 3)
    return {
        'beats': beats,
        'halves': [b + d for b in beats for d in (third if compound else (0, 0.5))],
        'quarters of a beat': [b + d for b in beats for d in (third if compound else (0, 0.25, 0.5, 0.75))],
        'off': [b + (2 / 3 if compound else 0.5) for b in beats],
        'back': beats[1::2] if metre % 2 == 0 else beats[1:],
        'gallop': [b + d for b in beats for d in (third if compound else (0, 0.5, 0.75))],
        'figure': mask,
        'bar': [0],
        'half bar': [0, metre / 2] if metre % 2 == 0 else [0],
        'tresillo': [0, 1.5, 3] if metre == 4 else [0, 1 + half] if metre == 2 else beats,
    }[kind]


def play_bass(rng, piece, tempo, style):
    kinds = ['beats', 'halves', 'figure', 'half bar', 'bar', 'walk', 'fifths', 'octaves', 'off', 'tresillo']
    weights = np.array(dict(metal=[1, 4, 2, 0, 0, 0, 0, 0, 0, 0], jazz=[1, 0, 1, 1, 0, 5, 2, 0, 0, 1], electronic=[2, 3, 3, 0, 1, 0, 0, 2, 2, 1],
                            orchestra=[3, 1, 1, 3, 3, 1, 2, 0, 0, 0], piano=[2, 0, 1, 4, 4, 0, 3, 1, 0, 1]).get(style, [3, 3, 3, 2, 1, 1, 2, 1, 0.4, 1]), float)
    kind = str(rng.choice(kinds, p=weights / weights.sum()))
    low, accent, short = int(rng.choice([28, 31, 33])), rng.uniform(0, 16), rng.uniform(0.45, 1.0)
    masks = {m: _mask(rng, m, piece['compound']) for _, m in piece['bars']}
    gallop = style == 'metal' and rng.random() < 0.4
    notes = []
    for start, metre in piece['bars']:
        figure = 'gallop' if gallop else dict(walk='beats', fifths='beats', octaves='halves').get(kind, kind)
        onsets = _figure(rng, figure, metre, piece['compound'], masks[metre])
        ends = list(onsets[1:]) + [metre + (onsets[0] if kind == 'off' else 0)]
        for index, (at, until) in enumerate(zip(onsets, ends)):
            chord = chord_at(piece['chords'], start + at)
            if not chord:
                continue
            pitch = low + (chord[4] - low) % 12
            if kind == 'walk' and index % 2 or kind == 'fifths' and index % 2:
                pitch = low + (chord[3][rng.integers(len(chord[3])) if kind == 'walk' else min(2, len(chord[3]) - 1)] - low) % 12
            if kind == 'octaves' and index % 2:
                pitch += 12
            if kind == 'fifths' and metre != 4 and index > 0 and style == 'piano':
                continue
            notes.append((start + at, start + at + (until - at) * short, pitch, int(84 + accent * (at == 0) + accent / 2 * (at % 1 == 0) + rng.integers(-6, 7))))
    return notes


def play_chords(rng, piece, tempo, style):
    """Struck, strummed or broken chords."""
    fast = tempo > 115
    kinds = ['beats', 'halves', 'quarters of a beat', 'off', 'back', 'figure', 'bar', 'half bar', 'broken', 'alberti', 'gallop']
    weights = np.array(dict(metal=[1, 4, 0 if fast else 2, 0, 0, 4, 1, 1, 0, 0, 2], jazz=[2, 0, 0, 0.5, 2, 5, 2, 1, 0.5, 0, 0],
                            orchestra=[3, 2, 1, 0.3, 1, 1, 2, 2, 3, 2, 0.3], piano=[2, 2, 0, 0.2, 1, 2, 1, 2, 6, 4, 0],
                            electronic=[1, 2, 1, 3, 0, 4, 1, 0, 3, 0, 0.3]).get(style, [3, 3, 0.3 if fast else 1, 0.6, 1.2, 3, 1.5, 1.5, 2, 0.3, 0.2]), float)
    kind = str(rng.choice(kinds, p=weights / weights.sum()))
    low = int(rng.choice([40, 43, 45])) if style == 'metal' else int(rng.choice([48, 52, 55, 60]))
    accent, short, strum = rng.uniform(0, 20), rng.uniform(0.3, 1.0), rng.choice([0.0, 0.0, 0.01, 0.03])
    masks = {m: _mask(rng, m, piece['compound']) for _, m in piece['bars']}
    grain = 'halves' if fast or rng.random() < 0.6 else 'quarters of a beat'
    order = rng.permutation(4) if rng.random() < 0.4 else np.array([0, 1, 2, 1]) if rng.random() < 0.5 else np.arange(4)
    notes = []
    for start, metre in piece['bars']:
        figure = dict(broken=grain, alberti=grain).get(kind, kind)
        onsets = _figure(rng, figure, metre, piece['compound'], masks[metre])
        for index, (at, until) in enumerate(zip(onsets, list(onsets[1:]) + [metre])):
            chord = chord_at(piece['chords'], start + at)
            if not chord:
                continue
            tones = [chord[2], (chord[2] + 7) % 12] if style == 'metal' else chord[3]
            pitches = spread(tones, low)
            strength = int(72 + accent * (at == 0) + accent / 2 * (at % 1 == 0) + rng.integers(-8, 9))
            hold = start + at + max(0.15, (until - at) * short)
            if kind in ('broken', 'alberti'):
                pick = (0, 2, 1, 2)[index % 4] if kind == 'alberti' else order[index % 4]
                pitches = [(pitches + [pitches[0] + 12])[min(int(pick), len(pitches))]]
                hold = start + at + (until - at) * (3 if style == 'piano' else 1)
            notes += [(start + at + strum * i, hold, p, strength) for i, p in enumerate(pitches)]
    return notes


def play_pad(rng, piece):
    low = int(rng.choice([52, 55, 60]))
    return [(a, b, p, int(rng.integers(50, 80))) for a, b, _, tones, _ in piece['chords'] for p in spread(tones, low)]
