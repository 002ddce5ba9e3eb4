<?xml version="1.0" encoding="utf-8"?>
<!DOCTYPE TS>
<TS version="2.1" language="es" sourcelanguage="en">
<context>
    <name>About</name>
    <message>
        <source>Probewright tests pulse-oximetry probes on a production station and keeps the evidence.</source>
        <translation>Probewright prueba sondas de pulsioximetría en una estación de producción y conserva las pruebas.</translation>
    </message>
    <message>
        <source>What a pass says, and what it does not</source>
        <translation>Qué dice «pasa» y qué no</translation>
    </message>
    <message>
        <source>This program</source>
        <translation>Este programa</translation>
    </message>
</context>
<context>
    <name>Berth</name>
    <message>
        <source>Likely cause: %1.</source>
        <translation>Causa probable: %1.</translation>
    </message>
    <message>
        <source>Nearest to a limit: %1, with %2 % of its room left.</source>
        <translation>Lo más cercano a un límite: %1, con un %2 % de margen.</translation>
    </message>
    <message>
        <source>Not recorded</source>
        <translation>Sin registrar</translation>
    </message>
    <message>
        <source>The ledger did not take this run, so it has no verdict.</source>
        <translation>El registro no aceptó esta pasada, así que no tiene veredicto.</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>No está listo</translation>
    </message>
    <message>
        <source>last: %1</source>
        <translation>última: %1</translation>
    </message>
    <message>
        <source>last: not recorded</source>
        <translation>última: sin registrar</translation>
    </message>
    <message>
        <source>%1 s left</source>
        <translation>quedan %1 s</translation>
    </message>
    <message>
        <source>Close the lid</source>
        <translation>Cierre la tapa</translation>
    </message>
    <message>
        <source>Plug it in</source>
        <translation>Enchúfela</translation>
    </message>
    <message>
        <source>Put it in</source>
        <translation>Póngala</translation>
    </message>
    <message>
        <source>part %1 of %2</source>
        <translation>parte %1 de %2</translation>
    </message>
    <message>
        <source>empty again</source>
        <translation>vacío de nuevo</translation>
    </message>
    <message>
        <source>Empty</source>
        <translation>Vacío</translation>
    </message>
    <message>
        <source>Take it out</source>
        <translation>Sáquela</translation>
    </message>
    <message>
        <source>Nest %1</source>
        <translation>Nido %1</translation>
    </message>
    <message>
        <source>Pass</source>
        <translation>Pasa</translation>
    </message>
    <message>
        <source>Fail</source>
        <translation>Falla</translation>
    </message>
    <message>
        <source>Void</source>
        <translation>Nula</translation>
    </message>
    <message>
        <source>production</source>
        <translation>producción</translation>
    </message>
    <message>
        <source>engineering</source>
        <translation>técnica</translation>
    </message>
    <message>
        <source>reference probe</source>
        <translation>sonda de referencia</translation>
    </message>
    <message>
        <source>challenge probe</source>
        <translation>sonda de contraste</translation>
    </message>
    <message>
        <source>gauge study</source>
        <translation>estudio de medida</translation>
    </message>
    <message>
        <source>echo</source>
        <translation>eco</translation>
    </message>
    <message>
        <source>training</source>
        <translation>formación</translation>
    </message>
    <message>
        <source>returned probe</source>
        <translation>sonda devuelta</translation>
    </message>
</context>
<context>
    <name>Details</name>
    <message>
        <source>Run %1, purpose %2, took %3 s</source>
        <translation>Pasada %1, propósito %2, duró %3 s</translation>
    </message>
    <message>
        <source>%1 repeated exchanges</source>
        <translation>%1 consultas repetidas</translation>
    </message>
    <message>
        <source>Demonstration: made on an emulated bench.</source>
        <translation>Demostración: hecha en un banco emulado.</translation>
    </message>
    <message>
        <source>%1 in nest %2: %3</source>
        <translation>%1 en el nido %2: %3</translation>
    </message>
    <message>
        <source>The run ended before its first reading.</source>
        <translation>La pasada acabó antes de su primera lectura.</translation>
    </message>
</context>
<context>
    <name>Help</name>
    <message>
        <source>What to scan</source>
        <translation>Qué se lee</translation>
    </message>
    <message>
        <source>The scan field always listens. Scan, or type and press Enter. The sentence below it says what was done, or why not and what to do.</source>
        <translation>El campo de lectura siempre escucha. Lea, o escriba y pulse Intro. La frase de debajo dice qué se hizo, o por qué no y qué hacer.</translation>
    </message>
    <message>
        <source>your badge</source>
        <translation>su tarjeta personal</translation>
    </message>
    <message>
        <source>signs you in; what is read from it is never shown</source>
        <translation>le da entrada; lo que se lee de ella no se muestra nunca</translation>
    </message>
    <message>
        <source>a lot card</source>
        <translation>una tarjeta de lote</translation>
    </message>
    <message>
        <source>opens its lot</source>
        <translation>abre su lote</translation>
    </message>
    <message>
        <source>a probe's serial</source>
        <translation>el número de serie de una sonda</translation>
    </message>
    <message>
        <source>arms the next free nest for 20 seconds: put that probe into that nest and close the lid</source>
        <translation>prepara el siguiente nido libre durante 20 segundos: ponga esa sonda en ese nido y cierre la tapa</translation>
    </message>
    <message>
        <source>the next serial is for nest 3</source>
        <translation>el siguiente número de serie es para el nido 3</translation>
    </message>
    <message>
        <source>What a berth shows</source>
        <translation>Qué muestra cada puesto</translation>
    </message>
    <message>
        <source>Bar</source>
        <translation>Barra</translation>
    </message>
    <message>
        <source>The checks of the run in their order, each as wide as its time. Full is done. A struck-out part was left out; a taller one failed.</source>
        <translation>Las comprobaciones de la pasada en su orden, cada una tan ancha como su tiempo. Lo lleno está hecho. Una parte tachada se omitió; una más alta ha fallado.</translation>
    </message>
    <message>
        <source>Rails</source>
        <translation>Raíles</translation>
    </message>
    <message>
        <source>The two thick lines are the acceptance limits of every check, drawn to one scale; the dotted line is the middle, or what is typical. Each diamond is a reading, its vertical line the uncertainty. A crossed square lies outside. The reading that is nearest to an edge is named.</source>
        <translation>Las dos líneas gruesas son los límites de aceptación de todas las comprobaciones, a una escala; la línea de puntos es el centro, o lo habitual. Cada rombo es una lectura, su línea vertical la incertidumbre. Un cuadrado con cruz queda fuera. La lectura más cercana a un borde lleva su nombre.</translation>
    </message>
    <message>
        <source>Grey posts</source>
        <translation>Postes grises</translation>
    </message>
    <message>
        <source>How much of the limit is given up for uncertainty. The limit itself is at the far end of the post.</source>
        <translation>Cuánto del límite se cede a la incertidumbre. El límite mismo está en el extremo del poste.</translation>
    </message>
    <message>
        <source>Small plots</source>
        <translation>Curvas pequeñas</translation>
    </message>
    <message>
        <source>Spectra and pulses of the red LED (full line) and the infrared one (dashed line).</source>
        <translation>Espectros y pulsos del LED rojo (línea continua) y del infrarrojo (línea de trazos).</translation>
    </message>
    <message>
        <source>Below</source>
        <translation>Debajo</translation>
    </message>
    <message>
        <source>What to do with the probe; after a fail which check failed, by how much, and the likely cause.</source>
        <translation>Qué hacer con la sonda; tras un fallo, qué comprobación, por cuánto y la causa probable.</translation>
    </message>
    <message>
        <source>Keys</source>
        <translation>Teclas</translation>
    </message>
    <message>
        <source>Keyboard and scanner are enough for everything. These work while the scan field is empty.</source>
        <translation>Bastan el teclado y el lector. Estas valen mientras el campo de lectura está vacío.</translation>
    </message>
    <message>
        <source>Arrows</source>
        <translation>Flechas</translation>
    </message>
    <message>
        <source>choose a berth</source>
        <translation>eligen un puesto</translation>
    </message>
    <message>
        <source>Enter</source>
        <translation>Intro</translation>
    </message>
    <message>
        <source>the readings of the chosen berth's last run; Enter or Esc closes them</source>
        <translation>las lecturas de la última pasada del puesto elegido; Intro o Esc las cierra</translation>
    </message>
    <message>
        <source>stop the chosen nest, or take its scan back; asks first</source>
        <translation>detiene el nido elegido o anula su lectura; pregunta antes</translation>
    </message>
    <message>
        <source>sign out</source>
        <translation>salir</translation>
    </message>
    <message>
        <source>Ctrl and +, -, 0</source>
        <translation>Ctrl y +, -, 0</translation>
    </message>
    <message>
        <source>larger text, smaller text, as at first</source>
        <translation>texto mayor, texto menor, como al principio</translation>
    </message>
    <message>
        <source>the menu</source>
        <translation>el menú</translation>
    </message>
    <message>
        <source>this page</source>
        <translation>esta página</translation>
    </message>
    <message>
        <source>When something is wrong</source>
        <translation>Cuando algo va mal</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>No está listo</translation>
    </message>
    <message>
        <source>The top of the window and the berth say why, and what to do. Nothing can be tested there until then.</source>
        <translation>Arriba en la ventana y en el puesto se dice por qué y qué hacer. Hasta entonces allí no se puede probar nada.</translation>
    </message>
    <message>
        <source>Void</source>
        <translation>Nula</translation>
    </message>
    <message>
        <source>The run could not be completed or trusted. The probe has neither passed nor failed.</source>
        <translation>La pasada no se pudo acabar o no es fiable. La sonda ni pasa ni falla.</translation>
    </message>
    <message>
        <source>A run stops</source>
        <translation>Una pasada se detiene</translation>
    </message>
    <message>
        <source>Opening the lid or taking the probe out stops the run. After a reading outside its limits, that is a fail.</source>
        <translation>Abrir la tapa o sacar la sonda detiene la pasada. Tras una lectura fuera de sus límites, eso es un fallo.</translation>
    </message>
    <message>
        <source>Power cut</source>
        <translation>Corte de corriente</translation>
    </message>
    <message>
        <source>At the next start the window tells which probe was in which nest. A run that was cut short is never a pass.</source>
        <translation>En el siguiente arranque la ventana dice qué sonda estaba en qué nido. Una pasada cortada nunca pasa.</translation>
    </message>
</context>
<context>
    <name>LateNotice</name>
    <message>
        <source>A reading already lay outside its limits, so the run was closed as a fail. Take the probe out and put it on the tray for failed probes.</source>
        <translation>Una lectura ya estaba fuera de sus límites, así que la pasada se cerró como fallo. Saque la sonda y póngala en la bandeja de las que fallan.</translation>
    </message>
    <message>
        <source>The run was closed as void: nothing was decided. Take the probe out; scan it again to test it.</source>
        <translation>La pasada se cerró como nula: no se decidió nada. Saque la sonda; léala otra vez para probarla.</translation>
    </message>
    <message>
        <source>The program ended last time in the middle of these runs. Look into each nest first.</source>
        <translation>El programa acabó la última vez en medio de estas pasadas. Mire primero cada nido.</translation>
    </message>
    <message>
        <source>Nest %1</source>
        <translation>Nido %1</translation>
    </message>
    <message>
        <source>Their readings up to then are in the ledger. Press Enter to go on.</source>
        <translation>Sus lecturas hasta entonces están en el registro. Pulse Intro para seguir.</translation>
    </message>
</context>
<context>
    <name>Plots</name>
    <message>
        <source>spectra</source>
        <translation>espectros</translation>
    </message>
    <message>
        <source>%1 to %2 nm</source>
        <translation>%1 a %2 nm</translation>
    </message>
    <message>
        <source>pulses</source>
        <translation>pulsos</translation>
    </message>
    <message>
        <source>pulses, %1 s</source>
        <translation>pulsos, %1 s</translation>
    </message>
</context>
<context>
    <name>Reading</name>
    <message>
        <source>no reading, because of %1</source>
        <translation>sin lectura, por %1</translation>
    </message>
    <message>
        <source>no reading: too much light</source>
        <translation>sin lectura: demasiada luz</translation>
    </message>
    <message>
        <source>no reading: too little light</source>
        <translation>sin lectura: poca luz</translation>
    </message>
    <message>
        <source>no reading: no line in the spectrum</source>
        <translation>sin lectura: ninguna línea en el espectro</translation>
    </message>
    <message>
        <source>no reading: the line runs out of the spectrum</source>
        <translation>sin lectura: la línea se sale del espectro</translation>
    </message>
    <message>
        <source>no reading: no pulse</source>
        <translation>sin lectura: sin pulso</translation>
    </message>
    <message>
        <source>no reading: the ID resistor is open</source>
        <translation>sin lectura: la resistencia ID está abierta</translation>
    </message>
    <message>
        <source>not measured</source>
        <translation>no medido</translation>
    </message>
    <message>
        <source>no reading (%1)</source>
        <translation>sin lectura (%1)</translation>
    </message>
    <message>
        <source>points</source>
        <translation>puntos</translation>
    </message>
    <message>
        <source>yes</source>
        <translation>sí</translation>
    </message>
    <message>
        <source>no</source>
        <translation>no</translation>
    </message>
    <message>
        <source>accepted from %1 to %2</source>
        <translation>aceptado de %1 a %2</translation>
    </message>
    <message>
        <source>accepted up to %1</source>
        <translation>aceptado hasta %1</translation>
    </message>
    <message>
        <source>accepted from %1 up</source>
        <translation>aceptado desde %1</translation>
    </message>
</context>
<context>
    <name>Said</name>
    <message>
        <source>phantom of nest {nest}</source>
        <translation>fantasma del nido {nest}</translation>
    </message>
    <message>
        <source>adapter of nest {nest}</source>
        <translation>adaptador del nido {nest}</translation>
    </message>
    <message>
        <source>nest {nest}</source>
        <translation>nido {nest}</translation>
    </message>
    <message>
        <source>contact, ID and dark current</source>
        <translation>contacto, ID y oscuridad</translation>
    </message>
    <message>
        <source>forward voltages</source>
        <translation>tensiones directas</translation>
    </message>
    <message>
        <source>pulses at ratio {ratio}</source>
        <translation>pulsos a razón {ratio}</translation>
    </message>
    <message>
        <source>spectra</source>
        <translation>espectros</translation>
    </message>
    <message>
        <source>the station stopped during this run; closed at the next start</source>
        <translation>la estación se paró durante esta pasada; se cerró en el siguiente arranque</translation>
    </message>
    <message>
        <source>stopped by {who}</source>
        <translation>detenida por {who}</translation>
    </message>
    <message>
        <source>take the probe out and apply its label</source>
        <translation>saque la sonda y ponga su etiqueta</translation>
    </message>
    <message>
        <source>apply its label</source>
        <translation>ponga su etiqueta</translation>
    </message>
    <message>
        <source>take the probe out; this run releases no label</source>
        <translation>saque la sonda; esta pasada no da etiqueta</translation>
    </message>
    <message>
        <source>this run releases no label</source>
        <translation>esta pasada no da etiqueta</translation>
    </message>
    <message>
        <source>take the probe out and put it on the tray for failed probes</source>
        <translation>saque la sonda y póngala en la bandeja de las que fallan</translation>
    </message>
    <message>
        <source>put it on the tray for failed probes</source>
        <translation>póngala en la bandeja de las que fallan</translation>
    </message>
    <message>
        <source>take the probe out and put it on the tray for {rework}</source>
        <translation>saque la sonda y póngala en la bandeja para {rework}</translation>
    </message>
    <message>
        <source>put it on the tray for {rework}</source>
        <translation>póngala en la bandeja para {rework}</translation>
    </message>
    <message>
        <source>take the probe out; nothing was decided about it</source>
        <translation>saque la sonda; no se decidió nada sobre ella</translation>
    </message>
    <message>
        <source>nothing was decided about it</source>
        <translation>no se decidió nada sobre ella</translation>
    </message>
    <message>
        <source>take the probe out and keep it apart: this run is not on record</source>
        <translation>saque la sonda y guárdela aparte: esta pasada no está registrada</translation>
    </message>
    <message>
        <source>keep it apart: this run is not on record</source>
        <translation>guárdela aparte: esta pasada no está registrada</translation>
    </message>
    <message>
        <source>put probe {serial} into nest {nest}</source>
        <translation>ponga la sonda {serial} en el nido {nest}</translation>
    </message>
    <message>
        <source>plug probe {serial} into the adapter</source>
        <translation>enchufe la sonda {serial} en el adaptador</translation>
    </message>
    <message>
        <source>close the lid</source>
        <translation>cierre la tapa</translation>
    </message>
    <message>
        <source>take the probe out of nest {nest}</source>
        <translation>saque la sonda del nido {nest}</translation>
    </message>
    <message>
        <source>scan a probe</source>
        <translation>lea una sonda</translation>
    </message>
    <message>
        <source>testing {serial}</source>
        <translation>probando {serial}</translation>
    </message>
    <message>
        <source>no answer in time</source>
        <translation>sin respuesta a tiempo</translation>
    </message>
    <message>
        <source>nest {nest} is stopped</source>
        <translation>el nido {nest} está detenido</translation>
    </message>
    <message>
        <source>{name}, {role}, is signed in</source>
        <translation>ha entrado {name}, {role}</translation>
    </message>
    <message>
        <source>{name} is signed out</source>
        <translation>ha salido {name}</translation>
    </message>
    <message>
        <source>lot {lot} is closed</source>
        <translation>el lote {lot} está cerrado</translation>
    </message>
    <message>
        <source>lot {lot} is open: {quantity} of {model}</source>
        <translation>el lote {lot} está abierto: {quantity} de {model}</translation>
    </message>
    <message>
        <source>scan the probe for nest {nest}</source>
        <translation>lea la sonda para el nido {nest}</translation>
    </message>
    <message>
        <source>{number} on {due}</source>
        <translation>{number} el {due}</translation>
    </message>
    <message>
        <source>operator</source>
        <translation>operario</translation>
    </message>
    <message>
        <source>engineer</source>
        <translation>técnico</translation>
    </message>
    <message>
        <source>quality</source>
        <translation>calidad</translation>
    </message>
    <message>
        <source>auditor</source>
        <translation>auditor</translation>
    </message>
    <message>
        <source>steward</source>
        <translation>administrador</translation>
    </message>
</context>
<context>
    <name>Workspace</name>
    <message>
        <source>Line</source>
        <translation>Línea</translation>
    </message>
</context>
<context>
    <name>probewright::windows::AnswerLine</name>
    <message>
        <source>Nobody is signed in. Scan your badge.</source>
        <translation>No ha entrado nadie. Lea su tarjeta personal.</translation>
    </message>
    <message>
        <source>No lot is open. Scan the lot card.</source>
        <translation>No hay ningún lote abierto. Lea la tarjeta de lote.</translation>
    </message>
    <message>
        <source>Scan a probe.</source>
        <translation>Lea una sonda.</translation>
    </message>
</context>
<context>
    <name>probewright::windows::LinePage</name>
    <message>
        <source>Nest %1 has no finished run yet.</source>
        <translation>El nido %1 no tiene todavía ninguna pasada acabada.</translation>
    </message>
    <message>
        <source>These probes were being tested</source>
        <translation>Estas sondas se estaban probando</translation>
    </message>
    <message>
        <source>Stop nest %1? Press F8 once more.</source>
        <translation>¿Detener el nido %1? Pulse F8 otra vez.</translation>
    </message>
    <message>
        <source>Close the lot? Choose it once more.</source>
        <translation>¿Cerrar el lote? Elíjalo otra vez.</translation>
    </message>
</context>
<context>
    <name>probewright::windows::MainWindow</name>
    <message>
        <source>Demonstration</source>
        <translation>Demostración</translation>
    </message>
    <message>
        <source>Demonstration
at speed %1</source>
        <translation>Demostración
a velocidad %1</translation>
    </message>
    <message>
        <source>Menu (F10)</source>
        <translation>Menú (F10)</translation>
    </message>
    <message>
        <source>Help: the line</source>
        <translation>Ayuda: la línea</translation>
    </message>
    <message>
        <source>About Probewright</source>
        <translation>Acerca de Probewright</translation>
    </message>
    <message>
        <source>Sign out</source>
        <translation>Salir</translation>
    </message>
    <message>
        <source>Stop the chosen nest</source>
        <translation>Detener el nido elegido</translation>
    </message>
    <message>
        <source>Close the lot</source>
        <translation>Cerrar el lote</translation>
    </message>
    <message>
        <source>Sound at a verdict</source>
        <translation>Sonido con el veredicto</translation>
    </message>
    <message>
        <source>Help</source>
        <translation>Ayuda</translation>
    </message>
    <message>
        <source>Leave</source>
        <translation>Dejar el programa</translation>
    </message>
    <message>
        <source>Colours</source>
        <translation>Colores</translation>
    </message>
    <message>
        <source>As the system</source>
        <translation>Como el sistema</translation>
    </message>
    <message>
        <source>Light</source>
        <translation>Claro</translation>
    </message>
    <message>
        <source>Dark</source>
        <translation>Oscuro</translation>
    </message>
    <message>
        <source>Text size</source>
        <translation>Tamaño del texto</translation>
    </message>
    <message>
        <source>Language</source>
        <translation>Idioma</translation>
    </message>
</context>
<context>
    <name>probewright::windows::PlayStrip</name>
    <message>
        <source>Emulated bench, next (F5):</source>
        <translation>Banco emulado, lo siguiente (F5):</translation>
    </message>
    <message>
        <source>scan a badge</source>
        <translation>leer una tarjeta personal</translation>
    </message>
    <message>
        <source>scan the lot card</source>
        <translation>leer la tarjeta de lote</translation>
    </message>
    <message>
        <source>scan the next probe</source>
        <translation>leer la sonda siguiente</translation>
    </message>
    <message>
        <source>put the probe into nest %1</source>
        <translation>poner la sonda en el nido %1</translation>
    </message>
    <message>
        <source>take the probe out of nest %1</source>
        <translation>sacar la sonda del nido %1</translation>
    </message>
    <message>
        <source>wait for a verdict</source>
        <translation>esperar un veredicto</translation>
    </message>
</context>
<context>
    <name>probewright::windows::ReadinessStrip</name>
    <message>
        <source>Stopped</source>
        <translation>Parado</translation>
    </message>
    <message>
        <source>The line ended by a mistake of the program. Close the window and start it again.</source>
        <translation>La línea acabó por un error del programa. Cierre la ventana y arranque de nuevo.</translation>
    </message>
    <message>
        <source>Not ready</source>
        <translation>No está listo</translation>
    </message>
    <message>
        <source>Ready</source>
        <translation>Listo</translation>
    </message>
    <message>
        <source>Next due: %1</source>
        <translation>Lo próximo que vence: %1</translation>
    </message>
    <message>
        <source>Nobody is signed in</source>
        <translation>No ha entrado nadie</translation>
    </message>
    <message>
        <source>Lot %1, %2, sheet revision %3</source>
        <translation>Lote %1, %2, hoja revisión %3</translation>
    </message>
    <message>
        <source>No lot is open</source>
        <translation>No hay ningún lote abierto</translation>
    </message>
</context>
<context>
    <name>probewright::windows::ScanField</name>
    <message>
        <source>Scan a probe, a badge or a lot card</source>
        <translation>Lea una sonda, una tarjeta personal o una tarjeta de lote</translation>
    </message>
    <message>
        <source>Scan field</source>
        <translation>Campo de lectura</translation>
    </message>
</context>
<context>
    <name>probewright::windows::SetupPage</name>
    <message>
        <source>&amp;Use these devices</source>
        <translation>&amp;Usar estos aparatos</translation>
    </message>
    <message>
        <source>&amp;Open the emulated bench</source>
        <translation>&amp;Abrir el banco emulado</translation>
    </message>
    <message>
        <source>Set up this station</source>
        <translation>Preparar esta estación</translation>
    </message>
    <message>
        <source>Plug in the phantom and the adapter of nest 1 and switch them on, then those of nest 2, and so on. Each appears below and is given the lowest nest that lacks it. Change the number where it is wrong.</source>
        <translation>Enchufe y encienda el fantasma y el adaptador del nido 1, luego los del nido 2, y así sucesivamente. Cada uno aparece abajo y recibe el nido más bajo al que le falta. Cambie el número donde no sea correcto.</translation>
    </message>
    <message>
        <source>The emulated bench is all devices in software, to learn and to try. It needs nothing plugged in, and what it makes is marked as a demonstration.</source>
        <translation>El banco emulado son todos los aparatos en software, para aprender y probar. No hace falta enchufar nada, y lo que hace queda marcado como demostración.</translation>
    </message>
    <message>
        <source>unknown</source>
        <translation>desconocido</translation>
    </message>
    <message>
        <source>nest </source>
        <translation>nido </translation>
    </message>
    <message>
        <source>not used</source>
        <translation>sin usar</translation>
    </message>
    <message>
        <source>Nest of %1</source>
        <translation>Nido de %1</translation>
    </message>
    <message>
        <source>Phantom %1</source>
        <translation>Fantasma %1</translation>
    </message>
    <message>
        <source>Adapter %1</source>
        <translation>Adaptador %1</translation>
    </message>
    <message>
        <source>certificate %1, at %2</source>
        <translation>certificado %1, en %2</translation>
    </message>
    <message>
        <source>1 nest is complete.</source>
        <translation>1 nido está completo.</translation>
    </message>
    <message>
        <source>%1 nests are complete.</source>
        <translation>%1 nidos están completos.</translation>
    </message>
    <message>
        <source>Looking at %1 ports ...</source>
        <translation>Mirando %1 puertos ...</translation>
    </message>
</context>
<context>
    <name>probewright::windows::Sheet</name>
    <message>
        <source>Close (Esc)</source>
        <translation>Cerrar (Esc)</translation>
    </message>
</context>
<context>
    <name>probewright::windows::Tally</name>
    <message>
        <source>tested</source>
        <translation>probadas</translation>
    </message>
    <message>
        <source>%1 of %2 in this lot</source>
        <translation>%1 de %2 de este lote</translation>
    </message>
    <message>
        <source>passed first time</source>
        <translation>pasan a la primera</translation>
    </message>
    <message>
        <source>%1 % of %2</source>
        <translation>%1 % de %2</translation>
    </message>
    <message>
        <source>failed</source>
        <translation>fallan</translation>
    </message>
    <message>
        <source>void</source>
        <translation>nulas</translation>
    </message>
    <message>
        <source>an hour</source>
        <translation>por hora</translation>
    </message>
    <message>
        <source>Checks that failed most</source>
        <translation>Lo que más falla</translation>
    </message>
</context>
</TS>
