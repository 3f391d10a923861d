package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;

class AnswerTest {
    @ParameterizedTest
    @CsvSource({
        "503, steelyard; error=destination_unavailable, NO_BACKEND",
        "502, steelyard; error=connection_refused, REFUSED",
        "504, steelyard; error=connection_timeout, REFUSED",
        "502, steelyard; error=connection_terminated, RESET",
        "503, steelyard; error=connection_terminated; details=\"cut\", CUT",
        "504, steelyard; error=http_response_timeout, GATEWAY_TIMEOUT",
        "502, steelyard; error=http_protocol_error, BAD_GATEWAY",
        "504, steelyard;error=connection_read_timeout, TIMED_OUT",
        "502, 'inner; error=connection_refused, steelyard; error=http_protocol_error', BAD_GATEWAY",
    })
    void cause_ofTheBalancersOwnAnswer_isItsErrorType(int status, String proxyStatus, Cause cause) {
        assertThat(Answer.cause(status, Set.of(), proxyStatus)).isEqualTo(cause);
    }

    @ParameterizedTest
    @CsvSource({"200,", "404,", "499,", "500, BACKEND_ERROR", "503, BACKEND_ERROR"})
    void cause_ofABackendsAnswer_isItsStatus(int status, @Nullable Cause cause) {
        assertThat(Answer.cause(status, Set.of(), null)).isEqualTo(cause);
    }

    @ParameterizedTest
    @CsvSource({"200, BACKEND_ERROR", "404,", "503,"})
    void cause_withAListOfGoodStatuses_isTheirs(int status, @Nullable Cause cause) {
        assertThat(Answer.cause(status, Set.of(404, 503), null)).isEqualTo(cause);
    }

    @Test
    void cause_ofABackendThatAnsweredAndWasOnlyForwarded_isTheBackends() {
        assertThat(Answer.cause(503, Set.of(), "steelyard; received-status=503"))
                .isEqualTo(Cause.BACKEND_ERROR);
    }

    @ParameterizedTest
    @EnumSource(Outcome.class)
    void cutShort_isWhatTheBalancerDid_elseAReset(Outcome outcome) {
        Cause expected = switch (outcome) {
            case CUT -> Cause.CUT;
            case STALLED -> Cause.TIMED_OUT;
            case ANSWERED, REFUSED, RESET, BROKEN, MALFORMED, LATE, ABANDONED -> Cause.RESET;
        };
        assertThat(Answer.cutShort(outcome)).isEqualTo(expected);
        assertThat(Answer.cutShort(null)).isEqualTo(Cause.RESET);
    }
}
