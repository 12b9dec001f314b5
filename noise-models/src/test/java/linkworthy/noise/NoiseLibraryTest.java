package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;

class NoiseLibraryTest {
  @Test
  void indexListsEveryFileOfTheLibrary() throws IOException {
    List<String> names = NoiseLibrary.shipped().stream().map(m -> m.id() + ".yaml").toList();
    try (Stream<Path> files = Files.list(Path.of("library"))) {
      assertThat(files.map(file -> file.getFileName().toString()).filter(n -> n.endsWith(".yaml")))
          .containsExactlyInAnyOrderElementsOf(names);
    }
    assertThat(names).doesNotHaveDuplicates().contains("gaussian.yaml", "burst-loss.yaml");
  }

  @Test
  void everyProcessHasAModelOfItsOwnNameThatOffersAllItsAxesAndSites() {
    for (NoiseProcess process : NoiseProcesses.all().values()) {
      NoiseModel model = NoiseLibrary.find(process.id());
      assertThat(model.implementation()).hasSameClassAs(process);
      assertThat(model.parameters()).isEqualTo(process.parameters());
      assertThat(model.actsOn()).isEqualTo(process.sites());
      assertThat(model.axes()).containsExactlyElementsOf(process.axes());
      assertThat(model.source()).isNotBlank();
    }
  }

  /** A study leaves them out at the process's default, so the model must have that as well. */
  @Test
  void shippedModelsKeepTheDefaultsOfLaterParameters() {
    for (NoiseModel model : NoiseLibrary.shipped()) {
      assertThat(model.recordedParameters())
          .as(model.id())
          .doesNotContainKeys(model.implementation().laterParameters().toArray(String[]::new));
    }
  }

  @Test
  void everyCurveHasAModelThatOffersItsRatio() {
    for (ErrorCurve curve : ErrorCurve.values()) {
      NoiseModel model = NoiseLibrary.find("radio-" + curve.id());
      assertThat(model.implementation()).isEqualTo(new BitErrors(curve));
      assertThat(model.axes()).containsExactlyInAnyOrderElementsOf(model.implementation().axes());
      assertThat(model.parameters()).containsEntry(BitErrors.FRAME_CHECK, 1.0);
      assertThat(model.canonical()).contains("\nsetting.curve: " + curve.id() + "\n");
    }
  }

  @Test
  void unknownModelIsRefusedWithWhatExists() {
    assertThatThrownBy(() -> NoiseLibrary.find("gausian"))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "no noise model 'gausian'; did you mean 'gaussian'? accepted: "
                + String.join(", ", NoiseLibrary.shipped().stream().map(NoiseModel::id).toList()));
  }

  @Test
  void unknownProcessIsRefusedWithWhatExists() {
    assertThatThrownBy(() -> NoiseProcesses.find("snow"))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "no noise process 'snow'; accepted: "
                + String.join(", ", NoiseProcesses.all().keySet()))
        .hasMessageContaining("burst-loss");
  }

  @Test
  void twoProcessesWithOneIdStopTheProgram() {
    assertThatThrownBy(
            () -> NoiseProcesses.index(List.of(new GaussianNoise(), new GaussianNoise())))
        .isInstanceOf(IllegalStateException.class)
        .hasMessage(
            "noise process id 'gaussian' is used twice:"
                + " by linkworthy.noise.GaussianNoise and by linkworthy.noise.GaussianNoise");
  }
}
