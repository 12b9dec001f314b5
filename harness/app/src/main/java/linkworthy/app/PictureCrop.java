package linkworthy.app;

import java.util.Base64;
import linkworthy.corpus.Picture;
import linkworthy.report.Gallery;

/**
 * The part of a picture that a report shows: of the windows of at most 72 by 72 samples on a
 * regular grid the one where the clean picture has the most detail (the largest sum of squared
 * differences of neighbouring samples), the first of them on ties. Drawn in grey, 8 bits a sample;
 * pictures of 8 bits keep their very samples.
 */
final class PictureCrop {
  /** Longest side of a crop, in samples. */
  static final int SIDE = 72;

  /** Levels of an error map for a level of error. */
  static final int GAIN = 4;

  private static final int WHOLE_SIDE = 256;
  private static final int STEP = 8;
  private static final int MOST_STEPS = 32;

  private final Picture clean;
  private final int x;
  private final int y;
  private final int width;
  private final int height;

  PictureCrop(Picture clean) {
    this.clean = clean;
    this.width = Math.min(SIDE, clean.width());
    this.height = Math.min(SIDE, clean.height());
    int acrossStep = step(clean.width() - width);
    int downStep = step(clean.height() - height);
    int bestX = 0;
    int bestY = 0;
    long most = -1;
    for (int top = 0; top + height <= clean.height(); top += downStep) {
      for (int left = 0; left + width <= clean.width(); left += acrossStep) {
        long detail = detail(left, top);
        if (detail > most) {
          most = detail;
          bestX = left;
          bestY = top;
        }
      }
    }
    this.x = bestX;
    this.y = bestY;
  }

  private static int step(int room) {
    return Math.max(STEP, (room + MOST_STEPS - 1) / MOST_STEPS);
  }

  private long detail(int left, int top) {
    long sum = 0;
    for (int row = top; row < top + height - 1; row++) {
      for (int column = left; column < left + width - 1; column++) {
        int i = row * clean.width() + column;
        long across = (long) clean.samples()[i + 1] - clean.samples()[i];
        long down = (long) clean.samples()[i + clean.width()] - clean.samples()[i];
        sum += across * across + down * down;
      }
    }
    return sum;
  }

  Gallery.Image clean() {
    return of(clean);
  }

  Gallery.Image of(Picture picture) {
    int[] samples = new int[width * height];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = (int) eighth(picture.samples()[place(i)]);
    }
    return image(width, height, samples);
  }

  Gallery.Image error(Picture decoded) {
    int[] samples = new int[width * height];
    for (int i = 0; i < samples.length; i++) {
      int error = decoded.samples()[place(i)] - clean.samples()[place(i)];
      samples[i] = (int) Math.max(0, Math.min(255, 128 + eighth(GAIN * error)));
    }
    return image(width, height, samples);
  }

  private int place(int i) {
    return (y + i / width) * clean.width() + x + i % width;
  }

  /** A difference of samples in levels of 8 bits. */
  private long eighth(int level) {
    return Math.round(255.0 * level / clean.peak());
  }

  private int factor() {
    return (Math.max(clean.width(), clean.height()) + WHOLE_SIDE - 1) / WHOLE_SIDE;
  }

  /** The whole clean picture, each pixel the mean of a square of samples. */
  Gallery.Image whole() {
    int factor = factor();
    int across = Math.max(1, clean.width() / factor);
    int down = Math.max(1, clean.height() / factor);
    int[] samples = new int[across * down];
    for (int i = 0; i < samples.length; i++) {
      long sum = 0;
      for (int k = 0; k < factor * factor; k++) {
        int row = Math.min(clean.height() - 1, i / across * factor + k / factor);
        int column = Math.min(clean.width() - 1, i % across * factor + k % factor);
        sum += clean.samples()[row * clean.width() + column];
      }
      samples[i] = (int) eighth((int) (sum / ((long) factor * factor)));
    }
    return image(across, down, samples);
  }

  Gallery.Crop frame() {
    int factor = factor();
    return new Gallery.Crop(x / factor, y / factor, width / factor, height / factor);
  }

  private static Gallery.Image image(int width, int height, int[] samples) {
    return new Gallery.Image(
        Base64.getEncoder().encodeToString(Pngs.grey(width, height, samples)), width, height);
  }
}
