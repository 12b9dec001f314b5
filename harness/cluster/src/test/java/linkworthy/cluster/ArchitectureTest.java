package linkworthy.cluster;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import org.junit.jupiter.api.Test;

/** The cluster stands beside the command line, on the engine. */
class ArchitectureTest {
  private static final JavaClasses CLASSES =
      new ClassFileImporter()
          .withImportOption(new ImportOption.DoNotIncludeTests())
          .importPackages("linkworthy");

  @Test
  void neitherTheCommandLineNorItsPagesAreUsed() {
    assertThat(CLASSES.stream().filter(c -> c.getPackageName().equals("linkworthy.cluster")))
        .hasSizeGreaterThan(8);
    noClasses()
        .should()
        .dependOnClassesThat()
        .resideInAnyPackage("linkworthy.app..", "linkworthy.report..", "org.thymeleaf..")
        .check(CLASSES);
    noClasses()
        .that()
        .resideOutsideOfPackage("linkworthy.cluster..")
        .should()
        .dependOnClassesThat()
        .resideInAnyPackage("org.apache.spark..", "org.apache.hadoop..", "scala..")
        .check(CLASSES);
  }
}
