package linkworthy.app;

import java.io.IOException;
import java.io.OutputStream;
import java.io.StringWriter;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.jar.JarEntry;
import java.util.jar.JarOutputStream;
import java.util.stream.Stream;
import javax.tools.JavaCompiler;
import javax.tools.StandardJavaFileManager;
import javax.tools.ToolProvider;

/** Compiles sources against this program and makes jars of them. */
final class PluginJars {
  static final String SERVICE = "META-INF/services/linkworthy.codec.CodecFamily";

  private PluginJars() {}

  /** The example of the handbook. */
  static Path example() {
    return Path.of("../handbook/plugin-example");
  }

  /** Makes {@code thumbnail.jar} of the example's sources and resources. */
  static Path makeExample(Path folder) {
    Path main = example().resolve("src/main");
    Path classes = compile(folder.resolve("classes"), javaFiles(main.resolve("java")));
    return jar(
        folder.resolve("thumbnail.jar"),
        classes,
        Map.of(SERVICE, read(main.resolve("resources").resolve(SERVICE))));
  }

  /** Makes a jar of one class in the unnamed package, named by a service line. */
  static Path makeClass(Path jar, String name, String source) {
    Path folder = jar.resolveSibling(jar.getFileName() + ".d");
    try {
      Files.createDirectories(folder);
      Path file = Files.writeString(folder.resolve(name + ".java"), source);
      return jar(jar, compile(folder.resolve("classes"), List.of(file)), Map.of(SERVICE, name));
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  static List<Path> javaFiles(Path folder) {
    try (Stream<Path> files = Files.walk(folder)) {
      return files.filter(file -> file.toString().endsWith(".java")).sorted().toList();
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** Compiles with every warning an error. */
  static Path compile(Path classes, List<Path> sources) {
    JavaCompiler compiler = ToolProvider.getSystemJavaCompiler();
    StringWriter messages = new StringWriter();
    try (StandardJavaFileManager files =
        compiler.getStandardFileManager(null, null, StandardCharsets.UTF_8)) {
      Files.createDirectories(classes);
      List<String> options =
          List.of(
              "-Xlint:all,-classfile,-path,-processing,-requires-automatic",
              "-proc:none",
              "-Werror",
              "--release",
              "17",
              "-cp",
              System.getProperty("java.class.path"),
              "-d",
              classes.toString());
      boolean done =
          compiler
              .getTask(
                  messages, files, null, options, null, files.getJavaFileObjectsFromPaths(sources))
              .call();
      if (!done) {
        throw new IllegalStateException(messages.toString());
      }
      return classes;
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** A jar of a folder's class files and of some texts. */
  static Path jar(Path file, Path classes, Map<String, String> texts) {
    try (OutputStream out = Files.newOutputStream(file);
        JarOutputStream jar = new JarOutputStream(out);
        Stream<Path> walk = Files.walk(classes)) {
      for (Path entry : walk.filter(Files::isRegularFile).sorted().toList()) {
        jar.putNextEntry(new JarEntry(classes.relativize(entry).toString().replace('\\', '/')));
        jar.write(Files.readAllBytes(entry));
      }
      for (Map.Entry<String, String> text : texts.entrySet()) {
        jar.putNextEntry(new JarEntry(text.getKey()));
        jar.write(text.getValue().getBytes(StandardCharsets.UTF_8));
      }
      return file;
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  private static String read(Path file) {
    try {
      return Files.readString(file);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }
}
