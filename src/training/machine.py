"""Machine-made music: patterns on an exact grid of four steps a beat, played by oscillators and noise instead of a sound font.

What sequencers and trackers make differs from what players make: off-beats as loud as beats, figures of three steps against bars of sixteen,
arpeggios too fast to be notes, echoes that fall between the beats, drums made of swept sines and filtered noise. All from chance; no
recording is copied.
"""
import numpy as np
import drums
import pieces
from features import RATE

STEPS = 4
FIGURES = [(4, 4, 4, 4), (2,) * 8, (1,) * 16, (3, 3, 2, 3, 3, 2), (3, 3, 3, 3, 2, 2), (6, 6, 4), (3, 3, 4, 2, 4), (8, 8), (16,), (4, 2, 2, 4, 4),
           (2, 1, 1) * 4, (3, 1) * 4, (2, 4, 4, 4, 2), (1, 2, 1) * 4, (12, 4), (6, 2, 6, 2), (4, 3, 1, 4, 4)]


def figure(rng, metre):
    """Steps within a bar on which something sounds, first the loop's own offset: off-beats are as likely as beats."""
    kind = rng.random()
    total = metre * STEPS
    if kind < 0.2:
        return [s for s in range(total) if s % 4 == 2]
    if kind < 0.35:
        return [s for s in range(total) if rng.random() < rng.uniform(0.2, 0.7)] or [0]
    at, out = 0, []
    lengths = FIGURES[rng.integers(len(FIGURES))]
    while at < total:
        for n in lengths:
            if at < total:
                out.append(at)
            at += n
    return out


def oscillator(rng):
    """One cycle as the amplitudes of its harmonics, its envelope, and what happens to its pitch."""
    kind = rng.choice(['pulse', 'saw', 'triangle', 'few', 'pluck'])
    k = np.arange(1, 65)
    duty = rng.choice([0.125, 0.25, 0.5, rng.uniform(0.1, 0.5)])
    harmonics = {'pulse': np.abs(np.sin(np.pi * k * duty)) / k, 'saw': 1 / k, 'triangle': (k % 2) / k ** 2.0,
                 'few': rng.random(64) * (k < rng.integers(2, 9)), 'pluck': 1 / k ** rng.uniform(1.0, 1.6)}[kind]
    harmonics = harmonics / (1 + (k / rng.uniform(3, 60)) ** 4)
    decay = float(np.exp(rng.uniform(np.log(0.06), np.log(2.0)))) if kind != 'pluck' else rng.uniform(0.1, 0.5)
    return dict(harmonics=harmonics, attack=float(np.exp(rng.uniform(np.log(0.001), np.log(0.02)))), decay=decay,
                sustain=float(rng.choice([0.0, rng.uniform(0.1, 0.8)])), vibrato=rng.uniform(0, 0.3) if rng.random() < 0.2 else 0.0,
                detune=rng.uniform(0.05, 0.2) if rng.random() < 0.25 else 0.0)


def sound_note(out, patch, at, length, pitches, level, tables, arpeggio):
    """Adds one note (or an arpeggio of several pitches in turn, `arpeggio` a second) to `out`."""
    start = int(at * RATE)
    n = min(out.size - start, int((length + 0.05) * RATE))
    if start < 0 or n <= 8:
        return
    t = np.arange(n) / RATE
    pitch = np.asarray(pitches, float)[(t * arpeggio).astype(int) % len(pitches)] if len(pitches) > 1 else np.full(n, float(pitches[0]))
    if patch['vibrato']:
        pitch = pitch + patch['vibrato'] * np.sin(2 * np.pi * 5.5 * t)
    hz = 440.0 * 2.0 ** ((pitch - 69) / 12)
    band = int(np.clip(np.log2(RATE / 2 / hz.max()), 0, 6))
    if band not in tables:                                     # a cycle without what would fold over
        phase = np.arange(1024) / 1024
        tables[band] = sum(a * np.sin(2 * np.pi * (i + 1) * phase) for i, a in enumerate(patch['harmonics'][:2 ** band])).astype(np.float32)
    envelope = np.minimum(1, t / patch['attack']) * (patch['sustain'] + (1 - patch['sustain']) * np.exp(-t / patch['decay']))
    envelope *= np.clip((length + 0.05 - t) / 0.05, 0, 1)
    for shift in (0.0, patch['detune']) if patch['detune'] else (0.0,):
        phase = np.cumsum(hz * 2 ** (shift / 12)) / RATE
        out[start:start + n] += level * envelope * tables[band][(phase * 1024).astype(int) % 1024]


def kit(rng):
    """A sound (samples) for every drum key."""
    def fall(seconds, decay):
        t = np.arange(int(seconds * RATE)) / RATE
        return t, np.exp(-t / decay)

    def noise(seconds, decay, low, high):
        t, envelope = fall(seconds, decay)
        spectrum = np.fft.rfft(rng.normal(0, 1, t.size))
        hz = np.fft.rfftfreq(t.size, 1 / RATE)
        spectrum *= 1 / (1 + (low / np.maximum(hz, 1)) ** 4) / (1 + (hz / high) ** 4)
        x = np.fft.irfft(spectrum, t.size)
        return x / (np.abs(x).max() + 1e-9) * envelope

    def sweep(seconds, decay, top, bottom, tau):
        t, envelope = fall(seconds, decay)
        return np.sin(2 * np.pi * np.cumsum(bottom + (top - bottom) * np.exp(-t / tau)) / RATE) * envelope

    kick = sweep(0.5, rng.uniform(0.06, 0.3), rng.uniform(120, 600), rng.uniform(38, 70), rng.uniform(0.008, 0.05))
    kick[:200] += rng.uniform(0, 0.6) * noise(0.5, 0.004, 500, 6000)[:200]
    snare = rng.uniform(0.3, 1) * noise(0.4, rng.uniform(0.04, 0.16), rng.uniform(200, 1500), rng.uniform(4000, 10000))
    snare[:] += rng.uniform(0, 0.7) * sweep(0.4, rng.uniform(0.03, 0.1), rng.uniform(220, 400), rng.uniform(140, 220), 0.02)
    high = rng.uniform(4000, 8000)
    closed, opened = noise(0.15, rng.uniform(0.012, 0.05), high, 11000), noise(0.5, rng.uniform(0.08, 0.3), high, 11000)
    cymbal, clap = noise(1.6, rng.uniform(0.3, 0.8), rng.uniform(2000, 5000), 11000), noise(0.3, rng.uniform(0.05, 0.12), 700, 4000)
    sounds = {}
    for keys, x, level in (((35, 36), kick, 1.0), ((38, 40), snare, 0.8), ((39,), clap, 0.7), ((37, 75), noise(0.1, 0.01, 1500, 6000), 0.6),
                           ((42, 44, 82, 70, 54), closed, 0.35), ((46,), opened, 0.4), ((49, 57, 51, 59, 53), cymbal, 0.35),
                           ((56,), sweep(0.3, 0.08, 830, 800, 0.1), 0.4)):
        sounds |= {key: level * rng.uniform(0.6, 1.3) * x for key in keys}
    for i, key in enumerate((41, 43, 45, 47, 48, 50, 62, 63, 64)):
        sounds[key] = 0.7 * sweep(0.4, 0.12, 180 + 40 * i, 90 + 20 * i, 0.04)
    return sounds


def riff(rng, piece, low, gate, together):
    """A part on the grid: [(position, length, pitches, level)] in beats. One figure and one walk over the chord's tones, looped."""
    figures = {m: [figure(rng, m) for _ in range(2)] for _, m in piece['bars']}
    walk = [int(x) for x in (rng.permutation(4)[:rng.choice([2, 3, 4])] if rng.random() < 0.6 else rng.integers(0, 4, int(rng.choice([3, 4, 6, 8]))))]
    change, notes, count = int(rng.choice([4, 8, 16])), [], 0
    rest = rng.random() < 0.15
    for bar, (start, metre) in enumerate(piece['bars']):
        if rest and (bar // change) % 3 == 2:
            continue
        steps = figures[metre][(bar // change) % 2 if rng.random() < 0.9 else 0]
        for here, following in zip(steps, steps[1:] + [metre * STEPS + steps[0]]):
            position = start + here / STEPS
            chord = pieces.chord_at(piece['chords'], position)
            if chord is None:
                continue
            tones = [low + (x - low) % 12 for x in chord[3]]
            tones = sorted(tones) + [min(tones) + 12]
            pitches = tones[:3] if together else [tones[min(walk[count % len(walk)], len(tones) - 1)]]
            count += 1
            notes.append((position, (following - here) / STEPS * gate, pitches, rng.uniform(0.8, 1.0)))
    return notes


def beat_pattern(rng, bars, tempo):
    """Drum hits: a written groove, or figures of each drum's own."""
    if rng.random() < 0.55 or any(m != 4 for _, m in bars):
        return drums.play_drums(rng, bars, tempo, np.ones(len(bars), bool))
    kick = [[0, 4, 8, 12], [0, 8], [0, 10], [0, 6, 10], [0, 3, 8, 11], [0, 7, 10], [0, 4, 8, 12, 14], [0, 8, 14], [0, 3, 6, 8, 11, 14]][rng.integers(9)]
    snare = [[4, 12], [4, 12], [4, 12, 15], [8], [], [4, 7, 9, 12], [4, 11, 14]][rng.integers(7)]
    hats = [[2, 6, 10, 14], list(range(0, 16, 2)), list(range(16)), [0, 4, 8, 12], [], figure(rng, 4)][rng.integers(6)]
    lines = [(36, kick, 110), (int(rng.choice([38, 39])), snare, 105), (int(rng.choice([42, 46])), hats, 85)]
    return [(start + s / 4, key, strength) for start, _ in bars for key, steps, strength in lines for s in steps]


def perform(rng, piece, times, tempo):
    """(samples at 22.05 kHz, first and last position that sounds, whether drums play)"""
    seconds = times[-1] + 1.0
    at = lambda position: np.interp(position, np.arange(times.size), times)
    mix = np.zeros(int(seconds * RATE))
    positions = []
    parts = [(rng.choice([28, 33, 36, 40]), rng.uniform(0.3, 1.0), False, 1.0)]
    parts += [(rng.choice([48, 55, 60, 67]), rng.uniform(0.2, 1.0), rng.random() < 0.35, rng.uniform(0.3, 0.9)) for _ in range(rng.integers(1, 4))]
    if rng.random() < 0.1:
        parts = parts[1:]
    tune = piece['lines'].get('MELODY', [])
    for low, gate, together, level in parts:
        patch, tables = oscillator(rng), {}
        arpeggio = rng.choice([0, 25, 50, 16]) if together else 0
        for position, length, pitches, strength in riff(rng, piece, int(low), gate, together):
            if not 0 <= position < times.size - 1:
                continue
            positions.append(position)
            span = at(position + length) - at(position)
            for group in [pitches] if arpeggio or len(pitches) == 1 else [[p] for p in pitches]:
                sound_note(mix, patch, at(position), span, group, level * strength / (1 if arpeggio or len(pitches) == 1 else 2), tables, arpeggio)
    if tune and rng.random() < 0.7:
        patch, tables = oscillator(rng), {}
        for start, end, pitch, _ in tune:
            if 0 <= start < times.size - 1:
                positions.append(start)
                sound_note(mix, patch, at(start), at(end) - at(start), [pitch], 0.8, tables, 0)
    if rng.random() < 0.45:                                    # an echo on the grid, not always on the beat
        delay = int(rng.choice([0.5, 0.75, 0.75, 1.0, 1.5]) * 60 / tempo * RATE)
        feedback = rng.uniform(0.25, 0.6)
        for i in range(delay, mix.size, delay):
            mix[i:i + delay] += feedback * mix[i - delay:i - delay + mix[i:i + delay].size]
    loud = lambda x: np.sqrt(np.mean(x ** 2)) + 1e-6
    mix /= loud(mix)
    with_drums = rng.random() < 0.85
    if with_drums:
        sounds, beat = kit(rng), np.zeros(mix.size)
        hits = beat_pattern(rng, piece['bars'], tempo)
        quiet = {int(b) for b in rng.choice(len(piece['bars']), int(rng.choice([0, 0, 2, 6])))} if len(piece['bars']) > 6 else set()
        silent = [(piece['bars'][b][0], piece['bars'][b][0] + piece['bars'][b][1]) for b in quiet]
        for position, key, strength in hits:
            if not 0 <= position < times.size - 1 or any(a <= position < b for a, b in silent) or int(key) not in sounds:
                continue
            positions.append(position)
            start = int(at(position) * RATE)
            x = sounds[int(key)][:beat.size - start]
            beat[start:start + x.size] += x * strength / 110
        mix += beat / loud(beat) * 10 ** (rng.normal(-1, 4) / 20)
        if rng.random() < 0.25:                                # pressed down on every beat, or between them
            n = int(rng.uniform(0.5, 0.95) * 60 / tempo * RATE)
            dip = 1 - rng.uniform(0.3, 0.9) * (1 - np.arange(n) / n) ** 2
            gain = np.ones(mix.size)
            for t in times:
                s = int(t * RATE)
                gain[s:s + n] = np.minimum(gain[s:s + n], dip[:max(0, gain.size - s)])
            mix *= gain
    if rng.random() < 0.3:                                     # eight bits, or fewer
        steps = 2.0 ** rng.integers(4, 8) / (np.abs(mix).max() + 1e-9)
        mix = np.round(mix * steps) / steps
    return mix, (min(positions), max(positions)) if positions else (0, -1), with_drums


def compose(rng, songs):
    """(tempo, piece, times): steady to the sample, as machines are; one in ten with a change of tempo."""
    tempo = float(np.exp(rng.uniform(np.log(78), np.log(200))))
    if rng.random() < 0.3:
        tempo = float(rng.choice([100, 107.1, 115.4, 120, 125, 125, 125, 130, 136.4, 140, 150, 150, 166.7, 175, 187.5]))
    beats = int(rng.uniform(32, 40) * tempo / 60)
    if rng.random() < 0.25:
        piece = pieces.take_excerpt(rng, songs[str(rng.choice(list(songs)))], tempo, beats)
        piece['own'] = None
    else:
        piece = pieces.make_piece(rng, 4 if rng.random() < 0.93 else 3, False, tempo, beats)
    lengths = np.full(beats, 60.0 / tempo)
    if rng.random() < 0.1:
        lengths[beats // 2:] *= np.exp(rng.uniform(-0.25, 0.25))
    return tempo, piece, rng.uniform(0.02, 0.6) + np.concatenate([[0.0], np.cumsum(lengths)])
