package steelyard.backends.stub;

import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import steelyard.backends.behave.RouteDelay;

/**
 * Finds the answer to a request in a folder of mapping files. Called on the stub's event loop only.
 *
 * <p>Everything behind this interface loads with the first folder that is read, so that a play without one does not wait
 * for it.
 */
public interface Answers {

    /** A request as the mappings see it; the body is cut at {@link #MOST_BODY_BYTES}. */
    record Asked(String method, String target, List<Map.Entry<String, String>> headers, byte[] body) {}

    /** An answer, and what its route adds to the work of the request. */
    record Answer(int status, List<Map.Entry<String, String>> headers, byte[] body, RouteDelay delay) {}

    /** As much of a request's body as the mappings get to see. */
    int MOST_BODY_BYTES = 1 << 20;

    Answer find(Asked asked);

    /**
     * Reads a folder: {@code mappings/*.json}, or {@code *.json} where there is no such folder; bodies are taken from
     * {@code __files}.
     *
     * @throws BadAnswers if the folder or a file in it cannot be used
     */
    static Answers read(Path folder) throws BadAnswers {
        return MappedAnswers.read(folder);
    }
}
