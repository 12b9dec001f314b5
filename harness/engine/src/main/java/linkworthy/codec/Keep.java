package linkworthy.codec;

import linkworthy.input.Require;

/** How many components are kept. */
public sealed interface Keep {
  /** As in labels: {@code K16}, {@code share0.85}; empty for all. */
  String label();

  /** All of them. */
  record All() implements Keep {
    @Override
    public String label() {
      return "";
    }
  }

  /**
   * The first K.
   *
   * @param components K, from 0
   */
  record First(int components) implements Keep {
    public First {
      Require.inRange(components, 0, 1 << 20, "keep (components)");
    }

    @Override
    public String label() {
      return "K" + components;
    }
  }

  /**
   * The smallest K whose cumulative contribution reaches a share: the running sum of the
   * components' variances over their total.
   *
   * @param share above 0, up to 1
   */
  record Share(double share) implements Keep {
    public Share {
      Require.inRange(share, Double.MIN_VALUE, 1, "share (of the variance)");
    }

    @Override
    public String label() {
      return "share" + Quantizer.plain(share);
    }
  }

  /**
   * The largest K whose sent bits, payload and link overhead, stay within a target for the very
   * picture; 0, recorded as it is, where even the means alone do not. Every packet counts once,
   * with the bytes that protection takes from it; copies, parity packets, further tries,
   * acknowledgements and frame checks are not counted here.
   *
   * @param bitsPerPixel target, sent bits per sample of the picture, above 0
   */
  record Rate(double bitsPerPixel) implements Keep {
    /** The largest target accepted, in bits per pixel. */
    static final int MOST = 1024;

    public Rate {
      Require.inRange(bitsPerPixel, Double.MIN_VALUE, MOST, "bits-per-pixel");
    }

    @Override
    public String label() {
      return "bpp" + Quantizer.plain(bitsPerPixel);
    }
  }

  /**
   * The components whose singular value of the centred matrix lies above the threshold of {@link
   * SingularValueThreshold}: {@code lambda(beta) sqrt(max(d, n)) sigma} with the noise's standard
   * deviation known, else {@code omega(beta)} times the median singular value.
   *
   * @param deviation standard deviation of the noise in grey levels; infinity if unknown
   */
  record NoiseFloor(double deviation) implements Keep {
    /** For noise of which nothing is known. */
    public static final NoiseFloor UNKNOWN = new NoiseFloor(Double.POSITIVE_INFINITY);

    public NoiseFloor {
      if (!(deviation > 0)) {
        Require.positive(deviation, "noise-floor (grey levels)");
      }
    }

    /** Whether the noise is to be judged from the picture. */
    public boolean isUnknown() {
      return deviation == Double.POSITIVE_INFINITY;
    }

    @Override
    public String label() {
      return isUnknown() ? "floor" : "floor" + Quantizer.plain(deviation);
    }
  }
}
