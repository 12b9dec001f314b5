package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/** The gallery laid out for the template: every number is already text. */
record GalleryView(List<String> rule, String missing, List<Noise> noises) {
  /** A noise: what reaches its encoders in words, and its pictures. */
  record Noise(String title, List<Subject> subjects) {}

  /** A picture under a noise. */
  record Subject(Gallery.Subject of, List<Scene> scenes) {}

  /** A picture in a condition; {@code words} where the encoder saw the clean picture. */
  record Scene(
      String given, String words, Gallery.@Nullable Image received, List<Decoded> decoded) {}

  /** A decoded picture; {@code id} and {@code at} find its figure and its codec. */
  record Decoded(Gallery.Decoded of, String id, int at, String bits, String psnr, String ssim) {}

  static GalleryView of(Gallery gallery, FigureGrid grid) {
    List<Noise> noises = new ArrayList<>();
    for (Gallery.Shown shown : gallery.noises()) {
      Condition noise = shown.noise();
      String title =
          new FigureGrid.Noise(noise.impairment(), noise.actsOn(), List.of(noise)).title();
      noises.add(
          new Noise(
              title,
              shown.subjects().stream()
                  .map(s -> new Subject(s, s.scenes().stream().map(c -> scene(c, grid)).toList()))
                  .toList()));
    }
    return new GalleryView(gallery.rule(), gallery.missing(), noises);
  }

  private static Scene scene(Gallery.Scene scene, FigureGrid grid) {
    Condition condition = scene.condition();
    return new Scene(
        MatrixTable.given(condition),
        scene.received() == null
            ? "The encoder saw the clean picture; " + condition.actsOn() + " were hurt on the way."
            : "",
        scene.received(),
        scene.decoded().stream()
            .map(
                d ->
                    new Decoded(
                        d,
                        grid.id(condition, d.codec()),
                        grid.place(d.codec()),
                        Numbers.significant(d.bitsPerPixel()),
                        Numbers.db(d.psnrDb()),
                        Numbers.index(d.ssim())))
            .toList());
  }
}
