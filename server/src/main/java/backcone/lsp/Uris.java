package backcone.lsp;

import java.net.URI;
import java.net.URISyntaxException;
import java.nio.file.FileSystemNotFoundException;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/** File addresses as clients write them. */
final class Uris {
    private Uris() {}

    /** The path of a {@code file:} address, whichever way its characters are escaped; null for another one. */
    static @Nullable Path path(String uri) {
        try {
            URI u = new URI(uri.replace(" ", "%20"));
            if (!"file".equalsIgnoreCase(u.getScheme())) {
                return null;
            }
            String path = u.getPath();
            if (path == null) {
                return null;
            }
            if (path.matches("/[A-Za-z]:.*")) {
                path = path.substring(1); // file:///c:/…
            }
            return Path.of(path).toAbsolutePath().normalize();
        } catch (URISyntaxException | IllegalArgumentException | FileSystemNotFoundException e) {
            return e instanceof InvalidPathException ? null : null;
        }
    }

    static String uri(Path path) {
        String s = path.toUri().toString();
        return s.endsWith("/") && !path.toString().endsWith("/") ? s.substring(0, s.length() - 1) : s;
    }
}
