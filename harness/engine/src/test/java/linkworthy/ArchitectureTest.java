package linkworthy;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import com.tngtech.archunit.library.dependencies.SlicesRuleDefinition;
import org.junit.jupiter.api.Test;

/** The arrows between the rooms of the house. */
class ArchitectureTest {
  private static final JavaClasses CLASSES =
      new ClassFileImporter()
          .withImportOption(new ImportOption.DoNotIncludeTests())
          .importPackages("linkworthy");

  private static void mayNotUse(String from, String... to) {
    noClasses()
        .that()
        .resideInAnyPackage(from)
        .should()
        .dependOnClassesThat()
        .resideInAnyPackage(to)
        .check(CLASSES);
  }

  @Test
  void enoughClassesWereSeen() {
    assertThat(CLASSES.stream().filter(c -> !c.isMemberClass()).count()).isGreaterThan(90);
  }

  @Test
  void modulesPointOneWay() {
    mayNotUse("linkworthy.input..", "linkworthy.corpus..", "linkworthy.noise..");
    mayNotUse("linkworthy.corpus..", "linkworthy.noise..", "linkworthy.codec..");
    mayNotUse(
        "linkworthy.noise..",
        "linkworthy.codec..",
        "linkworthy.link..",
        "linkworthy.quality..",
        "linkworthy.study..",
        "linkworthy.trial..",
        "linkworthy.statistics..",
        "linkworthy.results..");
  }

  @Test
  void packagesOfTheEngineFollowTheOrderInWhichAPictureMeetsThem() {
    mayNotUse(
        "linkworthy.link..", "linkworthy.codec..", "linkworthy.study..", "linkworthy.trial..");
    mayNotUse(
        "linkworthy.codec..",
        "linkworthy.quality..",
        "linkworthy.study..",
        "linkworthy.trial..",
        "linkworthy.statistics..",
        "linkworthy.results..");
    mayNotUse(
        "linkworthy.quality..",
        "linkworthy.study..",
        "linkworthy.trial..",
        "linkworthy.statistics..",
        "linkworthy.results..");
    mayNotUse(
        "linkworthy.study..",
        "linkworthy.trial..",
        "linkworthy.statistics..",
        "linkworthy.results..");
    mayNotUse("linkworthy.trial..", "linkworthy.statistics..", "linkworthy.results..");
    mayNotUse("linkworthy.statistics..", "linkworthy.results..");
    noClasses()
        .that()
        .resideInAnyPackage(
            "linkworthy.link..",
            "linkworthy.codec..",
            "linkworthy.quality..",
            "linkworthy.study..",
            "linkworthy.trial..",
            "linkworthy.statistics..",
            "linkworthy.results..")
        .should()
        .dependOnClassesThat()
        .resideInAnyPackage("linkworthy.decision..")
        .check(CLASSES);
  }

  @Test
  void packagesHaveNoCycles() {
    SlicesRuleDefinition.slices()
        .matching("linkworthy.(*)..")
        .should()
        .beFreeOfCycles()
        .check(CLASSES);
  }

  @Test
  void theEngineKnowsNoCommandLineNoPagesAndNoCluster() {
    mayNotUse(
        "linkworthy..", "picocli..", "org.thymeleaf..", "org.apache.spark..", "linkworthy.app..");
    noClasses()
        .should()
        .accessField(System.class, "out")
        .orShould()
        .accessField(System.class, "err")
        .check(CLASSES);
  }

  /** Math may differ in the last bit between machines; StrictMath does not. */
  @Test
  void onlyStrictArithmetic() {
    noClasses()
        .should()
        .callMethod(Math.class, "sin", double.class)
        .orShould()
        .callMethod(Math.class, "cos", double.class)
        .orShould()
        .callMethod(Math.class, "exp", double.class)
        .orShould()
        .callMethod(Math.class, "log", double.class)
        .orShould()
        .callMethod(Math.class, "log10", double.class)
        .orShould()
        .callMethod(Math.class, "pow", double.class, double.class)
        .orShould()
        .callMethod(Math.class, "fma", double.class, double.class, double.class)
        .check(CLASSES);
  }
}
