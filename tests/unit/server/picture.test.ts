import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { kindOf, PictureRefused, renderPicture, type Rendered } from '~/server/services/picture.ts';
import { heic, phoneJpeg, plainJpeg, pngClaiming, sides } from '../../support/sample-pictures.ts';

const rendition = (rendered: Rendered, name: string): Buffer => {
  const found = rendered.renditions.find(({ size, format }) => `${size}.${format}` === name);
  if (!found) throw new Error(`no ${name}`);
  return found.bytes;
};

const refusal = async (bytes: Buffer): Promise<string> => {
  const error = await renderPicture(bytes).then(() => null, (thrown: unknown) => thrown);
  expect(error).toBeInstanceOf(PictureRefused);
  return (error as Error).message;
};

describe('a photograph', () => {
  it('is turned upright and loses position, serial number and every other datum of the camera', async () => {
    const sent = await phoneJpeg();
    expect(sent.includes('SERIAL-12345')).toBe(true);
    expect((await sharp(sent).metadata()).orientation).toBe(6);
    const rendered = await renderPicture(sent);
    expect(rendered).toMatchObject({ width: 80, height: 120 });
    for (const { bytes, format } of rendered.renditions) {
      const about = await sharp(bytes).metadata();
      expect(about).toMatchObject({ format: format === 'jpg' ? 'jpeg' : 'webp', width: 80, height: 120 });
      expect([about.exif, about.xmp, about.iptc, about.icc, about.orientation]).toEqual([undefined, undefined, undefined, undefined, undefined]);
      expect(bytes.includes('SERIAL-12345') || bytes.includes('Sample camera') || bytes.includes('Exif')).toBe(false);
      // Orientation 6 is shown a quarter turn clockwise (Exif 2.3, tag 0x0112): what lay at the left comes to the top.
      expect(await sides(bytes)).toMatchObject({ top: 'red', bottom: 'blue' });
    }
  });

  it('comes in three sizes and two formats with a tiny stand-in', async () => {
    const rendered = await renderPicture(await plainJpeg(3000, 2000));
    const sizes = await Promise.all(rendered.renditions.map(async ({ bytes }) => (await sharp(bytes).metadata()).width));
    expect(sizes).toEqual([480, 480, 1024, 1024, 2048, 2048]);
    expect(rendered.renditions.map(({ size, format }) => `${size}.${format}`)).toEqual(['small.webp', 'small.jpg', 'medium.webp', 'medium.jpg', 'large.webp', 'large.jpg']);
    expect(rendered.blur).toMatch(/^data:image\/webp;base64,[A-Za-z0-9+/]+=*$/);
    expect(rendered.blur.length).toBeLessThan(600);
  });

  it('may be a phone’s HEIC, whose data is dropped too', async () => {
    const sent = heic();
    expect(sent.includes('Sample camera')).toBe(true);
    const rendered = await renderPicture(sent);
    expect(rendered).toMatchObject({ width: 96, height: 64 });
    const small = rendition(rendered, 'small.webp');
    expect(await sides(small)).toMatchObject({ left: 'red', right: 'blue' });
    expect((await sharp(small).metadata()).exif).toBeUndefined();
  });

  it('may be PNG, WebP or AVIF; what is clear becomes white', async () => {
    const clear = sharp({ create: { width: 40, height: 20, channels: 4, background: { r: 0, g: 0, b: 0, alpha: 0 } } });
    for (const sent of [await clear.clone().png().toBuffer(), await clear.clone().webp().toBuffer(), await clear.clone().avif().toBuffer()]) {
      const { data } = await sharp(rendition(await renderPicture(sent), 'large.jpg')).raw().toBuffer({ resolveWithObject: true });
      expect(data[0]).toBeGreaterThan(250);
    }
  });
});

describe('what is refused, and why', () => {
  it('a text file under a picture’s name', async () => {
    expect(await refusal(Buffer.from('Dear sawyer, the logs are behind the barn.'))).toMatch(/not a picture/);
    expect(await refusal(Buffer.alloc(0))).toMatch(/not a picture/);
  });

  it('a drawing in SVG, whatever it is called', async () => {
    expect(await refusal(Buffer.from('<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"/>'))).toMatch(/SVG/);
  });

  it('a picture that is cut off', async () => {
    const whole = await sharp({ create: { width: 600, height: 400, channels: 3, background: '#888', noise: { type: 'gaussian', mean: 128, sigma: 40 } } }).jpeg().toBuffer();
    expect(await refusal(whole.subarray(0, whole.length / 2))).toMatch(/damaged or cut off/);
    expect(await refusal(heic().subarray(0, 500))).toMatch(/damaged or cut off/);
  });

  it('a small file that would fill the memory', async () => {
    const bomb = pngClaiming(60_000, 60_000);
    expect(bomb.length).toBeLessThan(10_000);
    expect(await refusal(bomb)).toMatch(/more than 60 million pixels/);
  });

  it('and the limit itself is let through to decoding', async () => {
    // 60,000,000 pixels exactly: refused only because its data ends early, not for its size.
    expect(await refusal(pngClaiming(10_000, 6_000))).toMatch(/damaged or cut off/);
    expect(await refusal(pngClaiming(10_000, 6_001))).toMatch(/million pixels/);
  });

  it('bytes decide what a file is', async () => {
    expect(kindOf(heic())).toBe('heic');
    expect(kindOf(await plainJpeg(10, 10))).toBe('jpeg');
    expect(kindOf(Buffer.from('GIF89a'))).toBe('other');
  });
});
