package linkworthy.app;

/** The program. */
public final class Main {
  private Main() {}

  public static void main(String[] arguments) {
    System.out.println("linkworthy");
  }
}
