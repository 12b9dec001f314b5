package linkworthy.codec;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.lang.reflect.InvocationTargetException;
import java.net.URL;
import java.net.URLClassLoader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.jar.JarFile;
import java.util.stream.Stream;
import java.util.zip.ZipEntry;
import java.util.zip.ZipException;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.jspecify.annotations.Nullable;

/**
 * A folder with jars of the user's own codecs. All its jars share one class loader below the
 * program's own, so a codec may bring the libraries it needs as further jars. Each jar that has
 * codecs names their {@link CodecFamily} classes in {@code META-INF/services}, one a line, as for
 * {@link java.util.ServiceLoader}; the lines are read here, because an error has to name the jar.
 *
 * <p>A plugin runs with all rights of the program. Close the folder when no codec of it is in use
 * any more.
 */
public final class PluginFolder implements AutoCloseable {
  private static final String SERVICES = "META-INF/services/";
  private static final String CODECS = SERVICES + CodecFamily.class.getName();
  private static final List<String> NOT_TAKEN =
      List.of("linkworthy.noise.NoiseProcess", "linkworthy.quality.QualityMeasure");

  private final List<Jar> jars;
  private final List<CodecFamily> families;
  private final @Nullable URLClassLoader loader;

  private PluginFolder(
      List<Jar> jars, List<CodecFamily> families, @Nullable URLClassLoader loader) {
    this.jars = List.copyOf(jars);
    this.families = List.copyOf(families);
    this.loader = loader;
  }

  /**
   * A jar of the folder.
   *
   * @param name of the file
   * @param sha256 of its bytes, in hex
   */
  public record Jar(String name, String sha256) {}

  /** No plugins. */
  public static PluginFolder none() {
    return new PluginFolder(List.of(), List.of(), null);
  }

  /**
   * Loads the jars of a folder, in the order of their names.
   *
   * @throws BadInput if the folder is none or has no codec, or a jar or a class in it cannot be
   *     used; one line that names jar and class
   * @throws Unavailable if a file cannot be read
   */
  public static PluginFolder open(Path folder) {
    List<Path> files = jarFiles(folder);
    List<Jar> jars = new ArrayList<>();
    List<URL> addresses = new ArrayList<>();
    try {
      for (Path file : files) {
        if (!Files.isRegularFile(file)) {
          throw new BadInput(origin(file) + " is no jar: it is no file");
        }
        jars.add(new Jar(String.valueOf(file.getFileName()), sha256(file)));
        addresses.add(file.toUri().toURL());
      }
    } catch (IOException e) {
      throw Unavailable.cannot("read the plugins in " + folder, e);
    }
    URLClassLoader loader =
        new URLClassLoader(addresses.toArray(new URL[0]), CodecFamily.class.getClassLoader());
    PluginFolder opened = null;
    try {
      List<CodecFamily> families = new ArrayList<>();
      for (Path file : files) {
        for (String name : services(file)) {
          families.add(family(file, name, loader));
        }
      }
      if (families.isEmpty()) {
        throw new BadInput(
            folder + " has no jar with a codec; accepted: jars that name theirs in " + CODECS);
      }
      opened = new PluginFolder(jars, families, loader);
      return opened;
    } finally {
      if (opened == null) {
        close(loader);
      }
    }
  }

  private static List<Path> jarFiles(Path folder) {
    if (!Files.isDirectory(folder)) {
      throw new BadInput(
          folder
              + (Files.exists(folder) ? " is no folder" : " does not exist")
              + "; accepted: a folder with plugin jars");
    }
    try (Stream<Path> files = Files.list(folder)) {
      List<Path> jars = files.filter(file -> file.toString().endsWith(".jar")).sorted().toList();
      if (jars.isEmpty()) {
        throw new BadInput(folder + " has no jar; accepted: a folder with plugin jars");
      }
      return jars;
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  private static String sha256(Path file) throws IOException {
    try (InputStream in = Files.newInputStream(file)) {
      MessageDigest digest = MessageDigest.getInstance("SHA-256");
      byte[] some = new byte[1 << 16];
      for (int n = in.read(some); n >= 0; n = in.read(some)) {
        digest.update(some, 0, n);
      }
      return HexFormat.of().formatHex(digest.digest());
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java has SHA-256", e);
    }
  }

  /** The codec classes that a jar names; none where it is a library. */
  private static List<String> services(Path file) {
    try (JarFile jar = new JarFile(file.toFile())) {
      for (String service : NOT_TAKEN) {
        if (jar.getEntry(SERVICES + service) != null) {
          throw new BadInput(
              origin(file)
                  + " names a "
                  + service
                  + " in "
                  + SERVICES
                  + "; accepted: codecs alone are taken from plugins");
        }
      }
      ZipEntry entry = jar.getEntry(CODECS);
      if (entry == null) {
        return List.of();
      }
      try (BufferedReader lines =
          new BufferedReader(
              new InputStreamReader(jar.getInputStream(entry), StandardCharsets.UTF_8))) {
        return lines
            .lines()
            .map(line -> line.replaceFirst("#.*", "").strip())
            .filter(line -> !line.isEmpty())
            .distinct()
            .toList();
      }
    } catch (ZipException e) {
      throw new BadInput(origin(file) + " is no jar: " + e.getMessage(), e);
    } catch (IOException | SecurityException e) {
      throw new BadInput(origin(file) + " cannot be read as a jar: " + e.getMessage(), e);
    }
  }

  private static CodecFamily family(Path file, String name, ClassLoader loader) {
    String origin = origin(file) + ", class " + name;
    try {
      Object made = loader.loadClass(name).getConstructor().newInstance();
      if (made instanceof CodecFamily family) {
        return new PluginFamily(family, origin);
      }
      throw new BadInput(origin + " is no codec; accepted: a " + CodecFamily.class.getName());
    } catch (ClassNotFoundException e) {
      throw new BadInput(origin + " is named in " + CODECS + " and is not in the jar", e);
    } catch (UnsupportedClassVersionError e) {
      throw new BadInput(
          origin
              + " is compiled for a newer Java than this one, "
              + Runtime.version().feature()
              + "; accepted: a class compiled with --release "
              + Runtime.version().feature()
              + " or less",
          e);
    } catch (NoSuchMethodException | IllegalAccessException | InstantiationException e) {
      throw new BadInput(
          origin
              + " cannot be made; accepted: a public class with a public constructor of no"
              + " parameters",
          e);
    } catch (InvocationTargetException e) {
      throw new BadInput(origin + " failed in its constructor: " + e.getCause(), e);
    } catch (LinkageError e) {
      throw new BadInput(origin + " cannot be loaded: " + e, e);
    }
  }

  private static String origin(Path file) {
    return "plugin " + file.getFileName();
  }

  /** All jars, those of libraries included, in the order of their names. */
  public List<Jar> jars() {
    return jars;
  }

  /** The codec families of all jars. */
  public List<CodecFamily> families() {
    return families;
  }

  /** Lets go of the jars. */
  @Override
  public void close() {
    if (loader != null) {
      close(loader);
    }
  }

  private static void close(URLClassLoader loader) {
    try {
      loader.close();
    } catch (IOException e) {
      throw Unavailable.cannot("close the plugins", e);
    }
  }
}
