package steelyard.drills.model;

import java.util.List;

/**
 * What a cue acts on or an expectation looks at.
 *
 * @param kind how the file named it
 * @param name the backend, host, zone or pool; a list joined by commas
 * @param backends the backends meant, in stage order, at least one
 */
public record Target(Kind kind, String name, List<String> backends) {
    public Target {
        backends = List.copyOf(backends);
        Check.that(!backends.isEmpty(), "target %s has no backend", name);
    }

    /** As a person reads it: {@code fulmar}, {@code host north-quay}. */
    public String text() {
        return kind == Kind.BACKENDS ? name : kind.word() + " " + name;
    }

    /** How a target is named. */
    public enum Kind implements Worded {
        /** One backend, a list, or an entry with {@code times:}. */
        BACKENDS("backend"),
        HOST("host"),
        ZONE("zone"),
        POOL("pool");

        private final String word;

        Kind(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }
}
