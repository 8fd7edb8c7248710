"""The network: a convolutional front end and a temporal convolutional network (Davies & Boeck 2019), 60 722 parameters.

Input (batch, 72, frames) as features.normalise gives it; output (batch, 2, frames) logits of beat and downbeat.
Otherwise than in the paper: chroma joins after the front end, and the blocks are narrow enough for a browser's plain JavaScript.
"""
import torch
from torch import nn

CHANNELS, BLOCKS, KERNEL = 32, 9, 5


class Block(nn.Module):
    def __init__(self, dilation):
        super().__init__()
        self.wide = nn.Conv1d(CHANNELS, CHANNELS, KERNEL, dilation=dilation, padding=dilation * (KERNEL // 2))
        self.mix = nn.Conv1d(CHANNELS, CHANNELS, 1)
        self.drop = nn.Dropout(0.1)

    def forward(self, x):
        return x + self.mix(self.drop(nn.functional.elu(self.wide(x))))


class Network(nn.Module):
    def __init__(self):
        super().__init__()
        self.first = nn.Conv2d(1, 12, (3, 5), padding=(1, 2))
        self.second = nn.Conv2d(12, 16, (3, 3), padding=(1, 1))
        self.join = nn.Conv1d(16 * 4 + 24, CHANNELS, 1)
        self.blocks = nn.ModuleList(Block(2 ** i) for i in range(BLOCKS))
        self.out = nn.Conv1d(CHANNELS, 2, 1)

    def forward(self, x):
        elu = nn.functional.elu
        mel = x[:, None, :48]
        mel = elu(nn.functional.max_pool2d(self.first(mel), (3, 1)))
        mel = elu(nn.functional.max_pool2d(self.second(mel), (4, 1)))      # (batch, 16, 4, frames)
        h = elu(self.join(torch.cat([mel.flatten(1, 2), x[:, 48:]], 1)))
        for block in self.blocks:
            h = block(h)
        return self.out(h)
