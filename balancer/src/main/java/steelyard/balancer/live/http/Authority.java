package steelyard.balancer.live.http;

/** Host and port as RFC 3986, section 3.2, writes them. */
final class Authority {
    private static final boolean[] ALLOWED = new boolean[128];

    static {
        String allowed = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-._~%!$&'()*+,;=:[]";
        for (int i = 0; i < allowed.length(); i++) {
            ALLOWED[allowed.charAt(i)] = true;
        }
    }

    private Authority() {}

    /** Whether a Host field may hold this; it may be empty, and names no user. */
    static boolean valid(CharSequence host) {
        for (int i = 0; i < host.length(); i++) {
            char c = host.charAt(i);
            if (c >= ALLOWED.length || !ALLOWED[c]) {
                return false;
            }
        }
        return true;
    }
}
