"""Train the network: train.py OUT --rendered FOLDER --recordings NAME.npz:SHARE[:nodown] ... --validation FOLDER --steps N

Binary cross-entropy; a beat is 1 / 0.6 / 0.2 at 0 / 1 / 2 frames from its time (interpolated between), positives weigh 3 (beat) and 6
(downbeat); Adam 2.5e-3 with warm-up and cosine decay, gradients clipped at norm 1; what is saved is the running average of the weights.
New shards in FOLDER, and recordings, are taken up as they appear. SHARE is a recording set's share of the batches; `nodown` masks its downbeats.
"""
import argparse
import glob
import os
import time
import numpy as np
import torch
from features import normalise
from network import Network

FRAMES, BATCH, RATE = 1400, 8, 50.0        # 28 s
PEAK_RATE, WARM_UP, AVERAGE = 2.5e-3, 150, 0.995
POSITIVE = torch.tensor([3.0, 6.0])[:, None]


def load(path, trusted=True):
    data = np.load(path)
    return [(normalise(data[f'raw{i}'].astype(np.float32)).astype(np.float16), data[f'beats{i}'], data[f'down{i}'], trusted)
            for i in range(200) if f'raw{i}' in data]


def bump(times, frames):
    """Targets at `frames` (s) for events at `times` (s)."""
    if not times.size:
        return np.zeros(frames.size, np.float32)
    at = np.clip(np.searchsorted(times, frames), 1, max(1, times.size - 1))
    near = np.minimum(np.abs(frames - times[at - 1]), np.abs(frames - times[np.minimum(at, times.size - 1)]))
    return np.interp(near * RATE, [0, 1, 2, 3], [1, 0.6, 0.2, 0]).astype(np.float32)


def crop(rng, item):
    """One training example: stretched, shifted, masked. (72, FRAMES) input, (2, FRAMES) targets, (2, FRAMES) weights."""
    x, beats, down, trusted = item
    stretch = min(np.exp(rng.uniform(-0.2, 0.2)), x.shape[1] / FRAMES)      # source frames a frame
    start = rng.uniform(0, max(0.0, x.shape[1] - 1 - stretch * FRAMES))
    at = start + stretch * np.arange(FRAMES)
    low = np.minimum(at.astype(int), x.shape[1] - 2)
    part = np.clip(at - low, 0, 1).astype(np.float32)
    x = x[:, low[0]:low[-1] + 2].astype(np.float32)
    x = x[:, low - low[0]] * (1 - part) + x[:, low - low[0] + 1] * part
    times = (beats.astype(np.float64) * RATE - start) / stretch / RATE
    frames = np.arange(FRAMES) / RATE
    target = np.stack([bump(times, frames), bump(times[down], frames)])
    shift = int(rng.integers(-3, 4))
    mel = np.zeros((48, FRAMES), np.float32)
    mel[max(0, shift):48 + min(0, shift)] = x[max(0, -shift):48 - max(0, shift)]
    mel *= rng.uniform(0.75, 1.25)
    if rng.random() < 0.35:
        width = int(rng.integers(2, 14))
        band = int(rng.integers(0, 48 - width))
        mel[band:band + width] = 0
    roll = int(rng.integers(12))
    chroma = np.concatenate([np.roll(x[48:60], roll, 0), np.roll(x[60:], roll, 0)])
    if rng.random() < 0.08:
        chroma[:] = 0
    if rng.random() < 0.15:                                                # a hole: the beat goes on
        length = int(rng.integers(10, 120))
        hole = int(rng.integers(0, FRAMES - length))
        mel[:, hole:hole + length] = 0
        chroma[:, hole:hole + length] = 0
    weight = np.ones((2, FRAMES), np.float32)
    weight[1] *= trusted
    return np.concatenate([mel, chroma]), target, weight


def loss_of(logits, target, weight):
    each = torch.nn.functional.binary_cross_entropy_with_logits(logits, target, reduction='none', pos_weight=POSITIVE)
    return (each * weight).sum() / weight.sum()


def main():
    ap = argparse.ArgumentParser()
    ap.add_argument('out')
    ap.add_argument('--rendered', required=True)
    ap.add_argument('--recordings', nargs='*', default=[])
    ap.add_argument('--validation')
    ap.add_argument('--steps', type=int, default=3700)
    ap.add_argument('--minutes', type=float, help='end the schedule after this time if the steps are not done by then')
    ap.add_argument('--seed', type=int, default=1)
    ap.add_argument('--start', help='weights to go on from')
    ap.add_argument('--peak', type=float, default=PEAK_RATE, help='highest learning rate')
    ap.add_argument('--threads', type=int, default=1)
    args = ap.parse_args()
    torch.set_num_threads(args.threads)
    torch.manual_seed(args.seed)
    rng = np.random.default_rng(args.seed)
    seen, rendered = set(), []
    waiting = [text.split(':') for text in args.recordings]
    shares = [float(share) for _, share, *_ in waiting]
    sets = [None] * len(waiting)
    held = [item for path in sorted(glob.glob(f'{args.validation}/*-*.npz')) for item in load(path)] if args.validation else []
    check = [crop(np.random.default_rng(i), item) for i, item in enumerate(held)]
    net, mean = Network(), Network()
    if args.start:
        net.load_state_dict(torch.load(args.start))
    mean.load_state_dict(net.state_dict())
    adam = torch.optim.Adam(net.parameters(), lr=PEAK_RATE)
    print(sum(p.numel() for p in net.parameters()), 'parameters', flush=True)
    began, losses = time.time(), []

    def report():
        torch.save(mean.state_dict(), args.out + '.part')
        os.replace(args.out + '.part', args.out)
        mean.eval()
        with torch.no_grad():
            each = [loss_of(mean(torch.from_numpy(x[None])), torch.from_numpy(t[None]), torch.from_numpy(w[None])).item() for x, t, w in check]
        print(f'step {len(losses)}: loss {np.mean(losses[-250:]):.4f}, held out {np.mean(each) if each else 0:.4f}, {len(rendered)} excerpts, '
              f'{(time.time() - began) / len(losses):.3f} s a step', flush=True)

    for step in range(args.steps):
        if step % 100 == 0:
            for path in sorted(glob.glob(os.path.join(args.rendered, '*-????.npz'))):
                if path not in seen:
                    seen.add(path)
                    rendered += load(path)
            for i, (path, _, *rest) in enumerate(waiting):
                if sets[i] is None and os.path.exists(path):
                    sets[i] = load(path, 'nodown' not in rest)
        progress = max(step / args.steps, (time.time() - began) / 60 / args.minutes if args.minutes else 0)
        if progress >= 1:
            break
        picked = rng.choice(len(sets) + 1, BATCH, p=shares + [1 - sum(shares)])
        batch = []
        for which in picked:
            pool = rendered if which == len(sets) or sets[which] is None else sets[which]
            batch.append(crop(rng, pool[rng.integers(len(pool))]))
        x, target, weight = (torch.from_numpy(np.stack(part)) for part in zip(*batch))
        for group in adam.param_groups:
            group['lr'] = args.peak * min(1.0, (step + 1) / WARM_UP) * (0.01 + 0.99 * 0.5 * (1 + np.cos(np.pi * progress)))
        net.train()
        loss = loss_of(net(x), target, weight)
        adam.zero_grad()
        loss.backward()
        torch.nn.utils.clip_grad_norm_(net.parameters(), 1.0)
        adam.step()
        keep = min(AVERAGE, (1 + step) / (10 + step))
        with torch.no_grad():
            for slow, fast in zip(mean.parameters(), net.parameters()):
                slow.mul_(keep).add_(fast, alpha=1 - keep)
        losses.append(loss.item())
        if len(losses) % 250 == 0:
            report()
    report()


if __name__ == '__main__':
    main()
