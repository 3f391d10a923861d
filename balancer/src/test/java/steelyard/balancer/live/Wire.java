package steelyard.balancer.live;

import java.io.BufferedInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.net.InetSocketAddress;
import java.net.Socket;
import java.net.SocketTimeoutException;
import java.nio.charset.StandardCharsets;
import org.jspecify.annotations.Nullable;

/** One end of a TCP connection, read and written by the octet. Reads wait 20 s at most. */
final class Wire implements AutoCloseable {
    private static final int LIMIT_MILLIS = 20_000;

    private final Socket socket;
    private final InputStream in;
    private final OutputStream out;
    private volatile @Nullable IOException failure;

    Wire(Socket socket) throws IOException {
        this.socket = socket;
        socket.setSoTimeout(LIMIT_MILLIS);
        socket.setTcpNoDelay(true);
        in = new BufferedInputStream(socket.getInputStream());
        out = socket.getOutputStream();
    }

    static Wire to(InetSocketAddress address) throws IOException {
        return new Wire(new Socket(address.getAddress(), address.getPort()));
    }

    void send(String text) throws IOException {
        send(text.getBytes(StandardCharsets.ISO_8859_1));
    }

    void send(byte[] octets) throws IOException {
        out.write(octets);
        out.flush();
    }

    /** Everything up to and with the next empty line, or null at the end of the connection. */
    @Nullable
    String readHead() throws IOException {
        ByteArrayOutputStream head = new ByteArrayOutputStream();
        int ends = 0;
        while (ends < 4) {
            int octet = in.read();
            if (octet < 0) {
                return null;
            }
            head.write(octet);
            ends = octet == (ends % 2 == 0 ? '\r' : '\n') ? ends + 1 : octet == '\r' ? 1 : 0;
        }
        return head.toString(StandardCharsets.ISO_8859_1);
    }

    /** Octet by octet, each in a segment of its own as far as the system grants it. */
    void sendSlowly(String text) throws IOException {
        for (byte octet : text.getBytes(StandardCharsets.ISO_8859_1)) {
            out.write(octet);
            out.flush();
        }
    }

    /** A line without its CR LF, or null at the end of the connection. */
    @Nullable
    String readLine() throws IOException {
        ByteArrayOutputStream line = new ByteArrayOutputStream();
        for (int octet = in.read(); octet >= 0; octet = in.read()) {
            if (octet == '\r') {
                if (in.read() != '\n') {
                    throw new IOException("a CR without LF behind " + line.toString(StandardCharsets.ISO_8859_1));
                }
                return line.toString(StandardCharsets.ISO_8859_1);
            }
            if (octet == '\n') {
                throw new IOException("a LF without CR behind " + line.toString(StandardCharsets.ISO_8859_1));
            }
            line.write(octet);
        }
        if (line.size() > 0) {
            throw new IOException("ended inside " + line.toString(StandardCharsets.ISO_8859_1));
        }
        return null;
    }

    /** Exactly so many octets, as text. */
    String read(int octets) throws IOException {
        byte[] read = in.readNBytes(octets);
        if (read.length < octets) {
            throw new IOException("ended after " + read.length + " of " + octets + " octets");
        }
        return new String(read, StandardCharsets.ISO_8859_1);
    }

    /** Exactly so many octets. */
    byte[] readOctets(int octets) throws IOException {
        return in.readNBytes(octets);
    }

    /** Whether anything comes within so many milliseconds. */
    boolean answers(int millis) throws IOException {
        socket.setSoTimeout(millis);
        in.mark(1);
        try {
            in.read();
            in.reset();
            return true;
        } catch (SocketTimeoutException e) {
            return false;
        } finally {
            socket.setSoTimeout(LIMIT_MILLIS);
        }
    }

    /** Whether something has come that was not read. */
    boolean hasInput() throws IOException {
        return in.available() > 0;
    }

    /** How many octets came, of so many at most. */
    int skip(byte[] into) throws IOException {
        return in.read(into);
    }

    /** Everything until the other end closes. */
    String readToEnd() throws IOException {
        return new String(in.readAllBytes(), StandardCharsets.ISO_8859_1);
    }

    /** A head and the content that its Content-Length announces. */
    String readAnswer() throws IOException {
        String head = readHead();
        if (head == null) {
            throw new IOException("ended before an answer");
        }
        return head + read(contentLength(head));
    }

    static int contentLength(String head) {
        for (String line : head.split("\r\n")) {
            if (line.toLowerCase(java.util.Locale.ROOT).startsWith("content-length:")) {
                return Integer.parseInt(line.substring(line.indexOf(':') + 1).trim());
            }
        }
        return 0;
    }

    /** Says that nothing more comes, and can still be read from. */
    void finish() throws IOException {
        socket.shutdownOutput();
    }

    /** Closes so that the other end sees a reset. */
    void reset() throws IOException {
        socket.setSoLinger(true, 0);
        socket.close();
    }

    void failure(IOException e) {
        failure = e;
    }

    /** What ended the script of a backend early, if anything did. */
    @Nullable
    IOException failure() {
        return failure;
    }

    @Override
    public void close() throws IOException {
        socket.close();
    }
}
