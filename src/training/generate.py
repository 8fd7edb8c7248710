"""Render training music: generate.py OUT --songs POP909_FOLDER --fonts A.sf2 B.sf3 ... --count N --seed S

Each shard OUT/SEED-NNNN.npz holds 25 excerpts of 32-42 s: raw features (float16), beats (s), downbeat flags, whether the downbeats
are to be trusted, and the source (a song's name, 'rules' or 'machine'). The sound itself is not kept. The same seed gives the same music.
"""
import argparse
import os
import numpy as np
import drums
import features
import machine
import parts
import pieces
import sound
import tempo as tempi

HELD_OUT = 20   # every twentieth song is for validation and is never arranged here
SHARD = 25


def compose(rng, songs):
    """(style, tempo, piece, source, times): what is played and when its beats fall."""
    tempo = tempi.choose_tempo(rng)
    seconds = rng.uniform(32, 42)
    beats = int(seconds * tempo / 60)
    manner = str(rng.choice(['steady', 'drift', 'rubato'], p=[0.5, 0.32, 0.18]))
    if rng.random() < 0.5:
        source = str(rng.choice(list(songs)))
        piece = pieces.take_excerpt(rng, songs[source], tempo, beats)
    else:
        source = 'rules'
        metre = int(rng.choice([4, 3, 6, 2], p=[0.68, 0.17, 0.06, 0.09]))
        if metre == 6:
            tempo = max(tempo, float(rng.uniform(100, 205)))
            beats = int(seconds * tempo / 60)
        compound = metre == 2 and rng.random() < 0.6 or metre == 4 and tempo < 170 and rng.random() < 0.08
        piece = pieces.make_piece(rng, metre, compound, tempo, beats)
    style = parts.choose_style(rng, piece['bars'][0][1], tempo)
    if manner == 'rubato' and rng.random() < 0.6:
        style = str(rng.choice(['piano', 'piano', 'orchestra', 'folk']))
    return style, tempo, piece, source, tempi.place_beats(rng, tempo, piece['bars'], beats, manner)


def orchestrate(rng, piece, style, tempo):
    """Channel by channel: {channel: (program, level, notes)}, and the drum hits [(position, key, velocity)]."""
    spec, channels = parts.STYLES[style], {}

    def add(program_from, notes, low=60, high=120):
        channel = len(channels) + (len(channels) >= 9)
        if notes and channel < 16:
            channels[channel] = (int(rng.choice(spec[program_from])), int(rng.integers(low, high)), notes)

    solo_piano = piece['lines'].get('PIANO', [])
    as_played = solo_piano and rng.random() < (0.75 if style == 'piano' else 0.35)
    if as_played:
        add('comp', solo_piano, 80, 120)
    if not as_played or style != 'piano':
        if rng.random() < 0.92:
            add('bass', parts.play_bass(rng, piece, tempo, style), 85, 125)
        for _ in range(int(rng.choice([1, 1, 2, 3])) - int(bool(as_played))):
            add('comp', parts.play_chords(rng, piece, tempo, style), 50, 110)
        if rng.random() < 0.4 and style != 'piano':
            add('pad', parts.play_pad(rng, piece), 40, 100)
    if rng.random() < 0.8:
        add('lead', piece['lines'].get('MELODY', []), 65, 125)
    if rng.random() < 0.5:
        add('lead', piece['lines'].get('BRIDGE', []), 60, 110)
    if not channels:
        add('comp', parts.play_chords(rng, piece, tempo, style), 80, 110)
    with_drums = rng.random() < spec['drums']
    bars = piece['bars']
    on = np.full(len(bars), with_drums)
    if with_drums and rng.random() < 0.35:                     # drums come in late, or drop out for a while
        on[:int(rng.integers(0, max(1, len(bars) // 3)))] = False
        out = int(rng.integers(0, len(bars)))
        on[out:out + int(rng.choice([1, 2, 4, 8]))] = False
    hits = drums.play_drums(rng, bars, tempo, on) if with_drums else []
    if rng.random() < 0.3 and len(channels) > 1:               # parts that rest for a stretch
        for channel in list(channels)[1:]:
            if rng.random() < 0.5:
                start = bars[int(rng.integers(len(bars)))][0]
                gap = int(rng.choice([4, 8, 16]))
                program, level, notes = channels[channel]
                channels[channel] = (program, level, [n for n in notes if not start <= n[0] < start + gap])
    return channels, hits


def perform(rng, piece, times, tempo, channels, hits):
    """Events in seconds: swing, scatter, and a player's habit of being early or late."""
    swing = rng.uniform(0.54, 0.68) if not piece['compound'] and tempo < 200 and rng.random() < 0.15 else 0.5
    scatter = rng.uniform(0, 0.014)
    lead_in = rng.uniform(0.0, 1.5) if rng.random() < 0.3 else 0.03
    steady = np.diff(times)

    def when(position):
        whole = np.floor(position)
        part = position - whole
        if swing != 0.5:
            part = part * 2 * swing if part < 0.5 else swing + (part - 0.5) * 2 * (1 - swing)
        position = whole + part
        if position < 0:
            return lead_in + position * steady[0]
        if position > len(steady):
            return lead_in + times[-1] + (position - len(steady)) * steady[-1]
        return lead_in + np.interp(position, np.arange(times.size), times)

    melodic, drumming, onsets = [], [], []
    for channel, (_, _, notes) in channels.items():
        habit = rng.normal(0, 0.004)
        for start, end, pitch, velocity in notes:
            if start < -0.1:
                continue
            at = max(0.0, when(start) + habit + rng.normal(0, scatter))
            onsets.append(start)
            if 12 <= pitch <= 112:
                melodic += [(at, channel, pitch, int(np.clip(velocity, 20, 127))), (max(at + 0.04, when(end) + habit), channel, pitch, 0)]
    habit = rng.normal(0, 0.003)
    for position, key, velocity in hits:
        if position < -0.1:
            continue
        at = max(0.0, when(position) + habit + rng.normal(0, scatter * 0.5))
        onsets.append(position)
        drumming += [(at, 9, key, int(np.clip(velocity * rng.uniform(0.85, 1.05), 20, 127))), (at + 0.2, 9, key, 0)]
    return melodic, drumming, lead_in, (min(onsets), max(onsets)) if onsets else (0, -1)


def label(piece, count, first, last, with_drums):
    """Which of `count` beats are to be learnt, and which of them are downbeats: no beats before the first note or past the last."""
    index = np.arange(count)
    heard = (index >= first - 0.25) & (index <= last + 0.25)
    downbeats = {start for start, _ in piece['bars']}
    if piece.get('own') is not None and not with_drums:
        heard &= index % 2 == 0
        downbeats = set(piece['own'])
    return heard, np.array([i in downbeats for i in index])


def render(rng, synths, songs):
    style, tempo, piece, source, times = compose(rng, songs)
    channels, hits = orchestrate(rng, piece, style, tempo)
    melodic, drumming, lead_in, (first, last) = perform(rng, piece, times, tempo, channels, hits)
    seconds = lead_in + times[-1] + rng.uniform(0, 1.2)
    programs, levels = {c: v[0] for c, v in channels.items()}, {c: v[1] for c, v in channels.items()}
    x = synths[rng.integers(len(synths))].play(melodic, seconds, programs, levels)
    if drumming:
        kit = 25 if style == 'chip' else int(rng.choice([24, 25, 8, 0])) if style == 'electronic' else int(rng.choice([32, 40, 0])) if style == 'jazz' \
            else int(rng.choice([0, 0, 8, 16]))
        beat = synths[rng.integers(len(synths))].play(drumming, seconds, {9: kit}, {9: 110})
        level = lambda s: np.sqrt(np.mean(s ** 2)) + 1e-6
        if style == 'electronic' and rng.random() < 0.5:
            x = sound.duck(x, lead_in + times, rng.uniform(0.4, 0.95), rng.uniform(0.5, 0.95) * 60 / tempo)
        x = x / level(x) + beat / level(beat) * 10 ** (rng.normal(0, 4) / 20)
    x = sound.roughen(rng, sound.to_features_rate(x))
    heard, flags = label(piece, times.size, first, last, bool(drumming))
    return features.hear(x).astype(np.float16), (times + lead_in)[heard].astype(np.float32), flags[heard], source


def render_machine(rng, songs):
    """An excerpt as a sequencer would play it."""
    tempo, piece, times = machine.compose(rng, songs)
    x, (first, last), with_drums = machine.perform(rng, piece, times, tempo)
    x = sound.roughen(rng, x)
    heard, flags = label(piece, times.size, first, last, with_drums)
    return features.hear(x).astype(np.float16), times[heard].astype(np.float32), flags[heard], 'machine'


def without_beat(rng):
    """Sound in which nobody would tap: noise that comes and goes, tones at no rate."""
    seconds = rng.uniform(30, 36)
    t = np.arange(int(seconds * sound.RATE)) / sound.RATE
    x = rng.normal(0, rng.uniform(0.0, 0.1), t.size)
    for _ in range(int(rng.integers(5, 60))):
        start, length, hz = rng.uniform(0, seconds), rng.gamma(2, 0.6), np.exp(rng.uniform(np.log(80), np.log(3000)))
        inside = (t >= start) & (t < start + length)
        local = t[inside] - start
        tone = sum(np.sin(2 * np.pi * hz * k * local + rng.uniform(0, 6)) / k for k in range(1, int(rng.integers(2, 6))))
        x[inside] += (tone if rng.random() < 0.7 else rng.normal(0, 1, local.size)) * rng.uniform(0.05, 0.4) * np.sin(np.pi * local / length)
    return features.hear(sound.roughen(rng, x)).astype(np.float16), np.zeros(0, np.float32), np.zeros(0, bool), 'none'


def main():
    ap = argparse.ArgumentParser()
    ap.add_argument('out')
    ap.add_argument('--songs', required=True)
    ap.add_argument('--fonts', nargs='+', required=True)
    ap.add_argument('--count', type=int, default=1500)
    ap.add_argument('--seed', type=int, default=1)
    ap.add_argument('--machine', type=float, default=0.25, help='share of excerpts as a sequencer would play them')
    ap.add_argument('--validation', action='store_true', help='use the held-out songs, and only those')
    args = ap.parse_args()
    os.makedirs(args.out, exist_ok=True)
    names = sorted(n[:-5] for n in os.listdir(args.songs) if n.endswith('.json'))
    names = [n for i, n in enumerate(names) if (i % HELD_OUT == 0) == args.validation]
    songs = {n: pieces.read_song(args.songs, n) for n in names}
    synths = [sound.Synth(font) for font in args.fonts]
    for shard in range((args.count + SHARD - 1) // SHARD):
        path = os.path.join(args.out, f'{args.seed}-{shard:04d}.npz')
        if os.path.exists(path):
            continue
        out = {}
        for i in range(SHARD):
            rng = np.random.default_rng([args.seed, shard, i])
            try:
                kind = rng.random()
                raw, beats, flags, source = without_beat(rng) if kind < 0.02 else render_machine(rng, songs) if kind < 0.02 + args.machine \
                    else render(rng, synths, songs)
            except (ValueError, IndexError) as problem:
                print(f'shard {shard} excerpt {i}: {problem!r}', flush=True)
                continue
            out |= {f'raw{i}': raw, f'beats{i}': beats, f'down{i}': flags, f'source{i}': np.array(source)}
        np.savez(path + '.part.npz', **out)
        os.replace(path + '.part.npz', path)
        print(path, flush=True)


if __name__ == '__main__':
    main()
