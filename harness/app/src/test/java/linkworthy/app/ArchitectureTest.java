package linkworthy.app;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.base.DescribedPredicate;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import org.junit.jupiter.api.Test;

/** Who may do what in the runnable program. */
class ArchitectureTest {
  private static final JavaClasses CLASSES =
      new ClassFileImporter()
          .withImportOption(new ImportOption.DoNotIncludeTests())
          .importPackages("linkworthy");

  @Test
  void enoughClassesWereSeen() {
    assertThat(CLASSES.stream().filter(c -> !c.isMemberClass()).count()).isGreaterThan(120);
    assertThat(CLASSES.stream().map(JavaClass::getPackageName))
        .contains("linkworthy.app", "linkworthy.report", "linkworthy.trial", "linkworthy.corpus");
  }

  @Test
  void onlyTheCommandLinePrintsAndParses() {
    noClasses()
        .that()
        .resideOutsideOfPackage("linkworthy.app..")
        .should()
        .dependOnClassesThat()
        .resideInAnyPackage("picocli..", "me.tongfei..", "linkworthy.app..")
        .orShould()
        .accessField(System.class, "out")
        .orShould()
        .accessField(System.class, "err")
        .check(CLASSES);
  }

  @Test
  void onlyMainTouchesTheStreamsOfTheProcess() {
    noClasses()
        .that()
        .doNotHaveFullyQualifiedName(Main.class.getName())
        .should()
        .accessField(System.class, "out")
        .orShould()
        .accessField(System.class, "err")
        .orShould()
        .callMethod(System.class, "exit", int.class)
        .check(CLASSES);
  }

  @Test
  void reportsKnowNothingOfTrials() {
    DescribedPredicate<JavaClass> otherwiseOfThisProject =
        DescribedPredicate.describe(
            "of this project",
            c ->
                c.getPackageName().startsWith("linkworthy")
                    && !c.getPackageName().startsWith("linkworthy.report"));
    noClasses()
        .that()
        .resideInAPackage("linkworthy.report..")
        .should()
        .dependOnClassesThat(otherwiseOfThisProject)
        .check(CLASSES);
  }

  @Test
  void theRunnableProgramHasNoCluster() {
    noClasses()
        .should()
        .dependOnClassesThat()
        .resideInAPackage("org.apache.spark..")
        .check(CLASSES);
    ClassLoader loader = ArchitectureTest.class.getClassLoader();
    assertThat(loader.getResource("picocli/CommandLine.class")).isNotNull();
    assertThat(loader.getResource("org/apache/spark/SparkContext.class")).isNull();
  }
}
