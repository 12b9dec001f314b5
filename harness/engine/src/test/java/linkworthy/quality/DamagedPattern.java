package linkworthy.quality;

import java.util.Arrays;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;

/** Nine ways to damage the square test pattern; integer arithmetic only. */
enum DamagedPattern {
  SHIFT1 {
    @Override
    int sample(Picture clean, int x, int y) {
      return at(clean, Math.floorMod(x - 1, clean.width()), y);
    }
  },
  CONTRAST {
    @Override
    int sample(Picture clean, int x, int y) {
      return (3 * at(clean, x, y) + 128) / 4;
    }
  },
  BRIGHT20 {
    @Override
    int sample(Picture clean, int x, int y) {
      return at(clean, x, y) + 20;
    }
  },
  NOISE {
    @Override
    int sample(Picture clean, int x, int y) {
      return Math.max(0, Math.min(255, at(clean, x, y) + TestPattern.noise(x, y)));
    }
  },
  SALTPEP {
    @Override
    int sample(Picture clean, int x, int y) {
      int hit = TestPattern.saltAndPepper(x, y);
      return hit < 0 ? 0 : hit > 0 ? 255 : at(clean, x, y);
    }
  },
  BLKMEAN {
    @Override
    int sample(Picture clean, int x, int y) {
      int sum = 32;
      for (int i = 0; i < 64; i++) {
        sum += at(clean, x / 8 * 8 + i % 8, y / 8 * 8 + i / 8);
      }
      return sum >> 6;
    }
  },
  LOSTROWS {
    @Override
    int sample(Picture clean, int x, int y) {
      return y >= 16 && y < 24 ? 128 : at(clean, x, y);
    }
  },
  BLUR3 {
    @Override
    int sample(Picture clean, int x, int y) {
      int sum = 8;
      for (int i = -1; i <= 1; i++) {
        for (int j = -1; j <= 1; j++) {
          int column = Math.max(0, Math.min(clean.width() - 1, x + i));
          int row = Math.max(0, Math.min(clean.height() - 1, y + j));
          sum += (2 - Math.abs(i)) * (2 - Math.abs(j)) * at(clean, column, row);
        }
      }
      return sum >> 4;
    }
  },
  NEGATIVE {
    @Override
    int sample(Picture clean, int x, int y) {
      return 255 - at(clean, x, y);
    }
  };

  abstract int sample(Picture clean, int x, int y);

  Picture of(Picture clean) {
    int width = clean.width();
    int[] samples = new int[clean.size()];
    Arrays.setAll(samples, i -> sample(clean, i % width, i / width));
    return new Picture(width, clean.height(), clean.bitDepth(), samples);
  }

  private static int at(Picture picture, int x, int y) {
    return picture.samples()[y * picture.width() + x];
  }
}
