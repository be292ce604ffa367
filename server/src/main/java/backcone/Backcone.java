package backcone;

import backcone.cli.Main;
import backcone.lsp.ServerMain;

/** Both doors: commands for people and CI, and {@code serve} for editors. */
public final class Backcone {
    private Backcone() {}

    public static void main(String[] args) {
        Main.main(args, ServerMain::serve);
    }
}
