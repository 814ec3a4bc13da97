PRAGMA application_id=1380404017;
PRAGMA user_version=1;
BEGIN TRANSACTION;
CREATE TABLE alembic_version (version_num VARCHAR(32) NOT NULL, CONSTRAINT alembic_version_pkc PRIMARY KEY (version_num));
INSERT INTO "alembic_version" VALUES('0001');
CREATE TABLE change (
	number INTEGER NOT NULL, 
	author TEXT NOT NULL, 
	reason TEXT NOT NULL, 
	recorded_at TEXT NOT NULL, 
	records INTEGER NOT NULL, 
	records_root TEXT NOT NULL, 
	header TEXT NOT NULL, 
	CONSTRAINT pk_change PRIMARY KEY (number), 
	CONSTRAINT ck_change_number_from_one CHECK (number >= 1), 
	CONSTRAINT ck_change_author_given CHECK (author <> ''), 
	CONSTRAINT ck_change_reason_given CHECK (reason <> ''), 
	CONSTRAINT ck_change_root_length CHECK (length(records_root) = 64)
)
 STRICT

;
INSERT INTO "change" VALUES(1,'an invented steward','Loaded two invented compounds','2026-12-01T13:47:11.614075Z',68,'b9919e74aac2914ec2c29065f18313b04cf1c75cb2957024c3968899381c755c','{"author":"an invented steward","number":1,"reason":"Loaded two invented compounds","recorded_at":"2026-12-01T13:47:11.614075Z","records":68,"records_root":"b9919e74aac2914ec2c29065f18313b04cf1c75cb2957024c3968899381c755c"}');
INSERT INTO "change" VALUES(2,'an invented reviewer','Declined a slip','2026-12-01T13:47:11.684379Z',1,'d32829c41a29170f7df3d46648577a276fe51a1b1bc930848ed6213e82bb9808','{"author":"an invented reviewer","number":2,"reason":"Declined a slip","recorded_at":"2026-12-01T13:47:11.684379Z","records":1,"records_root":"d32829c41a29170f7df3d46648577a276fe51a1b1bc930848ed6213e82bb9808"}');
INSERT INTO "change" VALUES(3,'an invented steward','An invented erratum and a corrected coefficient','2026-12-01T13:47:11.744123Z',4,'2b3ac917acf9e5ffcdf04ecf05605132d26d0eebe4c960917883f17f1c0a409f','{"author":"an invented steward","number":3,"reason":"An invented erratum and a corrected coefficient","recorded_at":"2026-12-01T13:47:11.744123Z","records":4,"records_root":"2b3ac917acf9e5ffcdf04ecf05605132d26d0eebe4c960917883f17f1c0a409f"}');
INSERT INTO "change" VALUES(4,'an invented steward','A draft over an accepted revision','2026-12-01T13:47:11.805254Z',3,'665ce0fb97edfe70e5fe27341477fb80e858f2bcd56b7f99cb563058150823f5','{"author":"an invented steward","number":4,"reason":"A draft over an accepted revision","recorded_at":"2026-12-01T13:47:11.805254Z","records":3,"records_root":"665ce0fb97edfe70e5fe27341477fb80e858f2bcd56b7f99cb563058150823f5"}');
CREATE TABLE library (
	id INTEGER NOT NULL, 
	name TEXT NOT NULL, 
	started_at TEXT NOT NULL, 
	CONSTRAINT pk_library PRIMARY KEY (id), 
	CONSTRAINT ck_library_one_row CHECK (id = 1)
)
 STRICT

;
INSERT INTO "library" VALUES(1,'15946b856241af0cae6fe7726e9b6e5e','2026-12-01T13:47:11.547324Z');
CREATE TABLE link (
	record INTEGER NOT NULL, 
	role TEXT NOT NULL, 
	kind TEXT NOT NULL, 
	"key" TEXT NOT NULL, 
	CONSTRAINT pk_link PRIMARY KEY (record, role, kind, "key"), 
	CONSTRAINT fk_link_record_record FOREIGN KEY(record) REFERENCES record (id)
)
 STRICT

;
INSERT INTO "link" VALUES(3,'compound','compound','brindovane');
INSERT INTO "link" VALUES(4,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(14,'compound','compound','brindovane');
INSERT INTO "link" VALUES(14,'source','source','invented-handbook-b');
INSERT INTO "link" VALUES(15,'of','correlation','brindovane-antoine-high');
INSERT INTO "link" VALUES(16,'compound','compound','brindovane');
INSERT INTO "link" VALUES(16,'source','source','invented-measurements-e');
INSERT INTO "link" VALUES(17,'of','correlation','brindovane-antoine-low');
INSERT INTO "link" VALUES(18,'compound','compound','brindovane');
INSERT INTO "link" VALUES(18,'source','source','invented-handbook-b');
INSERT INTO "link" VALUES(19,'of','correlation','brindovane-antoine-mid');
INSERT INTO "link" VALUES(20,'compound','compound','brindovane');
INSERT INTO "link" VALUES(20,'source','source','invented-evaluation-f');
INSERT INTO "link" VALUES(21,'compound','compound','brindovane');
INSERT INTO "link" VALUES(21,'source','source','invented-measurements-e');
INSERT INTO "link" VALUES(22,'of','correlation','brindovane-density');
INSERT INTO "link" VALUES(23,'compound','compound','brindovane');
INSERT INTO "link" VALUES(23,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(24,'of','correlation','brindovane-enthalpy');
INSERT INTO "link" VALUES(25,'compound','compound','brindovane');
INSERT INTO "link" VALUES(25,'source','source','invented-evaluation-c');
INSERT INTO "link" VALUES(26,'of','correlation','brindovane-kirchhoff');
INSERT INTO "link" VALUES(27,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(27,'source','source','invented-measurements-a');
INSERT INTO "link" VALUES(28,'of','correlation','dunmarane-antoine-past-critical');
INSERT INTO "link" VALUES(29,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(29,'source','source','invented-handbook-b');
INSERT INTO "link" VALUES(30,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(30,'source','source','invented-evaluation-g');
INSERT INTO "link" VALUES(31,'of','correlation','dunmarane-cox');
INSERT INTO "link" VALUES(32,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(32,'source','source','invented-evaluation-h');
INSERT INTO "link" VALUES(33,'of','correlation','dunmarane-recalled-alone');
INSERT INTO "link" VALUES(34,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(34,'source','source','invented-evaluation-f');
INSERT INTO "link" VALUES(35,'of','correlation','dunmarane-recalled-confirmed');
INSERT INTO "link" VALUES(36,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(36,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(37,'of','correlation','dunmarane-riedel');
INSERT INTO "link" VALUES(38,'compound','compound','brindovane');
INSERT INTO "link" VALUES(38,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(39,'of','fixed-point','brindovane-critical-pressure');
INSERT INTO "link" VALUES(40,'compound','compound','brindovane');
INSERT INTO "link" VALUES(40,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(41,'of','fixed-point','brindovane-critical-temperature');
INSERT INTO "link" VALUES(42,'compound','compound','brindovane');
INSERT INTO "link" VALUES(42,'source','source','invented-evaluation-c');
INSERT INTO "link" VALUES(43,'of','fixed-point','brindovane-normal-boiling-temperature');
INSERT INTO "link" VALUES(44,'compound','compound','brindovane');
INSERT INTO "link" VALUES(44,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(45,'of','fixed-point','brindovane-triple-point-temperature');
INSERT INTO "link" VALUES(46,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(46,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(47,'of','fixed-point','dunmarane-critical-pressure');
INSERT INTO "link" VALUES(48,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(48,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(49,'of','fixed-point','dunmarane-critical-temperature');
INSERT INTO "link" VALUES(50,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(50,'source','source','invented-handbook-b');
INSERT INTO "link" VALUES(51,'of','fixed-point','dunmarane-normal-boiling-temperature-b');
INSERT INTO "link" VALUES(52,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(52,'source','source','invented-evaluation-g');
INSERT INTO "link" VALUES(53,'of','fixed-point','dunmarane-normal-boiling-temperature-g');
INSERT INTO "link" VALUES(54,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(54,'source','source','invented-measurements-j');
INSERT INTO "link" VALUES(55,'of','fixed-point','dunmarane-normal-boiling-temperature-j');
INSERT INTO "link" VALUES(56,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(56,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(57,'of','fixed-point','dunmarane-triple-point-temperature');
INSERT INTO "link" VALUES(58,'correlation','correlation','brindovane-antoine-high');
INSERT INTO "link" VALUES(59,'correlation','correlation','brindovane-kirchhoff');
INSERT INTO "link" VALUES(60,'correlation','correlation','dunmarane-cox');
INSERT INTO "link" VALUES(61,'compound','compound','brindovane');
INSERT INTO "link" VALUES(61,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(62,'of','dataset','brindovane-density-table');
INSERT INTO "link" VALUES(63,'compound','compound','brindovane');
INSERT INTO "link" VALUES(63,'source','source','invented-handbook-d');
INSERT INTO "link" VALUES(64,'of','dataset','brindovane-vapor-pressure-table');
INSERT INTO "link" VALUES(65,'compound','compound','dunmarane');
INSERT INTO "link" VALUES(65,'source','source','invented-measurements-j');
INSERT INTO "link" VALUES(66,'of','dataset','dunmarane-vapor-pressure-measured');
INSERT INTO "link" VALUES(67,'correlation','correlation','brindovane-kirchhoff');
INSERT INTO "link" VALUES(67,'over','correlation','brindovane-antoine-high');
INSERT INTO "link" VALUES(68,'of','preference','brindovane-kirchhoff-first');
INSERT INTO "link" VALUES(69,'of','correlation','dunmarane-august-slip');
INSERT INTO "link" VALUES(71,'compound','compound','brindovane');
INSERT INTO "link" VALUES(71,'source','source','invented-measurements-e');
INSERT INTO "link" VALUES(72,'of','correlation','brindovane-antoine-low');
INSERT INTO "link" VALUES(73,'of','correlation','brindovane-antoine-mid');
INSERT INTO "link" VALUES(75,'compound','compound','brindovane');
INSERT INTO "link" VALUES(75,'source','source','invented-measurements-e');
INSERT INTO "link" VALUES(76,'of','correlation','brindovane-antoine-low');
CREATE TABLE node (
	level INTEGER NOT NULL, 
	place INTEGER NOT NULL, 
	hash TEXT NOT NULL, 
	CONSTRAINT pk_node PRIMARY KEY (level, place), 
	CONSTRAINT ck_node_hash_length CHECK (length(hash) = 64)
)
 STRICT

;
INSERT INTO "node" VALUES(0,0,'bb278b42a63605ff152853f734f3495839f0720d34f058e49a06f67199ae79a1');
INSERT INTO "node" VALUES(0,1,'6f0e0e070e72f1dbe05c15d42b69ce6cecd87a7a87be60a6ad869af90de32773');
INSERT INTO "node" VALUES(1,0,'2a5654aa24f6ff15eab66c8365ca926155e40ad0ae054a7bdb6b2f3b1a17154b');
INSERT INTO "node" VALUES(0,2,'4117743d5a02d18aeadc7694d3f4a5498beb75151b2ff1b720e6e87ab03435ac');
INSERT INTO "node" VALUES(0,3,'8a4c7c1a57956aa004d76566869482063559c0e4e0aade5459db08b9c77436b9');
INSERT INTO "node" VALUES(1,1,'8cb1d11a2da71f9ba9ea966f18bb5e4e808fd0cb0e25d468bc88aab80af78514');
INSERT INTO "node" VALUES(2,0,'7dccb21e9df991c14174d15fc1d9df17c194f1cf9f0d210d15832fb0181ceb0b');
CREATE TABLE record (
	id INTEGER NOT NULL, 
	change INTEGER NOT NULL, 
	place INTEGER NOT NULL, 
	kind TEXT NOT NULL, 
	"key" TEXT NOT NULL, 
	revision INTEGER NOT NULL, 
	content TEXT NOT NULL, 
	digest TEXT NOT NULL, 
	CONSTRAINT pk_record PRIMARY KEY (id), 
	CONSTRAINT uq_record_kind_key_revision UNIQUE (kind, "key", revision), 
	CONSTRAINT uq_record_change_place UNIQUE (change, place), 
	CONSTRAINT ck_record_revision_from_one CHECK (revision >= 1), 
	CONSTRAINT ck_record_digest_length CHECK (length(digest) = 64), 
	CONSTRAINT fk_record_change_change FOREIGN KEY(change) REFERENCES change (number)
)
 STRICT

;
INSERT INTO "record" VALUES(1,1,0,'compound','brindovane',1,'{"formula":"C7H10ClFO","name":"brindovane (invented)","note":"No such substance exists: it shows a gap, a seam that jumps, a withdrawn record and a draft. Invented for the rangebook demonstration; not data."}','d6fef914ecbc83d102b6ae00421164b0c5e00cf97bd8abb950301a74405c6dde');
INSERT INTO "record" VALUES(2,1,1,'compound','dunmarane',1,'{"formula":"C4H7F3OSi","name":"dunmarane (invented)","note":"No such substance exists: it shows records from memory, an older temperature scale and rounded values. Invented for the rangebook demonstration; not data."}','33986533f48217ba6e931cddca54db4c07e48c649634c6e804549cd3aa9d60c8');
INSERT INTO "record" VALUES(3,1,2,'name','brindovane:invented fluid b',1,'{"compound":"brindovane","name":"invented fluid B"}','8c584b5a6bd76775af501d2290a6b577e4586d4b5d8759b20421df9e13a6c4f5');
INSERT INTO "record" VALUES(4,1,3,'name','dunmarane:invented fluid d',1,'{"compound":"dunmarane","name":"invented fluid D"}','3f4be4a693a6e2ac543520f1e3a8d6130614cf45e17ab2afc938713c3bc5291d');
INSERT INTO "record" VALUES(5,1,4,'source','invented-evaluation-c',1,'{"citation":"Invented for the rangebook demonstration; not data (evaluation C)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented evaluation C","type":"report"}','1d8fd938d0886e914ec90995fdcfc4d292cc5a57e5e69d00192367a9d8d6d22c');
INSERT INTO "record" VALUES(6,1,5,'source','invented-evaluation-f',1,'{"citation":"Invented for the rangebook demonstration; not data (evaluation F)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented evaluation F","type":"report"}','a9fbe2c1ecbd1eb648dffaea9f13af15ba47dca658e5969e307e0c92208edfdd');
INSERT INTO "record" VALUES(7,1,6,'source','invented-evaluation-g',1,'{"citation":"Invented for the rangebook demonstration; not data (evaluation G)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented evaluation G","type":"report"}','0b879ab5df54418375c352f0217384a182b551886039309d05daecdb317cb9ea');
INSERT INTO "record" VALUES(8,1,7,'source','invented-evaluation-h',1,'{"citation":"Invented for the rangebook demonstration; not data (evaluation H)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented evaluation H","type":"report"}','9e879c0a3f0f3ed1f54ddc9273f37c8fcf4d113170c5b6201edb1fd23e10b6ae');
INSERT INTO "record" VALUES(9,1,8,'source','invented-handbook-b',1,'{"citation":"Invented for the rangebook demonstration; not data (handbook B)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented handbook B","type":"book"}','e27a5a8c94b47297af131ea08fb452aed85e134a24baea34a53b293a415f20ea');
INSERT INTO "record" VALUES(10,1,9,'source','invented-handbook-d',1,'{"citation":"Invented for the rangebook demonstration; not data (handbook D)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented handbook D","type":"book"}','ce543025fd1dfd0db688e29bd55a8ced9b54c221c0f036e70dee10d9dd444895');
INSERT INTO "record" VALUES(11,1,10,'source','invented-measurements-a',1,'{"citation":"Invented for the rangebook demonstration; not data (measurements A)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented measurements A","type":"dataset"}','039b26fc3b493c272d868bf45fcfcb72933adbc5a1e7a281d969835a9a660e7e');
INSERT INTO "record" VALUES(12,1,11,'source','invented-measurements-e',1,'{"citation":"Invented for the rangebook demonstration; not data (measurements E)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented measurements E","type":"dataset"}','04fcca7b77ad7fe7d83b30571f80319fbdbb4f373da4d7c630df4cebf3ab43c8');
INSERT INTO "record" VALUES(13,1,12,'source','invented-measurements-j',1,'{"citation":"Invented for the rangebook demonstration; not data (measurements J)","note":"No such publication exists. Invented for the rangebook demonstration; not data.","title":"Invented measurements J","type":"dataset"}','3a65fafe02bd96894d92c9e89326ef02e3ecb32675cabb6c47a82da4b3262dc2');
INSERT INTO "record" VALUES(14,1,13,'correlation','brindovane-antoine-high',1,'{"coefficients":{"A":"5.48669","B":"2801.83","C":"362.88"},"compound":"brindovane","evidence":"compiled","form":"antoine-log10","locator":"invented table 6","note":"Printed in psi and degrees Fahrenheit. Its pressures are deliberately 6 % high: the seam at 420 K jumps, and it does not close at the normal boiling point. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-handbook-b","temperature_scale":"not-stated","temperature_unit":"degF","value_unit":"psi","window_basis":"printed","window_max":"540","window_min":"280","window_unit":"degF"}','337f03d17e0ae5b45894d7c8d12096fa7d9395117ecb61ca411517dca195ebcb');
INSERT INTO "record" VALUES(15,1,14,'review','correlation:brindovane-antoine-high@1',1,'{"of_key":"brindovane-antoine-high","of_kind":"correlation","of_revision":"1","standing":"accepted"}','833417ec4e8322e58ff765884ea04bbac2af6c126e837d533a68a5ad821eeb94');
INSERT INTO "record" VALUES(16,1,15,'correlation','brindovane-antoine-low',1,'{"coefficients":{"A":"22.14808","B":"3909.70","C":"-45.63"},"compound":"brindovane","evidence":"measured","form":"antoine-ln","locator":"invented table 1","note":"Below 255 K its source states no uncertainty. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-measurements-e","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"not stated up to 255 K; 4 Pa up to 290 K; 1.5 %","value_unit":"Pa","window_basis":"printed","window_max":"310","window_min":"250","window_unit":"K"}','4b5af9ad239ca8ced721a14b7bf9af31c1309fb190c5fd217649e3a787bab262');
INSERT INTO "record" VALUES(17,1,16,'review','correlation:brindovane-antoine-low@1',1,'{"of_key":"brindovane-antoine-low","of_kind":"correlation","of_revision":"1","standing":"accepted"}','1de8a769dc067e5ca9e97d35fc09b08c814d0d73292b8c2949fd5a806081ffcf');
INSERT INTO "record" VALUES(18,1,17,'correlation','brindovane-antoine-mid',1,'{"coefficients":{"A":"14.67084","B":"3555.70","C":"57.63"},"compound":"brindovane","evidence":"compiled","form":"antoine-ln-minus","locator":"invented table 3","note":"Used to cover the gap from 310 K to 360 K. Its pressures are deliberately 14 % high. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-handbook-b","temperature_scale":"not-stated","temperature_unit":"K","value_unit":"kPa","window_basis":"printed","window_max":"365","window_min":"305","window_unit":"K"}','317d66d997175bf65591138096dc3624f17daaeb4c831a5ebc822705e64fd9af');
INSERT INTO "record" VALUES(19,1,18,'review','correlation:brindovane-antoine-mid@1',1,'{"of_key":"brindovane-antoine-mid","of_kind":"correlation","of_revision":"1","standing":"accepted"}','fce6cda6ad8a44d6fd9ef8cd3ffd84d0a06d1283bb0c135804ccb9194bb4c59c');
INSERT INTO "record" VALUES(20,1,19,'correlation','brindovane-cox-draft',1,'{"coefficients":{"A0":"2.86733","A1":"-1.64103e-03","A2":"1.4470e-06","T0":"416.30","p0":"1"},"compound":"brindovane","evidence":"evaluated","form":"cox","locator":"invented eq. 2","note":"Would close the gap from 310 K to 360 K once it is accepted. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-evaluation-f","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"0.5 %","value_unit":"atm","window_basis":"printed","window_max":"400","window_min":"300","window_unit":"K"}','84d8d6bd5e43108ae53c31211f9c938e2f9d39c872212283f75a84981e026f3d');
INSERT INTO "record" VALUES(21,1,20,'correlation','brindovane-density',1,'{"coefficients":{"Tc":"618.4","c0":"436.0","n1":"741.8","n2":"338.5","t1":"1/3","t2":"1"},"compound":"brindovane","evidence":"measured","form":"density-power","locator":"invented table 2","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"saturated-liquid-density","source":"invented-measurements-e","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"0.3 % up to 500 K; 6 kg/m3","value_unit":"kg/m3","window_basis":"printed","window_max":"610","window_min":"255","window_unit":"K"}','8406f5e6f726590b65a864acd9260caada821011ab19a2ca5fa7dc461285c737');
INSERT INTO "record" VALUES(22,1,21,'review','correlation:brindovane-density@1',1,'{"of_key":"brindovane-density","of_kind":"correlation","of_revision":"1","standing":"accepted"}','bcd5e3fd1a233059101cfed1c667bcd7aa9b28787ce592453c74e2cf24c8f83a');
INSERT INTO "record" VALUES(23,1,22,'correlation','brindovane-enthalpy',1,'{"coefficients":{"H1":"266.5","T1":"320","Tc":"618.4","n":"0.403"},"compound":"brindovane","evidence":"compiled","form":"watson","locator":"invented table 8","note":"Printed per gram. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"enthalpy-of-vaporization","source":"invented-handbook-d","temperature_scale":"not-stated","temperature_unit":"K","uncertainty":"3 %","value_unit":"J/g","window_basis":"printed","window_max":"600","window_min":"300","window_unit":"K"}','27b6e1ff56cbe067a004b2ba186fdbfe5b06adb50a77c8672956463dfb7cda84');
INSERT INTO "record" VALUES(24,1,23,'review','correlation:brindovane-enthalpy@1',1,'{"of_key":"brindovane-enthalpy","of_kind":"correlation","of_revision":"1","standing":"accepted"}','8610af9ac3e54bd2b5ff2a4a6387a881e80a032c487605a40637b64f33005b4d');
INSERT INTO "record" VALUES(25,1,24,'correlation','brindovane-kirchhoff',1,'{"coefficients":{"A":"23.1408","B":"-2966.7","C":"-5.014"},"compound":"brindovane","evidence":"evaluated","form":"kirchhoff-rankine-log10","locator":"invented eq. 11","note":"Meets brindovane-antoine-high at 420 K, where that curve is deliberately 6 % higher. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-evaluation-c","temperature_scale":"not-stated","temperature_unit":"K","uncertainty":"0.8 %","value_unit":"mmHg","window_basis":"printed","window_max":"420","window_min":"360","window_unit":"K"}','92c4bfbc4511f5af891d758d1e659b7578fe08e29f26fda93feb511a299fd1cd');
INSERT INTO "record" VALUES(26,1,25,'review','correlation:brindovane-kirchhoff@1',1,'{"of_key":"brindovane-kirchhoff","of_kind":"correlation","of_revision":"1","standing":"accepted"}','03525362d3c4a9ee9cf7f3ec4bc69ed0a40146235a2ec4eaa9e4765d520db577');
INSERT INTO "record" VALUES(27,1,26,'correlation','dunmarane-antoine-past-critical',1,'{"coefficients":{"A":"8.19895","B":"2469.41","C":"88.40"},"compound":"dunmarane","evidence":"measured","form":"antoine-log10","locator":"invented table 12","note":"The window deliberately runs past the critical temperature, 552.6 K. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-measurements-a","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"1 %","value_unit":"Torr","window_basis":"printed","window_max":"560","window_min":"480","window_unit":"K"}','86ac9a020b2a6f5c09a8645cb63f81fd8a047c0b0e57059ba98788d386d65138');
INSERT INTO "record" VALUES(28,1,27,'review','correlation:dunmarane-antoine-past-critical@1',1,'{"of_key":"dunmarane-antoine-past-critical","of_kind":"correlation","of_revision":"1","standing":"accepted"}','caf4e7ed25553d180175843434378aa9e92e33f754a41e754c878ae76f33338f');
INSERT INTO "record" VALUES(29,1,28,'correlation','dunmarane-august-slip',1,'{"coefficients":{"A":"7.1550","B":"1969.3"},"compound":"dunmarane","evidence":"compiled","form":"august-ln","locator":"invented table 10","note":"Deliberately recorded with the wrong logarithm base: the constants are for log10. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-handbook-b","temperature_scale":"not-stated","temperature_unit":"K","value_unit":"kPa","window_basis":"printed","window_max":"400","window_min":"310","window_unit":"K"}','dc4329951bdb4b5876f559c002d88f9b99002ac73960f8f3b01c840fd522cfcd');
INSERT INTO "record" VALUES(30,1,29,'correlation','dunmarane-cox',1,'{"coefficients":{"A0":"2.904145","A1":"-1.956024e-03","A2":"1.92276e-06","T0":"382.60","p0":"101.325"},"compound":"dunmarane","evidence":"evaluated","form":"cox","locator":"invented eq. 1","note":"Stands on IPTS-68. Read as ITS-90 it would be about 0.07 % off. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-evaluation-g","temperature_scale":"IPTS-68","temperature_unit":"K","uncertainty":"0.1 %","value_unit":"kPa","window_basis":"printed","window_max":"385","window_min":"290","window_unit":"K"}','cf0b177beb014d6b3d69cc95ab5d6693a920b3df75f9c8ee44bef77e79b476bc');
INSERT INTO "record" VALUES(31,1,30,'review','correlation:dunmarane-cox@1',1,'{"of_key":"dunmarane-cox","of_kind":"correlation","of_revision":"1","standing":"accepted"}','16b43869662cf1247fe52239749f89d21d3eab379af9c91872ed8d896672ddc3');
INSERT INTO "record" VALUES(32,1,31,'correlation','dunmarane-recalled-alone',1,'{"coefficients":{"A0":"10.2330","A1":"1412.7","A2":"-1.46589E+06"},"compound":"dunmarane","evidence":"evaluated","form":"polynomial-reciprocal-ln","locator":"not recorded","note":"Recalled from memory. No independent value lies in its window, so it counts as compiled. It is deliberately about 1 % higher than dunmarane-antoine-past-critical near 527 K. Invented for the rangebook demonstration; not data.","obtained":"memory","phase":"liquid","property":"vapor-pressure","source":"invented-evaluation-h","temperature_scale":"not-stated","temperature_unit":"K","uncertainty":"0.3 %","value_unit":"kPa","window_basis":"memory","window_max":"548","window_min":"505","window_unit":"K"}','2d48afec0536613b08f8e47ecf2a6bca3b6444edea07e1ccf4320ec003548a5b');
INSERT INTO "record" VALUES(33,1,32,'review','correlation:dunmarane-recalled-alone@1',1,'{"of_key":"dunmarane-recalled-alone","of_kind":"correlation","of_revision":"1","standing":"accepted"}','f25528a59cb8734abb904f2050ab6591c0c83d4559d853cb2044e93cf7e2eec7');
INSERT INTO "record" VALUES(34,1,33,'correlation','dunmarane-recalled-confirmed',1,'{"coefficients":{"Tc":"552.6","a":"-7.9228","b":"1.3156","c":"-4.2268","d":"-1.9793","pc":"29.68"},"compound":"dunmarane","evidence":"evaluated","form":"wagner-3-6","locator":"not recorded","note":"Recalled from memory. The points of dunmarane-vapor-pressure-measured confirm it, so it may count as evaluated. Invented for the rangebook demonstration; not data.","obtained":"memory","phase":"liquid","property":"vapor-pressure","source":"invented-evaluation-f","temperature_scale":"not-stated","temperature_unit":"K","uncertainty":"0.3 %","value_unit":"bar","window_basis":"memory","window_max":"505","window_min":"380","window_unit":"K"}','7ea438b0ccdab334c3608b4cd468c258e5843d5d5bb8dfb09745d5de74970081');
INSERT INTO "record" VALUES(35,1,34,'review','correlation:dunmarane-recalled-confirmed@1',1,'{"of_key":"dunmarane-recalled-confirmed","of_kind":"correlation","of_revision":"1","standing":"accepted"}','cb65ab0d9ca54d7821025383b8b69faba16f9ae53aed05a5320077a29887a866');
INSERT INTO "record" VALUES(36,1,35,'correlation','dunmarane-riedel',1,'{"coefficients":{"C1":"71.749","C2":"-6977.2","C3":"-7.0675","C4":"1.4386E-17","C5":"6"},"compound":"dunmarane","evidence":"compiled","form":"riedel","locator":"invented table 4","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-handbook-d","temperature_scale":"not-stated","temperature_unit":"K","value_unit":"Pa","window_basis":"printed","window_max":"552.6","window_min":"240","window_unit":"K"}','40e5e866b4de58fd36778b3dc9fc3181bae94fe1fdab33c9a7b3965b4f98647d');
INSERT INTO "record" VALUES(37,1,36,'review','correlation:dunmarane-riedel@1',1,'{"of_key":"dunmarane-riedel","of_kind":"correlation","of_revision":"1","standing":"accepted"}','24e476d770c7971ceeb59c738bb7df0495ace57cf5f2df5b756189113626e097');
INSERT INTO "record" VALUES(38,1,37,'fixed-point','brindovane-critical-pressure',1,'{"compound":"brindovane","evidence":"compiled","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"critical-pressure","source":"invented-handbook-d","unit":"MPa","value":"3.614"}','a7c989d4e3c9e1c3f2a69aea206009443bb300c9a61b8f6fc3ae1d9ef091b80c');
INSERT INTO "record" VALUES(39,1,38,'review','fixed-point:brindovane-critical-pressure@1',1,'{"of_key":"brindovane-critical-pressure","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','8f51cb91bfb923f64e34248e5495bbc638defc9af9c5a0df00b154571c28ffda');
INSERT INTO "record" VALUES(40,1,39,'fixed-point','brindovane-critical-temperature',1,'{"compound":"brindovane","evidence":"compiled","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"critical-temperature","source":"invented-handbook-d","temperature_scale":"not-stated","unit":"K","value":"618.4"}','e2310c6e727e4917282fb8c32a66f361084c26d2532797e670277f14db4c1137');
INSERT INTO "record" VALUES(41,1,40,'review','fixed-point:brindovane-critical-temperature@1',1,'{"of_key":"brindovane-critical-temperature","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','d04972376c1b3ab7cfa8d07e3858e156c30354b4074d06f4277cd2bf13d89657');
INSERT INTO "record" VALUES(42,1,41,'fixed-point','brindovane-normal-boiling-temperature',1,'{"compound":"brindovane","evidence":"evaluated","locator":"invented table 1","note":"brindovane-antoine-high does not close here. Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"normal-boiling-temperature","source":"invented-evaluation-c","temperature_scale":"ITS-90","unit":"K","value":"416.30"}','8b1be5d43891e2c2c57cb80c2ec553dd2d92c3e973c348605ca7d958aec28b5b');
INSERT INTO "record" VALUES(43,1,42,'review','fixed-point:brindovane-normal-boiling-temperature@1',1,'{"of_key":"brindovane-normal-boiling-temperature","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','f232be0a12d2dd5e46f6968950bed5677327de112af54bac868514c844ff708f');
INSERT INTO "record" VALUES(44,1,43,'fixed-point','brindovane-triple-point-temperature',1,'{"compound":"brindovane","evidence":"compiled","locator":"invented table 1","note":"Printed in degrees Fahrenheit: 246.59 K. Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"triple-point-temperature","source":"invented-handbook-d","temperature_scale":"not-stated","unit":"degF","value":"-15.8"}','0beee51d45572271c3bd85ab4277d3b89507c4f7035bf0f9df19090a3a6ef693');
INSERT INTO "record" VALUES(45,1,44,'review','fixed-point:brindovane-triple-point-temperature@1',1,'{"of_key":"brindovane-triple-point-temperature","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','052eba134a9caadeeeb27d3aadad29ee33686345f618689f1dd8c1d50a9f85f4');
INSERT INTO "record" VALUES(46,1,45,'fixed-point','dunmarane-critical-pressure',1,'{"compound":"dunmarane","evidence":"compiled","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"critical-pressure","source":"invented-handbook-d","unit":"bar","value":"29.68"}','66a6b279c0d3d9f28dc23454c109d107013d196a0a8b8d86f223ed1d942b6e44');
INSERT INTO "record" VALUES(47,1,46,'review','fixed-point:dunmarane-critical-pressure@1',1,'{"of_key":"dunmarane-critical-pressure","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','c1f01a722b599155fa765df30b9b6c3dd21dd3e5519aaa47c40e8b802ef44d14');
INSERT INTO "record" VALUES(48,1,47,'fixed-point','dunmarane-critical-temperature',1,'{"compound":"dunmarane","evidence":"compiled","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"critical-temperature","source":"invented-handbook-d","temperature_scale":"not-stated","unit":"K","value":"552.6"}','6532e1d2441e14e011b31fac7d419902312c5ee7ca2548bbeaaa64a26cfbe0af');
INSERT INTO "record" VALUES(49,1,48,'review','fixed-point:dunmarane-critical-temperature@1',1,'{"of_key":"dunmarane-critical-temperature","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','0c0c0f208bffcb84bf02c67913f794f6da6e85cb0b538df86ac4c37ca228603f');
INSERT INTO "record" VALUES(50,1,49,'fixed-point','dunmarane-normal-boiling-temperature-b',1,'{"compound":"dunmarane","evidence":"compiled","locator":"invented table 1","note":"Rounded to a whole degree Celsius. Invented for the rangebook demonstration; not data.","obtained":"seen","qualifier":"rounded","quantity":"normal-boiling-temperature","source":"invented-handbook-b","temperature_scale":"not-stated","unit":"degC","value":"109"}','3445e424eb72e6638033e47135bbb0ad3adcbd2f7f3f457395f8a1fd680b24c5');
INSERT INTO "record" VALUES(51,1,50,'review','fixed-point:dunmarane-normal-boiling-temperature-b@1',1,'{"of_key":"dunmarane-normal-boiling-temperature-b","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','79f85297013b08d1151f4289449f0458e49beeced0c363fc9834fdf895b9d5fd');
INSERT INTO "record" VALUES(52,1,51,'fixed-point','dunmarane-normal-boiling-temperature-g',1,'{"compound":"dunmarane","evidence":"evaluated","locator":"invented table 1","note":"On IPTS-68, 0.02 K above its ITS-90 number. Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"normal-boiling-temperature","source":"invented-evaluation-g","temperature_scale":"IPTS-68","uncertainty":"0.02 K","unit":"K","value":"382.60"}','59459d1281805dd2ea5bf270b35552ea5fceb618a6f12940f629cd9ca8a40c26');
INSERT INTO "record" VALUES(53,1,52,'review','fixed-point:dunmarane-normal-boiling-temperature-g@1',1,'{"of_key":"dunmarane-normal-boiling-temperature-g","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','5170b478133602a262e8acc4a532fb47ebb47dc1ff81c80f71d0e6dac4ff37dd');
INSERT INTO "record" VALUES(54,1,53,'fixed-point','dunmarane-normal-boiling-temperature-j',1,'{"compound":"dunmarane","evidence":"measured","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"normal-boiling-temperature","source":"invented-measurements-j","temperature_scale":"ITS-90","uncertainty":"0.03 K","unit":"K","value":"382.58"}','7fc2437b4a091ac0ee062566d22516e0b4cd62bc092be0b74ea3be79a8ec104a');
INSERT INTO "record" VALUES(55,1,54,'review','fixed-point:dunmarane-normal-boiling-temperature-j@1',1,'{"of_key":"dunmarane-normal-boiling-temperature-j","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','c017e754eccea8172180b0a1273b117fdf8340ad154c3ad57057f27bdf2a1241');
INSERT INTO "record" VALUES(56,1,55,'fixed-point','dunmarane-triple-point-temperature',1,'{"compound":"dunmarane","evidence":"compiled","locator":"invented table 1","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","quantity":"triple-point-temperature","source":"invented-handbook-d","temperature_scale":"not-stated","unit":"K","value":"236.4"}','1eda5738eeb84da7b573121d2cdff2957dff09364c0fff30c2b4008a707d9544');
INSERT INTO "record" VALUES(57,1,56,'review','fixed-point:dunmarane-triple-point-temperature@1',1,'{"of_key":"dunmarane-triple-point-temperature","of_kind":"fixed-point","of_revision":"1","standing":"accepted"}','56aaf2a1131c0fac56d453485fd5b6f59ce4c17e6356e76ec439ac96382bca8a');
INSERT INTO "record" VALUES(58,1,57,'printed-value','brindovane-antoine-high-at-400',1,'{"correlation":"brindovane-antoine-high","locator":"invented, beside the constants","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","temperature":"400","temperature_unit":"degF","value":"65.16","value_unit":"psi"}','9976120fe9bf05f0b41422b8f94cf9e7c13f6c7d52f6c793d6cf2b07ecab34a5');
INSERT INTO "record" VALUES(59,1,58,'printed-value','brindovane-kirchhoff-at-400',1,'{"correlation":"brindovane-kirchhoff","locator":"invented, beside the constants","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","temperature":"400","temperature_unit":"K","value":"475.7","value_unit":"mmHg"}','efeae24fe4dd42a5f488acd19d215126c225d053a92217e176828fa9a06dd9b4');
INSERT INTO "record" VALUES(60,1,59,'printed-value','dunmarane-cox-at-350',1,'{"correlation":"dunmarane-cox","locator":"invented, beside the constants","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","temperature":"350","temperature_unit":"K","value":"34.243","value_unit":"kPa"}','71cfefa673c6c077563d9526d2003541d9ebd80f9118e08ac0ce159871c6f6c4');
INSERT INTO "record" VALUES(61,1,60,'dataset','brindovane-density-table',1,'{"compound":"brindovane","evidence":"compiled","locator":"invented table 9","note":"Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","points":[{"note":"Invented for the rangebook demonstration; not data.","temperature":"0","value":"1.237"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"20","value":"1.212"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"60","value":"1.167"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"120","value":"1.088"}],"property":"saturated-liquid-density","source":"invented-handbook-d","temperature_scale":"not-stated","temperature_unit":"degC","value_unit":"g/cm3"}','3d787b80318c3b9916374c19648ea686f2bd45dfee8e80417b008d8c90b323fa');
INSERT INTO "record" VALUES(62,1,61,'review','dataset:brindovane-density-table@1',1,'{"of_key":"brindovane-density-table","of_kind":"dataset","of_revision":"1","standing":"accepted"}','b81f75a54163a97e9bd6670418cd3bd3460a2dff1e0686db069ea1a491d95a11');
INSERT INTO "record" VALUES(63,1,62,'dataset','brindovane-vapor-pressure-table',1,'{"compound":"brindovane","evidence":"compiled","locator":"invented table 7","note":"Agrees with brindovane-kirchhoff, and shows brindovane-antoine-high 6 % high. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","points":[{"note":"Invented for the rangebook demonstration; not data.","temperature":"220","value":"4.472"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"260","value":"9.129"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"300","value":"17.20"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"340","value":"29.80"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"380","value":"49.09"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"420","value":"76.35"}],"property":"vapor-pressure","source":"invented-handbook-d","temperature_scale":"not-stated","temperature_unit":"degF","uncertainty":"1 %","value_unit":"psi"}','92b6d230d1a50fd93b4c9c9f3a8c84f5039f1c66f111645c913e9e48d2f3d6f4');
INSERT INTO "record" VALUES(64,1,63,'review','dataset:brindovane-vapor-pressure-table@1',1,'{"of_key":"brindovane-vapor-pressure-table","of_kind":"dataset","of_revision":"1","standing":"accepted"}','db8f3faabdf734f1d44046fe8e01ea957c40c3a4720bdfdbda2638217e553408');
INSERT INTO "record" VALUES(65,1,64,'dataset','dunmarane-vapor-pressure-measured',1,'{"compound":"dunmarane","evidence":"measured","locator":"invented table 2","note":"Independent of dunmarane-recalled-confirmed, which it confirms. It ends at 500 K. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","points":[{"note":"Invented for the rangebook demonstration; not data.","temperature":"384.0","temperature_uncertainty":"0.01","value":"1.0580"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"400.0","temperature_uncertainty":"0.01","value":"1.6586"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"415.0","temperature_uncertainty":"0.01","value":"2.4448"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"430.0","temperature_uncertainty":"0.01","value":"3.4833"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"445.0","temperature_uncertainty":"0.01","value":"4.8430"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"460.0","temperature_uncertainty":"0.01","value":"6.5502"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"475.0","temperature_uncertainty":"0.01","value":"8.7045"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"490.0","temperature_uncertainty":"0.01","value":"11.333"},{"note":"Invented for the rangebook demonstration; not data.","temperature":"500.0","temperature_uncertainty":"0.01","value":"13.421"}],"property":"vapor-pressure","source":"invented-measurements-j","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"0.3 %","value_unit":"bar"}','b8b88b5b67c43d3fd854b9378fe01d30cd53c472e44a222ec7a58326b12f8ad2');
INSERT INTO "record" VALUES(66,1,65,'review','dataset:dunmarane-vapor-pressure-measured@1',1,'{"of_key":"dunmarane-vapor-pressure-measured","of_kind":"dataset","of_revision":"1","standing":"accepted"}','c9ece16f306f1c83b657ec5bd91006dc4042dcce7b58b9dc41d03399370f3328');
INSERT INTO "record" VALUES(67,1,66,'preference','brindovane-kirchhoff-first',1,'{"correlation":"brindovane-kirchhoff","over":"brindovane-antoine-high","reason":"Invented to show a preference. Invented for the rangebook demonstration; not data."}','26a18f7438396584dac63bb928f30142173f108de41498d494959b993d6cdedd');
INSERT INTO "record" VALUES(68,1,67,'review','preference:brindovane-kirchhoff-first@1',1,'{"of_key":"brindovane-kirchhoff-first","of_kind":"preference","of_revision":"1","standing":"accepted"}','215e7002fa9a097b1df1395f984d7f2fc797933c60c03d8073af4297c925b47f');
INSERT INTO "record" VALUES(69,2,0,'review','correlation:dunmarane-august-slip@1',1,'{"note":"Recorded with base e; the invented table prints log10. Record it again as august-log10.","of_key":"dunmarane-august-slip","of_kind":"correlation","of_revision":"1","standing":"declined"}','3ae921d53c2c6b362f010a4bda216a5ba2ffe27ec3c2fbe747e9b725a46141dd');
INSERT INTO "record" VALUES(70,3,0,'compound','brindovane',2,'{"formula":"C7H10ClFO","name":"brindovane (invented, renamed)","note":"No such substance exists: it shows a gap, a seam that jumps, a withdrawn record and a draft. Invented for the rangebook demonstration; not data."}','288c79a9b0dbce3b99cd3d0ce3908959a059505097b548f66b6e08d0b5071333');
INSERT INTO "record" VALUES(71,3,1,'correlation','brindovane-antoine-low',2,'{"coefficients":{"A":"22.14908","B":"3909.70","C":"-45.63"},"compound":"brindovane","evidence":"measured","form":"antoine-ln","locator":"invented table 1","note":"Below 255 K its source states no uncertainty. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-measurements-e","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"not stated up to 255 K; 4 Pa up to 290 K; 1.5 %","value_unit":"Pa","window_basis":"printed","window_max":"310","window_min":"250","window_unit":"K"}','2bd8a8c6321976093cfd38cf675ec0c54358249f3affe7be04daf9854f262fab');
INSERT INTO "record" VALUES(72,3,2,'review','correlation:brindovane-antoine-low@2',1,'{"of_key":"brindovane-antoine-low","of_kind":"correlation","of_revision":"2","standing":"accepted"}','772039dfe15dc0fcc10d04a7afaa1a6ed17a795ac29cee1407684c89c427f55c');
INSERT INTO "record" VALUES(73,3,3,'review','correlation:brindovane-antoine-mid@1',2,'{"note":"An invented erratum.","of_key":"brindovane-antoine-mid","of_kind":"correlation","of_revision":"1","standing":"withdrawn"}','50c6cf5405a49a5e2fc6a03fa6f72f97a5b69780ca7bad76ebd5fdca76d425f9');
INSERT INTO "record" VALUES(74,4,0,'source','invented-handbook-b',2,'{"citation":"Invented for the rangebook demonstration; not data (handbook B)","note":"No such publication exists. Revised once. Invented for the rangebook demonstration; not data.","title":"Invented handbook B","type":"book"}','9b9be4b790b0718124b8386826a1c9dcc0ca29e1e7707837e50f9acd3ac970f5');
INSERT INTO "record" VALUES(75,4,1,'correlation','brindovane-antoine-low',3,'{"coefficients":{"A":"22.14708","B":"3909.70","C":"-45.63"},"compound":"brindovane","evidence":"measured","form":"antoine-ln","locator":"invented table 1","note":"Below 255 K its source states no uncertainty. Invented for the rangebook demonstration; not data.","obtained":"seen","phase":"liquid","property":"vapor-pressure","source":"invented-measurements-e","temperature_scale":"ITS-90","temperature_unit":"K","uncertainty":"not stated up to 255 K; 4 Pa up to 290 K; 1.5 %","value_unit":"Pa","window_basis":"printed","window_max":"310","window_min":"250","window_unit":"K"}','0cf8a763331a53951b7b6cda7d304e7032b7d6a451156a3778f3061962fe4b5a');
INSERT INTO "record" VALUES(76,4,2,'review','correlation:brindovane-antoine-low@3',1,'{"note":"Invented: to be looked at.","of_key":"brindovane-antoine-low","of_kind":"correlation","of_revision":"3","standing":"draft"}','0201b64324ee1bacdb11d53709d9e83636dd1b8f1b5d8ba53f3b13d2a1152148');
CREATE TABLE term (
	record INTEGER NOT NULL, 
	text TEXT NOT NULL, 
	CONSTRAINT pk_term PRIMARY KEY (record, text), 
	CONSTRAINT fk_term_record_record FOREIGN KEY(record) REFERENCES record (id)
)
 STRICT

;
INSERT INTO "term" VALUES(1,'brindovane (invented)');
INSERT INTO "term" VALUES(1,'c7h10clfo');
INSERT INTO "term" VALUES(2,'c4h7f3osi');
INSERT INTO "term" VALUES(2,'dunmarane (invented)');
INSERT INTO "term" VALUES(3,'invented fluid b');
INSERT INTO "term" VALUES(4,'invented fluid d');
INSERT INTO "term" VALUES(70,'brindovane (invented, renamed)');
INSERT INTO "term" VALUES(70,'c7h10clfo');
CREATE INDEX ix_link_kind_key_record ON link (kind, "key", record);
CREATE INDEX ix_term_text_record ON term (text, record);
CREATE TRIGGER record_no_insertion BEFORE INSERT ON record WHEN NEW.change <> (SELECT max(number) FROM change) BEGIN SELECT RAISE(ABORT, 'history is only appended to: record'); END;
CREATE TRIGGER library_no_update BEFORE UPDATE ON library BEGIN SELECT RAISE(ABORT, 'history is only appended to: library'); END;
CREATE TRIGGER library_no_delete BEFORE DELETE ON library BEGIN SELECT RAISE(ABORT, 'history is only appended to: library'); END;
CREATE TRIGGER library_no_replace BEFORE INSERT ON library WHEN EXISTS (SELECT 1 FROM library WHERE id = NEW.id) BEGIN SELECT RAISE(ABORT, 'history is only appended to: library'); END;
CREATE TRIGGER change_no_update BEFORE UPDATE ON change BEGIN SELECT RAISE(ABORT, 'history is only appended to: change'); END;
CREATE TRIGGER change_no_delete BEFORE DELETE ON change BEGIN SELECT RAISE(ABORT, 'history is only appended to: change'); END;
CREATE TRIGGER change_no_replace BEFORE INSERT ON change WHEN EXISTS (SELECT 1 FROM change WHERE number = NEW.number) BEGIN SELECT RAISE(ABORT, 'history is only appended to: change'); END;
CREATE TRIGGER node_no_update BEFORE UPDATE ON node BEGIN SELECT RAISE(ABORT, 'history is only appended to: node'); END;
CREATE TRIGGER node_no_delete BEFORE DELETE ON node BEGIN SELECT RAISE(ABORT, 'history is only appended to: node'); END;
CREATE TRIGGER node_no_replace BEFORE INSERT ON node WHEN EXISTS (SELECT 1 FROM node WHERE level = NEW.level AND place = NEW.place) BEGIN SELECT RAISE(ABORT, 'history is only appended to: node'); END;
CREATE TRIGGER record_no_update BEFORE UPDATE ON record BEGIN SELECT RAISE(ABORT, 'history is only appended to: record'); END;
CREATE TRIGGER record_no_delete BEFORE DELETE ON record BEGIN SELECT RAISE(ABORT, 'history is only appended to: record'); END;
CREATE TRIGGER record_no_replace BEFORE INSERT ON record WHEN EXISTS (SELECT 1 FROM record WHERE id = NEW.id OR (kind = NEW.kind AND key = NEW.key AND revision = NEW.revision) OR (change = NEW.change AND place = NEW.place)) BEGIN SELECT RAISE(ABORT, 'history is only appended to: record'); END;
CREATE TRIGGER link_no_update BEFORE UPDATE ON link BEGIN SELECT RAISE(ABORT, 'history is only appended to: link'); END;
CREATE TRIGGER link_no_delete BEFORE DELETE ON link BEGIN SELECT RAISE(ABORT, 'history is only appended to: link'); END;
CREATE TRIGGER link_no_replace BEFORE INSERT ON link WHEN EXISTS (SELECT 1 FROM link WHERE record = NEW.record AND role = NEW.role AND kind = NEW.kind AND key = NEW.key) BEGIN SELECT RAISE(ABORT, 'history is only appended to: link'); END;
CREATE TRIGGER term_no_update BEFORE UPDATE ON term BEGIN SELECT RAISE(ABORT, 'history is only appended to: term'); END;
CREATE TRIGGER term_no_delete BEFORE DELETE ON term BEGIN SELECT RAISE(ABORT, 'history is only appended to: term'); END;
CREATE TRIGGER term_no_replace BEFORE INSERT ON term WHEN EXISTS (SELECT 1 FROM term WHERE record = NEW.record AND text = NEW.text) BEGIN SELECT RAISE(ABORT, 'history is only appended to: term'); END;
COMMIT;
