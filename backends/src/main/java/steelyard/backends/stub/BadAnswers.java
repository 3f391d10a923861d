package steelyard.backends.stub;

import org.jspecify.annotations.Nullable;

/** A folder of mapping files cannot be used. The message is one line, names the file and says what to do. */
public final class BadAnswers extends Exception {
    BadAnswers(String message) {
        this(message, null);
    }

    BadAnswers(String message, @Nullable Throwable cause) {
        super(message, cause);
    }
}
