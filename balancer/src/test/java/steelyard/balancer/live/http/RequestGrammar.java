package steelyard.balancer.live.http;

import java.util.List;
import java.util.SplittableRandom;

/** Makes requests by the grammar, and spoils some of them. All chance comes from the source that it is given. */
final class RequestGrammar {
    private static final List<String> METHODS =
            List.of("GET", "HEAD", "POST", "PUT", "DELETE", "OPTIONS", "PATCH", "DRILL", "TRACE");
    private static final List<String> TARGETS = List.of(
            "/", "/sailings/today", "/a%2Fb//c/../d?x=%41&&y=1;z", "http://a.example/p", "/~x/'(*)'!", "/?", "/%zz");
    private static final List<String> FIELDS = List.of(
            "Connection: keep-alive",
            "Connection: X-Hop",
            "Connection: , x-hop ,keep-alive",
            "X-Hop: 1",
            "x-hop:2",
            "Accept: text/html;q=0.9, */*;q=0.1",
            "Cookie: a=1; b=\"2\"",
            "TE: trailers",
            "Keep-Alive: timeout=5",
            "Proxy-Connection: keep-alive",
            "Via: 1.0 fred, 1.1 p.example.net (x)",
            "Forwarded: for=192.0.2.43;proto=http",
            "Max-Forwards: 7",
            "Expect: 100-continue",
            "X-Empty:",
            "X-Long: \t padded value \t",
            "X-High: caf\u00e9",
            "X-L: 1",
            "X-L: 2",
            "Steelyard-Request: 417",
            "Steelyard-Attempt: 9",
            "Trailer: X-Sum");
    private static final String SPOILERS = "\r\n\u0000\t :;,\u007f\u0080\u00ff0x\u000b\"/";
    private static final List<String> PIECES = List.of(
            "\r\n",
            "\n",
            "\r",
            " ",
            "\r\n ",
            "Content-Length: 3\r\n",
            "Transfer-Encoding: chunked\r\n",
            "Transfer-Encoding: identity\r\n",
            "Host: b\r\n",
            "Connection: Host\r\n",
            "0\r\n\r\n",
            ": ",
            "HTTP/1.1",
            "\r\n\r\n",
            "GET / HTTP/1.1\r\nHost: c\r\n\r\n",
            "Content-Length : 1\r\n",
            ";a=b");

    private final SplittableRandom random;

    RequestGrammar(SplittableRandom random) {
        this.random = random;
    }

    /** A request that has to be passed on. */
    String valid() {
        StringBuilder text = new StringBuilder(pick(METHODS))
                .append(' ')
                .append(pick(TARGETS))
                .append(" HTTP/1.1\r\n");
        int host = random.nextInt(4);
        int fields = random.nextInt(6);
        for (int i = 0; i <= fields; i++) {
            if (i == Math.min(host, fields)) {
                text.append("Host: a.example:81\r\n");
            }
            text.append(pick(FIELDS)).append("\r\n");
        }
        return switch (random.nextInt(5)) {
            case 0 -> withLength(text);
            case 1 -> inChunks(text);
            default -> text.append("\r\n").toString();
        };
    }

    private String withLength(StringBuilder head) {
        String content = content();
        return head.append("Content-Length: ")
                .append(content.length())
                .append("\r\n\r\n")
                .append(content)
                .toString();
    }

    private String inChunks(StringBuilder head) {
        head.append("Transfer-Encoding: chunked\r\n\r\n");
        for (int left = random.nextInt(3); left > 0; left--) {
            String content = content() + "x";
            head.append(Integer.toHexString(content.length()))
                    .append(random.nextInt(4) == 0 ? ";a=b" : "")
                    .append("\r\n")
                    .append(content)
                    .append("\r\n");
        }
        return head.append("0\r\n")
                .append(random.nextInt(4) == 0 ? "X-Sum: 1\r\n" : "")
                .append("\r\n")
                .toString();
    }

    private String content() {
        return random.nextBoolean() ? "hold".repeat(random.nextInt(5)) : "GET /x HTTP/1.1\r\nHost: b\r\n\r\n";
    }

    /** The same octets with up to three of them, or of their lines, spoilt. */
    String spoilt(String request) {
        StringBuilder text = new StringBuilder(request);
        for (int left = 1 + random.nextInt(3); left > 0; left--) {
            int at = random.nextInt(text.length());
            switch (random.nextInt(6)) {
                case 0 -> text.setCharAt(at, (char) random.nextInt(256));
                case 1 -> text.insert(at, SPOILERS.charAt(random.nextInt(SPOILERS.length())));
                case 2 -> text.deleteCharAt(at);
                case 3 -> text.insert(at, pick(PIECES));
                case 4 -> atLineStart(text, at, pick(PIECES));
                default -> text.setCharAt(at, SPOILERS.charAt(random.nextInt(SPOILERS.length())));
            }
            if (text.length() == 0) {
                text.append('x');
            }
        }
        return text.toString();
    }

    private static void atLineStart(StringBuilder text, int from, String piece) {
        int end = text.indexOf("\r\n", from);
        text.insert(end < 0 ? text.length() : end + 2, piece);
    }

    private String pick(List<String> of) {
        return of.get(random.nextInt(of.size()));
    }
}
