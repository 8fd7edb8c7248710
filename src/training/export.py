"""Write weights for the application: export.py WEIGHTS.pt --to weights-data.ts --examples network-examples.json --note "how it was made"

The weights go out as float16 in base64. The examples hold what PyTorch (with those rounded weights) and features.py answer to an input and a
signal that both sides make by the same integer arithmetic; the application's tests compare.
"""
import argparse
import base64
import json
import numpy as np
import torch
import features
from network import Network

INPUT_FRAMES = 1300     # more than the network's reach of 1022 frames to either side
SIGNAL_SECONDS = 6


def congruential(count, seed=1):
    """Numbers in [-1, 1) of a 32-bit linear congruential generator (Numerical Recipes, 1992)."""
    out = np.empty(count)
    for i in range(count):
        seed = (seed * 1664525 + 1013904223) & 0xFFFFFFFF
        out[i] = seed / 2 ** 31 - 1
    return out


def example_signal():
    """Two plucked notes a beat over a little noise, 22.05 kHz."""
    n = SIGNAL_SECONDS * features.RATE
    t = np.arange(n) / features.RATE
    x = 0.01 * congruential(n, 7)
    for beat in range(12):
        since = t - beat * 0.5
        on = since >= 0
        for pitch in (48 + 5 * (beat % 3), 64 + 2 * (beat % 4)):
            x[on] += 0.3 * np.exp(-6 * since[on]) * np.sin(2 * np.pi * 440 * 2 ** ((pitch - 69) / 12) * since[on])
    return x


def pack(values, kind):
    return base64.b64encode(np.asarray(values).astype(kind).tobytes()).decode()


def main():
    ap = argparse.ArgumentParser()
    ap.add_argument('weights')
    ap.add_argument('--to', required=True)
    ap.add_argument('--examples', required=True)
    ap.add_argument('--note', nargs='+', default=[], help='lines for the head of the file')
    args = ap.parse_args()
    net = Network()
    state = {k: v.half().float() for k, v in torch.load(args.weights).items()}
    net.load_state_dict(state)
    net.eval()
    flat = np.concatenate([p.detach().numpy().ravel() for p in net.parameters()])
    text = pack(flat, '<f2')
    head = ''.join(f' * {line}\n' for line in ('Weights of the beat network, float16 in base64, written by src/training/export.py.', *args.note))
    open(args.to, 'w').write(f'/**\n{head} */\nexport const WEIGHTS =\n\t"{text}";\n')
    x = congruential(INPUT_FRAMES * 72).reshape(INPUT_FRAMES, 72).T * 2
    with torch.no_grad():
        logits = net(torch.from_numpy(x[None].astype(np.float32)))[0].numpy()
    raw = features.hear(example_signal())
    json.dump({
        'source': f'PyTorch {torch.__version__} and numpy {np.__version__}, src/training/export.py',
        'inputFrames': INPUT_FRAMES, 'signalSeconds': SIGNAL_SECONDS,
        'logits': pack(logits.T, '<f4'),                                  # frame after frame: beat, downbeat
        'featureStep': 7, 'features': pack(features.normalise(raw).T[::7], '<f4'),
    }, open(args.examples, 'w'), indent='\t')


if __name__ == '__main__':
    main()
