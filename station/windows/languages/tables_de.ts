<?xml version="1.0" encoding="utf-8"?>
<!DOCTYPE TS>
<TS version="2.1" language="de" sourcelanguage="en">
<context>
    <name>Cautions</name>
    <message>
        <source>A pass is production evidence: this probe met its limit sheet on this station. It does not show the accuracy of
saturation readings in people; that takes controlled desaturation studies, as ISO 80601-2-61 describes.
The radiation of LEDs and electrical safety are for qualified people to judge, under the standards and local
rules in force.
The limits, models and certificates that come with this program are a demonstration. Every one of them must be
replaced by your own before a probe is shipped on its verdict.</source>
        <translation>„Gut“ ist ein Nachweis der Fertigung: diese Sonde hat an dieser Station ihr Grenzwertblatt eingehalten. Es zeigt nicht, wie genau Sättigungswerte bei Menschen sind; dazu braucht es kontrollierte Entsättigungsstudien, wie ISO 80601-2-61 sie beschreibt.
Über die Strahlung von LEDs und die elektrische Sicherheit urteilen Fachleute nach den geltenden Normen und örtlichen Regeln.
Die Grenzwerte, Modelle und Scheine, die mit diesem Programm kommen, sind eine Vorführung. Jeder davon muss durch einen eigenen ersetzt sein, bevor eine Sonde auf sein Urteil hin ausgeliefert wird.</translation>
    </message>
</context>
<context>
    <name>Check</name>
    <message>
        <source>probe present</source>
        <translation>Sonde vorhanden</translation>
    </message>
    <message>
        <source>ID resistance</source>
        <translation>ID-Widerstand, Wert</translation>
    </message>
    <message>
        <source>ID resistor</source>
        <translation>ID-Widerstand</translation>
    </message>
    <message>
        <source>bin against centroid</source>
        <translation>Klasse gegen Schwerpunkt</translation>
    </message>
    <message>
        <source>cable noise</source>
        <translation>Kabelrauschen</translation>
    </message>
    <message>
        <source>mains pick-up</source>
        <translation>Netzeinstreuung</translation>
    </message>
    <message>
        <source>red forward voltage</source>
        <translation>Flussspannung rot</translation>
    </message>
    <message>
        <source>infrared forward voltage</source>
        <translation>Flussspannung infrarot</translation>
    </message>
    <message>
        <source>red voltage rise</source>
        <translation>Spannungsanstieg rot</translation>
    </message>
    <message>
        <source>infrared voltage rise</source>
        <translation>Spannungsanstieg infrarot</translation>
    </message>
    <message>
        <source>red reverse leakage</source>
        <translation>Sperrstrom rot</translation>
    </message>
    <message>
        <source>infrared reverse leakage</source>
        <translation>Sperrstrom infrarot</translation>
    </message>
    <message>
        <source>red drive current</source>
        <translation>LED-Strom rot</translation>
    </message>
    <message>
        <source>infrared drive current</source>
        <translation>LED-Strom infrarot</translation>
    </message>
    <message>
        <source>red warm-up</source>
        <translation>Erwärmung rot</translation>
    </message>
    <message>
        <source>infrared warm-up</source>
        <translation>Erwärmung infrarot</translation>
    </message>
    <message>
        <source>red peak wavelength</source>
        <translation>Spitzenwellenlänge rot</translation>
    </message>
    <message>
        <source>infrared peak wavelength</source>
        <translation>Spitzenwellenlänge infrarot</translation>
    </message>
    <message>
        <source>red centroid wavelength</source>
        <translation>Schwerpunktwellenlänge rot</translation>
    </message>
    <message>
        <source>infrared centroid wavelength</source>
        <translation>Schwerpunktwellenlänge infrarot</translation>
    </message>
    <message>
        <source>red half-power centre</source>
        <translation>Halbwertmitte rot</translation>
    </message>
    <message>
        <source>infrared half-power centre</source>
        <translation>Halbwertmitte infrarot</translation>
    </message>
    <message>
        <source>red width (FWHM)</source>
        <translation>Breite rot (FWHM)</translation>
    </message>
    <message>
        <source>infrared width (FWHM)</source>
        <translation>Breite infrarot (FWHM)</translation>
    </message>
    <message>
        <source>secondary emission</source>
        <translation>Nebenlinie</translation>
    </message>
    <message>
        <source>dark current</source>
        <translation>Dunkelstrom</translation>
    </message>
    <message>
        <source>dark current as found</source>
        <translation>Dunkelstrom bei Ankunft</translation>
    </message>
    <message>
        <source>red transfer</source>
        <translation>Übertragung rot</translation>
    </message>
    <message>
        <source>infrared transfer</source>
        <translation>Übertragung infrarot</translation>
    </message>
    <message>
        <source>light around the phantom</source>
        <translation>Licht am Phantom vorbei</translation>
    </message>
    <message>
        <source>slot cross-talk</source>
        <translation>Übersprechen der Zeitfenster</translation>
    </message>
    <message>
        <source>ambient light taken up</source>
        <translation>aufgenommenes Umgebungslicht</translation>
    </message>
    <message>
        <source>red AC/DC against set value</source>
        <translation>AC/DC rot gegen Sollwert</translation>
    </message>
    <message>
        <source>infrared AC/DC against set value</source>
        <translation>AC/DC infrarot gegen Sollwert</translation>
    </message>
    <message>
        <source>ratio at 0.4</source>
        <translation>Verhältnis bei 0.4</translation>
    </message>
    <message>
        <source>ratio at 1.0</source>
        <translation>Verhältnis bei 1.0</translation>
    </message>
    <message>
        <source>ratio at 1.6</source>
        <translation>Verhältnis bei 1.6</translation>
    </message>
    <message>
        <source>slope of the ratio line</source>
        <translation>Steigung der Verhältnisgeraden</translation>
    </message>
    <message>
        <source>offset of the ratio line</source>
        <translation>Versatz der Verhältnisgeraden</translation>
    </message>
    <message>
        <source>non-linearity of the ratio line</source>
        <translation>Nichtlinearität der Verhältnisgeraden</translation>
    </message>
    <message>
        <source>modelled saturation error at 100 %</source>
        <translation>berechneter Sättigungsfehler bei 100 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 90 %</source>
        <translation>berechneter Sättigungsfehler bei 90 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 80 %</source>
        <translation>berechneter Sättigungsfehler bei 80 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 70 %</source>
        <translation>berechneter Sättigungsfehler bei 70 %</translation>
    </message>
</context>
<context>
    <name>Problem</name>
    <message>
        <source>there is no such serial port</source>
        <comment>port_missing</comment>
        <translation>diesen seriellen Anschluss gibt es nicht</translation>
    </message>
    <message>
        <source>check the cable and the path in the station file</source>
        <comment>port_missing</comment>
        <translation>Kabel und den Pfad in der Stationsdatei prüfen</translation>
    </message>
    <message>
        <source>this is no serial port</source>
        <comment>port_not_a_tty</comment>
        <translation>das ist kein serieller Anschluss</translation>
    </message>
    <message>
        <source>check the path in the station file</source>
        <comment>port_not_a_tty</comment>
        <translation>den Pfad in der Stationsdatei prüfen</translation>
    </message>
    <message>
        <source>another program holds this serial port</source>
        <comment>port_busy</comment>
        <translation>ein anderes Programm hält diesen seriellen Anschluss</translation>
    </message>
    <message>
        <source>end the other program; only one station can use a device</source>
        <comment>port_busy</comment>
        <translation>das andere Programm beenden; nur eine Station kann ein Gerät benutzen</translation>
    </message>
    <message>
        <source>this account may not open the serial port</source>
        <comment>port_permission</comment>
        <translation>dieses Konto darf den seriellen Anschluss nicht öffnen</translation>
    </message>
    <message>
        <source>add the account to the group dialout and sign in again, or set a udev rule for the device</source>
        <comment>port_permission</comment>
        <translation>das Konto in die Gruppe dialout aufnehmen und neu anmelden, oder eine udev-Regel für das Gerät setzen</translation>
    </message>
    <message>
        <source>the serial port cannot run at {baud} baud</source>
        <comment>port_baud</comment>
        <translation>der serielle Anschluss kann nicht mit {baud} Baud laufen</translation>
    </message>
    <message>
        <source>check the baud rate in the station file</source>
        <comment>port_baud</comment>
        <translation>die Baudrate in der Stationsdatei prüfen</translation>
    </message>
    <message>
        <source>the serial port failed: {reason}</source>
        <comment>port_failed</comment>
        <translation>der serielle Anschluss ist ausgefallen: {reason}</translation>
    </message>
    <message>
        <source>unplug the device and plug it in again</source>
        <comment>port_failed</comment>
        <translation>das Gerät abziehen und wieder anstecken</translation>
    </message>
    <message>
        <source>neither a phantom nor an adapter answers here</source>
        <comment>port_unknown_device</comment>
        <translation>hier antwortet weder ein Phantom noch ein Adapter</translation>
    </message>
    <message>
        <source>check its power and cable; another kind of device can stay where it is</source>
        <comment>port_unknown_device</comment>
        <translation>Strom und Kabel prüfen; ein anderes Gerät kann bleiben, wo es ist</translation>
    </message>
    <message>
        <source>the device does not answer, tried {tries} times; last: {cause}</source>
        <comment>device_lost</comment>
        <translation>das Gerät antwortet nicht, {tries} Mal versucht; zuletzt: {cause}</translation>
    </message>
    <message>
        <source>check its cable and power; the station keeps looking for it</source>
        <comment>device_lost</comment>
        <translation>Kabel und Strom prüfen; die Station sucht weiter danach</translation>
    </message>
    <message>
        <source>the device has started anew and lost its settings</source>
        <comment>device_reset</comment>
        <translation>das Gerät ist neu gestartet und hat seine Einstellungen verloren</translation>
    </message>
    <message>
        <source>check its power supply, then test the probe again</source>
        <comment>device_reset</comment>
        <translation>seine Stromversorgung prüfen, dann die Sonde noch einmal prüfen</translation>
    </message>
    <message>
        <source>the device refuses "{request}": {words}</source>
        <comment>device_refused</comment>
        <translation>das Gerät lehnt „{request}“ ab: {words}</translation>
    </message>
    <message>
        <source>check the model's values against what the device can do</source>
        <comment>device_refused</comment>
        <translation>die Werte des Modells mit dem vergleichen, was das Gerät kann</translation>
    </message>
    <message>
        <source>the device reports a fault at "{request}": {words}</source>
        <comment>device_fault</comment>
        <translation>das Gerät meldet bei „{request}“ einen Fehler: {words}</translation>
    </message>
    <message>
        <source>take the device out of use and have it looked at</source>
        <comment>device_fault</comment>
        <translation>das Gerät außer Betrieb nehmen und nachsehen lassen</translation>
    </message>
    <message>
        <source>its {what} is {found}, expected is {expected}</source>
        <comment>device_stranger</comment>
        <translation>{what} ist {found}, erwartet wird {expected}</translation>
    </message>
    <message>
        <source>connect the right device, or correct the station file</source>
        <comment>device_stranger</comment>
        <translation>das richtige Gerät anschließen oder die Stationsdatei berichtigen</translation>
    </message>
    <message>
        <source>its {what} is {found}, expected is {expected}</source>
        <comment>device_wrong_firmware</comment>
        <translation>{what} ist {found}, erwartet wird {expected}</translation>
    </message>
    <message>
        <source>load the firmware that the documents name, or correct them</source>
        <comment>device_wrong_firmware</comment>
        <translation>die Firmware laden, die in den Dokumenten steht, oder diese berichtigen</translation>
    </message>
    <message>
        <source>its {what} is {found}, the documents say {expected}</source>
        <comment>device_wrong_certificate</comment>
        <translation>{what} ist {found}, in den Dokumenten steht {expected}</translation>
    </message>
    <message>
        <source>bring in the certificate that is in force for this device</source>
        <comment>device_wrong_certificate</comment>
        <translation>den Schein einspielen, der für dieses Gerät gilt</translation>
    </message>
    <message>
        <source>a real device is connected where an emulated one is expected</source>
        <comment>device_not_emulated</comment>
        <translation>ein echtes Gerät ist angeschlossen, wo ein nachgebildetes erwartet wird</translation>
    </message>
    <message>
        <source>correct the station file, or connect the emulated bench</source>
        <comment>device_not_emulated</comment>
        <translation>die Stationsdatei berichtigen oder den nachgebildeten Messplatz anschließen</translation>
    </message>
    <message>
        <source>an emulated device is connected where a real one is expected</source>
        <comment>device_is_emulated</comment>
        <translation>ein nachgebildetes Gerät ist angeschlossen, wo ein echtes erwartet wird</translation>
    </message>
    <message>
        <source>connect the real device, or mark the station as emulated</source>
        <comment>device_is_emulated</comment>
        <translation>das echte Gerät anschließen oder die Station als nachgebildet kennzeichnen</translation>
    </message>
    <message>
        <source>the device runs at speed {found}, the line at {expected}</source>
        <comment>device_speed_mismatch</comment>
        <translation>das Gerät läuft mit Tempo {found}, die Linie mit {expected}</translation>
    </message>
    <message>
        <source>start the bench and the line with the same speed</source>
        <comment>device_speed_mismatch</comment>
        <translation>beide mit demselben Tempo starten</translation>
    </message>
    <message>
        <source>the LED drive is now {found}, set was {set}</source>
        <comment>drive_lost</comment>
        <translation>der LED-Strom ist jetzt {found}, gestellt war {set}</translation>
    </message>
    <message>
        <source>seat the probe again and repeat; it was pulled out, or the station was silent for too long</source>
        <comment>drive_lost</comment>
        <translation>die Sonde neu einlegen und wiederholen; sie wurde herausgezogen, oder die Station schwieg zu lange</translation>
    </message>
    <message>
        <source>the ledger has no room left: {reason} (SQLite {code})</source>
        <comment>ledger_full</comment>
        <translation>im Hauptbuch ist kein Platz mehr: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>free space on its disk, then start again; what was recorded is kept</source>
        <comment>ledger_full</comment>
        <translation>Platz auf seinem Datenträger schaffen, dann neu starten; was aufgezeichnet ist, bleibt</translation>
    </message>
    <message>
        <source>another program holds the ledger: {reason} (SQLite {code})</source>
        <comment>ledger_locked</comment>
        <translation>ein anderes Programm hält das Hauptbuch: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>end the other program that writes this ledger, then start again</source>
        <comment>ledger_locked</comment>
        <translation>das andere Programm beenden, das hinein schreibt, dann neu starten</translation>
    </message>
    <message>
        <source>the ledger's file is damaged: {reason} (SQLite {code})</source>
        <comment>ledger_damaged</comment>
        <translation>die Datei des Hauptbuchs ist beschädigt: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>keep the file, verify it with 'ledger verify', and restore the newest backup</source>
        <comment>ledger_damaged</comment>
        <translation>die Datei behalten, mit 'ledger verify' prüfen und die neueste Sicherung zurückholen</translation>
    </message>
    <message>
        <source>the ledger may not be written: {reason} (SQLite {code})</source>
        <comment>ledger_read_only</comment>
        <translation>in das Hauptbuch darf nicht geschrieben werden: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>check the permissions of the file and whether its disk is mounted read-only</source>
        <comment>ledger_read_only</comment>
        <translation>die Rechte der Datei prüfen und ob ihr Datenträger nur lesbar ist</translation>
    </message>
    <message>
        <source>the disk failed under the ledger: {reason} (SQLite {code})</source>
        <comment>ledger_io</comment>
        <translation>der Datenträger unter dem Hauptbuch ist ausgefallen: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>check the disk; start again when it is sound, and verify the ledger</source>
        <comment>ledger_io</comment>
        <translation>den Datenträger prüfen; neu starten, wenn er heil ist, und das Hauptbuch prüfen</translation>
    </message>
    <message>
        <source>the ledger refused a change: {reason} (SQLite {code})</source>
        <comment>ledger_refused</comment>
        <translation>das Hauptbuch hat eine Änderung abgelehnt: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>report this with the words above; nothing of the change was kept</source>
        <comment>ledger_refused</comment>
        <translation>dies mit den Worten oben melden; nichts von der Änderung wurde behalten</translation>
    </message>
    <message>
        <source>the ledger had trouble earlier and takes nothing more: {reason}</source>
        <comment>ledger_failed</comment>
        <translation>das Hauptbuch hatte zuvor eine Störung und nimmt nichts mehr an: {reason}</translation>
    </message>
    <message>
        <source>mend the cause, then start again</source>
        <comment>ledger_failed</comment>
        <translation>die Ursache beheben, dann neu starten</translation>
    </message>
    <message>
        <source>the ledger's file was moved, taken away or exchanged while it was in use</source>
        <comment>ledger_moved_away</comment>
        <translation>die Datei des Hauptbuchs wurde während der Benutzung verschoben, entfernt oder ausgetauscht</translation>
    </message>
    <message>
        <source>find out who moved it and put it back; what was recorded by then is in the file that was moved</source>
        <comment>ledger_moved_away</comment>
        <translation>herausfinden, wer sie verschoben hat, und sie zurücklegen; was bis dahin aufgezeichnet war, steht in der verschobenen Datei</translation>
    </message>
    <message>
        <source>the clock stands {seconds} s behind the ledger's last entry</source>
        <comment>ledger_clock_behind</comment>
        <translation>die Uhr steht {seconds} s hinter dem letzten Eintrag des Hauptbuchs</translation>
    </message>
    <message>
        <source>set the machine's clock right, then start again</source>
        <comment>ledger_clock_behind</comment>
        <translation>die Uhr des Rechners richtig stellen, dann neu starten</translation>
    </message>
    <message>
        <source>this volume of the ledger is closed and takes nothing more</source>
        <comment>ledger_volume_closed</comment>
        <translation>dieser Band des Hauptbuchs ist geschlossen und nimmt nichts mehr an</translation>
    </message>
    <message>
        <source>finish with 'ledger close-volume', which begins the next volume</source>
        <comment>ledger_volume_closed</comment>
        <translation>mit 'ledger close-volume' abschließen; das beginnt den nächsten Band</translation>
    </message>
    <message>
        <source>the ledger was begun on {ledger}; it takes no production run that is {run}</source>
        <comment>run_refused_emulated</comment>
        <translation>das Hauptbuch wurde mit {ledger} begonnen; es nimmt keinen Fertigungslauf an, der {run} ist</translation>
    </message>
    <message>
        <source>use the ledger of the other bench, or another purpose</source>
        <comment>run_refused_emulated</comment>
        <translation>das Hauptbuch des anderen Messplatzes nehmen oder einen anderen Zweck</translation>
    </message>
    <message>
        <source>the machine's clock is not synchronised</source>
        <comment>clock_unsynchronised</comment>
        <translation>die Uhr des Rechners wird nicht abgeglichen</translation>
    </message>
    <message>
        <source>switch on time synchronisation (NTP)</source>
        <comment>clock_unsynchronised</comment>
        <translation>den Abgleich der Uhrzeit (NTP) einschalten</translation>
    </message>
    <message>
        <source>only {room} GB are left for the ledger</source>
        <comment>disk_nearly_full</comment>
        <translation>für das Hauptbuch sind nur noch {room} GB frei</translation>
    </message>
    <message>
        <source>make room, or move the ledger to a larger disk</source>
        <comment>disk_nearly_full</comment>
        <translation>Platz schaffen oder das Hauptbuch auf einen größeren Datenträger legen</translation>
    </message>
    <message>
        <source>not ready: {reason}</source>
        <comment>nest_not_ready</comment>
        <translation>nicht bereit: {reason}</translation>
    </message>
    <message>
        <source>mend what is named, or run 'probewright checkup'</source>
        <comment>nest_not_ready</comment>
        <translation>beheben, was genannt ist, oder 'probewright checkup' aufrufen</translation>
    </message>
    <message>
        <source>this lot card cannot be read: {why}</source>
        <comment>lot_card_malformed</comment>
        <translation>diese Loskarte ist nicht lesbar: {why}</translation>
    </message>
    <message>
        <source>a lot card says LOT/lot/model/quantity/first serial</source>
        <comment>lot_card_malformed</comment>
        <translation>auf einer Loskarte steht LOT/Los/Modell/Menge/erste Seriennummer</translation>
    </message>
    <message>
        <source>the lot card names the model {model}, which this station does not have</source>
        <comment>lot_card_model</comment>
        <translation>die Loskarte nennt das Modell {model}, das diese Station nicht hat</translation>
    </message>
    <message>
        <source>bring the lot to a station that tests it, or add the model's documents</source>
        <comment>lot_card_model</comment>
        <translation>das Los zu einer Station bringen, die es prüft, oder die Dokumente des Modells ergänzen</translation>
    </message>
    <message>
        <source>{serial} is no serial of the model {model}</source>
        <comment>lot_card_serial</comment>
        <translation>{serial} ist keine Seriennummer des Modells {model}</translation>
    </message>
    <message>
        <source>have the lot card printed anew</source>
        <comment>lot_card_serial</comment>
        <translation>die Loskarte neu drucken lassen</translation>
    </message>
    <message>
        <source>nothing was scanned</source>
        <comment>scan_empty</comment>
        <translation>es wurde nichts gelesen</translation>
    </message>
    <message>
        <source>scan a badge, a lot card or a probe</source>
        <comment>scan_empty</comment>
        <translation>einen Ausweis, eine Loskarte oder eine Sonde lesen</translation>
    </message>
    <message>
        <source>the text is longer than {bound} characters</source>
        <comment>scan_too_long</comment>
        <translation>der Text ist länger als {bound} Zeichen</translation>
    </message>
    <message>
        <source>scan one code at a time: a badge, a lot card or a probe</source>
        <comment>scan_too_long</comment>
        <translation>immer nur einen Code lesen: Ausweis, Loskarte oder Sonde</translation>
    </message>
    <message>
        <source>the text holds characters that no code here has</source>
        <comment>scan_control</comment>
        <translation>der Text hat Zeichen, die hier kein Code hat</translation>
    </message>
    <message>
        <source>scan again; check the scanner's keyboard setting</source>
        <comment>scan_control</comment>
        <translation>noch einmal lesen; die Tastatureinstellung des Lesers prüfen</translation>
    </message>
    <message>
        <source>this is no badge, no lot card and no serial of a model of this station</source>
        <comment>scan_unknown</comment>
        <translation>das ist kein Ausweis, keine Loskarte und keine Seriennummer eines Modells dieser Station</translation>
    </message>
    <message>
        <source>scan the probe's own label, your badge, or the lot card</source>
        <comment>scan_unknown</comment>
        <translation>das Etikett der Sonde, den Ausweis oder die Loskarte lesen</translation>
    </message>
    <message>
        <source>nobody is signed in</source>
        <comment>nobody_signed_in</comment>
        <translation>niemand ist angemeldet</translation>
    </message>
    <message>
        <source>scan your badge</source>
        <comment>nobody_signed_in</comment>
        <translation>den Ausweis lesen</translation>
    </message>
    <message>
        <source>{person} ({role}) may not run probes</source>
        <comment>person_may_not</comment>
        <translation>{person} ({role}) darf keine Sonden prüfen</translation>
    </message>
    <message>
        <source>let an operator or engineer sign in</source>
        <comment>person_may_not</comment>
        <translation>jemand aus Bedienung oder Technik soll sich anmelden</translation>
    </message>
    <message>
        <source>runs of {person} go on</source>
        <comment>sign_in_while_testing</comment>
        <translation>Läufe von {person} sind noch im Gang</translation>
    </message>
    <message>
        <source>wait for their end, or let {person} sign out</source>
        <comment>sign_in_while_testing</comment>
        <translation>ihr Ende abwarten, oder {person} meldet sich ab</translation>
    </message>
    <message>
        <source>no lot is open</source>
        <comment>no_lot_open</comment>
        <translation>kein Los ist offen</translation>
    </message>
    <message>
        <source>scan the lot card</source>
        <comment>no_lot_open</comment>
        <translation>die Loskarte lesen</translation>
    </message>
    <message>
        <source>lot {lot} is open</source>
        <comment>lot_is_open</comment>
        <translation>Los {lot} ist offen</translation>
    </message>
    <message>
        <source>close it before another one is opened</source>
        <comment>lot_is_open</comment>
        <translation>es schließen, bevor ein anderes geöffnet wird</translation>
    </message>
    <message>
        <source>lot {lot} was closed</source>
        <comment>lot_was_closed</comment>
        <translation>Los {lot} wurde geschlossen</translation>
    </message>
    <message>
        <source>ask an engineer; a closed lot is not opened again</source>
        <comment>lot_was_closed</comment>
        <translation>die Technik fragen; ein geschlossenes Los wird nicht wieder geöffnet</translation>
    </message>
    <message>
        <source>lot {lot} was opened before with another card</source>
        <comment>lot_card_differs</comment>
        <translation>Los {lot} wurde zuvor mit einer anderen Karte geöffnet</translation>
    </message>
    <message>
        <source>find the card with the same model, quantity and serials</source>
        <comment>lot_card_differs</comment>
        <translation>die Karte mit demselben Modell, derselben Menge und denselben Seriennummern suchen</translation>
    </message>
    <message>
        <source>{serial} does not belong to lot {lot} ({first} to {last})</source>
        <comment>serial_of_other_lot</comment>
        <translation>{serial} gehört nicht zu Los {lot} ({first} bis {last})</translation>
    </message>
    <message>
        <source>put it back to its own lot</source>
        <comment>serial_of_other_lot</comment>
        <translation>zum eigenen Los zurücklegen</translation>
    </message>
    <message>
        <source>{serial} has passed already, in run {run}</source>
        <comment>serial_passed</comment>
        <translation>{serial} ist schon gut, nach Lauf {run}</translation>
    </message>
    <message>
        <source>put it on the tray for passed probes</source>
        <comment>serial_passed</comment>
        <translation>auf das Tablett „gut“ legen</translation>
    </message>
    <message>
        <source>{serial} is in test already</source>
        <comment>serial_in_nest</comment>
        <translation>{serial} wird schon geprüft</translation>
    </message>
    <message>
        <source>scan the probe that you hold</source>
        <comment>serial_in_nest</comment>
        <translation>die Sonde lesen, die in der Hand ist</translation>
    </message>
    <message>
        <source>{serial} has had all its {tries} tries</source>
        <comment>serial_tries_used</comment>
        <translation>{serial} hat alle {tries} Versuche gehabt</translation>
    </message>
    <message>
        <source>put it on the tray for failed probes</source>
        <comment>serial_tries_used</comment>
        <translation>auf das Tablett „schlecht“ legen</translation>
    </message>
    <message>
        <source>{serial} must rest for another {seconds} s</source>
        <comment>serial_rests</comment>
        <translation>{serial} muss noch {seconds} s ruhen</translation>
    </message>
    <message>
        <source>set it aside and take the next one</source>
        <comment>serial_rests</comment>
        <translation>beiseitelegen und die nächste nehmen</translation>
    </message>
    <message>
        <source>{serial} was tested twice without a verdict</source>
        <comment>serial_voided_twice</comment>
        <translation>{serial} wurde zweimal ohne Urteil geprüft</translation>
    </message>
    <message>
        <source>set it aside and call an engineer</source>
        <comment>serial_voided_twice</comment>
        <translation>beiseitelegen und die Technik rufen</translation>
    </message>
    <message>
        <source>{serial} is awaited here</source>
        <comment>other_probe_awaited</comment>
        <translation>hier wird {serial} erwartet</translation>
    </message>
    <message>
        <source>put it in first, or wait until it is called off</source>
        <comment>other_probe_awaited</comment>
        <translation>diese zuerst einlegen, oder warten, bis sie abgesagt ist</translation>
    </message>
    <message>
        <source>no nest is empty</source>
        <comment>no_nest_empty</comment>
        <translation>kein Nest ist leer</translation>
    </message>
    <message>
        <source>take a tested probe out first</source>
        <comment>no_nest_empty</comment>
        <translation>zuerst eine geprüfte Sonde herausnehmen</translation>
    </message>
    <message>
        <source>no nest is free</source>
        <comment>no_nest_free</comment>
        <translation>kein Nest ist frei</translation>
    </message>
    <message>
        <source>wait for a verdict</source>
        <comment>no_nest_free</comment>
        <translation>ein Urteil abwarten</translation>
    </message>
    <message>
        <source>a probe was put into nest {other}, but {serial} was scanned for this nest</source>
        <comment>probe_in_other_nest</comment>
        <translation>eine Sonde wurde in Nest {other} gelegt, {serial} war aber für dieses Nest gelesen</translation>
    </message>
    <message>
        <source>take it out there and scan it again</source>
        <comment>probe_in_other_nest</comment>
        <translation>dort herausnehmen und noch einmal lesen</translation>
    </message>
    <message>
        <source>the devices are being looked for</source>
        <comment>nest_connecting</comment>
        <translation>die Geräte werden gesucht</translation>
    </message>
    <message>
        <source>wait, or check their cables and power</source>
        <comment>nest_connecting</comment>
        <translation>warten, oder Kabel und Strom prüfen</translation>
    </message>
    <message>
        <source>the station has no nest {nest}</source>
        <comment>nest_not_there</comment>
        <translation>die Station hat kein Nest {nest}</translation>
    </message>
    <message>
        <source>use one of the nests that its file names</source>
        <comment>nest_not_there</comment>
        <translation>eines der Nester nehmen, die in ihrer Datei stehen</translation>
    </message>
    <message>
        <source>nothing is armed or running here</source>
        <comment>nest_idle</comment>
        <translation>hier ist nichts vorgemerkt und nichts im Gang</translation>
    </message>
    <message>
        <source>there is nothing to stop</source>
        <comment>nest_idle</comment>
        <translation>es gibt nichts anzuhalten</translation>
    </message>
    <message>
        <source>probe {serial} is being tested</source>
        <comment>nest_busy</comment>
        <translation>Sonde {serial} wird geprüft</translation>
    </message>
    <message>
        <source>wait for its verdict, or stop it</source>
        <comment>nest_busy</comment>
        <translation>ihr Urteil abwarten oder anhalten</translation>
    </message>
    <message>
        <source>a probe was in the nest before {serial} was scanned</source>
        <comment>nest_occupied</comment>
        <translation>eine Sonde lag im Nest, bevor {serial} gelesen wurde</translation>
    </message>
    <message>
        <source>take the probe out, scan it again, then put it in</source>
        <comment>nest_occupied</comment>
        <translation>die Sonde herausnehmen, noch einmal lesen, dann einlegen</translation>
    </message>
    <message>
        <source>'{serial}' is no serial number of one of this station's models</source>
        <comment>serial_unknown</comment>
        <translation>„{serial}“ ist keine Seriennummer eines Modells dieser Station</translation>
    </message>
    <message>
        <source>scan the probe's own label; check the model's serial pattern</source>
        <comment>serial_unknown</comment>
        <translation>das Etikett der Sonde lesen; das Muster der Seriennummern prüfen</translation>
    </message>
    <message>
        <source>a production run needs an open lot, an opening check and signed documents, which this command does not have</source>
        <comment>purpose_not_possible</comment>
        <translation>ein Fertigungslauf braucht ein offenes Los, eine Eröffnungsprüfung und unterschriebene Dokumente, die es hier nicht gibt</translation>
    </message>
    <message>
        <source>use purpose engineering or training</source>
        <comment>purpose_not_possible</comment>
        <translation>den Zweck Technik oder Schulung nehmen</translation>
    </message>
    <message>
        <source>probe {serial} was not put in within 20 s</source>
        <comment>arming_ended</comment>
        <translation>Sonde {serial} wurde nicht innerhalb von 20 s eingelegt</translation>
    </message>
    <message>
        <source>scan it again, then put it in</source>
        <comment>arming_ended</comment>
        <translation>noch einmal lesen, dann einlegen</translation>
    </message>
    <message>
        <source>the scan of {serial} was taken back by {who}</source>
        <comment>arming_taken_back</comment>
        <translation>{who} hat die Lesung von {serial} zurückgenommen</translation>
    </message>
    <message>
        <source>scan the probe that is to be tested</source>
        <comment>arming_taken_back</comment>
        <translation>die Sonde lesen, die geprüft werden soll</translation>
    </message>
    <message>
        <source>the certificate {number} held up to {due}</source>
        <comment>certificate_ended</comment>
        <translation>der Schein {number} galt bis {due}</translation>
    </message>
    <message>
        <source>have the device calibrated and put its new certificate into the configuration</source>
        <comment>certificate_ended</comment>
        <translation>das Gerät kalibrieren lassen und den neuen Schein in die Konfiguration legen</translation>
    </message>
    <message>
        <source>the certificate {number} holds up to {due} only</source>
        <comment>certificate_ends_soon</comment>
        <translation>der Schein {number} gilt nur noch bis {due}</translation>
    </message>
    <message>
        <source>plan the device's calibration</source>
        <comment>certificate_ends_soon</comment>
        <translation>die Kalibrierung des Geräts planen</translation>
    </message>
    <message>
        <source>the lid was opened during the run</source>
        <comment>lid_opened</comment>
        <translation>der Deckel wurde während des Laufs geöffnet</translation>
    </message>
    <message>
        <source>scan the probe again and leave the lid closed</source>
        <comment>lid_opened</comment>
        <translation>die Sonde noch einmal lesen und den Deckel zulassen</translation>
    </message>
    <message>
        <source>the probe was taken out during the run</source>
        <comment>probe_unplugged</comment>
        <translation>die Sonde wurde während des Laufs herausgenommen</translation>
    </message>
    <message>
        <source>scan the probe again and leave it in until the verdict</source>
        <comment>probe_unplugged</comment>
        <translation>die Sonde noch einmal lesen und bis zum Urteil darin lassen</translation>
    </message>
    <message>
        <source>the probe was taken out and put in again during the run</source>
        <comment>probe_exchanged</comment>
        <translation>die Sonde wurde während des Laufs herausgenommen und wieder eingelegt</translation>
    </message>
    <message>
        <source>scan the probe that is in the nest again and leave it in until the verdict</source>
        <comment>probe_exchanged</comment>
        <translation>die Sonde im Nest noch einmal lesen und bis zum Urteil darin lassen</translation>
    </message>
    <message>
        <source>the phantom stores no set point with the ratio {ratio}</source>
        <comment>set_point_not_stored</comment>
        <translation>im Phantom ist kein Sollpunkt mit dem Verhältnis {ratio} gespeichert</translation>
    </message>
    <message>
        <source>check the phantom against its certificate and the model's set points</source>
        <comment>set_point_not_stored</comment>
        <translation>das Phantom mit seinem Schein und den Sollpunkten des Modells vergleichen</translation>
    </message>
    <message>
        <source>the run took longer than any run can</source>
        <comment>run_too_long</comment>
        <translation>der Lauf hat länger gedauert, als ein Lauf kann</translation>
    </message>
    <message>
        <source>check the devices' cables, then scan the probe again</source>
        <comment>run_too_long</comment>
        <translation>die Kabel der Geräte prüfen, dann die Sonde noch einmal lesen</translation>
    </message>
    <message>
        <source>a part of this run did not go into the ledger</source>
        <comment>run_stage_lost</comment>
        <translation>ein Teil dieses Laufs kam nicht ins Hauptbuch</translation>
    </message>
    <message>
        <source>start the program again</source>
        <comment>run_stage_lost</comment>
        <translation>das Programm neu starten</translation>
    </message>
    <message>
        <source>an earlier start left a run of {serial} open; it was closed as {verdict}</source>
        <comment>run_closed_late</comment>
        <translation>ein früherer Start ließ einen Lauf von {serial} offen; er wurde als {verdict} geschlossen</translation>
    </message>
    <message>
        <source>nothing is to be done; 'probewright trace {serial}' shows it</source>
        <comment>run_closed_late</comment>
        <translation>nichts ist zu tun; 'probewright trace {serial}' zeigt ihn</translation>
    </message>
    <message>
        <source>the program made a mistake: {what}</source>
        <comment>our_bug</comment>
        <translation>das Programm hat einen Fehler gemacht: {what}</translation>
    </message>
    <message>
        <source>report it with the ledger and the record of the bytes</source>
        <comment>our_bug</comment>
        <translation>ihn mit dem Hauptbuch und der Aufzeichnung der Bytes melden</translation>
    </message>
    <message>
        <source>nest {nest} has {phantoms} phantoms and {adapters} adapters</source>
        <comment>setup_nest_incomplete</comment>
        <translation>Nest {nest} hat {phantoms} Phantome und {adapters} Adapter</translation>
    </message>
    <message>
        <source>give each nest one of both</source>
        <comment>setup_nest_incomplete</comment>
        <translation>jedem Nest eines von beiden geben</translation>
    </message>
    <message>
        <source>no device was found</source>
        <comment>setup_no_device</comment>
        <translation>kein Gerät wurde gefunden</translation>
    </message>
    <message>
        <source>plug in the devices of the nests and switch them on, or open the emulated bench</source>
        <comment>setup_no_device</comment>
        <translation>die Geräte der Nester anstecken und einschalten, oder den nachgebildeten Messplatz öffnen</translation>
    </message>
</context>
</TS>
