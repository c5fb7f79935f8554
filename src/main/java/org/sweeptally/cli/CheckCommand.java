package org.sweeptally.cli;

import java.util.Optional;
import java.util.concurrent.Callable;
import org.sweeptally.site.Site;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;

/** Validates a site file and says what the site will do. */
@Command(
        name = "check",
        mixinStandardHelpOptions = true,
        description = {
            "Checks a site file: prints every fault with its line, or, if there is none, what the site will do: what"
                    + " each sensor covers, how long the picture waits for whom, how many false births to expect, and"
                    + " how soon an object is confirmed.",
            ""
        },
        footer = {"", "Example:", "  sweeptally check --site site.yaml"})
final class CheckCommand implements Callable<Integer> {

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    CheckCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        site.ifPresent(valid -> new CheckReport(valid).print(terminal.out()));
        return site.isPresent() ? Main.DONE : Main.USAGE;
    }
}
