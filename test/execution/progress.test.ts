import { describe, expect, it } from 'vitest';
import { clock, Progress } from '../../src/execution/progress.js';

function shown(terminal: boolean, act: (progress: Progress, at: (seconds: number) => void) => void): string {
  let text = '';
  let nowMs = 5_000;
  const progress = new Progress({
    terminal,
    nowMs: () => nowMs,
    write: (part) => {
      text += part;
    },
  });
  act(progress, (seconds) => {
    nowMs = 5_000 + seconds * 1000;
  });
  return text;
}

describe('progress', () => {
  it('off a terminal is a line a minute', () => {
    const text = shown(false, (progress, at) => {
      for (let second = 1; second <= 150; second++) {
        at(second);
        progress.update(second, 300);
      }
      progress.end();
    });
    // By hand: 60 of 300 blocks in 60 s leave 240 s, 120 in 120 s leave 180 s.
    expect(text).toBe(
      '60 of 300 blocks in 1:00, 60 a minute, about 4:00 left\n120 of 300 blocks in 2:00, 60 a minute, about 3:00 left\n',
    );
  });

  it('on a terminal writes over its line, lets notes stand and goes away at the end', () => {
    const text = shown(true, (progress, at) => {
      at(1);
      progress.update(1, 4);
      progress.note('a note');
      progress.end();
    });
    const clear = '\r\u001b[K';
    const line = '1 of 4 blocks in 0:01, 60 a minute, about 0:03 left';
    expect(text).toBe(`${clear}${line}${clear}a note\n${line}${clear}`);
  });

  it('on a terminal shows at once that something goes on', () => {
    expect(shown(true, (progress) => progress.update(0, 4))).toBe('\r\u001b[K0 of 4 blocks in 0:00');
  });

  it('promises nothing before the first block', () => {
    const text = shown(false, (progress, at) => {
      at(61);
      progress.update(0, 4);
    });
    expect(text).toBe('0 of 4 blocks in 1:01\n');
  });

  it('shows that time goes on while no block comes', () => {
    const text = shown(false, (progress, at) => {
      at(30);
      progress.update(1, 10);
      at(120);
      progress.tick();
    });
    // By hand: one block in 120 s is half a block a minute and leaves 9 x 2 minutes.
    expect(text).toBe('1 of 10 blocks in 2:00, 0.5 a minute, about 18:00 left\n');
  });

  it('tells notes to whoever wants them too, lines to the screen only', () => {
    const notes: string[] = [];
    const progress = new Progress({
      terminal: false,
      nowMs: () => 0,
      write: () => undefined,
      onNote: (text) => notes.push(text),
    });
    progress.note('a thread ended');
    progress.line('so far so good');
    expect(notes).toEqual(['a thread ended']);
  });

  it.each([
    [0, '0:00'],
    [59_400, '0:59'],
    [59_600, '1:00'],
    [3_725_000, '1:02:05'],
  ])('writes %i ms as %s', (durationMs, text) => {
    expect(clock(durationMs)).toBe(text);
  });
});
