package steelyard.drills.read;

import java.util.List;
import java.util.Optional;

/**
 * What reading a text came to: a value and perhaps notices, or no value and at least one problem.
 *
 * @param value present exactly when none of the problems is of severity {@code PROBLEM}
 * @param problems problems or, beside a value, notices, in the order of the file
 */
public record Parsed<T>(Optional<T> value, List<Problem> problems) {
    public Parsed {
        problems = List.copyOf(problems);
        boolean refused = problems.stream().anyMatch(p -> p.severity() == Problem.Severity.PROBLEM);
        if (value.isPresent() == refused) {
            throw new IllegalArgumentException("a value or problems, not both and not neither");
        }
    }

    /** Whether there is a value. */
    public boolean ok() {
        return value.isPresent();
    }
}
