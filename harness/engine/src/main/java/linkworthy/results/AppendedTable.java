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

  AppendedTable(CsvTable<T> table, Path file) {
    this.table = table;
    this.file = file;
    try {
      channel = FileChannel.open(file, StandardOpenOption.CREATE_NEW, StandardOpenOption.WRITE);
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", file, e);
    }
    write(table.header());
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
