package steelyard.backends.stub;

import java.io.ByteArrayOutputStream;
import java.io.EOFException;
import java.io.IOException;
import java.io.InputStream;
import java.net.InetSocketAddress;
import java.net.Socket;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Locale;

/** An HTTP client that hides nothing: one socket, bytes out, bytes in. No read waits longer than 20 s. */
public final class RawClient implements AutoCloseable {

    /** What came back; header lines are in lower case. */
    public record Received(int status, List<String> headers, String body) {}

    private static final int LONGEST_READ_MILLIS = 20_000;

    private final Socket socket = new Socket();
    private final InputStream in;

    public RawClient(InetSocketAddress address) throws IOException {
        socket.setTcpNoDelay(true);
        socket.connect(address, LONGEST_READ_MILLIS);
        socket.setSoTimeout(LONGEST_READ_MILLIS);
        in = socket.getInputStream();
    }

    /** Sends the first try of a GET that carries its number. */
    public RawClient get(String path, long request) throws IOException {
        return send("GET " + path + " HTTP/1.1\r\nHost: gannet\r\nSteelyard-Request: " + request
                + "\r\nSteelyard-Attempt: 1\r\n\r\n");
    }

    public RawClient send(String text) throws IOException {
        socket.getOutputStream().write(text.getBytes(StandardCharsets.ISO_8859_1));
        return this;
    }

    public Received receive() throws IOException {
        return receive(true);
    }

    /** @param hasBody false for the answer to a HEAD */
    public Received receive(boolean hasBody) throws IOException {
        String head = readHead();
        int status = Integer.parseInt(head.substring(9, 12));
        List<String> headers =
                head.lines().skip(1).map(line -> line.toLowerCase(Locale.ROOT)).toList();
        int length = headers.stream()
                .filter(line -> line.startsWith("content-length:"))
                .mapToInt(line -> Integer.parseInt(line.substring(15).strip()))
                .findFirst()
                .orElse(0);
        byte[] body = hasBody ? in.readNBytes(length) : new byte[0];
        return new Received(status, headers, new String(body, StandardCharsets.ISO_8859_1));
    }

    /** The next byte, or -1 at an orderly end. */
    public int readByte() throws IOException {
        return in.read();
    }

    /** Everything up to the orderly end. */
    public String readAll() throws IOException {
        return new String(in.readAllBytes(), StandardCharsets.ISO_8859_1);
    }

    /** Ends this side of the connection; the other may go on. */
    public void endOutput() throws IOException {
        socket.shutdownOutput();
    }

    public void longestRead(int millis) throws IOException {
        socket.setSoTimeout(millis);
    }

    @Override
    public void close() throws IOException {
        socket.close();
    }

    private String readHead() throws IOException {
        ByteArrayOutputStream head = new ByteArrayOutputStream();
        while (!head.toString(StandardCharsets.ISO_8859_1).endsWith("\r\n\r\n")) {
            int next = in.read();
            if (next < 0) {
                throw new EOFException("connection ended after: " + head);
            }
            head.write(next);
        }
        return head.toString(StandardCharsets.ISO_8859_1);
    }
}
