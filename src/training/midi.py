"""The little of Standard MIDI Files (MIDI 1.0, 1996) that the songs need: notes with their times in seconds."""
import struct


def read_notes(path):
    """{track name: [(start s, end s, pitch, velocity)]} of a format 1 file with ticks per quarter."""
    data = open(path, 'rb').read()
    ticks_per_quarter = struct.unpack('>H', data[12:14])[0]
    at, tracks = 14, []
    while at < len(data):
        size = struct.unpack('>I', data[at + 4:at + 8])[0]
        tracks.append(_events(data[at + 8:at + 8 + size]))
        at += 8 + size
    tempos = sorted((tick, int.from_bytes(body, 'big')) for track in tracks for tick, kind, body in track if kind == 'tempo')
    seconds = _clock(tempos, ticks_per_quarter)
    return {_name(track): _pair(track, seconds) for track in tracks}


def _events(data):
    """[(tick, kind, body)]: kind is 'note' (pitch, velocity; 0 releases), 'tempo' or 'name'."""
    out, at, tick, status = [], 0, 0, 0

    def number():
        nonlocal at
        value = 0
        while True:
            byte = data[at]
            at += 1
            value = value << 7 | byte & 127
            if byte < 128:
                return value

    while at < len(data):
        tick += number()
        if data[at] >= 128:
            status = data[at]
            at += 1
        if status in (0xFF, 0xF0, 0xF7):
            meta = data[at] if status == 0xFF else None
            at += status == 0xFF
            size = number()
            body = data[at:at + size]
            at += size
            if meta in (0x51, 0x03):
                out.append((tick, 'tempo' if meta == 0x51 else 'name', body))
            continue
        high = status & 0xF0
        if high in (0x80, 0x90):
            out.append((tick, 'note', (data[at], data[at + 1] if high == 0x90 else 0)))
        at += 1 if high in (0xC0, 0xD0) else 2
    return out


def _clock(tempos, ticks_per_quarter):
    """A function from tick to seconds."""
    points, tick, time, micros = [(0, 0.0, 500000)], 0, 0.0, 500000
    for when, value in tempos:
        time += (when - tick) * micros / 1e6 / ticks_per_quarter
        tick, micros = when, value
        points.append((tick, time, micros))

    def seconds(when):
        tick, time, micros = next(p for p in reversed(points) if p[0] <= when)
        return time + (when - tick) * micros / 1e6 / ticks_per_quarter
    return seconds


def _name(track):
    return next((body.decode('latin1') for _, kind, body in track if kind == 'name'), '')


def _pair(track, seconds):
    notes, open_notes = [], {}
    for tick, kind, body in track:
        if kind != 'note':
            continue
        pitch, velocity = body
        if pitch in open_notes:
            start, strength = open_notes.pop(pitch)
            notes.append((start, seconds(tick), pitch, strength))
        if velocity:
            open_notes[pitch] = (seconds(tick), velocity)
    return sorted(notes)
