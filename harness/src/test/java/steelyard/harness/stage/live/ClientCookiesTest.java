package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;

import io.netty.handler.codec.http.DefaultHttpHeaders;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** What a client keeps of the cookies that it is given, and for how long; from several origins of time. */
class ClientCookiesTest {
    private long now;
    private final ClientCookies cookies = new ClientCookies(() -> now);

    private void given(String... fields) {
        HttpHeaders answer = new DefaultHttpHeaders();
        for (String field : fields) {
            answer.add(HttpHeaderNames.SET_COOKIE, field);
        }
        cookies.take(answer);
    }

    private @Nullable String shown() {
        HttpHeaders request = new DefaultHttpHeaders();
        cookies.show(request);
        return request.get(HttpHeaderNames.COOKIE);
    }

    private void pass(long seconds) {
        now += TimeUnit.SECONDS.toNanos(seconds);
    }

    @ParameterizedTest
    @ValueSource(longs = {0, -1, Long.MAX_VALUE - 1_000_000_000L, Long.MIN_VALUE})
    void cookie_pastItsMaxAge_isNotShown(long origin) {
        now = origin;
        given("berth=1; Max-Age=10", "tide=high");
        pass(9);
        assertThat(shown()).isEqualTo("berth=1; tide=high");
        pass(1);
        assertThat(shown()).isEqualTo("tide=high");
    }

    @ParameterizedTest
    @ValueSource(longs = {0, -1, Long.MAX_VALUE - 1_000_000_000L, Long.MIN_VALUE})
    void cookie_givenAnew_lastsFromThen(long origin) {
        now = origin;
        given("berth=1; Max-Age=10");
        pass(9);
        given("berth=1; Max-Age=10");
        pass(9);
        assertThat(shown()).isEqualTo("berth=1");
        pass(1);
        assertThat(shown()).isNull();
    }

    @ParameterizedTest
    @ValueSource(strings = {"0", "-5"})
    void cookie_ofNoAge_isDropped(String age) {
        given("berth=1");
        given("berth=1; Max-Age=" + age);
        assertThat(shown()).isNull();
    }
}
