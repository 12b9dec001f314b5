package linkworthy.noise.fit;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.stream.Collectors;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.Picture;
import linkworthy.corpus.PictureFile;
import linkworthy.input.BadInput;

/**
 * Sensor noise from a folder of pictures, of their luma planes: from repeated frames of one scene
 * ({@link SensorFit}), or from each picture alone ({@link SingleFrame}).
 *
 * @param source the folder's name, the number and size of the pictures, and SHA-256 over a line
 *     with the SHA-256 of each file in the order of their names
 * @param names names of the files
 * @param repeated the fit of repeated frames, unless single pictures were asked for
 * @param singles the noise of each picture, of single pictures only
 */
public record PicturesFit(
    String source, List<String> names, Optional<SensorFit> repeated, List<SingleFrame> singles) {
  private static final double MOST_DRIFT = 0.1;

  /** How the pictures of a folder belong together. */
  public enum Kind {
    /** To be told from the pictures. */
    TOLD_BY_PICTURES,
    /** Frames of one scene. */
    REPEATED,
    /** Each for itself. */
    SINGLE
  }

  /**
   * Reads the pictures of a folder and fits them; files of other kinds are passed over.
   *
   * @throws BadInput if there are none, they cannot be fitted, or several of equal size are neither
   *     clearly one scene nor said to be single
   * @throws linkworthy.input.Unavailable if one cannot be read
   */
  public static PicturesFit of(Path folder, Kind kind) {
    List<PictureFile> files =
        PictureFile.in(folder).stream()
            .filter(PictureFile::hasSignature)
            .map(PictureFile::read)
            .collect(Collectors.toList());
    if (files.isEmpty()) {
      throw new BadInput(
          folder + " has no pictures; accepted: a folder with PNG, JPEG, TIFF, PNM or BMP");
    }
    List<Picture> lumas = files.stream().map(PictureFile::luma).toList();
    List<String> names = new ArrayList<>();
    StringBuilder lines = new StringBuilder();
    for (PictureFile file : files) {
      names.add(String.valueOf(file.path().getFileName()));
      lines.append(file.sha256()).append('\n');
    }
    String source =
        "fitted from %s, %d pictures of %d x %d, sha256 %s"
            .formatted(
                folder.toAbsolutePath().normalize().getFileName(),
                files.size(),
                lumas.get(0).width(),
                lumas.get(0).height(),
                Manifest.sha256(lines.toString().getBytes(StandardCharsets.UTF_8)));
    try {
      if (areRepeated(lumas, kind)) {
        return new PicturesFit(source, names, Optional.of(SensorFit.of(lumas)), List.of());
      }
      PicturesFit singles =
          new PicturesFit(
              source, names, Optional.empty(), lumas.stream().map(SingleFrame::of).toList());
      if (singles.deviation() == 0) {
        throw new BadInput(
            "half of the pictures show no noise beyond the rounding to grey levels; accepted: pictures with noise");
      }
      return singles;
    } catch (BadInput e) {
      throw new BadInput(folder + ": " + e.getMessage(), e);
    }
  }

  private static boolean areRepeated(List<Picture> pictures, Kind kind) {
    if (kind != Kind.TOLD_BY_PICTURES || pictures.size() < 2 || !SensorFit.sameShape(pictures)) {
      return kind == Kind.REPEATED;
    }
    double difference = SensorFit.difference(pictures);
    if (difference < SensorFit.DIFFERENT_SCENES) {
      return true;
    }
    throw new BadInput(
        "%d pictures of equal size differ by %s of their variance, too much to be taken for frames of one scene; accepted: --repeated (flat or very noisy frames) or --single"
            .formatted(pictures.size(), LossFit.format(difference)));
  }

  /** Median standard deviation of the single pictures' noise, grey levels. */
  double deviation() {
    double[] sorted = singles.stream().mapToDouble(SingleFrame::deviation).sorted().toArray();
    int half = sorted.length / 2;
    return sorted.length % 2 == 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
  }

  /** The fit in plain words. */
  public List<String> lines() {
    List<String> lines = new ArrayList<>();
    repeated.ifPresentOrElse(fit -> repeated(lines, fit), () -> single(lines));
    return lines;
  }

  private static void repeated(List<String> lines, SensorFit fit) {
    add(lines, "%d frames of one scene", fit.frames());
    add(
        lines,
        "noise variance %s grey levels squared (s.e. %s), over all levels",
        LossFit.format(fit.variance()),
        LossFit.format(fit.errorOfVariance()));
    if (fit.line().isPresent()) {
      SensorFit.Line line = fit.line().get();
      lines.add("variance = gain * mean + offset:");
      add(
          lines,
          "  gain %s grey levels for each photon counted (s.e. %s)",
          LossFit.format(line.gain()),
          LossFit.format(line.errorOfGain()));
      add(
          lines,
          "  offset %s grey levels squared (s.e. %s), read noise %s",
          LossFit.format(line.offset()),
          LossFit.format(line.errorOfOffset()),
          LossFit.format(line.readNoise()));
      add(
          lines,
          "  chi-square %.1f with %d degrees of freedom",
          line.chiSquare(),
          line.degreesOfFreedom());
    } else {
      lines.add("too few grey levels to say whether the noise grows with the light");
    }
    if (fit.drift() * fit.drift() > MOST_DRIFT * fit.variance()) {
      add(
          lines,
          "caution: the frames' mean levels differ by %s grey levels; the light may have changed",
          LossFit.format(fit.drift()));
    }
    lines.add(
        fit.growsWithLight()
            ? "chosen: shot-noise, as the gain is clearly above 0"
            : "chosen: gaussian, as no gain clearly above 0 was found");
  }

  private void single(List<String> lines) {
    for (int i = 0; i < singles.size(); i++) {
      add(
          lines,
          "%s: noise deviation %s grey levels (s.e. %s)",
          names.get(i),
          LossFit.format(singles.get(i).deviation()),
          LossFit.format(singles.get(i).error()));
    }
    add(lines, "median of %d: %s grey levels", singles.size(), LossFit.format(deviation()));
    lines.add(
        "fine texture counts as noise here; repeated frames of one scene would tell them apart");
    lines.add("chosen: gaussian, as one picture does not tell how noise grows with the light");
  }

  private static void add(List<String> lines, String format, Object... values) {
    lines.add(String.format(Locale.ROOT, format, values));
  }

  /** The model as the text of a model file. */
  public String model(String id) {
    if (repeated.isPresent() && repeated.get().growsWithLight()) {
      SensorFit.Line line = repeated.get().line().orElseThrow();
      return ModelFile.shotNoise(
          id,
          line.readNoise(),
          source,
          "variance = gain x + offset; measured: gain %s (s.e. %s), offset %s (s.e. %s) grey levels squared."
              .formatted(
                  LossFit.format(line.gain()),
                  LossFit.format(line.errorOfGain()),
                  LossFit.format(line.offset()),
                  LossFit.format(line.errorOfOffset())));
    }
    String notes =
        repeated
            .map(
                fit ->
                    "measured: variance %s (s.e. %s) grey levels squared, from repeated frames."
                        .formatted(
                            LossFit.format(fit.variance()), LossFit.format(fit.errorOfVariance())))
            .orElseGet(
                () ->
                    "measured: variance %s grey levels squared, the median of %d single pictures, with fine texture counted as noise."
                        .formatted(LossFit.format(deviation() * deviation()), singles.size()));
    return ModelFile.gaussian(id, source, notes);
  }
}
