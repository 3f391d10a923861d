package steelyard.balancer.live.http;

import java.net.InetSocketAddress;
import java.net.SocketAddress;
import java.nio.ByteBuffer;
import java.security.GeneralSecurityException;
import java.security.SecureRandom;
import java.util.Arrays;
import java.util.HexFormat;
import javax.crypto.Mac;
import javax.crypto.spec.SecretKeySpec;
import org.jspecify.annotations.Nullable;

/**
 * Made-up identifiers in place of addresses (RFC 7239, 6.3): the same for one address as long as the balancer runs, and
 * of no use to whoever wants the address, since the key is made at the start and told to nobody. Thread-safe.
 */
final class HiddenNames {
    private static final String ALGORITHM = "HmacSHA256";
    private static final int KEY_BYTES = 32;
    private static final int SHOWN_BYTES = 8;

    private final SecretKeySpec key;

    HiddenNames() {
        byte[] random = new byte[KEY_BYTES];
        new SecureRandom().nextBytes(random);
        key = new SecretKeySpec(random, ALGORITHM);
    }

    /** An underscore and hexadecimal digits; the port plays no part unless {@code withPort}. */
    String of(@Nullable SocketAddress address, boolean withPort) {
        if (!(address instanceof InetSocketAddress node) || node.getAddress() == null) {
            return "_unknown";
        }
        byte[] ip = node.getAddress().getAddress();
        ByteBuffer named = ByteBuffer.allocate(ip.length + Integer.BYTES).put(ip);
        named.putInt(withPort ? node.getPort() : -1);
        byte[] digest = digest(named.array());
        return "_" + HexFormat.of().formatHex(Arrays.copyOf(digest, SHOWN_BYTES));
    }

    private byte[] digest(byte[] named) {
        try {
            Mac mac = Mac.getInstance(ALGORITHM);
            mac.init(key);
            return mac.doFinal(named);
        } catch (GeneralSecurityException e) {
            throw new IllegalStateException("every Java platform has " + ALGORITHM, e);
        }
    }
}
