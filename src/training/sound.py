"""From notes to samples: FluidSynth through its C library, then what rooms, desks and tapes do to sound."""
import ctypes
import ctypes.util
import numpy as np
from scipy.signal import fftconvolve, resample_poly
from features import RATE

PLAY_RATE = 44100


class Synth:
    """One FluidSynth with one sound font, played note by note (no MIDI file, no WAV)."""

    def __init__(self, font):
        f = ctypes.CDLL(ctypes.util.find_library('fluidsynth'))
        for name in ('new_fluid_settings', 'new_fluid_synth'):
            getattr(f, name).restype = ctypes.c_void_p
        settings = ctypes.c_void_p(f.new_fluid_settings())
        f.fluid_settings_setnum(settings, b'synth.sample-rate', ctypes.c_double(PLAY_RATE))
        f.fluid_settings_setnum(settings, b'synth.gain', ctypes.c_double(0.3))
        f.fluid_settings_setint(settings, b'synth.polyphony', 256)
        for effect in (b'synth.reverb.active', b'synth.chorus.active'):
            f.fluid_settings_setint(settings, effect, 0)
        self.library, self.synth = f, ctypes.c_void_p(f.new_fluid_synth(settings))
        if f.fluid_synth_sfload(self.synth, font.encode(), 1) < 0:
            raise SystemExit(f'{font}: not a sound font that FluidSynth reads')

    def play(self, events, seconds, programs, levels):
        """Mono samples at 44.1 kHz. events: [(time s, channel, pitch, velocity; 0 releases)]; programs, levels (0-127) by channel."""
        f, synth = self.library, self.synth
        f.fluid_synth_system_reset(synth)
        for channel, program in programs.items():
            f.fluid_synth_program_change(synth, channel, int(program))
            f.fluid_synth_cc(synth, channel, 7, int(levels[channel]))
        total = int(seconds * PLAY_RATE)
        left, right = np.zeros(total + 64, np.float32), np.zeros(total + 64, np.float32)
        done = 0

        def run_to(sample):
            nonlocal done
            sample = min(total, sample)
            if sample > done:
                f.fluid_synth_write_float(synth, sample - done, left.ctypes.data_as(ctypes.c_void_p), done, 1,
                                          right.ctypes.data_as(ctypes.c_void_p), done, 1)
                done = sample

        for time, channel, pitch, velocity in sorted(events, key=lambda e: (e[0], e[3] > 0)):
            run_to(int(time * PLAY_RATE / 64) * 64)   # FluidSynth acts on events every 64 samples
            if velocity:
                f.fluid_synth_noteon(synth, channel, int(pitch), int(velocity))
            else:
                f.fluid_synth_noteoff(synth, channel, int(pitch))
        run_to(total)
        return 0.5 * (left[:total] + right[:total])


def to_features_rate(samples):
    return resample_poly(samples, 1, PLAY_RATE // RATE).astype(np.float32)


def roughen(rng, x):
    """Reverb, equaliser and filters, compression, saturation, noise: each by chance."""
    x = x / (np.sqrt(np.mean(x ** 2)) + 1e-9) * 0.1
    if rng.random() < 0.5:
        n = int(RATE * rng.uniform(0.15, 1.4))
        tail = rng.normal(0, 1, n) * np.exp(-6.9 * np.arange(n) / n)
        tail *= rng.uniform(0.05, 0.5) / np.sqrt(np.sum(tail ** 2))
        x = x + fftconvolve(x, tail)[:x.size]
    frequency = np.fft.rfftfreq(x.size, 1 / RATE)
    knots = np.log2(np.array([20, 60, 120, 250, 500, 1000, 2000, 4000, 8000, 11025]))
    shape = np.interp(np.log2(np.maximum(20, frequency)), knots, rng.uniform(-4.5, 4.5, knots.size) if rng.random() < 0.75 else np.zeros(knots.size))
    if rng.random() < 0.15:
        shape -= 12 * np.maximum(0, np.log2(rng.uniform(60, 250) / np.maximum(20, frequency)))
    if rng.random() < 0.2:
        shape -= 12 * np.maximum(0, np.log2(np.maximum(20, frequency) / rng.uniform(2500, 8000)))
    x = np.fft.irfft(np.fft.rfft(x) * 10 ** (shape / 20), x.size)
    if rng.random() < 0.5:                                     # compression: pull the level of 10-100 ms towards its mean
        n = int(RATE * rng.uniform(0.01, 0.1))
        power = np.maximum(0, np.cumsum(np.pad(x ** 2, (n, 0)))[n:] - np.cumsum(np.pad(x ** 2, (n, 0)))[:-n]) / n
        x = x * (power + 1e-5) ** (-0.5 * rng.uniform(0.2, 0.75))
        x = x / (np.sqrt(np.mean(x ** 2)) + 1e-9) * 0.1
    if rng.random() < 0.4:
        drive = rng.uniform(1, 12)
        x = np.tanh(drive * x) / drive
    noise = rng.normal(0, 1, x.size)
    if rng.random() < 0.5:
        noise = np.convolve(noise, np.ones(16) / 4, 'same')
    return (x + noise * 0.1 * 10 ** (rng.uniform(-62, -28) / 20)).astype(np.float32)


def duck(x, times, depth, recovery):
    """The level pressed down on every beat and let up again, as dance music is mixed."""
    gain = np.ones(x.size, np.float32)
    n = int(recovery * PLAY_RATE)
    curve = 1 - depth * (1 - np.arange(n) / n) ** 2
    for t in times:
        at = int(t * PLAY_RATE)
        if 0 <= at < x.size:
            gain[at:at + n] = np.minimum(gain[at:at + n], curve[:max(0, min(n, x.size - at))])
    return x * gain
