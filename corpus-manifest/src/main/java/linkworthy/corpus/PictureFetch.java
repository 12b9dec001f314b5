package linkworthy.corpus;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.net.ConnectException;
import java.net.URI;
import java.net.http.HttpClient;
import java.net.http.HttpHeaders;
import java.net.http.HttpRequest;
import java.net.http.HttpResponse;
import java.net.http.HttpResponse.BodySubscribers;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.UnresolvedAddressException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import java.time.Duration;
import java.util.Objects;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.concurrent.atomic.AtomicLong;
import javax.net.ssl.SSLException;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/**
 * Fetches pictures that are listed with an address, over https (or http on this machine), with at
 * most 3 redirects. A picture is written beside its place as {@code <file>.part} and moved there
 * once its SHA-256 is the manifest's; nothing else is touched. A part that was left is continued by
 * a range request with {@code If-Range} (RFC 9110, sections 13.1.5 and 14) if the server named the
 * version it sent, kept in {@code <file>.part.from}; a server that has another version, or knows no
 * ranges, sends all of it again.
 *
 * <p>Refused: more bytes than the announced picture may have, a server from which nothing comes for
 * the patience given, a fetch of more than 15 minutes, and files whose path leaves the manifest's
 * folder.
 */
public final class PictureFetch {
  /** What came of one picture. */
  public enum Outcome {
    /** It was fetched and is what the manifest says. */
    FETCHED,
    /** It was there already. */
    HERE,
    /** The manifest has no address for it. */
    WITHOUT_ADDRESS
  }

  private static final int MAX_REDIRECTS = 3;
  private static final int OK = 200;
  private static final int PARTIAL = 206;
  private static final int RANGE_NOT_SATISFIABLE = 416;
  private static final int MAX_VERSION_LENGTH = 500;
  private static final Duration LONGEST = Duration.ofMinutes(15);

  private final Manifest manifest;
  private final Path folder;
  private final Duration patience;
  private final HttpClient client;

  /**
   * @param patience how long to wait for a connection, an answer or the next bytes
   * @throws BadInput if the manifest's pictures are not in a folder
   */
  public PictureFetch(Manifest manifest, Duration patience) {
    this.manifest = manifest;
    this.folder =
        manifest
            .folder()
            .orElseThrow(
                () ->
                    new BadInput(
                        manifest.source()
                            + " is complete and nothing is fetched for it; accepted: --manifest FILE"));
    this.patience = patience;
    this.client =
        HttpClient.newBuilder()
            .version(HttpClient.Version.HTTP_1_1)
            .followRedirects(HttpClient.Redirect.NEVER)
            .connectTimeout(patience)
            .build();
  }

  /**
   * Fetches one picture if it has an address and is not there.
   *
   * @throws BadInput if what came, or what stands in its place, is not what the manifest says
   * @throws Unavailable if it cannot be fetched or written; one line says why
   */
  public Outcome fetch(ManifestEntry entry) {
    Optional<Finding> finding = manifest.check(entry);
    if (finding.isEmpty()) {
      return Outcome.HERE;
    }
    Optional<URI> address = Address.of(entry.address());
    if (address.isEmpty()) {
      return Outcome.WITHOUT_ADDRESS;
    }
    if (finding.get().kind() != Finding.Kind.MISSING
        || Files.exists(folder.resolve(entry.file()), LinkOption.NOFOLLOW_LINKS)) {
      throw new BadInput(finding.get().message() + "; it is in the way and was not replaced");
    }
    Path target = place(entry);
    Part part = new Part(sibling(target, ".part"), sibling(target, ".part.from"));
    try {
      download(entry, address.get(), part);
      moveIn(entry, part, target);
    } catch (IOException e) {
      throw Unavailable.cannot("write picture " + target, e);
    }
    return Outcome.FETCHED;
  }

  private static Path sibling(Path file, String ending) {
    return file.resolveSibling(file.getFileName() + ending);
  }

  /** The file's place, its folders made; each of them is checked to lie inside before the next. */
  private Path place(ManifestEntry entry) {
    String[] steps = entry.file().split("/", -1);
    try {
      Path root = folder.toRealPath();
      Path at = root;
      for (int i = 0; i < steps.length - 1; i++) {
        at = at.resolve(steps[i]);
        if (!Files.exists(at, LinkOption.NOFOLLOW_LINKS)) {
          Files.createDirectory(at);
        }
        at = at.toRealPath();
        if (!at.startsWith(root)) {
          throw new BadInput(
              "file is '" + entry.file() + "', a link that leaves the manifest's folder");
        }
      }
      return at.resolve(steps[steps.length - 1]);
    } catch (IOException e) {
      throw Unavailable.cannot("make the folder of picture " + entry.file(), e);
    }
  }

  private void moveIn(ManifestEntry entry, Part part, Path target) throws IOException {
    byte[] bytes = Files.readAllBytes(part.file);
    String found = Manifest.sha256(bytes);
    part.forget();
    if (!found.equals(entry.sha256())) {
      Files.delete(part.file);
      throw new BadInput(
          entry.address() + " has SHA-256 " + found + "; expected " + entry.sha256());
    }
    Files.move(part.file, target, StandardCopyOption.ATOMIC_MOVE);
  }

  private void download(ManifestEntry entry, URI address, Part part) throws IOException {
    URI at = address;
    boolean restarted = false;
    for (int redirects = 0; redirects <= MAX_REDIRECTS; ) {
      Body body = new Body(part, Manifest.limit(entry), at);
      HttpResponse<Void> response = send(at, part, body);
      int status = response.statusCode();
      if (status == OK || status == PARTIAL) {
        return;
      }
      if (status == RANGE_NOT_SATISFIABLE && !restarted) {
        part.forget();
        restarted = true;
      } else if (status / 100 == 3 && response.headers().firstValue("location").isPresent()) {
        at = redirect(at, response.headers().firstValue("location").get());
        redirects++;
      } else {
        throw new Unavailable("cannot fetch " + at + ": the server answers " + status);
      }
    }
    throw new Unavailable(
        "cannot fetch " + address + ": more than " + MAX_REDIRECTS + " redirects");
  }

  private static URI redirect(URI from, String location) {
    Optional<URI> to = Optional.empty();
    try {
      to = Address.of(from.resolve(location));
    } catch (IllegalArgumentException e) {
      to = Optional.empty();
    }
    return to.orElseThrow(
        () ->
            new Unavailable(
                "cannot fetch " + from + ": redirected to '" + location + "'; accepted: https"));
  }

  private HttpResponse<Void> send(URI at, Part part, Body body) throws IOException {
    HttpRequest.Builder request = HttpRequest.newBuilder(at).GET();
    Optional<String> version = part.version();
    if (version.isPresent() && part.length() > 0) {
      request.header("Range", "bytes=" + part.length() + "-");
      request.header("If-Range", version.get());
    }
    CompletableFuture<HttpResponse<Void>> answer = client.sendAsync(request.build(), body::open);
    try {
      return await(answer, body, at);
    } finally {
      answer.cancel(true);
      body.close();
    }
  }

  /** Waits as long as something comes within the patience. */
  private HttpResponse<Void> await(
      CompletableFuture<HttpResponse<Void>> answer, Body body, URI at) {
    long end = System.nanoTime() + LONGEST.toNanos();
    while (true) {
      long before = body.received.get();
      try {
        return answer.get(patience.toMillis(), TimeUnit.MILLISECONDS);
      } catch (TimeoutException e) {
        if (body.received.get() == before || System.nanoTime() > end) {
          throw new Unavailable(
              "cannot fetch "
                  + at
                  + ": nothing came for "
                  + patience.toMillis() / 1000.0
                  + " s after "
                  + before
                  + " bytes",
              e);
        }
      } catch (InterruptedException e) {
        Thread.currentThread().interrupt();
        throw new Unavailable("cannot fetch " + at + ": interrupted", e);
      } catch (ExecutionException e) {
        throw failed(at, e);
      }
    }
  }

  private static Unavailable failed(URI at, ExecutionException problem) {
    for (Throwable cause = problem; cause != null; cause = cause.getCause()) {
      if (cause instanceof Unavailable known) {
        return known;
      }
      if (cause instanceof UncheckedIOException && cause.getCause() instanceof IOException file) {
        return Unavailable.cannot("keep what " + at + " sends", file);
      }
    }
    Throwable cause = problem.getCause() == null ? problem : problem.getCause();
    return new Unavailable("cannot fetch " + at + ": " + reason(at, cause), problem);
  }

  private static String reason(URI at, Throwable cause) {
    String message = Objects.requireNonNullElse(cause.getMessage(), "");
    if (message.contains("EOF") || message.contains("fixed content-length")) {
      return "the connection ended before all was sent; run it again to continue";
    }
    if (cause instanceof ConnectException) {
      return cause.getCause() instanceof UnresolvedAddressException
          ? "no host of the name " + at.getHost() + " is known"
          : "the host takes no connection at that port";
    }
    if (cause instanceof SSLException) {
      return "no safe connection: " + message;
    }
    return (cause.getClass().getSimpleName() + " " + message).strip();
  }

  /** What has come of a picture so far, and the version it is of. */
  private record Part(Path file, Path from) {
    long length() throws IOException {
      return Files.isRegularFile(file, LinkOption.NOFOLLOW_LINKS) ? Files.size(file) : 0;
    }

    Optional<String> version() throws IOException {
      if (!Files.isRegularFile(from, LinkOption.NOFOLLOW_LINKS)
          || Files.size(from) > MAX_VERSION_LENGTH) {
        return Optional.empty();
      }
      return Optional.of(Files.readString(from)).filter(Part::isHeaderValue);
    }

    private static boolean isHeaderValue(String text) {
      return !text.isBlank() && text.chars().allMatch(c -> c >= ' ' && c < 0x7f);
    }

    void forget() throws IOException {
      Files.deleteIfExists(from);
    }

    /** Begins anew with the version that the server names: a strong tag, or else a date. */
    void begin(HttpHeaders headers) throws IOException {
      Files.deleteIfExists(file);
      forget();
      Optional<String> version =
          headers
              .firstValue("etag")
              .filter(tag -> !tag.startsWith("W/"))
              .or(() -> headers.firstValue("last-modified"))
              .filter(text -> text.length() <= MAX_VERSION_LENGTH && isHeaderValue(text));
      if (version.isPresent()) {
        Files.write(
            from, version.get().getBytes(StandardCharsets.US_ASCII), StandardOpenOption.CREATE_NEW);
      }
    }
  }

  /** Writes what comes to the part, as long as it is not too much. */
  private static final class Body {
    private final Part part;
    private final long limit;
    private final URI at;
    private final AtomicLong received = new AtomicLong();
    private Optional<FileChannel> channel = Optional.empty();
    private boolean closed;
    private long length;

    Body(Part part, long limit, URI at) {
      this.part = part;
      this.limit = limit;
      this.at = at;
    }

    HttpResponse.BodySubscriber<Void> open(HttpResponse.ResponseInfo info) {
      received.incrementAndGet();
      if (info.statusCode() != OK && info.statusCode() != PARTIAL) {
        return BodySubscribers.replacing(null);
      }
      try {
        openFile(info);
      } catch (IOException e) {
        throw new UncheckedIOException(e);
      }
      return BodySubscribers.ofByteArrayConsumer(bytes -> bytes.ifPresent(this::keep));
    }

    private synchronized void openFile(HttpResponse.ResponseInfo info) throws IOException {
      long there = part.length();
      boolean more = info.statusCode() == PARTIAL;
      String range = info.headers().firstValue("content-range").orElse("");
      if (more && !range.startsWith("bytes " + there + "-")) {
        throw new Unavailable("cannot fetch " + at + ": it sends '" + range + "' of a picture");
      }
      if (!more) {
        part.begin(info.headers());
        there = 0;
      }
      length = there;
      long announced = info.headers().firstValueAsLong("content-length").orElse(0);
      requireRoom(announced);
      StandardOpenOption how = more ? StandardOpenOption.APPEND : StandardOpenOption.CREATE_NEW;
      channel = Optional.of(FileChannel.open(part.file, StandardOpenOption.WRITE, how));
    }

    private void requireRoom(long more) {
      if (length + more > limit) {
        throw new Unavailable(
            "cannot fetch "
                + at
                + ": it sends more than "
                + limit
                + " bytes, the most for the announced picture");
      }
    }

    private synchronized void keep(byte[] bytes) {
      if (closed || channel.isEmpty()) {
        return;
      }
      requireRoom(bytes.length);
      try {
        ByteBuffer buffer = ByteBuffer.wrap(bytes);
        while (buffer.hasRemaining()) {
          channel.get().write(buffer);
        }
      } catch (IOException e) {
        throw new UncheckedIOException(e);
      }
      length += bytes.length;
      received.addAndGet(bytes.length);
    }

    synchronized void close() throws IOException {
      closed = true;
      if (channel.isPresent()) {
        channel.get().close();
      }
    }
  }
}
