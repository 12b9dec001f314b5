package linkworthy.trial;

import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Failure;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.codec.Workload;
import linkworthy.corpus.AreaAverage;
import linkworthy.corpus.Picture;
import linkworthy.link.Packet;
import linkworthy.link.PartNumber;
import linkworthy.study.PictureChoice;
import org.jspecify.annotations.Nullable;

/**
 * How the planes of a picture go through a codec that knows one plane. With {@code planes: luma}
 * the codec's own packets are sent. With {@code planes: all} every plane is coded alone, luma
 * first, and each packet begins with its plane's {@link PartNumber} (0 Y, 1 Cb, 2 Cr).
 *
 * <p>With chroma 4:2:0 the colour planes are halved in both directions by area average, their sides
 * rounded up, before coding; at the receiver each of their samples is shown over the area that it
 * stands for.
 */
final class PlaneCoding {
  private final boolean numbered;
  private final boolean halved;

  PlaneCoding(PictureChoice pictures) {
    this.numbered = pictures.hasAllPlanes();
    this.halved = pictures.chroma().equals(PictureChoice.HALVED);
  }

  /**
   * @param planes all of the size of the first
   * @param completeness NOTHING where no plane had anything, COMPLETE where all were complete
   * @param failure of the first plane whose decoder failed, or null
   */
  record Decoded(
      List<Picture> planes, Decoding.Completeness completeness, @Nullable Failure failure) {
    Picture luma() {
      return planes.get(0);
    }
  }

  /** Makes a plane, counted from 0, of what arrived. */
  interface Decoder {
    Decoding decode(int plane, PictureShape shape, List<byte[]> arrived);
  }

  /** The planes as they are coded. */
  List<Picture> coded(List<Picture> planes) {
    List<Picture> coded = new ArrayList<>();
    for (Picture plane : planes) {
      coded.add(
          halved && !coded.isEmpty()
              ? AreaAverage.toSize(plane, (plane.width() + 1) / 2, (plane.height() + 1) / 2)
              : plane);
    }
    return coded;
  }

  /** The codec of a plane; the first is luma. */
  static Codec of(Codec codec, int plane) {
    return plane == 0 ? codec : codec.forChroma();
  }

  /**
   * Encodes the planes; the components in force are those of luma.
   *
   * @param memos one for each plane
   */
  Encoding encode(Codec codec, List<Picture> coded, List<Memo> memos) {
    if (!numbered) {
      return codec.encode(coded.get(0), memos.get(0));
    }
    List<Packet> packets = new ArrayList<>();
    int keep = -1;
    for (int plane = 0; plane < coded.size(); plane++) {
      Encoding encoding = of(codec, plane).encode(coded.get(plane), memos.get(plane));
      keep = plane == 0 ? encoding.keep() : keep;
      for (Packet packet : encoding.packets()) {
        packets.add(PartNumber.before(packet, plane, packet.node()));
      }
    }
    return new Encoding(packets, keep);
  }

  /**
   * Decodes what arrived, damaged or not.
   *
   * @param coded shapes of the planes as they were coded
   */
  Decoded decode(Decoder decoder, List<PictureShape> coded, List<byte[]> arrived) {
    if (!numbered) {
      Decoding decoding = decoder.decode(0, coded.get(0), arrived);
      return new Decoded(List.of(decoding.picture()), decoding.completeness(), decoding.failure());
    }
    List<List<byte[]>> byPlane = PartNumber.sort(arrived, coded.size());
    List<Picture> planes = new ArrayList<>();
    Set<Decoding.Completeness> parts = EnumSet.noneOf(Decoding.Completeness.class);
    Failure failure = null;
    for (int plane = 0; plane < coded.size(); plane++) {
      Decoding decoding = decoder.decode(plane, coded.get(plane), byPlane.get(plane));
      parts.add(decoding.completeness());
      failure = failure == null ? decoding.failure() : failure;
      planes.add(stretched(decoding.picture(), coded.get(0)));
    }
    return new Decoded(planes, Decoding.Completeness.ofParts(parts), failure);
  }

  /**
   * What coding the planes asks of each node: one plane after the other, the samples of all in
   * memory. Every plane is taken to keep as many components as luma.
   */
  List<Workload> workloads(Codec codec, List<PictureShape> coded, int keep) {
    List<Workload> nodes = codec.workloads(coded.get(0), keep);
    for (PictureShape plane : coded.subList(1, coded.size())) {
      List<Workload> more = codec.workloads(plane, keep);
      List<Workload> sums = new ArrayList<>();
      for (int node = 0; node < nodes.size(); node++) {
        sums.add(nodes.get(node).andAnother(more.get(node), plane));
      }
      nodes = sums;
    }
    return nodes;
  }

  private static Picture stretched(Picture plane, PictureShape shape) {
    if (plane.width() == shape.width() && plane.height() == shape.height()) {
      return plane;
    }
    int[] samples = new int[shape.size()];
    for (int y = 0; y < shape.height(); y++) {
      int row = y * plane.height() / shape.height() * plane.width();
      for (int x = 0; x < shape.width(); x++) {
        samples[y * shape.width() + x] = plane.samples()[row + x * plane.width() / shape.width()];
      }
    }
    return new Picture(shape.width(), shape.height(), plane.bitDepth(), samples);
  }
}
