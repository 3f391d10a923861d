package steelyard.harness.stage.live;

import java.util.Set;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;

/** What an answer, or the lack of its rest, means for a request. */
final class Answer {
    private static final int FIRST_SERVER_ERROR = 500;

    /** The error parameter of a member of Proxy-Status (RFC 9209, section 2.1.1); a token, so never quoted. */
    private static final Pattern ERROR = Pattern.compile(";\\s*error=([a-z_]+)(;\\s*details=\"cut\")?");

    private Answer() {}

    /**
     * Why a complete answer is no good, or null for a good one.
     *
     * @param good statuses that are good; empty for any below 500
     * @param proxyStatus the balancer's Proxy-Status field, or null where it sent none: the answer is the backend's own
     */
    static @Nullable Cause cause(int status, Set<Integer> good, @Nullable String proxyStatus) {
        Cause byBalancer = proxyStatus == null ? null : byBalancer(proxyStatus);
        if (byBalancer != null) {
            return byBalancer;
        }
        boolean isGood = good.isEmpty() ? status < FIRST_SERVER_ERROR : good.contains(status);
        return isGood ? null : Cause.BACKEND_ERROR;
    }

    /** Why an answer that had begun stopped short; {@code brokenOff} is what the balancer says it did, if it did. */
    static Cause cutShort(@Nullable Outcome brokenOff) {
        if (brokenOff == Outcome.CUT) {
            return Cause.CUT;
        }
        return brokenOff == Outcome.STALLED ? Cause.TIMED_OUT : Cause.RESET;
    }

    /** The last member counts: it is the one added nearest to the client. */
    private static @Nullable Cause byBalancer(String proxyStatus) {
        Matcher matcher = ERROR.matcher(proxyStatus);
        Cause cause = null;
        while (matcher.find()) {
            cause = ofError(matcher.group(1), matcher.group(2) != null);
        }
        return cause;
    }

    /** Error types of RFC 9209, section 2.3, that the balancer uses. */
    private static Cause ofError(String error, boolean cut) {
        return switch (error) {
            case "destination_unavailable" -> Cause.NO_BACKEND;
            case "connection_refused", "connection_timeout", "tls_protocol_error" -> Cause.REFUSED;
            case "connection_terminated" -> cut ? Cause.CUT : Cause.RESET;
            case "http_response_timeout" -> Cause.GATEWAY_TIMEOUT;
            case "connection_read_timeout" -> Cause.TIMED_OUT;
            default -> Cause.BAD_GATEWAY;
        };
    }
}
