"""Average the weights of several rounds: average.py OUT.pt A B [C ...], each a .pt of train.py or a weights-data.ts of export.py.

Rounds that go on from one another lie in one valley of the loss, and the mean of their weights lies lower in it than either
(Izmailov et al., "Averaging Weights Leads to Wider Optima and Better Generalization", 2018; Wortsman et al., "Model soups", 2022).
"""
import argparse
import base64
import re
import numpy as np
import torch
from network import Network


def read(path):
    """Parameters by name, float32."""
    if path.endswith('.pt'):
        return {k: v.float() for k, v in torch.load(path).items()}
    text = re.search(r'"([A-Za-z0-9+/=]+)";', open(path).read()).group(1)
    flat = np.frombuffer(base64.b64decode(text), '<f2').astype(np.float32)
    state, at = {}, 0
    for name, parameter in Network().named_parameters():
        size = parameter.numel()
        state[name] = torch.from_numpy(flat[at:at + size].reshape(parameter.shape).copy())
        at += size
    assert at == flat.size, f'{path} holds {flat.size} numbers, the network has {at}'
    return state


def main():
    ap = argparse.ArgumentParser()
    ap.add_argument('out')
    ap.add_argument('weights', nargs='+')
    args = ap.parse_args()
    states = [read(path) for path in args.weights]
    torch.save({name: sum(state[name] for state in states) / len(states) for name in states[0]}, args.out)


if __name__ == '__main__':
    main()
