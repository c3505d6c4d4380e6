import { describe, expect, it } from 'vitest';
import { fitWithin, largestPhotoBytes, parseRendition, photoAlt, photoProblem, photoType, pictureView } from '~/domain/photo.ts';

describe('the type of a chosen file', () => {
  it.each([
    ['a.jpg', 'image/jpeg', 'image/jpeg'],
    ['IMG_0001.HEIC', '', 'image/heic'],
    ['photo.heif', 'application/octet-stream', 'image/heif'],
    ['a.JPG', 'image/jpg', 'image/jpeg'],
    ['noname', 'image/webp', 'image/webp'],
    ['drawing.svg', 'image/svg+xml', null],
    ['notes.txt', 'text/plain', null],
    ['renamed.jpg', 'text/plain', null],
    ['noname', '', null],
  ])('%s said to be "%s" is %s', (name, said, type) => {
    expect(photoType(name, said)).toBe(type);
  });

  it('is refused with a reason before anything is sent', () => {
    expect(photoProblem('a.jpg', 'image/jpeg', 1000)).toBeNull();
    expect(photoProblem('a.jpg', 'image/jpeg', largestPhotoBytes)).toBeNull();
    expect(photoProblem('a.jpg', 'image/jpeg', largestPhotoBytes + 200_000)).toMatch(/25\.2 MB.*most is 25 MB/);
    expect(photoProblem('a.jpg', 'image/jpeg', 0)).toMatch(/empty/);
    expect(photoProblem('a.pdf', 'application/pdf', 10)).toMatch(/not a picture/);
  });
});

describe('renditions', () => {
  it('fit inside a square without growing', () => {
    expect(fitWithin(4032, 3024, 1024)).toEqual({ width: 1024, height: 768 });
    expect(fitWithin(3024, 4032, 1024)).toEqual({ width: 768, height: 1024 });
    expect(fitWithin(300, 200, 480)).toEqual({ width: 300, height: 200 });
    expect(fitWithin(10_000, 1, 480)).toEqual({ width: 480, height: 1 });
  });

  it('are named by size and format, and nothing else is a name', () => {
    expect(parseRendition('medium.webp')).toEqual({ size: 'medium', format: 'webp' });
    for (const name of ['original.jpg', 'medium', 'medium.png', '../medium.webp', 'medium.webp/']) expect(parseRendition(name)).toBeNull();
  });

  it('are offered by their true widths, each once', () => {
    const id = '00000000-0000-4000-8000-000000000001';
    const tall = pictureView({ id, width: 3024, height: 4032, blur: 'data:,' }, 'Both ends');
    expect(tall.srcset).toBe(`/photos/${id}/small.webp 360w, /photos/${id}/medium.webp 768w, /photos/${id}/large.webp 1536w`);
    expect(tall.src).toBe(`/photos/${id}/medium.jpg`);
    expect(pictureView({ id, width: 400, height: 300, blur: 'data:,' }, '').srcset).toBe(`/photos/${id}/small.webp 400w`);
  });

  it('say what they show', () => {
    expect(photoAlt('Butt end of the oak ', 'Log 1')).toBe('Butt end of the oak');
    expect(photoAlt('', 'Log 1')).toBe('Photograph of Log 1');
    expect(photoAlt(' ', null)).toBe('Photograph of the logs');
  });
});
