<?xml version="1.0" encoding="utf-8"?>
<!DOCTYPE TS>
<TS version="2.1" language="de" sourcelanguage="en">
<context>
    <name>About</name>
    <message>
        <source>Probewright tests pulse-oximetry probes on a production station and keeps the evidence.</source>
        <translation>Probewright prüft Pulsoximetrie-Sonden an einer Fertigungsstation und bewahrt die Nachweise auf.</translation>
    </message>
    <message>
        <source>What a pass says, and what it does not</source>
        <translation>Was „gut“ sagt und was nicht</translation>
    </message>
    <message>
        <source>This program</source>
        <translation>Dieses Programm</translation>
    </message>
</context>
<context>
    <name>Berth</name>
    <message>
        <source>Likely cause: %1.</source>
        <translation>Wahrscheinliche Ursache: %1.</translation>
    </message>
    <message>
        <source>Nearest to a limit: %1, with %2 % of its room left.</source>
        <translation>Am nächsten an einer Grenze: %1, mit %2 % Abstand.</translation>
    </message>
    <message>
        <source>Not recorded</source>
        <translation>Nicht aufgezeichnet</translation>
    </message>
    <message>
        <source>The ledger did not take this run, so it has no verdict.</source>
        <translation>Das Hauptbuch hat diesen Lauf nicht angenommen, darum hat er kein Urteil.</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>Nicht bereit</translation>
    </message>
    <message>
        <source>last: %1</source>
        <translation>zuletzt: %1</translation>
    </message>
    <message>
        <source>last: not recorded</source>
        <translation>zuletzt: nicht aufgezeichnet</translation>
    </message>
    <message>
        <source>%1 s left</source>
        <translation>noch %1 s</translation>
    </message>
    <message>
        <source>Close the lid</source>
        <translation>Deckel schließen</translation>
    </message>
    <message>
        <source>Plug it in</source>
        <translation>Einstecken</translation>
    </message>
    <message>
        <source>Put it in</source>
        <translation>Einlegen</translation>
    </message>
    <message>
        <source>part %1 of %2</source>
        <translation>Teil %1 von %2</translation>
    </message>
    <message>
        <source>empty again</source>
        <translation>wieder leer</translation>
    </message>
    <message>
        <source>Empty</source>
        <translation>Leer</translation>
    </message>
    <message>
        <source>Take it out</source>
        <translation>Herausnehmen</translation>
    </message>
    <message>
        <source>Nest %1</source>
        <translation>Nest %1</translation>
    </message>
    <message>
        <source>Pass</source>
        <translation>Gut</translation>
    </message>
    <message>
        <source>Fail</source>
        <translation>Schlecht</translation>
    </message>
    <message>
        <source>Void</source>
        <translation>Ungültig</translation>
    </message>
    <message>
        <source>production</source>
        <translation>Fertigung</translation>
    </message>
    <message>
        <source>engineering</source>
        <translation>Technik</translation>
    </message>
    <message>
        <source>reference probe</source>
        <translation>Bezugssonde</translation>
    </message>
    <message>
        <source>challenge probe</source>
        <translation>Gegenprobe</translation>
    </message>
    <message>
        <source>gauge study</source>
        <translation>Messsystemstudie</translation>
    </message>
    <message>
        <source>echo</source>
        <translation>Echo</translation>
    </message>
    <message>
        <source>training</source>
        <translation>Schulung</translation>
    </message>
    <message>
        <source>returned probe</source>
        <translation>zurückgekommene Sonde</translation>
    </message>
</context>
<context>
    <name>Details</name>
    <message>
        <source>Run %1, purpose %2, took %3 s</source>
        <translation>Lauf %1, Zweck %2, dauerte %3 s</translation>
    </message>
    <message>
        <source>%1 repeated exchanges</source>
        <translation>%1 wiederholte Abfragen</translation>
    </message>
    <message>
        <source>Demonstration: made on an emulated bench.</source>
        <translation>Vorführung: an einem nachgebildeten Messplatz gemacht.</translation>
    </message>
    <message>
        <source>%1 in nest %2: %3</source>
        <translation>%1 in Nest %2: %3</translation>
    </message>
    <message>
        <source>The run ended before its first reading.</source>
        <translation>Der Lauf endete vor dem ersten Messwert.</translation>
    </message>
</context>
<context>
    <name>Help</name>
    <message>
        <source>What to scan</source>
        <translation>Was gelesen wird</translation>
    </message>
    <message>
        <source>The scan field always listens. Scan, or type and press Enter. The sentence below it says what was done, or why not and what to do.</source>
        <translation>Das Lesefeld hört immer zu. Lesen, oder tippen und Eingabe drücken. Der Satz darunter sagt, was getan wurde, oder warum nicht und was zu tun ist.</translation>
    </message>
    <message>
        <source>your badge</source>
        <translation>der Ausweis</translation>
    </message>
    <message>
        <source>signs you in; what is read from it is never shown</source>
        <translation>meldet an; was davon gelesen wird, ist nie zu sehen</translation>
    </message>
    <message>
        <source>a lot card</source>
        <translation>eine Loskarte</translation>
    </message>
    <message>
        <source>opens its lot</source>
        <translation>öffnet ihr Los</translation>
    </message>
    <message>
        <source>a probe's serial</source>
        <translation>die Seriennummer einer Sonde</translation>
    </message>
    <message>
        <source>arms the next free nest for 20 seconds: put that probe into that nest and close the lid</source>
        <translation>merkt das nächste freie Nest für 20 Sekunden vor: diese Sonde in dieses Nest legen und den Deckel schließen</translation>
    </message>
    <message>
        <source>the next serial is for nest 3</source>
        <translation>die nächste Seriennummer ist für Nest 3</translation>
    </message>
    <message>
        <source>What a berth shows</source>
        <translation>Was ein Feld zeigt</translation>
    </message>
    <message>
        <source>Bar</source>
        <translation>Balken</translation>
    </message>
    <message>
        <source>The checks of the run in their order, each as wide as its time. Full is done. A struck-out part was left out; a taller one failed.</source>
        <translation>Die Prüfungen des Laufs der Reihe nach, jede so breit wie ihre Zeit. Gefüllt ist erledigt. Ein durchgestrichener Teil wurde ausgelassen; ein höherer ist schlecht.</translation>
    </message>
    <message>
        <source>Rails</source>
        <translation>Schienen</translation>
    </message>
    <message>
        <source>The two thick lines are the acceptance limits of every check, drawn to one scale; the dotted line is the middle, or what is typical. Each diamond is a reading, its vertical line the uncertainty. A crossed square lies outside. The reading that is nearest to an edge is named.</source>
        <translation>Die zwei dicken Linien sind die Annahmegrenzen aller Prüfungen in einem Maßstab; die punktierte Linie ist die Mitte, oder was üblich ist. Jede Raute ist ein Messwert, ihr senkrechter Strich die Unsicherheit. Ein Quadrat mit Kreuz liegt außerhalb. Der Messwert, der einer Grenze am nächsten ist, steht mit Namen da.</translation>
    </message>
    <message>
        <source>Grey posts</source>
        <translation>Graue Pfosten</translation>
    </message>
    <message>
        <source>How much of the limit is given up for uncertainty. The limit itself is at the far end of the post.</source>
        <translation>Wie viel von der Grenze für die Unsicherheit abgegeben wird. Die Grenze selbst ist am äußeren Ende des Pfostens.</translation>
    </message>
    <message>
        <source>Small plots</source>
        <translation>Kleine Kurven</translation>
    </message>
    <message>
        <source>Spectra and pulses of the red LED (full line) and the infrared one (dashed line).</source>
        <translation>Spektren und Pulse der roten LED (volle Linie) und der infraroten (gestrichelt).</translation>
    </message>
    <message>
        <source>Below</source>
        <translation>Darunter</translation>
    </message>
    <message>
        <source>What to do with the probe; after a fail which check failed, by how much, and the likely cause.</source>
        <translation>Was mit der Sonde zu tun ist; ist sie schlecht, welche Prüfung, um wie viel, und die wahrscheinliche Ursache.</translation>
    </message>
    <message>
        <source>Keys</source>
        <translation>Tasten</translation>
    </message>
    <message>
        <source>Keyboard and scanner are enough for everything. These work while the scan field is empty.</source>
        <translation>Tastatur und Leser genügen für alles. Diese wirken, solange das Lesefeld leer ist.</translation>
    </message>
    <message>
        <source>Arrows</source>
        <translation>Pfeile</translation>
    </message>
    <message>
        <source>choose a berth</source>
        <translation>ein Feld wählen</translation>
    </message>
    <message>
        <source>Enter</source>
        <translation>Eingabe</translation>
    </message>
    <message>
        <source>the readings of the chosen berth's last run; Enter or Esc closes them</source>
        <translation>die Messwerte des letzten Laufs im gewählten Feld; Eingabe oder Esc schließt sie</translation>
    </message>
    <message>
        <source>stop the chosen nest, or take its scan back; asks first</source>
        <translation>das gewählte Nest anhalten oder seine Lesung zurücknehmen; fragt zuerst</translation>
    </message>
    <message>
        <source>sign out</source>
        <translation>abmelden</translation>
    </message>
    <message>
        <source>Ctrl and +, -, 0</source>
        <translation>Strg und +, -, 0</translation>
    </message>
    <message>
        <source>larger text, smaller text, as at first</source>
        <translation>größerer Text, kleinerer Text, wie am Anfang</translation>
    </message>
    <message>
        <source>the menu</source>
        <translation>das Menü</translation>
    </message>
    <message>
        <source>this page</source>
        <translation>diese Seite</translation>
    </message>
    <message>
        <source>When something is wrong</source>
        <translation>Wenn etwas nicht stimmt</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>Nicht bereit</translation>
    </message>
    <message>
        <source>The top of the window and the berth say why, and what to do. Nothing can be tested there until then.</source>
        <translation>Oben im Fenster und im Feld steht, warum und was zu tun ist. Bis dahin kann dort nichts geprüft werden.</translation>
    </message>
    <message>
        <source>Void</source>
        <translation>Ungültig</translation>
    </message>
    <message>
        <source>The run could not be completed or trusted. The probe has neither passed nor failed.</source>
        <translation>Der Lauf ging nicht zu Ende oder ist nicht verlässlich. Die Sonde ist weder gut noch schlecht.</translation>
    </message>
    <message>
        <source>A run stops</source>
        <translation>Ein Lauf bricht ab</translation>
    </message>
    <message>
        <source>Opening the lid or taking the probe out stops the run. After a reading outside its limits, that is a fail.</source>
        <translation>Den Deckel öffnen oder die Sonde herausnehmen bricht den Lauf ab. Nach einem Messwert außerhalb seiner Grenzen heißt das „schlecht“.</translation>
    </message>
    <message>
        <source>Power cut</source>
        <translation>Stromausfall</translation>
    </message>
    <message>
        <source>At the next start the window tells which probe was in which nest. A run that was cut short is never a pass.</source>
        <translation>Beim nächsten Start sagt das Fenster, welche Sonde in welchem Nest war. Ein abgebrochener Lauf ist nie gut.</translation>
    </message>
</context>
<context>
    <name>LateNotice</name>
    <message>
        <source>A reading already lay outside its limits, so the run was closed as a fail. Take the probe out and put it on the tray for failed probes.</source>
        <translation>Ein Messwert lag schon außerhalb seiner Grenzen, darum wurde der Lauf als schlecht geschlossen. Die Sonde herausnehmen und auf das Tablett „schlecht“ legen.</translation>
    </message>
    <message>
        <source>The run was closed as void: nothing was decided. Take the probe out; scan it again to test it.</source>
        <translation>Der Lauf wurde als ungültig geschlossen: nichts ist entschieden. Die Sonde herausnehmen; zum Prüfen noch einmal lesen.</translation>
    </message>
    <message>
        <source>The program ended last time in the middle of these runs. Look into each nest first.</source>
        <translation>Das Programm endete beim letzten Mal mitten in diesen Läufen. Zuerst in jedes Nest sehen.</translation>
    </message>
    <message>
        <source>Nest %1</source>
        <translation>Nest %1</translation>
    </message>
    <message>
        <source>Their readings up to then are in the ledger. Press Enter to go on.</source>
        <translation>Ihre Messwerte bis dahin stehen im Hauptbuch. Eingabe drücken, um weiterzumachen.</translation>
    </message>
</context>
<context>
    <name>Plots</name>
    <message>
        <source>spectra</source>
        <translation>Spektren</translation>
    </message>
    <message>
        <source>%1 to %2 nm</source>
        <translation>%1 bis %2 nm</translation>
    </message>
    <message>
        <source>pulses</source>
        <translation>Pulse</translation>
    </message>
    <message>
        <source>pulses, %1 s</source>
        <translation>Pulse, %1 s</translation>
    </message>
</context>
<context>
    <name>Reading</name>
    <message>
        <source>no reading, because of %1</source>
        <translation>kein Messwert, wegen %1</translation>
    </message>
    <message>
        <source>no reading: too much light</source>
        <translation>kein Messwert: zu viel Licht</translation>
    </message>
    <message>
        <source>no reading: too little light</source>
        <translation>kein Messwert: zu wenig Licht</translation>
    </message>
    <message>
        <source>no reading: no line in the spectrum</source>
        <translation>kein Messwert: keine Linie im Spektrum</translation>
    </message>
    <message>
        <source>no reading: the line runs out of the spectrum</source>
        <translation>kein Messwert: die Linie läuft aus dem Spektrum</translation>
    </message>
    <message>
        <source>no reading: no pulse</source>
        <translation>kein Messwert: kein Puls</translation>
    </message>
    <message>
        <source>no reading: the ID resistor is open</source>
        <translation>kein Messwert: der ID-Widerstand ist offen</translation>
    </message>
    <message>
        <source>not measured</source>
        <translation>nicht gemessen</translation>
    </message>
    <message>
        <source>no reading (%1)</source>
        <translation>kein Messwert (%1)</translation>
    </message>
    <message>
        <source>points</source>
        <translation>Punkte</translation>
    </message>
    <message>
        <source>yes</source>
        <translation>ja</translation>
    </message>
    <message>
        <source>no</source>
        <translation>nein</translation>
    </message>
    <message>
        <source>accepted from %1 to %2</source>
        <translation>angenommen von %1 bis %2</translation>
    </message>
    <message>
        <source>accepted up to %1</source>
        <translation>angenommen bis %1</translation>
    </message>
    <message>
        <source>accepted from %1 up</source>
        <translation>angenommen ab %1</translation>
    </message>
</context>
<context>
    <name>Said</name>
    <message>
        <source>phantom of nest {nest}</source>
        <translation>Phantom von Nest {nest}</translation>
    </message>
    <message>
        <source>adapter of nest {nest}</source>
        <translation>Adapter von Nest {nest}</translation>
    </message>
    <message>
        <source>nest {nest}</source>
        <translation>Nest {nest}</translation>
    </message>
    <message>
        <source>contact, ID and dark current</source>
        <translation>Kontakt, ID und Dunkelstrom</translation>
    </message>
    <message>
        <source>forward voltages</source>
        <translation>Flussspannungen</translation>
    </message>
    <message>
        <source>pulses at ratio {ratio}</source>
        <translation>Pulse bei {ratio}</translation>
    </message>
    <message>
        <source>spectra</source>
        <translation>Spektren</translation>
    </message>
    <message>
        <source>the station stopped during this run; closed at the next start</source>
        <translation>die Station hielt während dieses Laufs an; beim nächsten Start geschlossen</translation>
    </message>
    <message>
        <source>stopped by {who}</source>
        <translation>angehalten von {who}</translation>
    </message>
    <message>
        <source>take the probe out and apply its label</source>
        <translation>die Sonde herausnehmen und ihr Etikett anbringen</translation>
    </message>
    <message>
        <source>apply its label</source>
        <translation>ihr Etikett anbringen</translation>
    </message>
    <message>
        <source>take the probe out; this run releases no label</source>
        <translation>die Sonde herausnehmen; dieser Lauf gibt kein Etikett frei</translation>
    </message>
    <message>
        <source>this run releases no label</source>
        <translation>dieser Lauf gibt kein Etikett frei</translation>
    </message>
    <message>
        <source>take the probe out and put it on the tray for failed probes</source>
        <translation>die Sonde herausnehmen und auf das Tablett „schlecht“ legen</translation>
    </message>
    <message>
        <source>put it on the tray for failed probes</source>
        <translation>auf das Tablett „schlecht“ legen</translation>
    </message>
    <message>
        <source>take the probe out and put it on the tray for {rework}</source>
        <translation>die Sonde herausnehmen und auf das Tablett für {rework} legen</translation>
    </message>
    <message>
        <source>put it on the tray for {rework}</source>
        <translation>auf das Tablett für {rework} legen</translation>
    </message>
    <message>
        <source>take the probe out; nothing was decided about it</source>
        <translation>die Sonde herausnehmen; über sie ist nichts entschieden</translation>
    </message>
    <message>
        <source>nothing was decided about it</source>
        <translation>über sie ist nichts entschieden</translation>
    </message>
    <message>
        <source>take the probe out and keep it apart: this run is not on record</source>
        <translation>die Sonde herausnehmen und getrennt aufbewahren: dieser Lauf ist nicht aufgezeichnet</translation>
    </message>
    <message>
        <source>keep it apart: this run is not on record</source>
        <translation>getrennt aufbewahren: dieser Lauf ist nicht aufgezeichnet</translation>
    </message>
    <message>
        <source>put probe {serial} into nest {nest}</source>
        <translation>Sonde {serial} in Nest {nest} legen</translation>
    </message>
    <message>
        <source>plug probe {serial} into the adapter</source>
        <translation>Sonde {serial} in den Adapter stecken</translation>
    </message>
    <message>
        <source>close the lid</source>
        <translation>den Deckel schließen</translation>
    </message>
    <message>
        <source>take the probe out of nest {nest}</source>
        <translation>die Sonde aus Nest {nest} nehmen</translation>
    </message>
    <message>
        <source>scan a probe</source>
        <translation>eine Sonde lesen</translation>
    </message>
    <message>
        <source>testing {serial}</source>
        <translation>{serial} wird geprüft</translation>
    </message>
    <message>
        <source>no answer in time</source>
        <translation>keine Antwort in der Zeit</translation>
    </message>
    <message>
        <source>nest {nest} is stopped</source>
        <translation>Nest {nest} ist angehalten</translation>
    </message>
    <message>
        <source>{name}, {role}, is signed in</source>
        <translation>{name}, {role}, ist angemeldet</translation>
    </message>
    <message>
        <source>{name} is signed out</source>
        <translation>{name} ist abgemeldet</translation>
    </message>
    <message>
        <source>lot {lot} is closed</source>
        <translation>Los {lot} ist geschlossen</translation>
    </message>
    <message>
        <source>lot {lot} is open: {quantity} of {model}</source>
        <translation>Los {lot} ist offen: {quantity} Stück {model}</translation>
    </message>
    <message>
        <source>scan the probe for nest {nest}</source>
        <translation>die Sonde für Nest {nest} lesen</translation>
    </message>
    <message>
        <source>{number} on {due}</source>
        <translation>{number} am {due}</translation>
    </message>
    <message>
        <source>operator</source>
        <translation>Bedienung</translation>
    </message>
    <message>
        <source>engineer</source>
        <translation>Technik</translation>
    </message>
    <message>
        <source>quality</source>
        <translation>Qualität</translation>
    </message>
    <message>
        <source>auditor</source>
        <translation>Prüfung</translation>
    </message>
    <message>
        <source>steward</source>
        <translation>Verwaltung</translation>
    </message>
</context>
<context>
    <name>Workspace</name>
    <message>
        <source>Line</source>
        <translation>Linie</translation>
    </message>
</context>
<context>
    <name>probewright::windows::AnswerLine</name>
    <message>
        <source>Nobody is signed in. Scan your badge.</source>
        <translation>Niemand ist angemeldet. Den Ausweis lesen.</translation>
    </message>
    <message>
        <source>No lot is open. Scan the lot card.</source>
        <translation>Kein Los ist offen. Die Loskarte lesen.</translation>
    </message>
    <message>
        <source>Scan a probe.</source>
        <translation>Eine Sonde lesen.</translation>
    </message>
</context>
<context>
    <name>probewright::windows::LinePage</name>
    <message>
        <source>Nest %1 has no finished run yet.</source>
        <translation>Nest %1 hat noch keinen beendeten Lauf.</translation>
    </message>
    <message>
        <source>These probes were being tested</source>
        <translation>Diese Sonden wurden gerade geprüft</translation>
    </message>
    <message>
        <source>Stop nest %1? Press F8 once more.</source>
        <translation>Nest %1 anhalten? Noch einmal F8 drücken.</translation>
    </message>
    <message>
        <source>Close the lot? Choose it once more.</source>
        <translation>Das Los schließen? Noch einmal wählen.</translation>
    </message>
</context>
<context>
    <name>probewright::windows::MainWindow</name>
    <message>
        <source>Demonstration</source>
        <translation>Vorführung</translation>
    </message>
    <message>
        <source>Demonstration
at speed %1</source>
        <translation>Vorführung
Tempo %1</translation>
    </message>
    <message>
        <source>Menu (F10)</source>
        <translation>Menü (F10)</translation>
    </message>
    <message>
        <source>Help: the line</source>
        <translation>Hilfe: die Linie</translation>
    </message>
    <message>
        <source>About Probewright</source>
        <translation>Über Probewright</translation>
    </message>
    <message>
        <source>Sign out</source>
        <translation>Abmelden</translation>
    </message>
    <message>
        <source>Stop the chosen nest</source>
        <translation>Das gewählte Nest anhalten</translation>
    </message>
    <message>
        <source>Close the lot</source>
        <translation>Das Los schließen</translation>
    </message>
    <message>
        <source>Sound at a verdict</source>
        <translation>Ton bei einem Urteil</translation>
    </message>
    <message>
        <source>Help</source>
        <translation>Hilfe</translation>
    </message>
    <message>
        <source>Leave</source>
        <translation>Verlassen</translation>
    </message>
    <message>
        <source>Colours</source>
        <translation>Farben</translation>
    </message>
    <message>
        <source>As the system</source>
        <translation>Wie das System</translation>
    </message>
    <message>
        <source>Light</source>
        <translation>Hell</translation>
    </message>
    <message>
        <source>Dark</source>
        <translation>Dunkel</translation>
    </message>
    <message>
        <source>Text size</source>
        <translation>Textgröße</translation>
    </message>
    <message>
        <source>Language</source>
        <translation>Sprache</translation>
    </message>
</context>
<context>
    <name>probewright::windows::PlayStrip</name>
    <message>
        <source>Emulated bench, next (F5):</source>
        <translation>Nachgebildeter Messplatz, als Nächstes (F5):</translation>
    </message>
    <message>
        <source>scan a badge</source>
        <translation>einen Ausweis lesen</translation>
    </message>
    <message>
        <source>scan the lot card</source>
        <translation>die Loskarte lesen</translation>
    </message>
    <message>
        <source>scan the next probe</source>
        <translation>die nächste Sonde lesen</translation>
    </message>
    <message>
        <source>put the probe into nest %1</source>
        <translation>die Sonde in Nest %1 legen</translation>
    </message>
    <message>
        <source>take the probe out of nest %1</source>
        <translation>die Sonde aus Nest %1 nehmen</translation>
    </message>
    <message>
        <source>wait for a verdict</source>
        <translation>ein Urteil abwarten</translation>
    </message>
</context>
<context>
    <name>probewright::windows::ReadinessStrip</name>
    <message>
        <source>Stopped</source>
        <translation>Angehalten</translation>
    </message>
    <message>
        <source>The line ended by a mistake of the program. Close the window and start it again.</source>
        <translation>Die Linie endete durch einen Fehler des Programms. Das Fenster schließen und neu starten.</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>Nicht bereit</translation>
    </message>
    <message>
        <source>Ready</source>
        <translation>Bereit</translation>
    </message>
    <message>
        <source>Next due: %1</source>
        <translation>Als Nächstes fällig: %1</translation>
    </message>
    <message>
        <source>Nobody is signed in</source>
        <translation>Niemand ist angemeldet</translation>
    </message>
    <message>
        <source>Lot %1, %2, sheet revision %3</source>
        <translation>Los %1, %2, Blatt Revision %3</translation>
    </message>
    <message>
        <source>No lot is open</source>
        <translation>Kein Los ist offen</translation>
    </message>
</context>
<context>
    <name>probewright::windows::ScanField</name>
    <message>
        <source>Scan a probe, a badge or a lot card</source>
        <translation>Eine Sonde, einen Ausweis oder eine Loskarte lesen</translation>
    </message>
    <message>
        <source>Scan field</source>
        <translation>Lesefeld</translation>
    </message>
</context>
<context>
    <name>probewright::windows::SetupPage</name>
    <message>
        <source>&amp;Use these devices</source>
        <translation>&amp;Diese Geräte nehmen</translation>
    </message>
    <message>
        <source>&amp;Open the emulated bench</source>
        <translation>&amp;Den nachgebildeten Messplatz öffnen</translation>
    </message>
    <message>
        <source>Set up this station</source>
        <translation>Diese Station einrichten</translation>
    </message>
    <message>
        <source>Plug in the phantom and the adapter of nest 1 and switch them on, then those of nest 2, and so on. Each appears below and is given the lowest nest that lacks it. Change the number where it is wrong.</source>
        <translation>Phantom und Adapter von Nest 1 anstecken und einschalten, dann die von Nest 2 und so weiter. Jedes erscheint unten und bekommt das niedrigste Nest, dem es fehlt. Die Nummer ändern, wo sie nicht stimmt.</translation>
    </message>
    <message>
        <source>The emulated bench is all devices in software, to learn and to try. It needs nothing plugged in, and what it makes is marked as a demonstration.</source>
        <translation>Der nachgebildete Messplatz ist alle Geräte als Software, zum Lernen und Ausprobieren. Nichts muss angesteckt sein, und was er macht, ist als Vorführung gekennzeichnet.</translation>
    </message>
    <message>
        <source>unknown</source>
        <translation>unbekannt</translation>
    </message>
    <message>
        <source>nest </source>
        <translation>Nest </translation>
    </message>
    <message>
        <source>not used</source>
        <translation>nicht benutzt</translation>
    </message>
    <message>
        <source>Nest of %1</source>
        <translation>Nest von %1</translation>
    </message>
    <message>
        <source>Phantom %1</source>
        <translation>Phantom %1</translation>
    </message>
    <message>
        <source>Adapter %1</source>
        <translation>Adapter %1</translation>
    </message>
    <message>
        <source>certificate %1, at %2</source>
        <translation>Schein %1, an %2</translation>
    </message>
    <message>
        <source>1 nest is complete.</source>
        <translation>1 Nest ist vollständig.</translation>
    </message>
    <message>
        <source>%1 nests are complete.</source>
        <translation>%1 Nester sind vollständig.</translation>
    </message>
    <message>
        <source>Looking at %1 ports ...</source>
        <translation>%1 Anschlüsse werden angesehen ...</translation>
    </message>
</context>
<context>
    <name>probewright::windows::Sheet</name>
    <message>
        <source>Close (Esc)</source>
        <translation>Schließen (Esc)</translation>
    </message>
</context>
<context>
    <name>probewright::windows::Tally</name>
    <message>
        <source>tested</source>
        <translation>geprüft</translation>
    </message>
    <message>
        <source>%1 of %2 in this lot</source>
        <translation>%1 von %2 in diesem Los</translation>
    </message>
    <message>
        <source>passed first time</source>
        <translation>sofort gut</translation>
    </message>
    <message>
        <source>%1 % of %2</source>
        <translation>%1 % von %2</translation>
    </message>
    <message>
        <source>failed</source>
        <translation>schlecht</translation>
    </message>
    <message>
        <source>void</source>
        <translation>ungültig</translation>
    </message>
    <message>
        <source>an hour</source>
        <translation>je Stunde</translation>
    </message>
    <message>
        <source>Checks that failed most</source>
        <translation>Häufigste Ausfälle</translation>
    </message>
</context>
</TS>
