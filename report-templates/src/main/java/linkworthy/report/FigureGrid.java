package linkworthy.report;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** The figures of a study, found by condition and codec. */
final class FigureGrid {
  private final Map<String, CodecColumn> codecs = new LinkedHashMap<>();
  private final Map<Condition.Key, Condition> conditions = new LinkedHashMap<>();
  private final Map<Place, Figure> figures = new LinkedHashMap<>();
  private final Map<Place, String> ids = new LinkedHashMap<>();
  private final Map<String, Integer> places = new LinkedHashMap<>();

  /**
   * @throws IllegalArgumentException if two figures are of one codec in one condition
   */
  FigureGrid(List<Figure> rows) {
    for (Figure figure : rows) {
      codecs.putIfAbsent(figure.codec().label(), figure.codec());
      places.putIfAbsent(figure.codec().label(), places.size());
      conditions.putIfAbsent(figure.condition().key(), figure.condition());
      Place place = new Place(figure.condition().key(), figure.codec().label());
      if (figures.put(place, figure) != null) {
        throw new IllegalArgumentException(
            "two figures of codec '" + place.codec + "' in condition " + place.condition);
      }
      ids.put(place, "f" + ids.size());
    }
  }

  /** Codecs in the order of their first figure. */
  List<CodecColumn> codecs() {
    return List.copyOf(codecs.values());
  }

  /** The codec's place in the order of the first figures, from 0. */
  int place(CodecColumn codec) {
    return place(codec.label());
  }

  /** The same by label. */
  int place(String codec) {
    return places.getOrDefault(codec, -1);
  }

  /** What a page calls the row of a figure. */
  String id(Figure figure) {
    return id(figure.condition(), figure.codec().label());
  }

  /** The same by codec label; empty where there is no figure. */
  String id(Condition condition, String codec) {
    return ids.getOrDefault(new Place(condition.key(), codec), "");
  }

  /** The condition without impairment, if it was run. */
  Optional<Condition> clean() {
    return conditions.values().stream().filter(Condition::isClean).findFirst();
  }

  /** Impairments in the order of their first figure, each with its conditions, mildest first. */
  List<Noise> noises() {
    Map<List<String>, List<Condition>> groups = new LinkedHashMap<>();
    for (Condition condition : conditions.values()) {
      if (!condition.isClean()) {
        groups
            .computeIfAbsent(
                List.of(condition.impairment(), condition.actsOn()), key -> new ArrayList<>())
            .add(condition);
      }
    }
    List<Noise> noises = new ArrayList<>();
    groups.forEach(
        (key, rows) -> {
          rows.sort(Comparator.comparingDouble(Condition::equivalentNoiseVariance));
          noises.add(new Noise(key.get(0), key.get(1), List.copyOf(rows)));
        });
    return noises;
  }

  Optional<Figure> find(Condition condition, CodecColumn codec) {
    return Optional.ofNullable(figures.get(new Place(condition.key(), codec.label())));
  }

  /** Mean PSNR in dB, or NaN where there is no figure. */
  double psnr(Condition condition, CodecColumn codec) {
    return find(condition, codec).map(f -> f.quality().psnrMeanDb()).orElse(Double.NaN);
  }

  /** Sent bits per pixel, or NaN where there is no figure. */
  double bits(Condition condition, CodecColumn codec) {
    return find(condition, codec).map(Figure::bitsPerPixel).orElse(Double.NaN);
  }

  /** One impairment: at least one condition. */
  record Noise(String name, String actsOn, List<Condition> conditions) {
    String title() {
      return actsOn.isEmpty() ? name : name + " on " + actsOn;
    }

    /** The severity in the middle of the row; of an even number, the milder of the two. */
    Condition middle() {
      return conditions.get((conditions.size() - 1) / 2);
    }

    Condition harshest() {
      return conditions.get(conditions.size() - 1);
    }
  }

  private record Place(Condition.Key condition, String codec) {}
}
