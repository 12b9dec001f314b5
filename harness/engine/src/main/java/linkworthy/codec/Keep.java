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
}
