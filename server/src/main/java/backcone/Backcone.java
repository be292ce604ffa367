package backcone;

import backcone.cli.Main;
import backcone.lsp.ServerMain;
import backcone.lsp.Trial;

/** Both doors: commands for people and CI, and {@code serve} for editors. */
public final class Backcone {
    private Backcone() {}

    public static void main(String[] args) {
        if (args.length > 0 && args[0].equals("self-test")) {
            Trial.run(Main.starter());
        }
        Main.main(args, ServerMain::serve);
    }
}
