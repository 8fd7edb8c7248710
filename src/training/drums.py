"""Drum grooves, written out as steps, and how they are filled, thinned and ended.

A line is one drum over one bar: X accent, x plain, o ghost, . nothing. Letters: K kick, S snare, L clap, N rim, H closed hat,
O open hat, P pedal hat, R ride, C crash, T low tom, U high tom, M tambourine, B cowbell, A shaker, G low conga, J high conga, V clave.
Tempi are those of the beat that people tap, which is what the network is to learn: at 180 the snare still falls on two and four.
"""

# metre, steps a beat, slowest and fastest beat, weight, lines
GROOVES = [(metre, steps, low, high, weight, dict(part.split('=') for part in lines.split())) for metre, steps, low, high, weight, lines in [
    (4, 4, 60, 150, 3, 'K=X.......x....... S=....X.......X... H=x.x.x.x.x.x.x.x.'),
    (4, 4, 60, 130, 2, 'K=X.....x.x.....x. S=....X.......X... H=X.x.X.x.X.x.X.x.'),
    (4, 4, 60, 125, 2, 'K=X..x..x...x..... S=....X..o.o..X..o H=xoxoxoxoxoxoxoxo'),
    (4, 4, 85, 122, 1, 'K=X.x...x...x..x.. S=....X..o.o..X... H=XoxoXoxoXoxoXoxo'),
    (4, 4, 95, 150, 3, 'K=X...X...X...X... L=....x.......x... O=..x...x...x...x. H=x...x...x...x...'),
    (4, 4, 110, 160, 2, 'K=X...X...X...X... O=..X...X...X...X.'),
    (4, 4, 110, 150, 1, 'K=X...X...X...X... S=....X.......X... H=xoxoxoxoxoxoxoxo B=x.....x.....x...'),
    (4, 4, 105, 135, 1, 'K=X...X...X...X... S=....X.......X... H=xx.xxx.xxx.xxx.x O=..x...x...x...x.'),
    (4, 4, 120, 215, 3, 'K=X.......X.x..... S=....X.......X... H=x...x...x...x...'),
    (4, 4, 125, 215, 3, 'K=X.......x.x..... S=....X.......X... R=x.x.x.x.x.x.x.x.'),
    (4, 4, 130, 215, 2, 'K=X.....x.x.x..... S=....X.......X... C=x...x...x...x...'),
    (4, 4, 130, 215, 2, 'K=X.x.x.x.X.x.x.x. S=....X.......X... H=x...x...x...x...'),
    (4, 4, 110, 190, 2, 'K=xxxxxxxxxxxxxxxx S=....X.......X... C=X...x...X...x...'),
    (4, 4, 110, 200, 2, 'K=x.xxx.xxx.xxx.xx S=....X.......X... R=X...X...X...X...'),
    (4, 4, 130, 210, 1, 'K=X.x.X.x.X.x.X.x. S=.x.x.x.x.x.x.x.x R=X...X...X...X...'),
    (4, 4, 100, 205, 1, 'K=X...x...X...x... S=..X...X...X...X. H=x...x...x...x...'),
    (4, 4, 95, 150, 1, 'K=X.......X....... S=X...X...X...X... M=x.x.x.x.x.x.x.x.'),
    (4, 4, 100, 165, 2, 'K=X.......x.x..... S=....X.x.....X... O=x.x.x.x.x.x.x.x.'),
    (4, 4, 150, 185, 2, 'K=X.........X..... S=....X.......X... H=x.x.x.x.x.x.x.x.'),
    (4, 4, 90, 180, 2, 'K=X.x.......xx.... S=....X..o.o..X..o R=x.x.x.x.x.x.x.x.'),
    (4, 4, 125, 190, 1, 'K=X.........x..... S=........X....... H=x.x.x.x.x.x.x.x.'),
    (4, 4, 130, 170, 1, 'K=X.....x......... L=........X....... H=x.x.x.xxx.x.xxx.'),
    (4, 4, 72, 108, 2, 'K=X..x......xx.... S=....X.......X... H=x.x.x.x.x.xxx.x.'),
    (4, 4, 60, 92, 1, 'K=....X.......X... N=....x.......x... H=x.x.x.x.x.x.x.x.'),
    (4, 4, 105, 175, 1, 'K=X..xX..xX..xX..x N=x..x..x...x..x.. H=x.x.x.x.x.x.x.x.'),
    (4, 4, 85, 130, 1, 'G=....x.......x.x. J=x.x...x.x.x..... V=x..x..x...x.x... B=X...x...X...x...'),
    (4, 4, 60, 160, 1, 'T=X.....x.X....... U=....x.x.....x.x. K=X.......X.......'),
    (4, 4, 60, 140, 1, 'A=x.x.x.x.x.x.x.x. M=....x.......x...'),
    (4, 4, 95, 180, 1, 'S=xoXoxoXoxoXoxoXo K=X...x...X...x...'),
    (4, 4, 115, 170, 1, 'K=X.x.X.x.X.x.X.x. S=....X.......X... H=x.x.x.x.x.x.x.x. M=x...x...x...x...'),
    (4, 4, 80, 140, 1, 'S=X..xx.x.X.xxx.x. K=X.......X.......'),
    (4, 4, 60, 205, 1, 'K=X...X...X...X...'),
    (4, 4, 60, 205, 1, 'H=X.x.X.x.X.x.X.x.'),
    (4, 3, 85, 215, 2, 'R=X..x.xX..x.x P=...x.....x.. K=o.....o.....'),
    (4, 3, 70, 165, 2, 'H=X.xx.xX.xx.x K=X.....x..... S=...X.....X..'),
    (4, 3, 60, 100, 2, 'H=xxxxxxxxxxxx K=X.....x.x... S=...X.....X..'),
    (4, 3, 95, 160, 1, 'K=X..X..X..X.. S=...X.....X.. H=x.xx.xx.xx.x'),
    (3, 4, 75, 205, 3, 'K=X........... S=....x...x... H=x...x...x...'),
    (3, 4, 60, 150, 2, 'K=X.....x..... S=........X... H=x.x.x.x.x.x.'),
    (3, 4, 60, 140, 2, 'K=X.....x..... S=....X....... H=x.x.x.x.x.x.'),
    (3, 4, 100, 205, 1, 'K=X........... R=x...x.x.x...'),
    (3, 3, 90, 205, 2, 'R=X..x.xx.. P=...x..... K=o........ S=.....o...'),
    (3, 4, 80, 180, 1, 'K=X........... M=....x...x... A=x.x.x.x.x.x.'),
    (6, 2, 100, 205, 3, 'K=X........... S=......X..... H=x.x.x.x.x.x.'),
    (6, 2, 100, 205, 2, 'K=X.......x... S=......X..... R=x.x.x.x.x.x.'),
    (6, 2, 110, 205, 1, 'K=X.....x..... S=......X..... M=x.x.x.x.x.x.'),
    (2, 3, 60, 150, 2, 'K=X..... S=...X.. H=xxxxxx'),
    (2, 3, 60, 150, 1, 'K=X..x.. S=...X.. H=X.xX.x'),
    (2, 4, 80, 190, 2, 'K=X...x... S=..X...X. H=x...x...'),
    (2, 4, 80, 160, 2, 'K=X....... S=....X... H=x.x.x.x.'),
    (2, 4, 85, 140, 1, 'S=X.xxX.x. K=X.......'),
]]
KEYS = dict(K=(36, 35), S=(38, 40), L=(39,), N=(37,), H=(42,), O=(46,), P=(44,), R=(51, 59, 53), C=(49, 57), T=(41, 43, 45), U=(47, 48, 50),
            M=(54,), B=(56,), A=(82, 70), G=(64,), J=(63, 62), V=(75,))
STRENGTH = {'X': 112, 'x': 88, 'o': 45}
KITS = (0, 0, 0, 8, 16, 24, 25, 32, 40)   # General MIDI level 2: standard, room, power, electronic, analogue, jazz, brush


def choose_groove(rng, metre, tempo):
    fitting = [g for g in GROOVES if g[0] == metre and g[2] <= tempo <= g[3] * 1.03] or [g for g in GROOVES if g[0] == metre]
    weights = [g[4] for g in fitting]
    return fitting[rng.choice(len(fitting), p=[w / sum(weights) for w in weights])]


def play_drums(rng, bars, tempo, entries):
    """Hits [(position, key, velocity)] for bars [(position of its first beat, metre)]; entries[bar] says whether drums play."""
    keys = {letter: rng.choice(options) for letter, options in KEYS.items()}
    grooves = {metre: [choose_groove(rng, metre, tempo) for _ in range(2)] for metre in {m for _, m in bars}}
    phrase, fill_chance, crash_chance = int(rng.choice([4, 4, 8])), rng.choice([0.0, 0.4, 0.9]), rng.choice([0.2, 0.9])
    left_out = set(rng.choice(list('KSHOR'), 1)) if rng.random() < 0.12 else set()   # a groove without its kick, or its hats
    hits = []
    for bar, (start, metre) in enumerate(bars):
        if not entries[bar]:
            continue
        second = (bar // (2 * phrase)) % 2 if rng.random() < 0.97 else rng.integers(2)
        _, steps, _, _, _, lines = grooves[metre][second]
        last_of_phrase = bar % phrase == phrase - 1
        fill_from = metre - rng.choice([1, 1, 2, metre]) if last_of_phrase and rng.random() < fill_chance else metre
        for letter, line in lines.items():
            if letter in left_out:
                continue
            for step, mark in enumerate(line):
                if mark != '.' and step / steps < fill_from and not (mark == 'o' and rng.random() < 0.3):
                    hits.append((start + step / steps, keys[letter], STRENGTH[mark]))
                elif mark == '.' and letter in 'KH' and rng.random() < 0.012:
                    hits.append((start + step / steps, keys[letter], 70))
        if fill_from < metre:
            hits += _fill(rng, start, fill_from, metre, tempo)
        if bar % phrase == 0 and rng.random() < crash_chance:
            hits.append((start, keys['C'], 105))
    return hits


def _fill(rng, start, first, metre, tempo):
    """Runs over snare and toms, or silence, up to the bar line."""
    kind = rng.choice(['run', 'run', 'broken', 'none', 'kicks'])
    steps = int(rng.choice([2, 3, 4])) if tempo < 120 else int(rng.choice([1, 2, 2, 3]))
    drums, hits = [38, 50, 48, 45, 43], []
    for step in range(int((metre - first) * steps)):
        at = first + step / steps
        if kind == 'none' or kind == 'broken' and rng.random() < 0.45:
            continue
        key = 36 if kind == 'kicks' else drums[min(4, int(5 * (at - first) / (metre - first)) + rng.integers(2))]
        hits.append((start + at, key, int(rng.integers(80, 118))))
    return hits
