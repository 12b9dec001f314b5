package linkworthy.codec;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import linkworthy.link.Importance;
import linkworthy.link.Link;

/**
 * Which coefficients of a wavelet transform travel together: the lowest band first; then by
 * component each other band, or by region all other bands where they speak of one square of the
 * picture, from coarse to fine.
 */
final class WaveletLayout {
  /** Least side of a region, in samples. */
  private static final int LEAST_SIDE = 32;

  private final List<int[]> components = new ArrayList<>();
  private final double[] gains;
  private final Link.Order order;
  private final int lowestWidth;

  WaveletLayout(Subbands subbands, PictureShape shape, int levels, Link.Order order) {
    this.order = order;
    this.gains = new double[shape.size()];
    List<Subbands.Band> bands = subbands.bands();
    this.lowestWidth = bands.get(0).width();
    int side = Math.max(LEAST_SIDE, 1 << levels);
    int across = (shape.width() + side - 1) / side;
    int regions = across * ((shape.height() + side - 1) / side);
    List<Places> details = new ArrayList<>();
    for (int i = 0; i < (order == Link.Order.BY_REGION ? regions : bands.size() - 1); i++) {
      details.add(new Places());
    }
    for (int b = 0; b < bands.size(); b++) {
      Subbands.Band band = bands.get(b);
      Places lowest = new Places();
      for (int y = 0; y < band.height(); y++) {
        for (int x = 0; x < band.width(); x++) {
          int place = (band.top() + y) * shape.width() + band.left() + x;
          gains[place] = band.gain();
          int region = (y << band.level()) / side * across + (x << band.level()) / side;
          (b == 0 ? lowest : details.get(order == Link.Order.BY_REGION ? region : b - 1))
              .add(place);
        }
      }
      if (b == 0) {
        components.add(lowest.toArray());
      }
    }
    details.stream().map(Places::toArray).filter(p -> p.length > 0).forEach(components::add);
  }

  /** A growing list of places. */
  private static final class Places {
    private int[] places = new int[16];
    private int count;

    void add(int place) {
      if (count == places.length) {
        places = Arrays.copyOf(places, 2 * count);
      }
      places[count++] = place;
    }

    int[] toArray() {
      return Arrays.copyOf(places, count);
    }
  }

  /** Number of components; the first is the lowest band. */
  int components() {
    return components.size();
  }

  /** Coefficients of each component. */
  int[] lengths() {
    return components.stream().mapToInt(places -> places.length).toArray();
  }

  /** Columns of the lowest band. */
  int lowestWidth() {
    return lowestWidth;
  }

  Importance importance(int component) {
    return component == 0
        ? Importance.HEADER
        : order == Link.Order.BY_REGION || component < Math.max(2, components() / 4)
            ? Importance.FIRST
            : Importance.REST;
  }

  /** The coefficients of a component, times their gains. */
  double[] gather(double[] values, int component) {
    int[] places = components.get(component);
    double[] gathered = new double[places.length];
    for (int i = 0; i < places.length; i++) {
      gathered[i] = values[places[i]] * gains[places[i]];
    }
    return gathered;
  }

  /** The inverse of {@link #gather}. */
  void scatter(double[] gathered, int component, double[] values) {
    int[] places = components.get(component);
    for (int i = 0; i < places.length; i++) {
      values[places[i]] = gathered[i] / gains[places[i]];
    }
  }
}
