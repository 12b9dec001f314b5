package linkworthy.results;

import java.io.IOException;
import java.nio.channels.FileChannel;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.List;

/**
 * A table that grows while a run goes on. A list of rows is handed to the system as a whole before
 * {@link #append} returns, so a killed run loses no list that was appended; after a failed append
 * the file is cut back to the rows before it.
 */
final class AppendedTable<T> implements AutoCloseable {
  private final CsvTable<T> table;
  private final Path file;
  private final FileChannel channel;

  private AppendedTable(CsvTable<T> table, Path file, FileChannel channel) {
    this.table = table;
    this.file = file;
    this.channel = channel;
  }

  /** A new table with its header; there must be no such file yet. */
  static <T> AppendedTable<T> create(CsvTable<T> table, Path file) {
    return open(table, file, 0, StandardOpenOption.CREATE_NEW);
  }

  /** A table that goes on behind its first bytes; whatever comes after them is cut off. */
  static <T> AppendedTable<T> reopen(CsvTable<T> table, Path file, long bytes) {
    return open(table, file, bytes, StandardOpenOption.CREATE);
  }

  private static <T> AppendedTable<T> open(
      CsvTable<T> table, Path file, long bytes, StandardOpenOption how) {
    AppendedTable<T> opened = new AppendedTable<>(table, file, channel(file, bytes, how));
    if (bytes == 0) {
      opened.writeHeader();
    }
    return opened;
  }

  private static FileChannel channel(Path file, long bytes, StandardOpenOption how) {
    try {
      FileChannel channel = FileChannel.open(file, how, StandardOpenOption.WRITE);
      try {
        return channel.truncate(bytes).position(bytes);
      } catch (IOException e) {
        channel.close();
        throw e;
      }
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", file, e);
    }
  }

  private void writeHeader() {
    try {
      write(table.header());
    } catch (RuntimeException e) {
      close();
      throw e;
    }
  }

  void append(List<T> rows) {
    write(table.lines(rows));
  }

  private void write(String text) {
    try {
      long before = channel.position();
      try {
        FolderFiles.writeFully(channel, text);
      } catch (IOException e) {
        channel.truncate(before);
        throw e;
      }
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", file, e);
    }
  }

  @Override
  public void close() {
    try (channel) {
      channel.force(true);
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", file, e);
    }
  }
}
