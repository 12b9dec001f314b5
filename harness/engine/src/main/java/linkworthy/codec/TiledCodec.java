package linkworthy.codec;

import java.util.ArrayList;
import java.util.EnumSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.link.Link;
import linkworthy.link.Packet;
import linkworthy.link.PartNumber;

/**
 * A picture cut into a grid of tiles, each coded alone over its rows as by one helper node. Tile t,
 * counted row by row from 0, is the work of node t + 1; its packets begin with t (see {@link
 * PartNumber}).
 *
 * <p>A tile of which nothing arrives is shown mid-grey. Sides that do not divide evenly give tiles
 * that differ by one sample.
 */
final class TiledCodec implements Codec {
  /** Tiles in a grid at most. */
  static final int MOST_TILES = PartNumber.MOST;

  private final Grid grid;
  private final TransformCodec inner;
  private final Link link;
  private final String label;

  /**
   * @param inner the codec of a tile, made for packets {@link PartNumber#BYTES} shorter
   * @param link the packets of the picture
   * @param label empty for the one derived from the parameters
   */
  TiledCodec(Grid grid, TransformCodec inner, Link link, String label) {
    this.grid = grid;
    this.link = link;
    this.inner = inner;
    this.label = label.isEmpty() ? inner.label().replaceFirst("rows", grid.id()) : label;
  }

  /**
   * A grid of tiles.
   *
   * @param columns tiles across
   * @param rows tiles down
   */
  record Grid(int columns, int rows) {
    /**
     * @throws IllegalArgumentException unless both are at least 1 and the tiles at most {@link
     *     #MOST_TILES}
     */
    Grid {
      if (columns < 1 || rows < 1 || (long) columns * rows > MOST_TILES) {
        throw new IllegalArgumentException(
            "grid is " + columns + "x" + rows + "; accepted: 1x1 up to " + MOST_TILES + " tiles");
      }
    }

    String id() {
      return "tiles" + columns + "x" + rows;
    }

    int tiles() {
      return columns * rows;
    }

    /** Place and size of tile t in pictures of a shape. */
    Tile tile(int t, PictureShape shape) {
      int column = t % columns;
      int row = t / columns;
      int left = column * shape.width() / columns;
      int top = row * shape.height() / rows;
      return new Tile(
          left,
          top,
          new PictureShape(
              (column + 1) * shape.width() / columns - left,
              (row + 1) * shape.height() / rows - top,
              shape.bitDepth()));
    }
  }

  /** A rectangle of a picture. */
  record Tile(int left, int top, PictureShape shape) {
    Picture cutFrom(Picture picture) {
      int[] samples = new int[shape.size()];
      for (int y = 0; y < shape.height(); y++) {
        System.arraycopy(
            picture.samples(),
            (top + y) * picture.width() + left,
            samples,
            y * shape.width(),
            shape.width());
      }
      return new Picture(shape.width(), shape.height(), shape.bitDepth(), samples);
    }

    void putInto(int[] samples, int width, Picture tile) {
      for (int y = 0; y < shape.height(); y++) {
        System.arraycopy(
            tile.samples(), y * shape.width(), samples, (top + y) * width + left, shape.width());
      }
    }
  }

  @Override
  public String label() {
    return label;
  }

  @Override
  public Description description() {
    Description description = inner.description();
    return new Description(description.transform(), grid.id(), description.step());
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    inner
        .settings()
        .forEach(
            (key, value) -> {
              if (key.equals("over")) {
                settings.put("over", "tiles");
                settings.put("grid", grid.columns() + "x" + grid.rows());
              } else {
                settings.put(key, value);
              }
            });
    settings.put("label", label);
    return settings;
  }

  @Override
  public void check(PictureShape shape) {
    if (shape.width() < grid.columns() || shape.height() < grid.rows()) {
      throw new BadInput(
          "codec '"
              + label
              + "' cuts "
              + grid.columns()
              + " x "
              + grid.rows()
              + " tiles, and the picture has "
              + shape.width()
              + " x "
              + shape.height()
              + " samples; accepted: at most one tile for each sample across and down");
    }
    try {
      for (int t = 0; t < grid.tiles(); t++) {
        inner.check(grid.tile(t, shape).shape());
      }
    } catch (BadInput e) {
      throw new BadInput("a tile of codec '" + label + "': " + e.getMessage(), e);
    }
  }

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    List<Packet> packets = new ArrayList<>();
    int keep = 0;
    for (int t = 0; t < grid.tiles(); t++) {
      Tile tile = grid.tile(t, PictureShape.of(picture));
      TileWork work =
          memo.once(
              new TileKey(grid, t),
              TileWork.class,
              () -> new TileWork(tile.cutFrom(picture), new Memo()));
      Encoding encoding = inner.encode(work.picture(), work.memo());
      keep = Math.max(keep, encoding.keep());
      for (Packet packet : encoding.packets()) {
        packets.add(PartNumber.before(packet, t, t + 1));
      }
    }
    return new Encoding(packets, keep);
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    List<List<byte[]>> byTile = PartNumber.sort(arrived, grid.tiles());
    int[] samples = new int[shape.size()];
    Set<Decoding.Completeness> parts = EnumSet.noneOf(Decoding.Completeness.class);
    for (int t = 0; t < grid.tiles(); t++) {
      Tile tile = grid.tile(t, shape);
      Decoding decoding = inner.decode(tile.shape(), byTile.get(t));
      tile.putInto(samples, shape.width(), decoding.picture());
      parts.add(decoding.completeness());
    }
    return new Decoding(
        new Picture(shape.width(), shape.height(), shape.bitDepth(), samples),
        Decoding.Completeness.ofParts(parts));
  }

  @Override
  public boolean hasHelpers() {
    return true;
  }

  /**
   * The camera passes every tile's raw samples to its helper, in packets of the link; each helper
   * codes its tile.
   */
  @Override
  public List<Workload> workloads(PictureShape shape, int keep) {
    List<Workload> nodes = new ArrayList<>();
    long passed = 0;
    for (int t = 0; t < grid.tiles(); t++) {
      PictureShape tile = grid.tile(t, shape).shape();
      long raw = rawBits(tile);
      passed += raw;
      for (Workload alone : inner.workloads(tile, keep)) {
        nodes.add(new Workload(alone.macs(), alone.memoryBytes(), 0, raw));
      }
    }
    nodes.add(0, new Workload(0, link.payloadBytes(), passed, 0));
    return nodes;
  }

  private long rawBits(PictureShape tile) {
    long bytes = ((long) tile.size() * tile.bitDepth() + 7) / 8;
    int packets = (int) ((bytes + link.payloadBytes() - 1) / link.payloadBytes());
    return link.sentBits(packets, 8 * bytes);
  }

  private record TileKey(Grid grid, int tile) {}

  private record TileWork(Picture picture, Memo memo) {}
}
