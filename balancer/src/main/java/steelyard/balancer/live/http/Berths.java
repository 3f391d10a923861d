package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaders;
import java.nio.charset.StandardCharsets;
import java.security.GeneralSecurityException;
import java.security.MessageDigest;
import java.util.ArrayList;
import java.util.Base64;
import java.util.List;
import java.util.concurrent.TimeUnit;
import javax.crypto.Mac;
import javax.crypto.spec.SecretKeySpec;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * The cookies that hold clients to the backends of one pool.
 *
 * <p>A cookie says the backend's place in the pool, signed (HMAC-SHA256, RFC 2104) with a key of this start, so that nobody
 * can choose a backend by making one up. There are only as many cookies as backends: they are made once, and a request
 * costs a comparison. One that is not among them is ignored.
 */
final class Berths {
    private static final String MAC = "HmacSHA256";

    private final String name;
    private final int first;
    private final List<byte[]> values = new ArrayList<>();
    private final List<String> fields = new ArrayList<>();

    /**
     * @param first backend of the pool, by number
     * @param secret of this start
     */
    private Berths(AffinitySettings affinity, PoolSettings pool, int first, byte[] secret) {
        this.name = affinity.cookie();
        this.first = first;
        String lasts = "; Path=/; Max-Age=" + Math.max(1, TimeUnit.NANOSECONDS.toSeconds(affinity.lastsNanos()))
                + "; HttpOnly; SameSite=Lax" + (pool.front().tls() == null ? "" : "; Secure");
        for (int member = 0; member < pool.backends().size(); member++) {
            String value = member + "." + signature(secret, pool.name() + "\n" + member);
            values.add(value.getBytes(StandardCharsets.ISO_8859_1));
            fields.add(name + "=" + value + lasts);
        }
    }

    /** Null for a pool that holds nobody by cookie. */
    static @Nullable Berths of(PoolSettings pool, int first, byte[] secret) {
        AffinitySettings affinity = pool.affinity();
        return affinity == null || affinity.by() != AffinitySettings.By.COOKIE
                ? null
                : new Berths(affinity, pool, first, secret);
    }

    private static String signature(byte[] secret, String text) {
        try {
            Mac mac = Mac.getInstance(MAC);
            mac.init(new SecretKeySpec(secret, MAC));
            byte[] signed = mac.doFinal(text.getBytes(StandardCharsets.UTF_8));
            return Base64.getUrlEncoder().withoutPadding().encodeToString(signed);
        } catch (GeneralSecurityException e) {
            throw new IllegalStateException("every Java has " + MAC, e);
        }
    }

    /** The backend that a request's cookie names, or {@link Decider#NOBODY}. */
    int held(HttpHeaders headers) {
        String given = Cookies.value(headers, name);
        int member = given == null ? -1 : place(given);
        if (given == null || member < 0 || member >= values.size()) {
            return Decider.NOBODY;
        }
        boolean genuine = MessageDigest.isEqual(given.getBytes(StandardCharsets.ISO_8859_1), values.get(member));
        return genuine ? first + member : Decider.NOBODY;
    }

    /** The Set-Cookie field that holds a client to a backend. */
    String field(int backend) {
        return fields.get(backend - first);
    }

    /** The number before the dot, or -1. */
    private static int place(String value) {
        int place = 0;
        int i = 0;
        while (i < value.length() && i < 7 && Character.digit(value.charAt(i), 10) >= 0) {
            place = place * 10 + Character.digit(value.charAt(i), 10);
            i++;
        }
        return i > 0 && i < value.length() && value.charAt(i) == '.' ? place : -1;
    }
}
