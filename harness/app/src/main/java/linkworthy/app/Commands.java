package linkworthy.app;

import picocli.CommandLine;

/** Makes commands, handing the surroundings to those that ask for them in their constructor. */
final class Commands implements CommandLine.IFactory {
  private final Surroundings surroundings;

  Commands(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public <K> K create(Class<K> type) throws Exception {
    for (var constructor : type.getDeclaredConstructors()) {
      if (constructor.getParameterCount() == 1
          && constructor.getParameterTypes()[0] == Surroundings.class) {
        return type.cast(constructor.newInstance(surroundings));
      }
    }
    return CommandLine.defaultFactory().create(type);
  }
}
